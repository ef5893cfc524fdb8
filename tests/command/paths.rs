//! Nothing outside the project's root is read, by whatever way it is asked for.

use crate::project::{FRONT, Project};

const USING: &str = "use crown from \"PATH\"\nrecipe r { stack { incident air substrate crown } }\n";

fn using(path: &str) -> String {
    USING.replace("PATH", path)
}

#[test]
fn imports_that_leave_the_project_are_refused() {
    let outside = Project::unmarked();
    outside.write("glass.coat", "material crown { index 1.5 }");
    outside.write("inside/overcoat.toml", "");
    for path in [
        "../glass.coat",
        "../../../../etc/passwd",
        "/etc/passwd",
        &outside.path().join("glass.coat").display().to_string(),
    ] {
        outside.write("inside/r.coat", using(path));
        let run = outside.run(&["check", "inside/r.coat"]);
        assert_eq!(run.status, Some(2), "{path}: {run:?}");
        assert!(run.stdout.contains("[import_outside]"), "{path}: {}", run.stdout);
    }
}

#[cfg(unix)]
#[test]
fn links_that_leave_the_project_are_refused() {
    use std::os::unix::fs::symlink;
    let outside = Project::unmarked();
    outside.write("glass.coat", "material crown { index 1.5 }");
    outside.write("secret.csv", "wavelength_nm,n,k\n400,1.5,0\n800,1.5,0\n");
    let project = Project::new();
    symlink(outside.path().join("glass.coat"), project.path().join("glass.coat")).unwrap();
    symlink(outside.path(), project.path().join("folder")).unwrap();
    symlink(outside.path().join("secret.csv"), project.path().join("secret.csv")).unwrap();
    for text in [using("glass.coat"), using("folder/glass.coat")] {
        project.write("r.coat", text);
        let run = project.run(&["check", "r.coat"]);
        assert_eq!(run.status, Some(2));
        assert!(run.stdout.contains("[import_outside]"), "{}", run.stdout);
    }
    project.write("r.coat", "material crown { index table \"secret.csv\" }\n");
    assert!(project.codes(&["r.coat"]).iter().any(|(code, line)| code == "import_outside" && *line == 1));
    // Named outright, too.
    let run = project.run(&["check", "glass.coat"]);
    assert_eq!(run.status, Some(2), "{run:?}");
}

#[cfg(unix)]
#[test]
fn links_inside_the_project_are_followed() {
    let project = Project::new();
    project.write("house/glass.coat", "material crown { source \"melt data\" index 1.5 }");
    std::os::unix::fs::symlink("house/glass.coat", project.path().join("glass.coat")).unwrap();
    project.write("r.coat", using("glass.coat"));
    let run = project.run(&["check", "r.coat"]);
    assert_eq!(run.status, Some(0), "{run:?}");
}

#[cfg(unix)]
#[test]
fn what_is_no_regular_file_is_refused_at_once() {
    let project = Project::new();
    let pipe = project.path().join("pipe.coat");
    assert!(std::process::Command::new("mkfifo").arg(&pipe).status().unwrap().success());
    project.write("r.coat", using("pipe.coat"));
    let run = project.run(&["check", "r.coat"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stdout.contains("is not a regular file"), "{}", run.stdout);
    assert_eq!(project.run(&["check", "pipe.coat"]).status, Some(2));
    project.write("folder/x.txt", "");
    project.write("r.coat", using("folder"));
    let run = project.run(&["check", "r.coat"]);
    assert!(run.stdout.contains("is a folder"), "{}", run.stdout);
}

#[test]
fn the_root_is_the_nearest_marked_folder_or_the_one_given() {
    let project = Project::new();
    project.write("glass.coat", "material crown { source \"melt data\" index 1.5 }");
    project.write("recipes/r.coat", using("../glass.coat"));
    assert_eq!(project.run_in("recipes", &["check", "r.coat"]).status, Some(0));
    assert_eq!(project.run(&["check", "--root", "recipes", "recipes/r.coat"]).status, Some(2));
    let run = project.run(&["check", "--root", "recipes", "glass.coat"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("`glass.coat` lies outside the root `recipes`"), "{}", run.stderr);
}

#[test]
fn without_a_mark_a_files_own_folder_is_the_root() {
    let project = Project::unmarked();
    project.write("glass.coat", "material crown { source \"melt data\" index 1.5 }");
    project.write("recipes/r.coat", using("../glass.coat"));
    assert_eq!(project.run(&["check", "recipes/r.coat"]).status, Some(2));
    assert_eq!(project.run(&["check", "."]).status, Some(0));
}

#[test]
fn paths_of_two_projects_are_told_apart() {
    let parent = Project::unmarked();
    for name in ["a", "b"] {
        parent.write(&format!("{name}/overcoat.toml"), "");
        parent.write(&format!("{name}/front.coat"), FRONT);
    }
    let run = parent.run(&["check", "a", "b"]);
    assert_eq!(run.status, Some(2));
    assert!(run.stderr.contains("several projects"), "{}", run.stderr);
    let run = parent.run(&["check", "--root", ".", "a", "b"]);
    assert_eq!(run.status, Some(0), "{run:?}");
}

#[test]
fn blocks_of_recipes_in_process_documents_are_checked_at_their_place() {
    let project = Project::new();
    project.write("house.coat", "material crown { source \"melt sheet\"  index 1.52 }\n");
    project.write(
        "process.md",
        "# Process notes\n\nThe part as it is made:\n\n```coat\nuse crown from \"house.coat\"\nrecipe bare {\n    stack { incident air  substrate crown }\n    require reflectance <= 1 % at 550 nm\n}\n```\n",
    );
    project.write("plain.md", "Nothing to check here: `coat`.\n");
    let output = project.run(&["check", ".", "--format", "json"]);
    let report: serde_json::Value = serde_json::from_str(&output.stdout).unwrap();
    assert_eq!(report["summary"]["recipes"], 1);
    assert_eq!(report["diagnostics"][0]["file"], "process.md");
    assert_eq!(report["diagnostics"][0]["line"], 9);
    assert_eq!(report["diagnostics"][0]["column"], 5);
}
