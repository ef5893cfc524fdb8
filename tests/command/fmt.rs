//! `overcoat fmt`.

use crate::project::{FRONT, Project, command};
use std::io::Write;
use std::process::Stdio;

const UNTIDY: &str = "let   a=1nm  # one\nlet b =2 µm\n";

/// A text given to the standard input, and what came out.
fn piped(text: &str, arguments: &[&str]) -> (Option<i32>, String, String) {
    let project = Project::new();
    let mut child = command(&project.path())
        .arg("fmt")
        .args(arguments)
        .arg("-")
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    child.stdin.take().unwrap().write_all(text.as_bytes()).unwrap();
    let output = child.wait_with_output().unwrap();
    let text = |bytes| String::from_utf8(bytes).unwrap();
    (output.status.code(), text(output.stdout), text(output.stderr))
}

#[test]
fn files_are_laid_out_in_place_and_then_stay() {
    let project = Project::with_front(UNTIDY);
    project.write("tidy.coat", "let a = 1 nm\n");
    let checked = project.run(&["fmt", "--check"]);
    assert_eq!(checked.status, Some(1), "{checked:?}");
    assert_eq!(checked.stdout, "front.coat:1: laid out otherwise from here\n");
    assert_eq!(project.read("front.coat"), UNTIDY);
    let run = project.run(&["fmt"]);
    assert_eq!((run.status, run.stdout.as_str(), run.stderr.as_str()), (Some(0), "", ""));
    let tidy = project.read("front.coat");
    assert!(tidy.starts_with("let a = 1 nm") && tidy.contains("# one\nlet b = 2 um\n"), "{tidy}");
    let again = project.run(&["fmt", "--check"]);
    assert_eq!((again.status, again.stdout.as_str()), (Some(0), ""));
}

#[test]
fn files_of_several_projects_are_laid_out_at_once() {
    let parent = Project::new();
    parent.write("a/front.coat", UNTIDY);
    parent.write("b/overcoat.toml", "");
    parent.write("b/front.coat", UNTIDY);
    let run = parent.run(&["fmt", "a", "b", "a/front.coat"]);
    assert_eq!(run.status, Some(0), "{run:?}");
    assert_eq!(parent.read("a/front.coat"), parent.read("b/front.coat"));
    assert_eq!(parent.run(&["fmt", "--check", "a", "b"]).status, Some(0));
}

#[test]
fn a_file_that_is_laid_out_is_not_touched() {
    let project = Project::with_front(UNTIDY);
    project.run(&["fmt"]);
    let path = project.path().join("front.coat");
    let long_ago = std::time::SystemTime::UNIX_EPOCH + std::time::Duration::from_secs(1_000_000_000);
    std::fs::File::options().write(true).open(&path).unwrap().set_modified(long_ago).unwrap();
    assert_eq!(project.run(&["fmt"]).status, Some(0));
    assert_eq!(std::fs::metadata(&path).unwrap().modified().unwrap(), long_ago);
}

#[test]
fn the_meaning_stays() {
    let project = Project::with_front(FRONT);
    let before = project.json(&[])["recipes"][0]["requirements"].clone();
    assert_eq!(project.run(&["fmt"]).status, Some(0));
    let after = project.json(&[])["recipes"][0]["requirements"].clone();
    for (before, after) in before.as_array().unwrap().iter().zip(after.as_array().unwrap()) {
        assert_eq!((&before["value"], &before["bound"]), (&after["value"], &after["bound"]));
    }
}

#[test]
fn what_cannot_be_read_is_told_and_stays_as_it_is() {
    let broken = "let   a = \nlet b = \u{7b}\n";
    let project = Project::with_front(broken);
    project.write("bytes.coat", b"let   a = 1\xff\n");
    let run = project.run(&["fmt"]);
    assert_eq!(run.status, Some(2), "{run:?}");
    assert!(run.stderr.contains("front.coat:") && run.stderr.contains("bytes.coat:"), "{}", run.stderr);
    assert_eq!(std::fs::read(project.path().join("bytes.coat")).unwrap(), b"let   a = 1\xff\n");
}

#[test]
fn the_standard_input_goes_to_the_standard_output() {
    let (status, out, told) = piped(UNTIDY, &[]);
    assert_eq!((status, told.as_str()), (Some(0), ""));
    assert!(out.starts_with("let a = 1 nm"), "{out}");
    assert_eq!(piped(&out, &["--check"]).0, Some(0));
    assert_eq!(piped(UNTIDY, &["--check"]).0, Some(1));
    let (status, out, told) = piped("let a =\n", &[]);
    assert_eq!((status, out.as_str()), (Some(2), "let a =\n"), "{told}");
    assert!(told.contains("[syntax]") && told.contains("-:"), "{told}");
}

#[cfg(unix)]
#[test]
fn rights_of_a_file_stay() {
    use std::os::unix::fs::PermissionsExt;
    let project = Project::with_front(UNTIDY);
    let path = project.path().join("front.coat");
    std::fs::set_permissions(&path, std::fs::Permissions::from_mode(0o640)).unwrap();
    project.run(&["fmt"]);
    assert_eq!(std::fs::metadata(&path).unwrap().permissions().mode() & 0o777, 0o640);
    assert_eq!(std::fs::read_dir(project.path()).unwrap().count(), 2, "nothing is left beside it");
}
