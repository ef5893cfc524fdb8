//! Effective media.

use overcoat_engine::MixingRule::{Bruggeman, LorentzLorenz, MaxwellGarnett, Volume};
use overcoat_engine::{Complex64, Index, MixingRule};

use super::{index, same};

fn mixed(rule: MixingRule, parts: &[(f64, f64, f64)]) -> Complex64 {
    let parts: Vec<(Index, f64)> = parts.iter().map(|&(n, k, fraction)| (index(n, k), fraction)).collect();
    Index::mixture(rule, &parts).expect("a mixture").at(550.0).expect("an index")
}

#[test]
fn lorentz_lorenz() {
    // (n² − 1)/(n² + 2) = Σ fᵢ (nᵢ² − 1)/(nᵢ² + 2); Born and Wolf, 2.3.3.
    same("n", mixed(LorentzLorenz, &[(2.35, 0.0, 0.3), (1.46, 0.0, 0.7)]).re, 1.666_639_811_135_423);
    same("n", mixed(LorentzLorenz, &[(1.46, 0.0, 0.85), (1.0, 0.0, 0.15)]).re, 1.382_154_936_553_905);
}

#[test]
fn bruggeman() {
    // ε = (b + √(b² + 8εₐε_b))/4; D. A. G. Bruggeman, Ann. Phys. 416, 636 (1935).
    same("n", mixed(Bruggeman, &[(2.35, 0.0, 0.3), (1.46, 0.0, 0.7)]).re, 1.707_410_635_859_328);
}

#[test]
fn maxwell_garnett() {
    // J. C. Maxwell Garnett, Phil. Trans. R. Soc. A 203, 385 (1904).
    same("low host", mixed(MaxwellGarnett, &[(1.46, 0.0, 0.7), (2.35, 0.0, 0.3)]).re, 1.695_138_093_157_880);
    same("high host", mixed(MaxwellGarnett, &[(2.35, 0.0, 0.3), (1.46, 0.0, 0.7)]).re, 1.730_199_728_709_050);
}

#[test]
fn upper_wiener_bound() {
    // O. Wiener (1912): ε = Σ fᵢ εᵢ; Born and Wolf, 15.5.2.
    same("n", mixed(Volume, &[(2.35, 0.0, 0.3), (1.46, 0.0, 0.7)]).re, 1.774_505_564_939_147);
}

#[test]
fn metal_inclusions() {
    let bruggeman = mixed(Bruggeman, &[(0.06, 3.6, 0.1), (1.46, 0.0, 0.9)]);
    same("n", bruggeman.re, 1.849_593_080_552_306);
    same("k", bruggeman.im, 0.502_693_965_678_993_9);
    let garnett = mixed(MaxwellGarnett, &[(1.46, 0.0, 0.9), (0.06, 3.6, 0.1)]);
    same("n", garnett.re, 1.863_548_409_038_906);
    same("k", garnett.im, 0.009_156_214_264_758_857);
}
