//! Which film to blame for a missed promise: the change is found, said, offered as a fix, and does what it says.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::diagnostic::Diagnostic;
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::report::Report;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};

const MATERIALS: &str = "material fluoride { source \"x\" index 1.38 }\nmaterial nitride { source \"x\" index 2.02 }\n\
     material titania { source \"x\" index 2.35 }\nmaterial silica { source \"x\" index 1.46 }\n\
     material silver { source \"x\" index 0.06 k 3.6 }\nmaterial crown { source \"x\" index 1.52 }\n";

fn report(text: &str) -> Report {
    let mut files = MemoryFiles::new();
    files.insert("main.coat", text.to_owned());
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    let project = load(&files, &["main.coat".to_owned()]);
    check(
        project,
        &Options { today, asked: None, remedies: true, yields: true, parts: None, whole_project: true },
    )
}

/// The only error of a recipe with this stack and these requirements, and the text.
fn missed(stack: &str, requirements: &str) -> (Diagnostic, String) {
    let text = format!("{MATERIALS}recipe r {{ stack {{ {stack} }} {requirements} }}\n");
    let report = report(&text);
    let mut errors = report.diagnostics.into_iter().filter(Diagnostic::fails);
    let error = errors.next().expect("a missed promise");
    assert!(errors.next().is_none());
    (error, text)
}

/// The text with the diagnostic's fix.
fn mended(diagnostic: &Diagnostic, text: &str) -> String {
    let edit = &diagnostic.fix.as_ref().expect("a fix").edits[0];
    let (start, end) = (edit.place.span.start as usize, edit.place.span.end as usize);
    format!("{}{}{}", &text[..start], edit.text, &text[end..])
}

/// A change that mends, with a part of what is said of it.
fn mends(stack: &str, requirements: &str, said: &str) {
    let (error, text) = missed(stack, requirements);
    assert!(error.message.contains(said), "{}", error.message);
    let after = report(&mended(&error, &text));
    assert!(after.diagnostics.iter().all(|one| !one.fails()), "{}: {:?}", error.message, after.diagnostics);
}

#[test]
fn a_quarter_wave_layer_off_its_thickness_is_set_right() {
    // R = ((n₀ nₛ − n₁²)/(n₀ nₛ + n₁²))² = 1.26 % where n₁ d = λ/4 (Born and Wolf, Principles of Optics, 1.6): 99.6 nm.
    let stack = "incident air  layer fluoride 82 nm  substrate crown";
    mends(stack, "require reflectance <= 1.27 % at 550 nm", "fluoride (layer 1) 82 → 99.6 nm gives 1.26 %");
}

#[test]
fn a_layer_in_quarter_waves_stays_in_quarter_waves() {
    let text = format!(
        "{MATERIALS}recipe r {{ reference 550 nm  stack {{ incident air  layer fluoride 0.8 qw  substrate crown }} \
         require reflectance <= 1.27 % at 550 nm }}\n"
    );
    let first = report(&text);
    let error = first.diagnostics.iter().find(|one| one.fails()).unwrap();
    assert_eq!(error.fix.as_ref().unwrap().edits[0].text, "1 qw", "{}", error.message);
}

#[test]
fn every_kind_of_promise_has_its_film() {
    let pair = "incident air  layer fluoride 60 nm as outer  layer nitride 70 nm  substrate crown";
    for promise in [
        "reflectance <= 3.5 % over 500 .. 600 nm",
        "mean reflectance <= 3 % over 480 .. 620 nm",
        "transmittance >= 97 % over 520 .. 580 nm at 0, 30 deg",
        "reflectance <= 5 % over 520 .. 580 nm at 0 .. 30 deg polarised s",
        "luminous reflectance <= 3 %",
        "solar transmittance >= 92 %",
        "reflected colour within 14 of lab(15, 0, 0)",
        "reflectance crosses 10 % rising within 563 .. 573 nm",
        "optical_density <= 0.003 at 550 nm",
        "reflected phase 190 .. 200 deg at 550 nm",
        "reflected group_delay 0.99 .. 1 fs at 550 nm",
        "reflected group_delay_dispersion 0.35 .. 0.39 fs^2 at 550 nm",
        "peak_field <= 0.93 at 550 nm",
    ] {
        let (error, text) = missed(pair, &format!("require {promise}"));
        assert!(error.message.contains("→") && error.fix.is_some(), "{promise}: {}", error.message);
        let after = report(&mended(&error, &text));
        assert!(after.diagnostics.iter().all(|one| !one.fails()), "{promise}: {}", error.message);
    }
}

#[test]
fn an_absorbing_film_in_a_pane_is_found() {
    let pane = "incident air  layer titania 30 nm  layer silver 16 nm as mirror  layer titania 32 nm  substrate crown 4 mm  \
                layer fluoride 98 nm  exit air";
    mends(pane, "require absorptance in mirror <= 2.2 % at 550 nm", "mirror of silver 16 → ");
    mends(pane, "require emittance <= 2.2 % over 540 .. 560 nm at 300 K", " → ");
    mends(pane, "require transmittance >= 95 % at 550 nm", " → ");
    mends(pane, "require photocurrent in mirror <= 0.02 mA/cm2 over 540 .. 560 nm under am15g", " → ");
}

#[test]
fn copies_change_together() {
    let mirror = "incident air  repeat 6 { layer titania 58.5 nm  layer silica 88 nm }  layer titania 58.5 nm  substrate crown";
    let (error, text) = missed(mirror, "require reflectance >= 99.62 % at 550 nm");
    assert!(error.notes.iter().any(|note| note.contains("all 6 copies")), "{error:?}");
    assert!(report(&mended(&error, &text)).diagnostics.iter().all(|one| !one.fails()));
}

#[test]
fn what_must_stay_stays() {
    let missed_by = |layer: &str| {
        missed(
            &format!("incident air  layer {layer}  substrate crown"),
            "require reflectance <= 1.27 % at 550 nm",
        )
        .0
    };
    let fixed = missed_by("fluoride 82 nm fixed");
    assert!(
        fixed.fix.is_none() && fixed.message.ends_with("no single film's thickness brings it nearer"),
        "{}",
        fixed.message
    );
    let between = missed_by("fluoride 82 nm between 80 .. 90 nm");
    let nearest =
        "no single film's thickness mends it, and fluoride (layer 1) 82 → 90 nm comes nearest with 1.33 %";
    assert!(between.fix.is_none() && between.message.contains(nearest), "{}", between.message);
}

#[test]
fn a_chamber_makes_what_it_can_in_its_own_steps() {
    let text = format!(
        "{MATERIALS}chamber c {{ deposit fluoride {{ rate 1 nm/s  thickness 20 .. 95 nm }}  resolution 2 nm }}\n\
         recipe r {{ chamber c  stack {{ incident air  layer fluoride 82 nm  substrate crown }} \
         require reflectance <= 1.32 % at 550 nm }}\n"
    );
    let first = report(&text);
    let error = first.diagnostics.iter().find(|one| one.fails()).unwrap();
    assert_eq!(error.fix.as_ref().unwrap().edits[0].text, "94 nm", "{}", error.message);
}

#[test]
fn a_change_that_breaks_another_promise_is_told_and_not_offered() {
    let stack = "incident air  layer fluoride 82 nm  substrate crown";
    let both = "require reflectance <= 1.27 % at 550 nm require reflectance <= 1.29 % at 450 nm";
    let (error, _) = missed(stack, both);
    assert!(error.message.contains("→ 99.6 nm gives 1.26 %"), "{}", error.message);
    assert!(error.fix.is_none());
    assert!(error.notes.iter().any(|note| note.contains("450 nm` is missed")), "{error:?}");
}

#[test]
fn a_film_on_a_crest_is_taken_over_the_hill() {
    // A quarter-wave of the higher index reflects most: every small change helps as little as none, a quarter-wave more does.
    let stack = "incident air  layer titania 58.5 nm  substrate crown";
    mends(stack, "require reflectance <= 4.3 % at 550 nm", "titania (layer 1) 58.5 → 11");
}

#[test]
fn a_film_too_thick_to_follow_is_told_without_a_made_up_figure() {
    // Millimetres written for nanometres.
    let stack = "incident air  layer nitride 51.5 mm  substrate crown";
    let (error, _) = missed(stack, "require reflectance <= 5 % over 400 .. 1100 nm");
    assert_eq!(error.code.slug(), "not_converged");
    assert!(
        error.message.contains("look for a thickness") && !error.message.contains("give or take"),
        "{}",
        error.message
    );
}
