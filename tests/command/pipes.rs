//! An output that nobody reads any more is an end like any other.

use crate::project::{FRONT, Project, command};
use std::process::Stdio;

#[test]
fn a_closed_output_is_no_failure() {
    let project = Project::with_front(FRONT);
    for arguments in [
        &["check"][..],
        &["spectrum", "front.coat"],
        &["explain"],
        &["handbook"],
        &["check", "--format", "json"],
    ] {
        let (reader, writer) = std::io::pipe().unwrap();
        drop(reader);
        let mut child =
            command(&project.path()).args(arguments).stdout(writer).stderr(Stdio::piped()).spawn().unwrap();
        let status = child.wait().unwrap();
        let told = std::io::read_to_string(child.stderr.take().unwrap()).unwrap();
        assert_eq!((status.code(), told.as_str()), (Some(0), ""), "{arguments:?}");
    }
}
