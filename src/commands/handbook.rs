//! `overcoat handbook`: the optical constants and spectra that come with the tool.

use crate::Status;
use crate::cli::Handbook;
use crate::failure::Failure;
use crate::quantity;
use crate::settings::did_you_mean;
use crate::{output, views::amount};
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
        output::print(&list()?)?;
        return Ok(Status::Met);
    };
    if handbook::text(name).is_none() {
        let near = did_you_mean(&nearest(name, handbook::names()));
        return Err(Failure::message(format!(
            "the handbook has no `{name}`{near}; `overcoat handbook` lists all entries"
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

/// Every entry with its range and the first sentence of its description.
fn list() -> Result<String, Failure> {
    let names: Vec<&str> = handbook::names().collect();
    let longest = names.iter().map(|name| name.len()).max().unwrap_or_default();
    let mut text = String::new();
    for name in names {
        let (range, description) = match entry(name)? {
            Entry::Material(material) => {
                let range = material.index.as_ref().and_then(|index| index.range_nm());
                (range.map_or("everywhere".to_owned(), band), material.description.clone())
            }
            Entry::Spectrum(spectrum) => (spectrum_range(&spectrum), spectrum.description.clone()),
        };
        let line = format!("{name:longest$}  {range:21}  {}", first_phrase(&description));
        text.push_str(line.trim_end());
        text.push('\n');
    }
    Ok(text)
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

/// A description up to its first comma or full stop.
fn first_phrase(description: &[String]) -> String {
    let whole = description.join(" ");
    let end = whole.match_indices([',', '.', ':', ';']).find(|(at, _)| {
        // A point inside a number ends nothing.
        whole[at + 1..].chars().next().is_none_or(char::is_whitespace)
    });
    whole[..end.map_or(whole.len(), |(at, _)| at)].to_owned()
}
