//! What a check ends with.

use crate::project::{FRONT, Project};

#[test]
fn a_recipe_that_is_met_ends_with_0() {
    let run = Project::with_front(FRONT).run(&["check"]);
    assert_eq!(run.status, Some(0), "{run:?}");
    assert!(run.stdout.ends_with("1 recipe, met\n"), "{}", run.stdout);
}

#[test]
fn a_missed_requirement_ends_with_1() {
    let run = Project::with_front(&FRONT.replace("<= 1.5 %", "<= 1.0 %")).run(&["check"]);
    assert_eq!(run.status, Some(1), "{run:?}");
    assert!(run.stdout.contains("[requirement_missed] error:"), "{}", run.stdout);
}

#[test]
fn a_text_that_cannot_be_understood_ends_with_2() {
    let run = Project::with_front(&FRONT.replace("99.6 nm", "99.6 nm nm")).run(&["check"]);
    assert_eq!(run.status, Some(2), "{run:?}");
}

#[test]
fn a_path_that_is_not_there_ends_with_2() {
    let run = Project::new().run(&["check", "fronts.coat"]);
    assert_eq!(run.status, Some(2));
    assert_eq!(run.stderr, "overcoat: `fronts.coat` can't be read: it does not exist\n");
}

#[test]
fn wrong_arguments_end_with_2_and_help_with_0() {
    let project = Project::new();
    assert_eq!(project.run(&["check", "--frmat", "json"]).status, Some(2));
    assert_eq!(project.run(&["--help"]).status, Some(0));
    assert_eq!(project.run(&["check", "--help"]).status, Some(0));
}

#[test]
fn a_project_without_recipes_is_met() {
    let run = Project::new().run(&["check"]);
    assert_eq!((run.status, run.stdout.as_str()), (Some(0), "no recipes\n"));
}

#[test]
fn only_what_was_asked_for_is_told() {
    let project = Project::with_front(FRONT);
    project.write("other.coat", FRONT.replace("<= 1.5 %", "<= 1.0 %"));
    assert_eq!(project.run(&["check", "front.coat"]).status, Some(0));
    assert_eq!(project.run(&["check", "other.coat"]).status, Some(1));
    assert_eq!(project.run(&["check"]).status, Some(1));
}

#[test]
fn a_denied_warning_ends_with_1() {
    let unsourced = FRONT.replace("source \"melt data\" ", "");
    let project = Project::with_front(&unsourced);
    let lax = project.run(&["check"]);
    assert_eq!(lax.status, Some(0), "{lax:?}");
    for denied in ["warnings", "unsourced"] {
        let run = project.run(&["check", "--deny", denied]);
        assert_eq!(run.status, Some(1), "{run:?}");
        assert!(run.stdout.contains("denied"), "{}", run.stdout);
    }
    assert_eq!(project.run(&["check", "--deny", "unused_name"]).status, Some(0));
}

#[test]
fn an_unknown_code_to_deny_is_told_with_the_nearest() {
    let run = Project::new().run(&["check", "--deny", "unsorced"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("did you mean `unsourced`"), "{}", run.stderr);
}

#[test]
fn a_waiver_counts_until_its_day() {
    let text = FRONT.replace("source \"melt data\" ", "").replace(
        "    require reflectance",
        "    waive unsourced because \"melt data follow\" until 2027-01-31\n    require reflectance",
    );
    let project = Project::with_front(&text);
    let on_the_day = project.run(&["check", "--deny", "warnings", "--today", "2027-01-31"]);
    assert_eq!(on_the_day.status, Some(0), "{on_the_day:?}");
    assert!(on_the_day.stdout.contains("Waived"), "{}", on_the_day.stdout);
    assert!(
        on_the_day.stdout.contains("because melt data follow, until 2027-01-31"),
        "{}",
        on_the_day.stdout
    );
    let after = project.run(&["check", "--deny", "warnings", "--today", "2027-02-01"]);
    assert_eq!(after.status, Some(1), "{after:?}");
    assert!(after.stdout.contains("waiver_expired"), "{}", after.stdout);
}

#[test]
fn the_report_can_go_to_a_file() {
    let project = Project::with_front(FRONT);
    let run = project.run(&["check", "--format", "json", "--output", "report.json"]);
    assert_eq!((run.status, run.stdout.as_str()), (Some(0), ""));
    let answer: serde_json::Value = serde_json::from_str(&project.read("report.json")).unwrap();
    assert_eq!(answer["summary"]["met"], 1);
}
