//! Files, places in them, and the lines and columns that people see.

use std::sync::Arc;

/// A file of the project, a handbook entry, or a Markdown block: an index into [`Sources`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct FileId(pub u32);

/// A half-open range of byte offsets in one file's text.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub struct Span {
    /// First byte.
    pub start: u32,
    /// One past the last byte.
    pub end: u32,
}

impl Span {
    /// The range from `start` to `end`, in bytes.
    pub fn new(start: usize, end: usize) -> Self {
        Span { start: start as u32, end: end as u32 }
    }

    /// The smallest span that holds both.
    pub fn to(self, other: Span) -> Span {
        Span { start: self.start.min(other.start), end: self.end.max(other.end) }
    }

    /// The span as a range that slices a text.
    pub fn range(self) -> std::ops::Range<usize> {
        self.start as usize..self.end as usize
    }

    /// This span in `file`.
    pub fn at(self, file: FileId) -> Place {
        Place { file, span: self }
    }
}

/// A span in a file.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Place {
    /// The file.
    pub file: FileId,
    /// The bytes in it.
    pub span: Span,
}

/// A line and a column, both counted from 1; the column in characters (Unicode scalar values).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Position {
    /// Line, from 1.
    pub line: u32,
    /// Column in characters, from 1.
    pub column: u32,
}

/// One text with its name and its line starts.
#[derive(Clone, Debug)]
pub struct Source {
    /// What people call it: a path below the root with `/`, or `handbook/silicon.coat`.
    pub path: String,
    /// The text, without a byte order mark.
    pub text: Arc<str>,
    line_starts: Arc<[u32]>,
}

impl Source {
    /// Indexes the lines of `text`.
    pub fn new(path: impl Into<String>, text: impl Into<Arc<str>>) -> Self {
        let text = text.into();
        let starts = std::iter::once(0).chain(text.match_indices('\n').map(|(at, _)| at as u32 + 1));
        Source { path: path.into(), line_starts: starts.collect(), text }
    }

    /// The position of a byte offset; an offset past the end is the end, one inside a character its start.
    pub fn position(&self, offset: u32) -> Position {
        let mut offset = (offset as usize).min(self.text.len());
        while !self.text.is_char_boundary(offset) {
            offset -= 1;
        }
        let line = self.line_starts.partition_point(|start| *start as usize <= offset) - 1;
        let start = self.line_starts[line] as usize;
        let column = self.text[start..offset].chars().count();
        Position { line: line as u32 + 1, column: column as u32 + 1 }
    }

    /// The text of a span; empty where the span does not lie on character boundaries.
    pub fn slice(&self, span: Span) -> &str {
        self.text.get(span.range()).unwrap_or("")
    }
}

/// All texts of one check.
#[derive(Clone, Debug, Default)]
pub struct Sources {
    files: Vec<Source>,
}

impl Sources {
    /// Adds a text and says by which number it goes.
    pub fn add(&mut self, source: Source) -> FileId {
        self.files.push(source);
        FileId(self.files.len() as u32 - 1)
    }

    /// The text of a file.
    pub fn get(&self, file: FileId) -> &Source {
        &self.files[file.0 as usize]
    }

    /// All files with their numbers, in the order in which they were read.
    pub fn iter(&self) -> impl Iterator<Item = (FileId, &Source)> {
        self.files.iter().enumerate().map(|(index, source)| (FileId(index as u32), source))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_count_characters_not_bytes() {
        let source = Source::new("a", "let µ = 1\nTa₂O₅ x");
        assert_eq!(source.position(0), Position { line: 1, column: 1 });
        let x = source.text.find('x').unwrap_or_default() as u32;
        assert_eq!(source.position(x), Position { line: 2, column: 7 });
        assert_eq!(source.position(9999), Position { line: 2, column: 8 });
    }
}
