//! The handbook against the tables that its entries were made from, and against values in print.

// In tests a panic is the report, in helpers too.
#![allow(clippy::unwrap_used)]

use overcoat_lang::files::MemoryFiles;
use overcoat_lang::model::Material;
use overcoat_lang::project::Project;
use overcoat_lang::{handbook, load};
use std::collections::BTreeMap;
use std::sync::Arc;

/// About ten rows of each entry's source: wavelength in nm, n, k. Each entry names its source. Where the source is a
/// formula, the rows were worked out from it outside this project and printed to seven decimals.
const POINTS: &str = include_str!("handbook/points.csv");

/// Definitions, with nothing to compare them with.
const DEFINED: [&str; 2] = ["air", "vacuum"];

fn read(name: &str) -> Project {
    let mut files = MemoryFiles::new();
    let path = format!("{name}.coat");
    files.insert(&path, handbook::text(name).unwrap());
    load(&files, &[path])
}

/// An entry, if it is a material.
fn material(name: &str) -> Option<Arc<Material>> {
    read(name).modules.first()?.materials.first().cloned()
}

fn index(name: &str, wavelength_nm: f64) -> (f64, f64) {
    let entry = material(name).unwrap();
    let value = entry.index.as_ref().unwrap().at(wavelength_nm);
    let value = value.unwrap_or_else(|error| panic!("{name} at {wavelength_nm} nm: {error}"));
    (value.re, value.im)
}

#[test]
fn every_entry_is_understood_and_says_where_it_is_from() {
    for name in handbook::names() {
        let project = read(name);
        assert!(project.findings.is_empty(), "{name}: {:?}", project.findings);
        let Some(entry) = project.modules[0].materials.first() else { continue };
        assert_eq!(entry.name, name);
        assert!(entry.source.is_some() && !entry.description.is_empty(), "{name}");
        let range = entry.index.as_ref().unwrap().range_nm();
        assert!(range.is_some() || DEFINED.contains(&name), "{name} has no range");
    }
}

/// Rows of a table come back as they went in; formulas meet the printed decimals.
#[test]
fn every_entry_agrees_with_its_source() {
    let mut points: BTreeMap<String, Vec<[f64; 3]>> = BTreeMap::new();
    for row in csv::Reader::from_reader(POINTS.as_bytes()).into_deserialize() {
        let (name, wavelength, n, k): (String, f64, f64, f64) = row.unwrap();
        points.entry(name).or_default().push([wavelength, n, k]);
    }
    for name in handbook::names() {
        let Some(entry) = material(name).filter(|_| !DEFINED.contains(&name)) else { continue };
        let rows = points.remove(name).unwrap_or_default();
        assert!(rows.len() >= 7, "{name} is compared at {} wavelengths", rows.len());
        let table = handbook::text(name).unwrap().contains("index table");
        let close = if table { 1e-12 } else { 0.51e-7 };
        for [wavelength, n, k] in rows {
            let found = entry.index.as_ref().unwrap().at(wavelength).unwrap();
            assert!((found.re - n).abs() <= close, "{name} at {wavelength} nm: n {} for {n}", found.re);
            assert!((found.im - k).abs() <= 1e-12 * k, "{name} at {wavelength} nm: k {} for {k}", found.im);
        }
    }
    assert!(points.is_empty(), "no such entries: {:?}", points.keys());
}

/// The yellow line of helium, 587.5618 nm.
const D_LINE: f64 = 587.5618;

/// n_d as manufacturers' catalogues print it for these codes (the code's first three digits are n_d − 1 in
/// thousandths), issue of 2017.
#[test]
fn glasses_have_their_printed_n_d() {
    let glasses = [
        ("crown_517642", 1.51680),
        ("crown_651559", 1.65113),
        ("flint_620364", 1.62004),
        ("flint_785257", 1.78472),
        ("flint_785258", 1.78472),
    ];
    for (name, printed) in glasses {
        let n = index(name, D_LINE).0;
        assert!((n - printed).abs() <= 0.51e-5, "{name}: n_d {n} for {printed}");
        let code: f64 = name.split_once('_').unwrap().1[..3].parse().unwrap();
        assert!(((n - 1.0) * 1e3 - code).abs() <= 0.51, "{name}: n_d {n}");
    }
}

/// n_d 1.45846 of fused silica: I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965), table of computed values (from
/// memory). n_d 1.7682 of sapphire's ordinary ray and 1.43384 of calcium fluoride: handbook figures of crystal data
/// sheets (from memory); calcium fluoride within one in the last place, as data sheets differ by it.
#[test]
fn common_substrates_have_their_n_d_in_print() {
    let printed = [
        ("fused_silica", 1.45846, 0.51e-5),
        ("sapphire_ordinary", 1.7682, 0.51e-4),
        ("calcium_fluoride", 1.43384, 1.01e-5),
    ];
    for (name, value, within) in printed {
        let n = index(name, D_LINE).0;
        assert!((n - value).abs() <= within, "{name}: n_d {n} for {value}");
    }
}

/// 1.33299 for sodium light at 20 °C relative to air is the usual figure (P. Schiebener, J. Straub, J. M. H. Levelt
/// Sengers, J. S. Gallagher, J. Phys. Chem. Ref. Data 19, 677 (1990); from memory); the entry is relative to vacuum,
/// air's index is 1.000277 (P. E. Ciddor, Appl. Opt. 35, 1566 (1996)).
#[test]
fn water_is_relative_to_vacuum() {
    let n = index("water_distilled", 589.3).0;
    assert!((n / 1.000277 - 1.33299).abs() < 2e-5, "{n}");
}

/// What can poison, burn or take the breath says so, and defers to who knows it all.
#[test]
fn hazardous_substances_carry_a_caution() {
    let hazardous = [
        "gallium_arsenide",
        "indium_phosphide",
        "zinc_selenide",
        "flint_785258",
        "flint_620364",
        "ytterbium_fluoride",
        "chromium",
        "nickel",
        "indium_tin_oxide",
        "silicon_nitride_pecvd",
    ];
    for name in hazardous {
        let cautions = &material(name).unwrap().cautions;
        let defers = |caution: &String| caution.contains("safety data sheet");
        assert!(cautions.iter().any(defers), "{name}: {cautions:?}");
    }
}
