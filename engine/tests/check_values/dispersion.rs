//! Dispersion formulas.

use overcoat_engine::{Index, Oscillator};

use super::{coated, normal, same};

/// The helium d, hydrogen F and hydrogen C lines, nm.
const LINES: [f64; 3] = [587.5618, 486.1327, 656.2725];

fn sellmeier(terms: &[(f64, f64)]) -> Index {
    Index::sellmeier(terms).expect("a glass")
}

#[test]
fn sellmeier_glasses_and_crystals() {
    // (B, C in µm): I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965); an optical glass catalogue's data sheets, whose C are in µm²;
    // I. H. Malitson and M. J. Dodge, J. Opt. Soc. Am. 62, 1405 (1972); I. H. Malitson, Appl. Opt. 2, 1103
    // (1963). Catalogues print glass 517642 as 1.51680, 64.17; 785258 as 1.78472, 25.76.
    let root = |terms: [(f64, f64); 3]| terms.map(|(strength, square): (f64, f64)| (strength, square.sqrt()));
    let materials = [
        (
            [(0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161)],
            [1.458_463_687_137_226, 1.463_126_484_747_024, 1.456_366_620_295_137],
            67.821_431_982_895_05,
        ),
        (
            root([(1.03961212, 0.00600069867), (0.231792344, 0.0200179144), (1.01046945, 103.560653)]),
            [1.516_800_034_500_588, 1.522_376_289_731_229, 1.514_322_347_261_375],
            64.167_336_237_498_98,
        ),
        (
            root([(1.73848403, 0.0136068604), (0.311168974, 0.0615960463), (1.17490871, 121.922711)]),
            [1.784_719_845_855_929, 1.806_454_385_470_879, 1.775_987_679_010_179],
            25.756_635_259_153_33,
        ),
        (
            [(1.4313493, 0.0726631), (0.65054713, 0.1193242), (5.3414021, 18.028251)],
            [1.768_172_093_292_356, 1.775_507_510_286_742, 1.764_883_985_412_415],
            72.308_588_945_722_20,
        ),
        (
            [(0.5675888, 0.050263605), (0.4710914, 0.1003909), (3.8484723, 34.649040)],
            [1.433_849_278_703_786, 1.437_025_050_192_304, 1.432_458_016_453_490],
            94.995_855_847_667_53,
        ),
    ];
    for (terms, expected, abbe) in materials {
        let n = LINES.map(|line| sellmeier(&terms).at(line).expect("an index").re);
        for (found, expected) in n.iter().zip(expected) {
            same("n", *found, expected);
        }
        super::near("V", (n[0] - 1.0) / (n[1] - n[2]), abbe, 1e-9);
    }
}

#[test]
fn cauchy() {
    // n = A + B/λ²; A. L. Cauchy (1836).
    let film = Index::cauchy(&[1.45, 0.0035]).expect("a film");
    same("n", film.at(550.0).expect("an index").re, 1.461_570_247_933_884);
}

#[test]
fn drude_metal() {
    // ε = ε∞ − Ep²/(E² + iΓE); P. Drude, Ann. Phys. 306, 566 (1900).
    let metal = Index::oscillators(3.7, vec![Oscillator::Drude { plasma_ev: 9.0, width_ev: 0.02 }]);
    // hc of the SI, in eV nm.
    let wavelength = 1_239.841_984_332_002_6 / 2.0;
    let index = metal.expect("a metal").at(wavelength).expect("an index");
    same("n", index.re, 0.024_886_913_977_980_33);
    same("k", index.im, 4.067_996_381_631_515);
    let mirror = coated(1.0, &[], (index.re, index.im));
    same("R", normal(&mirror, wavelength).reflectance, 0.994_343_557_860_220_2);
}

#[test]
fn tauc_lorentz() {
    // G. E. Jellison and F. A. Modine, Appl. Phys. Lett. 69, 371 and 2137 (1996). The expected values agree
    // with the Kramers–Kronig integral taken numerically to better than 1e-12.
    let term = Oscillator::TaucLorentz { strength_ev: 122.0, centre_ev: 3.45, width_ev: 2.54, gap_ev: 1.2 };
    let silicon = Index::oscillators(1.15, vec![term]).expect("a film");
    for (energy, n, k) in [
        (1.0, 3.525_604_569_032_760, 0.0),
        (2.0, 4.224_406_330_320_341, 0.458_799_738_237_926_5),
        (3.0, 4.342_033_014_185_039, 1.999_696_526_042_137),
    ] {
        let index = silicon.at(1_239.841_984_332_002_6 / energy).expect("an index");
        same("n", index.re, n);
        same("k", index.im, k);
    }
}
