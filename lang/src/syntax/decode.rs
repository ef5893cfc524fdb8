//! From a file's bytes to its text.

use crate::finding::FormFact;

/// The text of a file: UTF-8, a byte order mark dropped, NUL bytes refused.
///
/// # Errors
///
/// Says why the bytes are no text, with the line of the first offence.
pub fn decode(bytes: &[u8]) -> Result<String, FormFact> {
    let bytes = bytes.strip_prefix(b"\xEF\xBB\xBF").unwrap_or(bytes);
    let line = |offset: usize| bytes.iter().take(offset).filter(|byte| **byte == b'\n').count() + 1;
    if u32::try_from(bytes.len()).is_err() {
        return Err(FormFact::Unreadable { why: "it is larger than 4 GB".to_owned() });
    }
    if bytes.starts_with(b"\xFF\xFE") || bytes.starts_with(b"\xFE\xFF") {
        let why = "it is written in UTF-16; save it as UTF-8".to_owned();
        return Err(FormFact::Unreadable { why });
    }
    if let Some(offset) = bytes.iter().position(|byte| *byte == 0) {
        let why = format!("line {} holds a NUL byte, so this is no text", line(offset));
        return Err(FormFact::Unreadable { why });
    }
    match std::str::from_utf8(bytes) {
        Ok(text) => Ok(text.to_owned()),
        Err(error) => {
            let line = line(error.valid_up_to());
            let why = format!("line {line} is not UTF-8; save the file as UTF-8");
            Err(FormFact::Unreadable { why })
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn why(bytes: &[u8]) -> String {
        match decode(bytes) {
            Err(FormFact::Unreadable { why }) => why,
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn a_mark_is_dropped_and_line_ends_are_kept() {
        assert_eq!(decode(b"\xEF\xBB\xBFlet a = 1\r\n"), Ok("let a = 1\r\n".to_owned()));
    }

    #[test]
    fn what_is_no_text_is_refused_with_its_line() {
        assert!(why(b"let a = 1\nlet b = \xB5m").contains("line 2"));
        assert!(why(b"a\n\nb\0").contains("line 3"));
        assert!(why(b"\xFF\xFEl\0").contains("UTF-16"));
    }
}
