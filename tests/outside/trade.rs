//! What every coating shop knows. Common practice; no source is claimed.

use overcoat_engine::{Light, Polarisation, Quantity, extremes, mean};

use crate::data::{constant, films};
use crate::handbook::{index, weight};

/// Common practice, no source: a nitride film of one quarter-wave that takes the green off silicon is 60 to
/// 70 nm thick.
#[test]
fn a_quarter_wave_of_nitride_for_the_green_is_60_to_70_nm() {
    let mut best = (f64::INFINITY, 0.0);
    for step in 0..=1200 {
        let thickness = 20.0 + 0.1 * f64::from(step);
        let stack = films(constant([1.0, 0.0]), vec![(constant([2.05, 0.0]), thickness)], index("silicon"));
        let response = stack.response(530.0, 0.0, Polarisation::Mean).expect("well formed");
        if response.reflectance < best.0 {
            best = (response.reflectance, thickness);
        }
    }
    assert!((60.0..=70.0).contains(&best.1), "least at {} nm", best.1);
    assert!(best.0 < 0.01, "it leaves {}", best.0);
}

/// Common practice, no source: bare silicon reflects about a third of the usable sunlight.
#[test]
fn bare_silicon_loses_about_a_third_of_the_light() {
    let stack = films(constant([1.0, 0.0]), Vec::new(), index("silicon"));
    let sunlight = weight("am15g").photons();
    let lost = mean(&stack, &Quantity::Reflectance, &Light::normal(), &[(300.0, 1100.0)], &sunlight)
        .expect("both reach over the band");
    assert!((0.30..=0.37).contains(&lost.value), "it loses {}", lost.value);
}

/// Common practice, no source: one quarter-wave of magnesium fluoride on crown glass leaves about 1.3 %, where
/// the bare glass reflects about 4.2 %.
#[test]
fn magnesium_fluoride_on_crown_glass_leaves_about_1_3_percent() {
    let crown = index("crown_517642");
    let film = vec![(constant([1.38, 0.0]), 550.0 / 4.0 / 1.38)];
    let coated = films(constant([1.0, 0.0]), film, crown.clone());
    let bare = films(constant([1.0, 0.0]), Vec::new(), crown);
    let light = Light::normal();
    let found =
        extremes(&coated, &Quantity::Reflectance, &light, (450.0, 650.0)).expect("within the formula");
    assert!((found.min.value - 0.013).abs() < 0.0005, "it leaves {}", found.min.value);
    let before = extremes(&bare, &Quantity::Reflectance, &light, (550.0, 550.0)).expect("within the formula");
    assert!((before.min.value - 0.042).abs() < 0.0005, "bare: {}", before.min.value);
}
