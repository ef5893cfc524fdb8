//! The library that comes with the tool: published optical constants and spectra, written in the language itself.

use include_dir::{Dir, include_dir};

static ENTRIES: Dir<'_> = include_dir!("$CARGO_MANIFEST_DIR/handbook");

/// Materials in scope everywhere.
const MEDIA: [&str; 2] = ["air", "vacuum"];

/// Spectra in scope everywhere.
const SPECTRA: [&str; 7] = ["am15g", "am15d", "am0", "d65", "illuminant_a", "equal_energy", "photopic"];

/// The text of an entry: the file of that name.
pub fn text(name: &str) -> Option<&'static str> {
    let file = format!("{name}.coat");
    let entry = ENTRIES.get_file(&file).or_else(|| ENTRIES.get_file(format!("spectra/{file}")))?;
    entry.contents_utf8()
}

/// The names of all entries, materials first, each sorted.
pub fn names() -> impl Iterator<Item = &'static str> {
    let materials = ENTRIES.files();
    let spectra = ENTRIES.get_dir("spectra").map(Dir::files).into_iter().flatten();
    materials.chain(spectra).filter_map(|file| file.path().file_stem()?.to_str())
}

/// Whether an entry is in scope unasked.
pub fn in_scope(name: &str) -> bool {
    MEDIA.contains(&name) || SPECTRA.contains(&name)
}

/// Whether an entry is a definition rather than somebody's measurement.
pub fn built_in(name: &str) -> bool {
    MEDIA.contains(&name)
}

/// The names in scope unasked: the spectra, or the media.
pub fn standard_names(spectra: bool) -> impl Iterator<Item = &'static str> {
    let names: &[&str] = if spectra { &SPECTRA } else { &MEDIA };
    names.iter().copied()
}
