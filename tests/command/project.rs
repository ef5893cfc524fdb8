//! A project in a folder of its own, and the command run in it.

use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

/// A quarter-wave of magnesium fluoride on crown glass, met.
pub(crate) const FRONT: &str = r#"material fluoride { source "witness plate W-12" index 1.38 }
material crown { source "melt data" index 1.52 }

recipe front "lens, one layer" {
    revision "A"
    stack {
        incident  air
        layer     fluoride 99.6 nm
        substrate crown
    }
    require reflectance <= 1.5 % over 500 .. 600 nm
    require mean reflectance <= 1.6 % over 420 .. 680 nm
}
"#;

/// A project.
pub(crate) struct Project {
    folder: tempfile::TempDir,
}

/// What a run of the command left.
#[derive(Debug)]
pub(crate) struct Run {
    pub(crate) status: Option<i32>,
    pub(crate) stdout: String,
    pub(crate) stderr: String,
}

impl Project {
    /// An empty project with a mark at its root.
    pub(crate) fn new() -> Project {
        let project = Project::unmarked();
        project.write("overcoat.toml", "");
        project
    }

    /// An empty folder.
    pub(crate) fn unmarked() -> Project {
        Project { folder: tempfile::tempdir().unwrap() }
    }

    /// A project with one file `front.coat`.
    pub(crate) fn with_front(text: &str) -> Project {
        let project = Project::new();
        project.write("front.coat", text);
        project
    }

    /// Where it is.
    pub(crate) fn path(&self) -> PathBuf {
        self.folder.path().canonicalize().unwrap()
    }

    /// Writes a file.
    pub(crate) fn write(&self, name: &str, bytes: impl AsRef<[u8]>) {
        let path = self.path().join(name);
        std::fs::create_dir_all(path.parent().unwrap()).unwrap();
        std::fs::write(path, bytes).unwrap();
    }

    /// Reads a file.
    pub(crate) fn read(&self, name: &str) -> String {
        std::fs::read_to_string(self.path().join(name)).unwrap()
    }

    /// Runs the command at the root.
    pub(crate) fn run(&self, arguments: &[&str]) -> Run {
        self.run_in(".", arguments)
    }

    /// Runs the command in a folder of the project.
    pub(crate) fn run_in(&self, folder: &str, arguments: &[&str]) -> Run {
        finish(command(&self.path().join(folder)).args(arguments).stdin(Stdio::null()))
    }

    /// The answer of `check --format json`, whatever its status.
    pub(crate) fn json(&self, arguments: &[&str]) -> serde_json::Value {
        let run = self.run(&[&["check", "--format", "json"], arguments].concat());
        serde_json::from_str(&run.stdout).unwrap_or_else(|error| panic!("{error}: {run:?}"))
    }

    /// The codes of all diagnostics with their lines.
    pub(crate) fn codes(&self, arguments: &[&str]) -> Vec<(String, u64)> {
        let answer = self.json(arguments);
        let diagnostics = answer["diagnostics"].as_array().unwrap();
        let of = |finding: &serde_json::Value| {
            (finding["code"].as_str().unwrap().to_owned(), finding["line"].as_u64().unwrap())
        };
        diagnostics.iter().map(of).collect()
    }
}

/// The command, to be run in a folder.
pub(crate) fn command(folder: &Path) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_overcoat"));
    command.current_dir(folder).env_remove("NO_COLOR").env_remove("CLICOLOR_FORCE");
    command
}

/// Runs it to its end.
pub(crate) fn finish(command: &mut Command) -> Run {
    let output = command.output().unwrap();
    Run {
        status: output.status.code(),
        stdout: String::from_utf8(output.stdout).unwrap(),
        stderr: String::from_utf8(output.stderr).unwrap(),
    }
}
