//! Dispersion formulas and mixtures against arbitrary precision.
//!
//! Sources are named beside each point in the data files: Malitson 1965, a glass catalogue of 2017, Cauchy
//! 1836, Drude 1900, Lorentz, Urbach 1953, Jellison and Modine 1996, Bruggeman 1935, Maxwell Garnett 1904.

use overcoat_engine::{Index, MixingRule, Oscillator};
use serde::Deserialize;

use crate::data::{Comparison, constant, reference};

#[derive(Deserialize)]
struct Formulas {
    points: Vec<Point>,
}

#[derive(Deserialize)]
struct Point {
    model: String,
    source: String,
    wavelength_nm: f64,
    n: f64,
    /// None where the formula is for n alone.
    k: Option<f64>,
}

/// The material that a point names; its numbers are those of the published formula.
fn material(model: &str) -> Index {
    let index = match model {
        "fused_silica" | "crown_517642" => return crate::handbook::index(model),
        "cauchy 1.45, 3.5e-3 um^2, 1.1e-4 um^4" => Index::cauchy(&[1.45, 3.5e-3, 1.1e-4]),
        "drude 9 eV width 0.02 eV on 3.7" => {
            Index::oscillators(3.7, vec![Oscillator::Drude { plasma_ev: 9.0, width_ev: 0.02 }])
        }
        "lorentz 2.1 at 7.3 eV width 0.4 eV on 1.2" => Index::oscillators(
            1.2,
            vec![Oscillator::Lorentz { strength: 2.1, centre_ev: 7.3, width_ev: 0.4 }],
        ),
        "1.5 with k urbach 0.02 at 300 nm width 0.25 eV" => {
            constant([1.5, 0.0]).with_urbach(0.02, 300.0, 0.25)
        }
        other => panic!("no such model: {other}"),
    };
    index.expect("a published formula is valid")
}

#[test]
fn formulas_agree_with_forty_digits() {
    let file: Formulas = reference("dispersion.json");
    let mut comparison = Comparison::default();
    for point in &file.points {
        let got = material(&point.model).at(point.wavelength_nm).expect("inside the formula's range");
        let what = format!("{} at {} nm ({})", point.model, point.wavelength_nm, point.source);
        comparison.add(&format!("{what}, n"), got.re, point.n, 1e-13 * point.n.max(1.0));
        if let Some(k) = point.k {
            comparison.add(&format!("{what}, k"), got.im, k, 1e-13 * k.max(1.0));
        }
    }
    comparison.finish(35);
}

#[derive(Deserialize)]
struct TaucLorentz {
    points: Vec<TaucLorentzPoint>,
}

#[derive(Deserialize)]
struct TaucLorentzPoint {
    strength_ev: f64,
    position_ev: f64,
    width_ev: f64,
    gap_ev: f64,
    infinity: f64,
    energy_ev: f64,
    index: [f64; 2],
}

/// The closed real part answers to a numerical principal value of Kramers and Kronig's integral.
#[test]
fn tauc_lorentz_is_causal() {
    let file: TaucLorentz = reference("tauc_lorentz.json");
    let mut comparison = Comparison::default();
    for point in &file.points {
        let term = Oscillator::TaucLorentz {
            strength_ev: point.strength_ev,
            centre_ev: point.position_ev,
            width_ev: point.width_ev,
            gap_ev: point.gap_ev,
        };
        let index = Index::oscillators(point.infinity, vec![term]).expect("valid parameters");
        // h c / e, exact in the SI of 2019.
        let wavelength_nm = 6.62607015e-34 * 299_792_458.0 / 1.602_176_634e-19 * 1e9 / point.energy_ev;
        let got = index.at(wavelength_nm).expect("a formula has values everywhere");
        let what = format!("A {} eV at {} eV", point.strength_ev, point.energy_ev);
        comparison.add(&format!("{what}, n"), got.re, point.index[0], 1e-11);
        comparison.add(&format!("{what}, k"), got.im, point.index[1], 1e-11);
    }
    comparison.finish(120);
}

#[derive(Deserialize)]
struct Mixtures {
    mixtures: Vec<Mixture>,
}

#[derive(Deserialize)]
struct Mixture {
    first: [f64; 2],
    second: [f64; 2],
    share_of_first: f64,
    bruggeman: [f64; 2],
    maxwell_garnett_first_is_host: [f64; 2],
    lorentz_lorenz: [f64; 2],
    volume: [f64; 2],
}

#[test]
fn mixtures_agree_with_forty_digits() {
    let file: Mixtures = reference("mixtures.json");
    let mut comparison = Comparison::default();
    for mixture in &file.mixtures {
        let parts = [
            (constant(mixture.first), mixture.share_of_first),
            (constant(mixture.second), 1.0 - mixture.share_of_first),
        ];
        for (rule, expected) in [
            (MixingRule::Bruggeman, mixture.bruggeman),
            (MixingRule::MaxwellGarnett, mixture.maxwell_garnett_first_is_host),
            (MixingRule::LorentzLorenz, mixture.lorentz_lorenz),
            (MixingRule::Volume, mixture.volume),
        ] {
            let got =
                Index::mixture(rule, &parts).expect("valid parts").at(550.0).expect("constant everywhere");
            let what = format!(
                "{rule:?} of {:?} {} and {:?}",
                mixture.first, mixture.share_of_first, mixture.second
            );
            comparison.add(&format!("{what}, n"), got.re, expected[0], 1e-12);
            comparison.add(&format!("{what}, k"), got.im, expected[1], 1e-12);
        }
    }
    comparison.finish(300);
}
