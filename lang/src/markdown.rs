//! Recipes in process documents: the fenced blocks of a Markdown file that are tagged `coat` are one module.

/// The text with everything outside of its `coat` blocks blanked out, byte for byte, so that places in it are places in the
/// document; none where it has no such block.
///
/// Fences are those of CommonMark 0.31, 4.5: three or more backticks or tildes, indented by at most three blanks, closed
/// by at least as many of the same or by the end of the document.
pub fn recipes(text: &str) -> Option<String> {
    let mut kept = String::with_capacity(text.len());
    let mut fence: Option<(char, usize, bool)> = None;
    let mut found = false;
    for line in text.split_inclusive('\n') {
        let marks = opening(line);
        match fence {
            None => {
                if let Some((mark, length, info)) = marks {
                    let coat = info.split_whitespace().next() == Some("coat");
                    found |= coat;
                    fence = Some((mark, length, coat));
                }
                blank(line, &mut kept);
            }
            Some((mark, length, coat)) => {
                let closes = marks.is_some_and(|(other, count, info)| {
                    other == mark && count >= length && info.trim().is_empty()
                });
                if closes {
                    fence = None;
                    blank(line, &mut kept);
                } else if coat {
                    kept.push_str(line);
                } else {
                    blank(line, &mut kept);
                }
            }
        }
    }
    found.then_some(kept)
}

/// The mark, the length and the rest of a line that is a fence.
fn opening(line: &str) -> Option<(char, usize, &str)> {
    let inner = line.trim_start_matches(' ');
    if line.len() - inner.len() > 3 {
        return None;
    }
    let mark = inner.chars().next().filter(|mark| matches!(mark, '`' | '~'))?;
    let rest = inner.trim_start_matches(mark);
    let length = inner.len() - rest.len();
    (length >= 3 && !(mark == '`' && rest.contains('`'))).then_some((mark, length, rest))
}

/// As many blanks as the line has bytes, its line break kept.
fn blank(line: &str, kept: &mut String) {
    let content = line.trim_end_matches(['\n', '\r']);
    kept.extend(std::iter::repeat_n(' ', content.len()));
    kept.push_str(&line[content.len()..]);
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn places_stay_where_they_are() {
        let text = "# Notes on Ta₂O₅\n\n```coat\nlet a = 5 nm\n```\n\nmore\n\n~~~~ coat\nlet b = a\n~~~~\n";
        let module = recipes(text).unwrap_or_default();
        assert_eq!(module.len(), text.len());
        assert_eq!(module.find("let b"), text.find("let b"));
        assert_eq!(module.split_whitespace().collect::<Vec<_>>().join(" "), "let a = 5 nm let b = a");
    }

    #[test]
    fn other_blocks_and_longer_fences_are_left_out() {
        assert_eq!(recipes("```rust\nlet a = 1;\n```\n"), None);
        let nested = "````markdown\n```coat\nlet a = 5 nm\n```\n````\n";
        assert_eq!(recipes(nested), None);
        assert_eq!(recipes("    ```coat\n    let a = 1\n"), None);
        let open = recipes("```coat\nlet a = 1\n").unwrap_or_default();
        assert!(open.contains("let a = 1"));
    }
}
