//! One finding with the text that it is about.

use super::{Shown, View};
use anstream::adapter::strip_str;
use ariadne::{Cache, CharSet, Color, Config, IndexType, Label, Report, ReportKind};
use overcoat_lang::diagnostic::{Diagnostic, Severity};
use overcoat_lang::source::{FileId, Place};
use std::collections::BTreeMap;
use std::fmt;
use std::ops::Range;

/// A longer line is not shown: it would fill the screen.
const LONGEST_LINE: usize = 400;

/// The texts as the pictures need them, each prepared when it is first shown.
pub(super) struct Texts<'s> {
    shown: &'s Shown<'s>,
    ready: BTreeMap<FileId, ariadne::Source<String>>,
}

impl<'s> Texts<'s> {
    pub(super) fn new(shown: &'s Shown<'s>) -> Texts<'s> {
        Texts { shown, ready: BTreeMap::new() }
    }
}

impl Cache<FileId> for &mut Texts<'_> {
    type Storage = String;

    fn fetch(&mut self, id: &FileId) -> Result<&ariadne::Source<String>, impl fmt::Debug> {
        let text = || ariadne::Source::from(harmless(&self.shown.sources.get(*id).text));
        Ok::<_, String>(self.ready.entry(*id).or_insert_with(text))
    }

    fn display<'a>(&self, id: &'a FileId) -> Option<impl fmt::Display + 'a> {
        Some(self.shown.name(*id).to_owned())
    }
}

/// How pictures are drawn. Counted in bytes, ariadne takes a related file's place for one in characters.
fn config(coloured: bool) -> Config {
    Config::new()
        .with_index_type(IndexType::Char)
        .with_color(coloured)
        .with_char_set(CharSet::Unicode)
        .with_tab_width(4)
}

/// A finding for people.
pub(super) fn draw(view: &View<'_>, texts: &mut Texts<'_>, finding: &Diagnostic, coloured: bool) -> String {
    let severity = view.gravity(finding);
    let colour = match severity {
        Severity::Error => Color::Red,
        Severity::Warning => Color::Yellow,
        Severity::Hint => Color::Cyan,
    };
    let kind = ReportKind::Custom(severity.word(), colour);
    let mut notes: Vec<String> = finding.notes.iter().map(|note| harmless(note)).collect();
    if view.deny.denies(finding) {
        notes.push(format!("denied: a {} that makes this check fail", finding.severity.word()));
    }
    let fix = finding.fix.as_ref().map(|fix| with_text(&fix.title, &fix.edits));
    if !showable(&view.shown, finding) {
        return plain(view, finding, severity, &notes, fix.as_deref());
    }
    let here = (finding.place.file, characters(&view.shown, finding.place));
    // Without a message and without colour a label would not be drawn at all.
    let own = Label::new(here.clone()).with_color(colour).with_message(finding.code.headline());
    let mut labels = vec![((false, finding.place), own)];
    labels.extend(finding.related.iter().map(|related| {
        let place = (related.place.file, characters(&view.shown, related.place));
        let label = Label::new(place).with_color(Color::Blue).with_message(harmless(&related.message));
        ((related.place.file != finding.place.file, related.place), label)
    }));
    // The finding's own file first, each file from top to bottom: otherwise one file is drawn in several pieces.
    labels.sort_by_key(|((other, place), _)| (*other, place.file, place.span.end));
    let labels = labels.into_iter().enumerate().map(|(number, (_, label))| label.with_order(number as i32));
    let mut report = Report::build(kind, here)
        .with_config(config(coloured))
        .with_code(finding.code.slug())
        .with_message(harmless(&finding.message))
        .with_labels(labels);
    report.with_notes(notes);
    report.with_helps(fix);
    let mut drawn = Vec::new();
    match report.finish().write(texts, &mut drawn) {
        Ok(()) => {
            let drawn = String::from_utf8_lossy(&drawn);
            // The word for a severity of our own is coloured whatever the configuration says.
            trimmed(&if coloured { drawn.into_owned() } else { strip_str(&drawn).to_string() })
        }
        Err(_) => plain(view, finding, severity, &finding.notes, None),
    }
}

/// A fix's title with what it writes, where that is one short text.
fn with_text(title: &str, edits: &[overcoat_lang::diagnostic::Edit]) -> String {
    match edits {
        [edit] if !edit.text.is_empty() && !edit.text.contains('\n') && !title.contains(&edit.text) => {
            format!("{title}: `{}`", edit.text.trim())
        }
        _ => title.to_owned(),
    }
}

/// The bytes of a place, inside its text and between characters.
fn clamped(shown: &Shown<'_>, place: Place) -> Range<usize> {
    let text = &shown.sources.get(place.file).text;
    let inside = |offset: u32| {
        let mut offset = (offset as usize).min(text.len());
        while !text.is_char_boundary(offset) {
            offset -= 1;
        }
        offset
    };
    let (start, end) = (inside(place.span.start), inside(place.span.end));
    let end = end.max(start);
    // A label must not end on a line's end.
    start..start + text[start..end].trim_end_matches(['\n', '\r']).len()
}

/// The characters of a place.
fn characters(shown: &Shown<'_>, place: Place) -> Range<usize> {
    let text = &shown.sources.get(place.file).text;
    let range = clamped(shown, place);
    let start = text[..range.start].chars().count();
    start..start + text[range].chars().count()
}

/// Whether all lines to be shown are there and short enough.
fn showable(shown: &Shown<'_>, finding: &Diagnostic) -> bool {
    let places = std::iter::once(finding.place).chain(finding.related.iter().map(|related| related.place));
    places.into_iter().all(|place| {
        let text = &shown.sources.get(place.file).text;
        let range = clamped(shown, place);
        let start = text[..range.start].rfind('\n').map_or(0, |at| at + 1);
        let end = text[range.end..].find('\n').map_or(text.len(), |at| range.end + at);
        !text.is_empty() && text[start..end].lines().all(|line| line.len() <= LONGEST_LINE)
    })
}

/// A finding without its text: where the file could not be read, or its lines are too long to show.
fn plain(
    view: &View<'_>,
    finding: &Diagnostic,
    severity: Severity,
    notes: &[String],
    help: Option<&str>,
) -> String {
    let at = view.shown.located(finding.place);
    let (word, code) = (severity.word(), finding.code.slug());
    let message = harmless(&finding.message);
    let mut text = format!("[{code}] {word}: {message}\n   at {}:{}:{}\n", at.file, at.line, at.column);
    for related in &finding.related {
        let at = view.shown.located(related.place);
        text.push_str(&format!("   {}:{}:{}: {}\n", at.file, at.line, at.column, harmless(&related.message)));
    }
    text.extend(notes.iter().map(|note| format!("   note: {note}\n")));
    text.extend(help.map(|help| format!("   help: {help}\n")));
    text
}

/// A text without the characters that a terminal would obey or that would break a line; each is replaced by one of
/// as many bytes, so that places stay right.
pub(super) fn harmless(text: &str) -> String {
    let shown = |character: char| match character {
        '\n' | '\t' => character,
        _ if character.is_ascii_control() => ' ',
        '\u{80}'..='\u{9f}' => '·',
        // Ends of lines and of paragraphs, and what turns the direction of writing.
        '\u{2028}' | '\u{2029}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}' => '␣',
        _ => character,
    };
    text.chars().map(shown).collect()
}

/// Lines without blanks at their ends.
fn trimmed(drawn: &str) -> String {
    drawn.lines().map(|line| format!("{}\n", line.trim_end())).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_a_terminal_obeys_is_replaced_byte_for_byte() {
        let text = "a\u{1b}[31m\r\n\u{9b}\u{2028}\u{202e}Ta₂";
        let shown = harmless(text);
        assert_eq!(shown.len(), text.len());
        assert_eq!(shown, "a [31m \n·␣␣Ta₂");
    }
}
