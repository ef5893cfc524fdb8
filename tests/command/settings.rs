//! `overcoat.toml`, and which files are recipes of the project.

use crate::project::{FRONT, Project};

fn recipes(project: &Project, arguments: &[&str]) -> Vec<String> {
    let answer = project.json(arguments);
    let recipes = answer["recipes"].as_array().unwrap();
    recipes.iter().map(|recipe| recipe["file"].as_str().unwrap().to_owned()).collect()
}

#[test]
fn hidden_ignored_and_excluded_files_are_left_out_unless_named() {
    let project = Project::new();
    let names = ["a.coat", "z/b.coat", ".hidden/c.coat", "ignored/d.coat", "drafts/e.coat", "f.coat.txt"];
    for name in names {
        project.write(name, FRONT);
    }
    project.write(".gitignore", "ignored/\n");
    project.write("overcoat.toml", "exclude = [\"drafts/**\"]\n");
    assert_eq!(recipes(&project, &[]), ["a.coat", "z/b.coat"]);
    let named = ["drafts/e.coat", "ignored/d.coat", ".hidden/c.coat"];
    assert_eq!(recipes(&project, &named), [".hidden/c.coat", "drafts/e.coat", "ignored/d.coat"]);
}

#[test]
fn denials_of_the_project_count() {
    let project = Project::with_front(&FRONT.replace("source \"melt data\" ", ""));
    assert_eq!(project.run(&["check"]).status, Some(0));
    project.write("overcoat.toml", "deny = [\"unsourced\"]\n");
    assert_eq!(project.run(&["check"]).status, Some(1));
}

#[test]
fn the_hint_at_published_data_can_be_switched_off() {
    let own = "material fluoride { source \"witness plate W-12\" index 1.38 }";
    let text = FRONT.replace(own, "use magnesium_fluoride as fluoride from handbook");
    let project = Project::with_front(&text);
    let hinted = |project: &Project| project.codes(&[]).iter().any(|(code, _)| code == "handbook_data");
    assert!(hinted(&project));
    project.write("overcoat.toml", "handbook_only_hint = false\n");
    assert!(!hinted(&project));
}

#[test]
fn a_wrong_setting_is_told_at_its_place() {
    let project = Project::with_front(FRONT);
    project.write("overcoat.toml", "exclude = []\nexlude = []\n");
    let run = project.run(&["check"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.starts_with("overcoat: overcoat.toml:2:1: unknown field `exlude`"), "{}", run.stderr);
}
