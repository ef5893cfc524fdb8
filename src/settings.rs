//! The project's settings: `overcoat.toml` at its root.

use crate::disk::DiskFiles;
use crate::failure::Failure;
use overcoat_lang::code::Code;
use overcoat_lang::diagnostic::{Diagnostic, Severity};
use overcoat_lang::files::{Files, ReadError};
use overcoat_lang::nearest;
use serde::Deserialize;
use std::collections::BTreeSet;

const FILE: &str = "overcoat.toml";

/// What a project settles for all its recipes.
#[derive(Debug)]
pub(crate) struct Settings {
    /// Patterns of files and folders that are no recipes of the project, as in a `.gitignore`.
    pub(crate) exclude: Vec<String>,
    /// Findings that fail a check although they are no errors.
    pub(crate) deny: Deny,
    /// Whether recipes on published data are told so.
    pub(crate) handbook_only_hint: bool,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct Written {
    #[serde(default)]
    exclude: Vec<String>,
    #[serde(default)]
    deny: Vec<toml::Spanned<String>>,
    #[serde(default = "yes")]
    handbook_only_hint: bool,
}

fn yes() -> bool {
    true
}

impl Settings {
    /// Reads the settings of the project, if it has any.
    pub(crate) fn read(files: &DiskFiles) -> Result<Settings, Failure> {
        let text = match files.read(FILE) {
            Ok(bytes) => {
                String::from_utf8(bytes).map_err(|_| Failure::message(format!("{FILE} is not UTF-8")))?
            }
            Err(ReadError::Missing) => String::new(),
            Err(ReadError::Outside(why) | ReadError::Failed(why)) => {
                return Err(Failure::message(format!("{FILE} {why}")));
            }
        };
        Settings::parse(&text)
    }

    fn parse(text: &str) -> Result<Settings, Failure> {
        let written: Written = toml::from_str(text).map_err(|error| {
            let place = error.span().map_or(String::new(), |span| place(text, span.start));
            Failure::message(format!("{FILE}{place}: {}", error.message().trim().replace('\n', " ")))
        })?;
        let mut deny = Deny::default();
        for word in &written.deny {
            deny.add(word.get_ref()).map_err(|why| {
                Failure::message(format!("{FILE}{}: {why}", place(text, word.span().start)))
            })?;
        }
        Ok(Settings { exclude: written.exclude, deny, handbook_only_hint: written.handbook_only_hint })
    }
}

/// `:line:column`, counted from 1.
fn place(text: &str, offset: usize) -> String {
    let before = text.get(..offset).unwrap_or(text);
    let line = before.matches('\n').count() + 1;
    let column = before.chars().rev().take_while(|character| *character != '\n').count() + 1;
    format!(":{line}:{column}")
}

/// Which findings fail a check although they are no errors.
#[derive(Clone, Debug, Default)]
pub(crate) struct Deny {
    warnings: bool,
    codes: BTreeSet<Code>,
}

impl Deny {
    /// Adds a code, or all warnings.
    pub(crate) fn add(&mut self, word: &str) -> Result<(), String> {
        if word == "warnings" {
            self.warnings = true;
            return Ok(());
        }
        match Code::from_slug(word) {
            Some(code) => {
                self.codes.insert(code);
                Ok(())
            }
            None => {
                let known = Code::ALL.iter().map(|code| code.slug()).chain(["warnings"]);
                let near = did_you_mean(&nearest(word, known));
                Err(format!(
                    "`{word}` is no code{near}; `overcoat explain` lists them, `warnings` means all warnings"
                ))
            }
        }
    }

    /// Whether a finding fails the check only because it is denied.
    pub(crate) fn denies(&self, diagnostic: &Diagnostic) -> bool {
        let named = self.codes.contains(&diagnostic.code);
        let warning = self.warnings && diagnostic.severity == Severity::Warning;
        diagnostic.waived.is_none() && diagnostic.severity != Severity::Error && (named || warning)
    }
}

/// ", did you mean `…`?" without the question mark, or nothing.
pub(crate) fn did_you_mean(near: &[String]) -> String {
    match near.first() {
        Some(name) => format!(", did you mean `{name}`"),
        None => String::new(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn refusal(text: &str) -> String {
        Settings::parse(text).map(|_| ()).unwrap_err().to_string()
    }

    #[test]
    fn a_wrong_setting_is_told_with_its_place() {
        assert!(
            refusal("exclude = [\"a\"]\nruns = 5\n").starts_with("overcoat.toml:2:1: unknown field `runs`")
        );
        assert!(refusal("deny = [\"layer_to_thin\"]").contains(":1:9: `layer_to_thin` is no code"));
        assert!(refusal("deny = [\"layer_to_thin\"]").contains("`layer_too_thin`"));
        assert!(refusal("exclude = ").starts_with("overcoat.toml:1:"));
    }

    #[test]
    fn nothing_is_denied_unasked() {
        let settings = Settings::parse("").unwrap();
        assert!(settings.exclude.is_empty() && settings.handbook_only_hint);
    }
}
