//! From entries to lines.

use super::WIDTH;
use super::align::{Padding, paddings};
use super::tree::{Body, Entry, EntryKind, Part};

const INDENT: usize = 4;
/// A line that goes on is indented deeper than what stands in a block.
const CONTINUED: usize = 8;

/// The whole text.
pub(super) fn print(text: &str, entries: &[Entry<'_>]) -> String {
    let mut printer = Printer { out: String::with_capacity(text.len() + text.len() / 8), column: 0 };
    printer.entries(entries, 0, false, false);
    if !entries.is_empty() {
        printer.out.push('\n');
    }
    printer.out
}

/// An entry on one line, if it can stand on one.
pub(super) fn flat(entry: &Entry<'_>, padding: &[(usize, usize)]) -> Option<String> {
    let EntryKind::Pieces(parts) = &entry.kind else {
        return None;
    };
    let mut line = String::new();
    for (index, part) in parts.iter().enumerate() {
        match part {
            Part::Piece(piece) => {
                let gap = if index == 0 { 0 } else { piece.gap + extra(padding, index) };
                push_blanks(&mut line, gap);
                line.push_str(piece.text);
            }
            Part::Comment { .. } => return None,
            Part::Block(body) => {
                push_blanks(&mut line, 1 + extra(padding, index));
                line.push_str(&flat_body(body)?);
            }
        }
    }
    Some(line)
}

fn flat_body(body: &Body<'_>) -> Option<String> {
    if !body.one_line {
        return None;
    }
    if body.entries.is_empty() {
        return Some("{}".to_owned());
    }
    let entries: Option<Vec<String>> = body.entries.iter().map(|entry| flat(entry, &[])).collect();
    // Statements side by side need more than a blank between them; rows have their commas.
    let commas = entries.iter().flatten().any(|row| row.ends_with(','));
    let between = if body.statements || !commas { "  " } else { " " };
    Some(format!("{{ {} }}", entries?.join(between)))
}

fn extra(padding: &[(usize, usize)], index: usize) -> usize {
    padding.iter().filter(|(at, _)| *at == index).map(|(_, blanks)| blanks).sum()
}

fn push_blanks(line: &mut String, count: usize) {
    line.extend(std::iter::repeat_n(' ', count));
}

struct Printer {
    out: String,
    /// Characters on the current line.
    column: usize,
}

impl Printer {
    fn push(&mut self, text: &str) {
        self.out.push_str(text);
        self.column = match text.rfind('\n') {
            Some(at) => text[at + 1..].chars().count(),
            None => self.column + text.chars().count(),
        };
    }

    fn blanks(&mut self, count: usize) {
        push_blanks(&mut self.out, count);
        self.column += count;
    }

    fn line(&mut self, indent: usize) {
        self.out.push('\n');
        self.column = 0;
        self.blanks(indent);
    }

    /// Entries on lines of their own; outside of blocks the first stands where the text begins.
    fn entries(&mut self, entries: &[Entry<'_>], indent: usize, inside: bool, aligned: bool) {
        let paddings = if aligned { paddings(entries, indent) } else { Vec::new() };
        for (index, entry) in entries.iter().enumerate() {
            let glued = matches!(&entry.kind, EntryKind::Typed { glue: Some(_), .. });
            if !glued && (inside || index > 0) {
                if entry.blank_before && index > 0 {
                    self.out.push('\n');
                }
                self.line(indent);
            }
            match &entry.kind {
                EntryKind::Comment(text) => self.push(text),
                EntryKind::Typed { text, glue } => {
                    self.push(glue.unwrap_or(""));
                    self.push(text);
                }
                EntryKind::Pieces(parts) => {
                    let none = Padding::new();
                    let padding = paddings.get(index).unwrap_or(&none);
                    match flat(entry, padding).filter(|line| indent + line.chars().count() <= WIDTH) {
                        Some(line) => self.push(&line),
                        None => self.spread(parts, padding, indent),
                    }
                }
            }
            if let Some(comment) = entry.trailing {
                self.blanks(2);
                self.push(comment);
            }
        }
    }

    /// A statement over several lines.
    fn spread(&mut self, parts: &[Part<'_>], padding: &[(usize, usize)], indent: usize) {
        let continued = indent + CONTINUED;
        let mut fresh = true;
        for (index, part) in parts.iter().enumerate() {
            match part {
                Part::Piece(piece) => {
                    let gap = piece.gap + extra(padding, index);
                    let width = gap + run_width(&parts[index..]);
                    if piece.breakable && !fresh && self.column + width > WIDTH {
                        self.line(continued);
                    } else if !fresh {
                        self.blanks(gap);
                    }
                    self.push(piece.text);
                    fresh = false;
                }
                Part::Comment { text, own_line } => {
                    if *own_line && !fresh {
                        self.line(continued);
                    } else if !fresh {
                        self.blanks(2);
                    }
                    self.push(text);
                    if index + 1 < parts.len() {
                        self.line(continued);
                        fresh = true;
                    }
                }
                Part::Block(body) => {
                    if !fresh {
                        self.blanks(1 + extra(padding, index));
                    }
                    match flat_body(body).filter(|flat| self.column + flat.chars().count() <= WIDTH) {
                        Some(flat) => self.push(&flat),
                        None => self.block(body, indent),
                    }
                    fresh = false;
                }
            }
        }
    }

    fn block(&mut self, body: &Body<'_>, indent: usize) {
        self.push("{");
        if let Some(comment) = body.opening {
            self.blanks(2);
            self.push(comment);
        }
        self.entries(&body.entries, indent + INDENT, true, body.statements);
        if body.entries.is_empty() && body.opening.is_none() {
            self.push("}");
        } else {
            self.line(indent);
            self.push("}");
        }
    }
}

/// The width of a part and of those after it that can't be parted from it.
fn run_width(parts: &[Part<'_>]) -> usize {
    let mut width = 0;
    for (index, part) in parts.iter().enumerate() {
        let Part::Piece(piece) = part else { break };
        if index > 0 && piece.breakable {
            break;
        }
        width += piece.text.chars().count() + if index > 0 { piece.gap } else { 0 };
    }
    width
}
