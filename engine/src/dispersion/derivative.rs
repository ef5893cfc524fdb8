//! The formulas carry exact derivatives: every model against finite differences and published group indices.

use num_complex::Complex64;

use super::model::Photon;
use super::{Index, MixingRule, Oscillator};
use crate::constants::EV_NM;
use crate::number::Number;
use crate::taylor::Taylor;

/// N, dN/dE and d²N/dE² at a photon energy in eV.
fn at(index: &Index, energy_ev: f64) -> [Complex64; 3] {
    let energy = Taylor::variable(energy_ev, 1.0);
    let photon = Photon { wavelength_nm: Taylor::real(EV_NM) / energy, energy_ev: energy };
    let Taylor([value, slope, half]) = index.evaluate(&photon).expect("physical");
    [value, slope, 2.0 * half]
}

#[test]
fn group_index_of_fused_silica() {
    // n_g = n − λ dn/dλ = n + E dn/dE. Coefficients of I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965); the
    // group indices computed from them in 30-digit arithmetic.
    let terms = [(0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161)];
    let silica = Index::sellmeier(&terms).expect("a glass");
    for (wavelength, group) in [(1550.0, 1.462_596_483_894_15), (800.0, 1.467_144_755_351_564)] {
        let energy = EV_NM / wavelength;
        let [n, slope, _] = at(&silica, energy);
        assert!((n.re + energy * slope.re - group).abs() < 1e-13);
    }
}

#[test]
fn every_model_carries_its_derivative() {
    let constant = |n, k| Index::constant(n, k).expect("valid");
    let rows =
        [(300.0, 2.5, 0.3), (400.0, 2.3, 0.1), (550.0, 2.2, 0.02), (700.0, 2.15, 0.0), (900.0, 2.1, 0.0)];
    let table = Index::table(&rows).expect("valid");
    let cauchy = Index::cauchy(&[1.45, 0.0035, 1e-4]).expect("valid");
    let terms = vec![
        Oscillator::Lorentz { strength: 2.1, centre_ev: 7.3, width_ev: 0.4 },
        Oscillator::Drude { plasma_ev: 3.0, width_ev: 0.09 },
        Oscillator::TaucLorentz { strength_ev: 92.0, centre_ev: 3.5, width_ev: 4.0, gap_ev: 1.4 },
    ];
    let oscillators = Index::oscillators(1.0, terms).expect("valid");
    let metal = constant(0.06, 3.6);
    let mut models = vec![
        table.clone(),
        cauchy.clone(),
        oscillators.clone(),
        cauchy.with_urbach(0.02, 300.0, 0.25).expect("valid"),
        cauchy.with_extinction(table.clone()).expect("valid"),
        oscillators.scaled(0.015).expect("valid"),
        table.shifted(0.02).expect("valid"),
    ];
    let rules =
        [MixingRule::Bruggeman, MixingRule::MaxwellGarnett, MixingRule::LorentzLorenz, MixingRule::Volume];
    for rule in rules {
        let parts = [(table.clone(), 0.5), (oscillators.clone(), 0.3), (metal.clone(), 0.2)];
        models.push(Index::mixture(rule, &parts).expect("valid"));
    }
    for model in &models {
        for wavelength in [333.3, 480.0, 612.0, 850.0] {
            let energy = EV_NM / wavelength;
            let step = 1e-5;
            let (here, more, less) = (at(model, energy), at(model, energy + step), at(model, energy - step));
            for order in 1..3 {
                let difference = (more[order - 1] - less[order - 1]) / (2.0 * step);
                let off = (here[order] - difference).norm();
                assert!(off < 1e-6 * (1.0 + here[order].norm()), "{model:?} {wavelength} {order} {off}");
            }
        }
    }
}
