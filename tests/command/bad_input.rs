//! Bad input gets an error at its place: never a panic, a hang or a NaN.

use crate::project::{FRONT, Project, Run};

/// Checks a text, and that the command itself is not at fault.
fn checked(text: impl AsRef<[u8]>) -> Run {
    let project = Project::new();
    project.write("front.coat", text);
    let run = project.run(&["check"]);
    assert!(matches!(run.status, Some(0..=2)), "{run:?}");
    assert!(!run.stdout.contains("NaN") && run.stderr.is_empty(), "{run:?}");
    run
}

fn refused(text: impl AsRef<[u8]>) -> String {
    let run = checked(text);
    assert_eq!(run.status, Some(2), "{run:?}");
    run.stdout
}

#[test]
fn a_byte_order_mark_and_windows_line_ends_are_accepted() {
    assert_eq!(checked(format!("\u{feff}{FRONT}")).status, Some(0));
    let windows = FRONT.replace('\n', "\r\n");
    assert_eq!(checked(&windows).status, Some(0));
    let missed = checked(windows.replace("<= 1.5 %", "<= 1.0 %"));
    assert!(missed.stdout.contains("front.coat:11:5"), "{}", missed.stdout);
}

#[test]
fn what_is_no_text_is_refused() {
    assert!(refused(b"let a = \xff nm\n").contains("not UTF-8"));
    assert!(refused(b"let a = 1\nlet b\0 = 2\n").contains("NUL"));
    refused(b"\xff\xfel\0e\0t\0");
}

#[test]
fn deep_nesting_is_refused_quickly() {
    let open = "(".repeat(100_000);
    refused(format!("let a = {open}1"));
    let blocks = "repeat 2 {".repeat(50_000);
    refused(format!("recipe r {{ stack {{ incident air {blocks}"));
    refused("{".repeat(100_000));
    refused(format!("let a = {}1", "-".repeat(100_000)));
}

#[test]
fn a_stack_of_too_many_films_is_refused() {
    let text = FRONT.replace("layer     fluoride 99.6 nm", "repeat 1000000000 { layer fluoride 99.6 nm }");
    assert!(refused(&text).contains("front.coat:8"));
    let nested = FRONT.replace(
        "layer     fluoride 99.6 nm",
        "repeat 1000 { repeat 1000 { repeat 1000 { layer fluoride 1 nm } } }",
    );
    refused(&nested);
}

#[test]
fn cycles_are_told() {
    assert!(refused("let a = b\nlet b = a\n").contains("[import_cycle]"));
    assert!(refused("material a { index of a shifted 0.1 }\n").contains("[import_cycle]"));
    let project = Project::new();
    project.write("a.coat", "use x from \"b.coat\"\nlet y = 1\n");
    project.write("b.coat", "use y from \"a.coat\"\nlet x = 1\n");
    let run = project.run(&["check"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stdout.contains("[import_cycle]"), "{}", run.stdout);
}

#[test]
fn wrong_numbers_are_told_at_their_place() {
    let changes = [
        ("99.6 nm", "-99.6 nm", 8),
        ("99.6 nm", "1 nm / 0", 8),
        ("99.6 nm", "1e308 * 1e308 * 1 nm", 8),
        ("index 1.38", "index -1.38", 1),
        ("index 1.38", "index 1.38 k -0.1", 1),
        ("index 1.38", "index 0", 1),
        ("500 .. 600 nm", "600 .. 500 nm", 11),
        ("500 .. 600 nm", "500 .. 600 nm at 90 deg", 11),
    ];
    for (good, wrong, line) in changes {
        let shown = refused(FRONT.replace(good, wrong));
        assert!(shown.contains(&format!("front.coat:{line}:")), "{wrong}: {shown}");
    }
}

#[test]
fn wrong_tables_are_told_with_row_and_column() {
    let tables = [
        ("wavelength_nm,n,k\n400,1.5,0\n300,1.5,0\n", "3"),
        ("wavelength_nm,n,k\n400,1.5,0\n500,x,0\n", "3"),
        ("wavelength_nm,n,k\n400,1.5,0\n500,1.5\n", "3"),
        ("wavelength_nm,n,k\n400,1.5,0\n500,NaN,0\n", "3"),
        ("", ""),
    ];
    for (table, row) in tables {
        let project = Project::new();
        project.write("glass.csv", table);
        project.write("front.coat", FRONT.replace("index 1.52", "index table \"glass.csv\""));
        let run = project.run(&["check"]);
        assert_eq!(run.status, Some(2), "{run:?}");
        assert!(run.stdout.contains("[table_malformed]") && run.stdout.contains(row), "{}", run.stdout);
    }
    let missing = refused(FRONT.replace("index 1.52", "index table \"glas.csv\""));
    assert!(missing.contains("does not exist"), "{missing}");
}

#[test]
fn light_from_an_absorbing_medium_is_refused() {
    let text =
        FRONT.replace("incident  air", "incident  smoke") + "material smoke { source \"x\" index 1 k 0.1 }\n";
    let run = checked(&text);
    assert_eq!(run.status, Some(1), "{run:?}");
    assert!(run.stdout.contains("[absorbing_incident]"), "{}", run.stdout);
}

#[test]
fn every_beginning_of_a_recipe_is_survived() {
    let project = Project::new();
    // One project with all beginnings, so that the command runs once.
    for end in (0..FRONT.len()).filter(|end| FRONT.is_char_boundary(*end)) {
        project.write(&format!("b{end:04}.coat"), &FRONT[..end]);
    }
    let run = project.run(&["check"]);
    assert_eq!(run.status, Some(2), "{}", run.stderr);
}
