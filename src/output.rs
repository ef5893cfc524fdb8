//! The ways out: the standard output, files that change as a whole or not at all, and complaints.

use crate::cli::Colour;
use crate::failure::Failure;
use anstream::ColorChoice;
use anstyle::{AnsiColor, Style};
use std::io::{self, IsTerminal, Write};
use std::path::{Path, PathBuf};

/// Whether a stream gets colours: asked for, or a terminal without NO_COLOR.
pub(crate) fn coloured(colour: Colour, stream: &impl IsTerminal) -> bool {
    match colour {
        Colour::Always => true,
        Colour::Never => false,
        Colour::Auto => {
            let refused = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
            stream.is_terminal() && !refused && std::env::var_os("TERM").is_none_or(|term| term != "dumb")
        }
    }
}

/// Prints a text that may hold colours to the standard output.
pub(crate) fn print(text: &str) -> Result<(), Failure> {
    // The text holds colours only where they are wanted; on old Windows consoles anstream translates them.
    let mut out = anstream::AutoStream::new(io::stdout().lock(), ColorChoice::Always);
    out.write_all(text.as_bytes())?;
    out.flush()?;
    Ok(())
}

/// Says on the standard error what went wrong.
pub(crate) fn complain(colour: Colour, message: &str) {
    let style =
        if coloured(colour, &io::stderr()) { AnsiColor::Red.on_default().bold() } else { Style::new() };
    tell(&format!("{style}overcoat:{style:#} {message}\n"));
}

/// Writes a text that may hold colours to the standard error: the one door to it.
pub(crate) fn tell(text: &str) {
    let mut out = anstream::AutoStream::new(io::stderr().lock(), ColorChoice::Always);
    // Where even this can't be written there is nobody left to tell.
    let _ = out.write_all(text.as_bytes());
}

/// Replaces a file: its new text is written beside it and takes its place in one step.
pub(crate) fn replace(path: &Path, text: &str) -> Result<(), Failure> {
    let mut draft = Draft::beside(path)?;
    draft.write_all(text.as_bytes()).map_err(|error| Failure::path(path, "written", &error))?;
    draft.keep()
}

/// The new text of a file while it is written: beside it, and gone if it does not become whole.
#[derive(Debug)]
pub(crate) struct Draft {
    path: PathBuf,
    target: PathBuf,
    kind: Kind,
}

#[derive(Debug)]
enum Kind {
    /// A pipe or a device is written to; only a file can be replaced.
    Device(std::fs::File),
    File(tempfile::NamedTempFile),
}

impl Draft {
    /// Begins the new text of a file.
    pub(crate) fn beside(path: &Path) -> Result<Draft, Failure> {
        // A link keeps standing: what it points to is replaced.
        let target = path.canonicalize().unwrap_or_else(|_| path.to_owned());
        let folder = match target.parent() {
            Some(folder) if !folder.as_os_str().is_empty() => folder,
            _ => Path::new("."),
        };
        let kind = if std::fs::metadata(&target).is_ok_and(|about| !about.is_file()) {
            std::fs::OpenOptions::new().write(true).open(&target).map(Kind::Device)
        } else {
            tempfile::NamedTempFile::new_in(folder).map(Kind::File)
        };
        let kind = kind.map_err(|error| Failure::path(path, "written", &error))?;
        Ok(Draft { path: path.to_owned(), target, kind })
    }

    /// Puts the new text in the file's place.
    pub(crate) fn keep(self) -> Result<(), Failure> {
        let Draft { path, target, kind } = self;
        let Kind::File(file) = kind else { return Ok(()) };
        let kept = (|| {
            // A new file gets the usual rights, a replaced one keeps its own.
            if let Ok(before) = std::fs::metadata(&target) {
                file.as_file().set_permissions(before.permissions())?;
            } else {
                usual_rights(file.as_file())?;
            }
            file.as_file().sync_all()?;
            file.persist(&target).map_err(|error| error.error)?;
            io::Result::Ok(())
        })();
        kept.map_err(|error| Failure::path(&path, "written", &error))
    }
}

impl Write for Draft {
    fn write(&mut self, bytes: &[u8]) -> io::Result<usize> {
        match &mut self.kind {
            Kind::Device(file) => file.write(bytes),
            Kind::File(file) => file.write(bytes),
        }
    }

    fn flush(&mut self) -> io::Result<()> {
        match &mut self.kind {
            Kind::Device(file) => file.flush(),
            Kind::File(file) => file.flush(),
        }
    }
}

#[cfg(unix)]
fn usual_rights(file: &std::fs::File) -> io::Result<()> {
    use std::os::unix::fs::PermissionsExt;
    file.set_permissions(std::fs::Permissions::from_mode(0o644))
}

#[cfg(not(unix))]
fn usual_rights(_: &std::fs::File) -> io::Result<()> {
    Ok(())
}
