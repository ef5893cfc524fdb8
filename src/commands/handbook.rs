//! `overcoat handbook`: the optical constants and spectra that come with the tool.

use crate::Status;
use crate::cli::Handbook;
use crate::failure::Failure;
use crate::output;
use crate::quantity;
use crate::settings::did_you_mean;
use crate::views::{amount, chart};
use overcoat_engine::Index;
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::model::{Material, Spectrum, SpectrumKind};
use overcoat_lang::{handbook, load, nearest};
use std::sync::Arc;

/// A material or a spectrum of the handbook.
enum Entry {
    Material(Arc<Material>),
    Spectrum(Arc<Spectrum>),
}

pub(super) fn run(arguments: &Handbook) -> Result<Status, Failure> {
    let Some(name) = &arguments.name else {
        output::print(&list(&arguments.search)?)?;
        return Ok(Status::Met);
    };
    if handbook::text(name).is_none() {
        let near = did_you_mean(&nearest(name, handbook::names()));
        return Err(Failure::message(format!(
            "the handbook has no `{name}`{near}; `overcoat handbook` lists all entries, and with --search those that hold a word"
        )));
    }
    let wavelengths: Vec<f64> =
        arguments.at.iter().map(|text| quantity::wavelength(text, "--at")).collect::<Result<_, _>>()?;
    let text = match entry(name)? {
        Entry::Material(material) => material_page(&material, &wavelengths)?,
        Entry::Spectrum(spectrum) => spectrum_page(&spectrum, &wavelengths)?,
    };
    output::print(&text)?;
    Ok(Status::Met)
}

/// An entry, read as a recipe would read it.
fn entry(name: &str) -> Result<Entry, Failure> {
    let mut files = MemoryFiles::new();
    let path = format!("{name}.coat");
    files.insert(&path, handbook::text(name).unwrap_or_default());
    let project = load(&files, &[path]);
    let module = project.modules.first();
    let material = module.and_then(|module| module.materials.first().cloned()).map(Entry::Material);
    let spectrum = || module.and_then(|module| module.spectra.first().cloned()).map(Entry::Spectrum);
    let fault = || Failure::Fault(format!("the handbook's `{name}` can't be understood; please report this"));
    material.or_else(spectrum).ok_or_else(fault)
}

/// Every entry that holds all the words, with its range and the beginning of its description.
fn list(words: &[String]) -> Result<String, Failure> {
    let mut lines = Vec::new();
    for name in handbook::names() {
        let entry = entry(name)?;
        let (description, source) = match &entry {
            Entry::Material(material) => (&material.description, &material.source),
            Entry::Spectrum(spectrum) => (&spectrum.description, &spectrum.source),
        };
        let description = description.join(" ");
        if !holds(&format!("{name} {description} {}", source.as_deref().unwrap_or_default()), words) {
            continue;
        }
        let range = match &entry {
            Entry::Material(material) => {
                let range = material.index.as_ref().and_then(|index| index.range_nm());
                range.map_or("everywhere".to_owned(), band)
            }
            Entry::Spectrum(spectrum) => spectrum_range(spectrum),
        };
        lines.push((name, range, form(&description).to_owned()));
    }
    if lines.is_empty() {
        let words = words.join(" ");
        return Err(Failure::message(format!(
            "nothing in the handbook holds `{words}`; `overcoat handbook` lists all entries"
        )));
    }
    let longest = |texts: &mut dyn Iterator<Item = usize>| texts.max().unwrap_or_default();
    let names = longest(&mut lines.iter().map(|line| line.0.len()));
    let ranges = longest(&mut lines.iter().map(|line| line.1.len()));
    let line = |(name, range, form)| format!("{name:names$}  {range:ranges$}  {form}\n");
    Ok(lines.into_iter().map(line).collect())
}

/// Whether each of the words begins a word of the text; the parts of a name are words.
fn holds(text: &str, words: &[String]) -> bool {
    let text = text.to_lowercase();
    let parts: Vec<&str> = text.split(|letter: char| !letter.is_alphanumeric()).collect();
    let asked = words.iter().flat_map(|word| word.split(|letter: char| !letter.is_alphanumeric()));
    asked.map(str::to_lowercase).all(|word| parts.iter().any(|part| part.starts_with(&word)))
}

fn material_page(material: &Material, wavelengths: &[f64]) -> Result<String, Failure> {
    let range = material.index.as_ref().and_then(|index| index.range_nm());
    let mut text = head(&material.name, "material", &material.description, material.source.as_deref());
    text.push_str(&format!("range    {}\n", range.map_or("everywhere".to_owned(), band)));
    if let Some(density) = material.density {
        text.push_str(&format!("density  {density} g/cm3\n"));
    }
    if let Some(stress) = material.stress {
        text.push_str(&format!("stress   {stress} MPa\n"));
    }
    text.extend(material.cautions.iter().map(|caution| format!("caution  {caution}\n")));
    let Some(index) = &material.index else { return Ok(text) };
    if let Some(range) = range {
        text.push_str(&curves(index, range));
    }
    if !wavelengths.is_empty() {
        text.push_str("\nwavelength_nm,n,k\n");
    }
    for wavelength in wavelengths {
        let constants = index.at(*wavelength).map_err(|error| {
            Failure::message(format!("{} has no constants there: {error}", material.name))
        })?;
        let numbers = [*wavelength, constants.re, constants.im].map(amount::shortest);
        text.push_str(&format!("{}\n", numbers.join(",")));
    }
    Ok(text)
}

/// n and k over the whole range.
fn curves(index: &Index, range: (f64, f64)) -> String {
    let knots = index.knots_nm();
    let known = chart::wavelengths(range, &knots).into_iter().filter_map(|nm| Some((nm, index.at(nm).ok()?)));
    let (n, k): (Vec<_>, Vec<_>) =
        known.map(|(nm, constants)| ((nm, constants.re), (nm, constants.im))).unzip();
    format!("\n{}\n{}", chart::chart("n", &n), chart::chart("k", &k))
}

fn spectrum_page(spectrum: &Spectrum, wavelengths: &[f64]) -> Result<String, Failure> {
    if !wavelengths.is_empty() {
        return Err(Failure::message(format!(
            "--at prints optical constants, and `{}` is a spectrum",
            spectrum.name
        )));
    }
    let mut text = head(&spectrum.name, "spectrum", &spectrum.description, spectrum.source.as_deref());
    text.push_str(&format!("range    {}\n", spectrum_range(spectrum)));
    if spectrum.irradiance {
        text.push_str("values   W m^-2 nm^-1\n");
    }
    Ok(text)
}

fn head(name: &str, kind: &str, description: &[String], source: Option<&str>) -> String {
    let mut text = format!("{name}, {kind}\n\n");
    text.extend(description.iter().map(|line| format!("{line}\n")));
    if !description.is_empty() {
        text.push('\n');
    }
    text.extend(source.map(|source| format!("source   {source}\n")));
    text
}

fn spectrum_range(spectrum: &Spectrum) -> String {
    match &spectrum.kind {
        Some(SpectrumKind::Table(rows)) => match (rows.first(), rows.last()) {
            (Some(first), Some(last)) => band((first.0, last.0)),
            _ => String::new(),
        },
        _ => "everywhere".to_owned(),
    }
}

fn band((low, high): (f64, f64)) -> String {
    let short = |number| amount::trimmed(amount::significant(number, 6));
    format!("{} .. {} nm", short(low), short(high))
}

/// The first sentence of a description, up to the range, which stands in a column of its own.
fn form(description: &str) -> &str {
    let end = description.match_indices(['.', ':', ';']).find(|(at, _)| {
        // A point inside a number ends nothing.
        description[at + 1..].chars().next().is_none_or(char::is_whitespace)
    });
    let sentence = &description[..end.map_or(description.len(), |(at, _)| at)];
    sentence.split_once(", from ").map_or(sentence, |(form, _)| form)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn all_words_must_begin_a_word() {
        let text = "zinc_sulfide_film Zinc sulfide, electron-beam evaporated film";
        let holds =
            |words: &[&str]| holds(text, &words.iter().map(|&word| word.to_owned()).collect::<Vec<_>>());
        assert!(holds(&[]) && holds(&["Film"]) && holds(&["beam", "zinc"]) && holds(&["zinc_sulf"]));
        assert!(!holds(&["zinc", "bulk"]) && !holds(&["vaporated"]));
    }

    #[test]
    fn the_form_ends_before_the_range() {
        assert_eq!(
            form("Silver, film of 1.5 nm, from 191 nm to 20.9 um: all rows."),
            "Silver, film of 1.5 nm"
        );
        assert_eq!(form("Standard light. More."), "Standard light");
    }
}
