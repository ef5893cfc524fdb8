//! Rough interfaces against the exponential factor that they agree with while the roughness is small.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::files::MemoryFiles;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};

/// The value of the only requirement of a recipe, 40 digits of it allowed by a wide bound.
fn value(stack: &str, sentence: &str) -> Option<f64> {
    let mut files = MemoryFiles::new();
    let text = format!(
        "material glass {{ source \"x\" index 1.5 }}\nmaterial dense {{ source \"x\" index 1.9 }}\n\
         material half {{ source \"x\" index mixture of glass 50 %, air 50 % }}\n\
         material near {{ source \"x\" index mixture of glass 29/30, dense 1/30 by volume }}\n\
         recipe r {{ stack {{ {stack} }} require {sentence} }}\n"
    );
    files.insert("main.coat", text);
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    let project = load(&files, &["main.coat".to_owned()]);
    let report = check(
        project,
        &Options { today, asked: None, remedies: false, yields: true, parts: None, whole_project: true },
    );
    report.recipes[0].requirements[0].value
}

#[test]
fn a_rough_surface_reflects_less_by_the_factor_of_nevot_and_croce() {
    // L. Névot, P. Croce, Rev. Phys. Appl. 15, 761 (1980): r = r₀ exp(−2 k₁ k₂ σ²) with k = 2π n/λ, to second order in σ.
    let smooth =
        value("incident air layer glass 300 nm substrate glass", "reflectance <= 90 % at 550 nm").unwrap();
    for sigma in [1.0, 2.0, 4.0] {
        let stack = format!("incident air layer glass 300 nm rough {sigma} nm substrate glass");
        let rough = value(&stack, "reflectance <= 90 % at 550 nm").unwrap();
        let k = 2.0 * std::f64::consts::PI / 550.0;
        let loss = 4.0 * k * k * 1.5 * sigma * sigma;
        assert!(
            ((1.0 - rough / smooth) / loss - 1.0).abs() < 0.06,
            "{sigma}: {} {loss}",
            1.0 - rough / smooth
        );
    }
}

#[test]
fn the_rough_face_is_the_one_away_from_the_piece_whichever_way_it_is_written() {
    let sentence = "reflectance <= 90 % over 450 .. 650 nm";
    let light = value("incident air layer dense 90 nm rough 3 nm substrate glass", sentence).unwrap();
    let deposited = value("substrate glass layer dense 90 nm rough 3 nm incident air", sentence).unwrap();
    assert_eq!(light, deposited);
    // On the back of a thick piece the upper face looks to the exit.
    let both = "incident air substrate glass 1 mm layer dense 90 nm rough 3 nm exit air";
    let turned = "exit air layer dense 90 nm rough 3 nm substrate glass 1 mm incident air";
    assert_eq!(value(both, sentence), value(turned, sentence));
    let front = value("incident air layer dense 90 nm rough 3 nm substrate glass 1 mm exit air", sentence);
    let from_exit = value(both, &format!("{sentence} from exit"));
    assert!((front.unwrap() - from_exit.unwrap()).abs() < 1e-12);
}

#[test]
fn smooth_is_the_limit_and_too_rough_is_said() {
    let sentence = "reflectance <= 90 % at 550 nm";
    let smooth = value("incident air layer dense 90 nm substrate glass", sentence).unwrap();
    let nearly = value("incident air layer dense 90 nm rough 0.001 nm substrate glass", sentence).unwrap();
    assert!((smooth - nearly).abs() < 1e-5);
    assert_eq!(value("incident air layer dense 2 nm rough 3 nm substrate glass", sentence), None);
}

#[test]
fn a_rough_face_beside_a_gradient_is_between_the_materials_at_that_face() {
    // What stands for the face, written out: half glass and half air over ±3 nm, and the profile from 3 nm on, whose first
    // material is 29 parts of 30 glass (by volume, so that a mixture of mixtures is the mixture).
    let sentence = "reflectance <= 90 % at 550 nm";
    let graded = "layer graded glass to dense 90 nm by volume";
    let short = value(&format!("incident air {graded} rough 3 nm substrate dense"), sentence).unwrap();
    let written = "incident air layer half 6 nm layer graded near to dense 87 nm by volume substrate dense";
    assert!((short - value(written, sentence).unwrap()).abs() < 1e-8);
    let turned = "substrate dense layer graded dense to glass 90 nm by volume rough 3 nm incident air";
    assert!((value(turned, sentence).unwrap() - short).abs() < 1e-12);
}
