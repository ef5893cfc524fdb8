//! `overcoat spectrum`.

use crate::project::{FRONT, Project};

fn rows(text: &str) -> Vec<Vec<f64>> {
    let mut lines = text.lines();
    assert_eq!(lines.next(), Some("wavelength_nm,reflectance,transmittance,absorptance"));
    lines.map(|line| line.split(',').map(|field| field.parse().unwrap()).collect()).collect()
}

/// One quarter-wave of index n₁ on n₂ reflects ((n₂ − n₁²)/(n₂ + n₁²))² at its wavelength (M. Born, E. Wolf, Principles of
/// Optics, 1.6; the formula is from memory).
#[test]
fn a_quarter_wave_reflects_what_the_formula_says() {
    let thickness = 550.0 / 4.0 / 1.38;
    let text = FRONT.replace("99.6 nm", &format!("{thickness} nm"));
    let run =
        Project::with_front(&text).run(&["spectrum", "front.coat", "--over", "550..560nm", "--step", "20nm"]);
    let rows = rows(&run.stdout);
    let formula = ((1.52 - 1.38f64.powi(2)) / (1.52 + 1.38f64.powi(2))).powi(2);
    assert!((rows[0][1] - formula).abs() < 1e-14, "{run:?}");
    assert!((rows[0][1] + rows[0][2] + rows[0][3] - 1.0).abs() < 1e-14);
}

#[test]
fn both_ends_of_the_band_are_rows() {
    let project = Project::with_front(FRONT);
    let wavelengths = |arguments: &[&str]| -> Vec<f64> {
        let run = project.run(&[&["spectrum", "front.coat"], arguments].concat());
        assert_eq!(run.status, Some(0), "{run:?}");
        rows(&run.stdout).iter().map(|row| row[0]).collect()
    };
    assert_eq!(wavelengths(&["--over", "0.4..0.405um", "--step", "2nm"]), [400.0, 402.0, 404.0, 405.0]);
    // By default what the requirements are about.
    let whole = wavelengths(&[]);
    assert_eq!((whole[0], whole[whole.len() - 1], whole.len()), (420.0, 680.0, 261));
}

#[test]
fn angle_and_polarisation_count() {
    let project = Project::with_front(FRONT);
    let reflectance = |arguments: &[&str]| -> f64 {
        let base = ["spectrum", "front.coat", "--over", "550..551nm"];
        rows(&project.run(&[&base, arguments].concat()).stdout)[0][1]
    };
    let (s, p) = (
        reflectance(&["--at", "45deg", "--polarised", "s"]),
        reflectance(&["--at", "45deg", "--polarised", "p"]),
    );
    let mean = reflectance(&["--at", "45deg"]);
    assert!(s > p && ((s + p) / 2.0 - mean).abs() < 1e-15);
    // Without absorption both sides reflect alike (Stokes's reversibility).
    let (front, back) = (reflectance(&[]), reflectance(&["--from", "exit"]));
    assert!((front - back).abs() < 1e-14);
}

#[test]
fn one_of_several_recipes_is_chosen_by_name() {
    let second = FRONT.split("\n\n").nth(1).unwrap().replace("recipe front", "recipe back");
    let project = Project::with_front(&format!("{FRONT}\n{second}"));
    let run = project.run(&["spectrum", "front.coat"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("choose one with --recipe: front, back"), "{}", run.stderr);
    let run = project.run(&["spectrum", "front.coat", "--recipe", "frnt"]);
    assert!(run.stderr.contains("did you mean `front`"), "{}", run.stderr);
    assert_eq!(project.run(&["spectrum", "front.coat", "--recipe", "back"]).status, Some(0));
}

#[test]
fn beyond_the_data_there_is_no_spectrum() {
    let text = FRONT.replace("index 1.52", "index table { 400 nm 1.53 0, 700 nm 1.51 0 }");
    let project = Project::with_front(&text);
    let run = project.run(&["spectrum", "front.coat", "--over", "300..500nm"]);
    assert_eq!((run.status, run.stdout.as_str()), (Some(2), ""));
    assert!(run.stderr.contains("crown has no optical constants at 300 nm"), "{}", run.stderr);
    assert!(run.stderr.contains("front.coat:2"), "{}", run.stderr);
    // What was not asked for is cut to the data.
    let text = text.replace("420 .. 680", "420 .. 980");
    let run = Project::with_front(&text).run(&["spectrum", "front.coat"]);
    assert_eq!(rows(&run.stdout).last().unwrap()[0], 700.0);
}

#[test]
fn wrong_options_are_told() {
    let project = Project::with_front(FRONT);
    for (option, value) in [
        ("--over", "700..400nm"),
        ("--at", "90deg"),
        ("--step", "0nm"),
        ("--step", "1"),
        ("--over", "400..700"),
    ] {
        let run = project.run(&["spectrum", "front.coat", option, value]);
        assert_eq!((run.status, run.stdout.as_str()), (Some(2), ""));
        assert!(run.stderr.contains(option) && run.stderr.contains("for example"), "{}", run.stderr);
    }
    project.write("none.coat", "let a = 1");
    assert!(project.run(&["spectrum", "none.coat"]).stderr.contains("holds no recipe"));
    project.write("wrong.coat", "recipe r { stack { layer x 1 nm } }");
    let run = project.run(&["spectrum", "wrong.coat"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("stack_order") || run.stderr.contains("unknown_name"), "{}", run.stderr);
}
