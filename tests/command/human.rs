//! What people read.

use crate::project::{FRONT, Project};

#[test]
fn a_missed_requirement_is_shown_with_its_place_and_its_numbers() {
    let run = Project::with_front(&FRONT.replace("<= 1.5 %", "<= 1.0 %")).run(&["check"]);
    insta::assert_snapshot!(run.stdout);
}

#[test]
fn several_places_of_one_file_are_one_picture() {
    let run = Project::with_front("let a = 1 nm\n\nlet b = 2 nm\n\nlet a = 3 nm\n").run(&["check"]);
    insta::assert_snapshot!(run.stdout);
}

#[test]
fn places_are_right_after_characters_of_several_bytes() {
    let text = "# Ta₂O₅ and µm\n## Größe\nlet a = 1 nm + 2 µm\nlet b = 1 nm + 2 # ±\n";
    let run = Project::with_front(text).run(&["check"]);
    insta::assert_snapshot!(run.stdout);
}

#[test]
fn places_in_other_files_are_right_after_characters_of_several_bytes() {
    let project = Project::with_front(
        &FRONT
            .replace("revision \"A\"", "chamber heron")
            .replace("99.6 nm", "99.65 nm")
            .replace("material crown", "use heron from \"heron.coat\"\nmaterial crown"),
    );
    let chamber = "# ± ± ± ± ± ± ± ± ±\nuse magnesium_fluoride from handbook\nchamber heron {\n    resolution 0.5 nm\n    \
                   deposit magnesium_fluoride { thickness varies ± 1 % each run }\n}\n";
    project.write("heron.coat", chamber);
    let run = project.run(&["check", "front.coat"]);
    assert!(run.stdout.contains("[ heron.coat:4:5 ]"), "{}", run.stdout);
}

#[test]
fn colour_comes_only_when_asked_for() {
    let project = Project::with_front(&FRONT.replace("<= 1.5 %", "<= 1.0 %"));
    assert!(!project.run(&["check"]).stdout.contains('\u{1b}'));
    assert!(!project.run(&["check", "--color", "never"]).stdout.contains('\u{1b}'));
    assert!(project.run(&["check", "--color", "always"]).stdout.contains('\u{1b}'));
}

#[test]
fn a_terminal_obeys_nothing_that_a_recipe_says() {
    let text = FRONT.replace("one layer", "\u{1b}]0;owned\u{7} \u{9b}31m");
    let run = Project::with_front(&text).run(&["check"]);
    let obeyed = |c: char| c.is_control() && c != '\n';
    assert!(!run.stdout.contains(obeyed), "{:?}", run.stdout);
}
