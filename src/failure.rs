//! Why a command could not do its job.

use crate::Status;
use std::fmt;
use std::io;
use std::path::Path;

/// What ends a command early.
#[derive(Debug)]
pub(crate) enum Failure {
    /// Nobody reads the output any more: an end like any other.
    Closed,
    /// Something asked for can't be read, written or understood; a sentence for people.
    Message(String),
    /// The tool itself went wrong; a sentence for people.
    Fault(String),
}

impl Failure {
    /// A sentence for people.
    pub(crate) fn message(text: impl Into<String>) -> Failure {
        Failure::Message(text.into())
    }

    /// A path that the system refuses, with what was to be done to it ("read", "written").
    pub(crate) fn path(path: &Path, done: &str, error: &io::Error) -> Failure {
        Failure::Message(format!("`{}` can't be {done}: {}", path.display(), plain(error)))
    }

    pub(crate) fn status(&self) -> Status {
        match self {
            Failure::Closed => Status::Met,
            Failure::Message(_) => Status::NotUnderstood,
            Failure::Fault(_) => Status::Fault,
        }
    }
}

/// The system's reason, without its error number.
pub(crate) fn plain(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => "it does not exist".to_owned(),
        io::ErrorKind::PermissionDenied => "permission denied".to_owned(),
        io::ErrorKind::IsADirectory => "it is a folder".to_owned(),
        _ => {
            let text = error.to_string();
            text.split(" (os error").next().unwrap_or(&text).to_lowercase()
        }
    }
}

impl fmt::Display for Failure {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Failure::Closed => formatter.write_str("the output was closed"),
            Failure::Message(text) | Failure::Fault(text) => formatter.write_str(text),
        }
    }
}

impl From<io::Error> for Failure {
    /// Of writing to the standard output; paths have [`Failure::path`].
    fn from(error: io::Error) -> Failure {
        if error.kind() == io::ErrorKind::BrokenPipe {
            Failure::Closed
        } else {
            Failure::Message(format!("the output can't be written: {}", plain(&error)))
        }
    }
}
