//! Columns: blanks that align consecutive statements of a block.

use super::WIDTH;
use super::print::flat;
use super::spacing::REQUIREMENT_CLAUSES;
use super::tree::{Entry, EntryKind, Part};
use crate::syntax::tokens::TokenKind;

/// Extra blanks before some parts of an entry: the part's index and how many.
pub(super) type Padding = Vec<(usize, usize)>;

/// What kinds of statements align with each other.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Class {
    Requirement,
    Limit,
    Other,
}

/// The padding of each entry of a block whose lines are indented by `indent`.
pub(super) fn paddings(entries: &[Entry<'_>], indent: usize) -> Vec<Padding> {
    let mut paddings: Vec<Padding> = entries.iter().map(|_| Vec::new()).collect();
    let mut start = 0;
    while start < entries.len() {
        let class = entries.get(start).and_then(class);
        let mut end = start + 1;
        while class.is_some()
            && entries.get(end).is_some_and(|next| !next.blank_before && self::class(next) == class)
        {
            end += 1;
        }
        if let (Some(class), Some(group), Some(out)) =
            (class, entries.get(start..end), paddings.get_mut(start..end))
        {
            align(class, group, out, indent);
        }
        start = end;
    }
    paddings
}

fn class(entry: &Entry<'_>) -> Option<Class> {
    let EntryKind::Pieces(parts) = &entry.kind else {
        return None;
    };
    if parts.iter().any(|part| matches!(part, Part::Block(body) if body.statements)) {
        return None;
    }
    Some(match word(parts, 0)? {
        "require" => Class::Requirement,
        "limit" => Class::Limit,
        _ => Class::Other,
    })
}

fn align(class: Class, group: &[Entry<'_>], out: &mut [Padding], indent: usize) {
    match class {
        Class::Limit => column(group, out, |_| Some(0), |_| Some(2)),
        Class::Other => {
            column(group, out, |_| Some(0), |_| Some(1));
            let mut start = 0;
            while start < group.len() {
                let layers =
                    group.get(start..).unwrap_or(&[]).iter().take_while(|entry| layer(entry)).count();
                let end = start + layers.max(1);
                if let (Some(group), Some(out)) = (group.get(start..end), out.get_mut(start..end)) {
                    column(group, out, |_| Some(1), thickness);
                }
                start = end;
            }
        }
        Class::Requirement => {
            column(group, out, |_| Some(0), bound);
            let quantities = out.to_vec();
            column(group, out, bound, clause);
            // Where one long sentence would push the others past the edge, fewer columns align.
            if !fit(group, out, indent) {
                out.clone_from_slice(&quantities);
            }
            if !fit(group, out, indent) {
                out.iter_mut().for_each(Vec::clear);
            }
        }
    }
}

/// Whether no padded line is too long.
fn fit(group: &[Entry<'_>], out: &[Padding], indent: usize) -> bool {
    group.iter().zip(out).all(|(entry, padding)| {
        flat(entry, padding).is_none_or(|line| indent + line.chars().count() <= WIDTH)
    })
}

/// Makes the parts `to` of a group start in one column, `from` doing so already.
fn column(
    group: &[Entry<'_>],
    out: &mut [Padding],
    from: impl Fn(&[Part<'_>]) -> Option<usize>,
    to: impl Fn(&[Part<'_>]) -> Option<usize>,
) {
    let measured: Vec<Option<(usize, usize)>> = group
        .iter()
        .map(|entry| {
            let EntryKind::Pieces(parts) = &entry.kind else { return None };
            let (from, to) = (from(parts)?, to(parts)?);
            let mut width = 0;
            for (index, part) in parts.get(from..to)?.iter().enumerate() {
                let Part::Piece(piece) = part else { return None };
                width += piece.text.chars().count() + if index > 0 { piece.gap } else { 0 };
            }
            parts.get(to)?;
            Some((to, width))
        })
        .collect();
    let widest = measured.iter().flatten().map(|(_, width)| *width).max().unwrap_or(0);
    for (padding, measured) in out.iter_mut().zip(measured) {
        if let Some((to, width)) = measured {
            padding.push((to, widest - width));
        }
    }
}

fn word<'a>(parts: &[Part<'a>], index: usize) -> Option<&'a str> {
    match parts.get(index) {
        Some(Part::Piece(piece)) if piece.kind == TokenKind::Word => Some(piece.text),
        _ => None,
    }
}

fn layer(entry: &Entry<'_>) -> bool {
    matches!(&entry.kind, EntryKind::Pieces(parts) if word(parts, 0) == Some("layer"))
}

/// Where the thickness of a layer stands.
fn thickness(parts: &[Part<'_>]) -> Option<usize> {
    let graded = word(parts, 1) == Some("graded") && word(parts, 3) == Some("to");
    (word(parts, 0) == Some("layer")).then_some(if graded { 5 } else { 2 })
}

/// Where the bound of a requirement stands.
fn bound(parts: &[Part<'_>]) -> Option<usize> {
    let ends = |part: &Part<'_>| match part {
        Part::Piece(piece) if piece.kind == TokenKind::Word => {
            matches!(piece.text, "crosses" | "within") || REQUIREMENT_CLAUSES.contains(&piece.text)
        }
        _ => true,
    };
    let at = parts.iter().position(ends)?;
    word(parts, at).is_none_or(|word| !REQUIREMENT_CLAUSES.contains(&word)).then_some(at)
}

/// Where the first clause of a requirement stands.
fn clause(parts: &[Part<'_>]) -> Option<usize> {
    let from = bound(parts)?;
    let clause = |part: &Part<'_>| matches!(part, Part::Piece(piece) if piece.gap == 2);
    parts.iter().skip(from).position(clause).map(|at| from + at)
}
