//! What people write by mistake, and what they mean by it: words for the lexer's findings.

/// A found text for a message: in backticks, cut short, without control characters.
pub(super) fn quoted(text: &str) -> String {
    const MOST: usize = 24;
    let shown: String = text
        .chars()
        .take(MOST)
        .map(|letter| if letter.is_control() { char::REPLACEMENT_CHARACTER } else { letter })
        .collect();
    let dots = if text.chars().nth(MOST).is_some() { "…" } else { "" };
    format!("`{}{dots}`", shown.replace('`', "'"))
}

/// What should stand instead of something that can be left out, and how to mend it.
pub(super) fn noise(text: &str) -> (&'static str, String) {
    match text.get(..2).unwrap_or(text) {
        "//" | "/*" => ("a comment", "a comment starts with `#`".to_owned()),
        "<<" | "==" | ">>" | "||" => (
            "",
            "a merge conflict was left here: keep one of the two versions and take the marks out".to_owned(),
        ),
        ":" => ("", "a statement is its keyword and its value, without `:`".to_owned()),
        _ => ("", "a statement needs no mark at its end".to_owned()),
    }
}

/// What a foreign mark or letter was meant to be.
pub(super) fn foreign(text: &str) -> Option<String> {
    let write = |mark: &str| Some(format!("write `{mark}`"));
    match text {
        "==" => return Some("a `let` takes one `=`, a bound `<=`, `>=` or `a .. b`".to_owned()),
        "->" | "=>" => {
            return Some("the language has no arrows: a statement is its keyword and its value".to_owned());
        }
        "=<" | "<" => return write("<="),
        ">" => return write(">="),
        "**" => return write("^"),
        "..." => return write(".."),
        _ => {}
    }
    let first = text.chars().find(|letter| !letter.is_ascii())?;
    match first {
        '\u{2212}' | '\u{2010}'..='\u{2015}' | '\u{FE63}' | '\u{FF0D}' => {
            Some("write a plain `-` for minus, `..` for a range".to_owned())
        }
        '≤' | '⩽' | '≦' => write("<="),
        '≥' | '⩾' | '≧' => write(">="),
        '×' | '·' | '⋅' | '∗' => write("*"),
        '÷' | '∕' | '⁄' => write("/"),
        '…' | '‥' => write(".."),
        '“' | '”' | '„' | '«' | '»' | '‘' | '’' => {
            Some("a text stands in plain double quotes, `\"…\"`".to_owned())
        }
        '，' | '、' => write(","),
        '\u{A0}' | '\u{2000}'..='\u{200B}' | '\u{202F}' | '\u{2060}' | '\u{3000}' | '\u{FEFF}' => {
            Some("this is an unusual blank that came with a copied text: type a plain one".to_owned())
        }
        'Ω' | 'µ' | 'μ' | 'Å' => Some("a unit stands after its number, for example `62 nm`".to_owned()),
        '∓' => write("±"),
        'λ' | 'θ' | 'φ' | 'ρ' | 'τ' | 'α' => {
            Some("write the name out in the letters a to z".to_owned())
        }
        _ if first.is_alphanumeric() => {
            Some(format!("names are of the letters a to z, digits and `_`; `{first}` is none of them"))
        }
        _ => None,
    }
}

/// Year, month and day of `2027-01-31`.
pub(super) fn date(text: &str) -> Option<(u16, u8, u8)> {
    let mut parts = text.split('-');
    let mut part = |length: usize| parts.next().filter(|part| part.len() == length);
    let (year, month, day) = (part(4)?, part(2)?, part(2)?);
    let date = (year.parse().ok()?, month.parse().ok()?, day.parse().ok()?);
    parts.next().is_none().then_some(date)
}

/// The days of a month in the Gregorian calendar; none where there is no such month.
pub(super) fn days(year: u16, month: u8) -> Option<u8> {
    let leap = year.is_multiple_of(4) && !year.is_multiple_of(100) || year.is_multiple_of(400);
    match month {
        1 | 3 | 5 | 7 | 8 | 10 | 12 => Some(31),
        4 | 6 | 9 | 11 => Some(30),
        2 => Some(if leap { 29 } else { 28 }),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_calendar_has_leap_days() {
        assert_eq!(days(2028, 2), Some(29));
        assert_eq!(days(2100, 2), Some(28));
        assert_eq!(days(2000, 2), Some(29));
        assert_eq!(date("2027-1-31"), None);
        assert_eq!(date("2027-01-31"), Some((2027, 1, 31)));
    }
}
