//! `explain`, `handbook` and `completions`.

use crate::project::Project;

#[test]
fn every_code_is_listed_and_explained() {
    let project = Project::new();
    let list = project.run(&["explain"]).stdout;
    assert!(list.contains("process\n") && list.contains("layer_too_thin"));
    let run = project.run(&["explain", "layer_too_thin"]);
    assert_eq!(run.status, Some(0));
    assert!(run.stdout.starts_with("# layer_too_thin\n"), "{}", run.stdout);
    let run = project.run(&["explain", "layer_to_thin"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("did you mean `layer_too_thin`"), "{}", run.stderr);
}

/// Fused silica: n = 1.458 46 at 589.3 nm (I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965), table I: 1.458 404 at
/// 589.29 nm).
#[test]
fn the_handbook_prints_constants_with_their_source() {
    let run = Project::new().run(&["handbook", "fused_silica", "--at", "589.29nm,0.55um"]);
    assert_eq!(run.status, Some(0), "{run:?}");
    assert!(run.stdout.contains("source   ") && run.stdout.contains("range    "), "{}", run.stdout);
    let mut rows = run.stdout.lines().skip_while(|line| *line != "wavelength_nm,n,k").skip(1);
    let row: Vec<f64> = rows.next().unwrap().split(',').map(|field| field.parse().unwrap()).collect();
    assert!((row[1] - 1.458_404).abs() < 1e-5, "{row:?}");
    assert!(rows.next().unwrap().starts_with("550,"));
}

#[test]
fn the_handbook_lists_its_entries_and_refuses_what_it_lacks() {
    let project = Project::new();
    let list = project.run(&["handbook"]).stdout;
    for name in [
        "silicon",
        "fused_silica",
        "crown_517642",
        "float_glass",
        "magnesium_fluoride",
        "titania",
        "tantala",
        "silver",
        "aluminium",
        "am15g",
    ] {
        assert!(list.lines().any(|line| line.starts_with(name)), "{name}: {list}");
    }
    let run = project.run(&["handbook", "silcon"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("did you mean `silicon`"), "{}", run.stderr);
    let run = project.run(&["handbook", "silicon", "--at", "2um"]);
    assert_eq!(run.status, Some(2), "{run:?}");
    assert!(!run.stdout.contains("NaN"));
}

#[test]
fn completions_name_the_commands() {
    let project = Project::new();
    for shell in ["bash", "zsh", "fish", "elvish", "powershell"] {
        let run = project.run(&["completions", shell]);
        assert_eq!(run.status, Some(0));
        assert!(run.stdout.contains("spectrum"), "{shell}");
    }
}
