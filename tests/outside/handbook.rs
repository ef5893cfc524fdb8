//! The handbook as the language reads it: every entry sound, with its source; its figures those of the source.

use std::collections::BTreeMap;
use std::sync::OnceLock;

use overcoat_engine::{Index, SpectralWeight};
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::model::{Material, Spectrum, SpectrumKind};
use overcoat_lang::project::Project;
use overcoat_lang::{handbook, load};

use crate::data::Comparison;

/// Every entry of the handbook, each read as a module of its own.
fn project() -> &'static Project {
    static PROJECT: OnceLock<Project> = OnceLock::new();
    PROJECT.get_or_init(|| {
        let mut files = MemoryFiles::new();
        for name in handbook::names() {
            files.insert(format!("{name}.coat"), handbook::text(name).expect("an entry has a text"));
        }
        let paths: Vec<String> = files.paths().map(str::to_owned).collect();
        load(&files, &paths)
    })
}

fn materials() -> BTreeMap<&'static str, &'static Material> {
    let all = project().modules.iter().flat_map(|module| &module.materials);
    all.map(|material| (material.name.as_str(), material.as_ref())).collect()
}

fn spectra() -> BTreeMap<&'static str, &'static Spectrum> {
    let all = project().modules.iter().flat_map(|module| &module.spectra);
    all.map(|spectrum| (spectrum.name.as_str(), spectrum.as_ref())).collect()
}

/// The optical constants of a handbook material.
pub(crate) fn index(name: &str) -> Index {
    let material = materials().get(name).copied().unwrap_or_else(|| panic!("the handbook has {name}"));
    material.index.clone().expect("a handbook material has an index")
}

/// The rows of a handbook spectrum: wavelength in nm and value.
pub(crate) fn rows(name: &str) -> Vec<(f64, f64)> {
    let spectrum = spectra().get(name).copied().unwrap_or_else(|| panic!("the handbook has {name}"));
    match &spectrum.kind {
        Some(SpectrumKind::Table(rows)) => rows.clone(),
        other => panic!("{name} is {other:?}"),
    }
}

/// A handbook spectrum as a weight.
pub(crate) fn weight(name: &str) -> SpectralWeight {
    SpectralWeight::table(&rows(name)).expect("a handbook spectrum is a table")
}

#[test]
fn every_entry_is_sound_and_names_its_source() {
    assert!(project().findings.is_empty(), "{:?}", project().findings);
    let names: Vec<&str> = handbook::names().collect();
    assert_eq!(materials().len() + spectra().len(), names.len(), "one item a file");
    for (name, material) in materials() {
        assert!(names.contains(&name), "{name} is in the file of its name");
        assert!(material.index.is_some(), "{name}");
        assert!(material.source.is_some() && !material.description.is_empty(), "{name}");
    }
    for (name, spectrum) in spectra() {
        assert!(names.contains(&name), "{name} is in the file of its name");
        assert!(spectrum.kind.is_some(), "{name}");
        assert!(spectrum.source.is_some() && !spectrum.description.is_empty(), "{name}");
        assert_eq!(spectrum.irradiance, name.starts_with("am"), "{name}");
    }
}

/// Rows as the sources print them, one for each measured material and one more at the far end of its range.
#[test]
fn measured_materials_have_their_sources_rows() {
    let printed = [
        // M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305 (2008).
        ("silicon", 600.0, 3.94, 1.9934e-2),
        ("silicon", 1450.0, 3.485, 1.3846e-13),
        // A. Ciesielski et al., Appl. Surf. Sci. 421B, 349 (2017).
        ("silver", 190.77, 1.017, 1.1),
        ("silver", 20912.0, 41.734, 122.727),
        // A. D. Rakic, Appl. Opt. 34, 4755 (1995).
        ("aluminium", 563.57, 1.0728, 6.7839),
        ("aluminium", 200_000.0, 423.96, 483.7),
        // L. Gao, F. Lemarchand, M. Lequime, Opt. Express 20, 15734 (2012).
        ("tantala", 350.0, 2.317048, 6.55e-4),
        ("tantala", 1800.0, 2.083136, 0.0),
        // D. Franta et al., Proc. SPIE 9628, 96281U (2015).
        ("titania", 120.876, 0.9733299, 0.8574236),
        ("titania", 24965.5, 3.404678, 3.046892),
        // D. Franta et al., Appl. Surf. Sci. 421, 424 (2017).
        ("magnesium_fluoride", 120.06, 1.686884, 0.008606418),
        ("magnesium_fluoride", 24968.9, 3.148928, 2.625167),
        // M. Rubin, Sol. Energy Mater. 12, 275 (1985): the formula for n, the table for k.
        ("float_glass", 550.0, 1.513 - 0.003169 * 0.3025 + 0.003962 / 0.3025, 2.2e-7),
        ("float_glass", 1100.0, 1.513 - 0.003169 * 1.21 + 0.003962 / 1.21, 5.111e-6),
    ];
    let mut comparison = Comparison::default();
    for (name, wavelength_nm, n, k) in printed {
        let got = index(name).at(wavelength_nm).expect("a row of the source");
        // float_glass prints seven decimals of its formula.
        comparison.add(&format!("{name} at {wavelength_nm} nm, n"), got.re, n, 6e-8);
        comparison.add(&format!("{name} at {wavelength_nm} nm, k"), got.im, k, 1e-12 * k);
    }
    comparison.finish(28);
}

/// The catalogue's index at the helium d line and its k at two of its wavelengths. Optical glass catalogue,
/// issue of 20 January 2017, glass 517642: n_d = 1.51680.
#[test]
fn crown_glass_has_the_catalogues_figures() {
    let crown = index("crown_517642");
    assert!((crown.at(587.5618).expect("in range").re - 1.5168).abs() < 5e-6);
    for (wavelength_nm, k) in [(300.0, 2.8607e-6), (2500.0, 8.13e-6)] {
        let got = crown.at(wavelength_nm).expect("in range").im;
        assert!((got - k).abs() < 1e-12, "{got} at {wavelength_nm} nm");
    }
}

/// Nothing is extrapolated: a material has no value a little outside its range.
#[test]
fn nothing_is_known_outside_the_range() {
    for (name, low, high) in [
        ("silicon", 250.0, 1450.0),
        ("fused_silica", 210.0, 3710.0),
        ("crown_517642", 300.0, 2500.0),
        ("float_glass", 310.0, 4600.0),
        ("tantala", 350.0, 1800.0),
    ] {
        let material = index(name);
        assert_eq!(material.range_nm(), Some((low, high)), "{name}");
        assert!(material.at(low).is_ok() && material.at(high).is_ok(), "{name}");
        assert!(material.at(low - 0.01).is_err() && material.at(high + 0.01).is_err(), "{name}");
    }
}
