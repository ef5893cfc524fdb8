//! Weighted means over bands against quadrature with numpy and scipy.
//!
//! Sources: ASTM G173-03; CIE 015:2018, CIE 018; M. Planck (1901); silicon by M. A. Green, Sol. Energy Mater.
//! Sol. Cells 92, 1305 (2008); M. Born, E. Wolf, Principles of Optics, 7th ed. (1999), 1.6.4.

use overcoat_engine::{Body, Index, Light, Polarisation, Quantity, SpectralWeight, Stack, mean};
use serde::Deserialize;

use crate::data::{Comparison, constant, films, reference};
use crate::handbook;

#[derive(Deserialize)]
struct File {
    means: Vec<Entry>,
    plates: Vec<Plate>,
}

#[derive(Deserialize)]
struct Plate {
    float_glass_nm: f64,
    band_nm: (f64, f64),
    under: Vec<String>,
    mean_reflectance: f64,
    mean_transmittance: f64,
}

#[derive(Deserialize)]
struct Entry {
    part: String,
    films: Vec<([f64; 2], f64)>,
    exit: Medium,
    band_nm: (f64, f64),
    angle_deg: f64,
    under: Vec<String>,
    photons: bool,
    mean_reflectance: f64,
}

#[derive(Deserialize)]
#[serde(untagged)]
enum Medium {
    Constant([f64; 2]),
    Handbook { handbook: String },
}

fn medium(medium: &Medium) -> Index {
    match medium {
        Medium::Constant(index) => constant(*index),
        Medium::Handbook { handbook } => handbook::index(handbook),
    }
}

fn weight(names: &[String], photons: bool) -> SpectralWeight {
    let factors: Vec<SpectralWeight> = names
        .iter()
        .map(|name| match name.as_str() {
            "blackbody 2856 K" => SpectralWeight::blackbody(2856.0).expect("a temperature"),
            name => handbook::weight(name),
        })
        .collect();
    let product = match factors.as_slice() {
        [] => SpectralWeight::constant(),
        factors => SpectralWeight::product(factors).expect("they overlap"),
    };
    if photons { product.photons() } else { product }
}

#[test]
fn means_agree_with_numpy_and_scipy() {
    let file: File = reference("means.json");
    let mut comparison = Comparison::default();
    for entry in &file.means {
        let layers = entry.films.iter().map(|&(index, thickness)| (constant(index), thickness)).collect();
        let stack = films(constant([1.0, 0.0]), layers, medium(&entry.exit));
        let light = Light::parallel(entry.angle_deg.to_radians(), Polarisation::Mean);
        let what = format!("{} over {:?} nm under {:?}", entry.part, entry.band_nm, entry.under);
        let weight = weight(&entry.under, entry.photons);
        let got = mean(&stack, &Quantity::Reflectance, &light, &[entry.band_nm], &weight)
            .unwrap_or_else(|e| panic!("{what}: {e}"));
        comparison.add(&what, got.value, entry.mean_reflectance, 1e-8);
    }
    comparison.finish(19);
}

/// Float glass of window thickness, M. Rubin, Sol. Energy Mater. 12, 275 (1985), as a plate with two faces,
/// G. G. Stokes, Proc. R. Soc. London 11, 545 (1862).
#[test]
fn window_panes_agree_with_numpy_and_scipy() {
    let file: File = reference("means.json");
    let mut comparison = Comparison::default();
    for plate in &file.plates {
        let body = Body { index: handbook::index("float_glass"), thickness_nm: plate.float_glass_nm };
        let air = constant([1.0, 0.0]);
        let stack = Stack {
            facets_rad: None,
            incident: air.clone(),
            coatings: vec![Vec::new(), Vec::new()],
            bodies: vec![body],
            exit: air,
        };
        let weight = weight(&plate.under, false);
        for (quantity, expected) in [
            (Quantity::Reflectance, plate.mean_reflectance),
            (Quantity::Transmittance, plate.mean_transmittance),
        ] {
            let what = format!("{quantity:?} of {} nm under {:?}", plate.float_glass_nm, plate.under);
            let got = mean(&stack, &quantity, &Light::normal(), &[plate.band_nm], &weight)
                .unwrap_or_else(|e| panic!("{what}: {e}"));
            comparison.add(&what, got.value, expected, 1e-8);
        }
    }
    comparison.finish(8);
}
