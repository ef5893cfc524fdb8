//! Texts that nobody would write: whatever comes in, parsing ends, without a panic, with spans in the text.

use super::{EVERYTHING, handbook};
use crate::finding::{Fact, FormFact};
use crate::source::FileId;
use crate::syntax::{Parsed, parse};
use proptest::prelude::*;

/// Parses, and checks what holds for every text.
fn survives(text: &str) -> Parsed {
    let parsed = parse(text, FileId(0));
    let mut end = 0;
    for token in &parsed.tokens {
        assert!(text.get(token.span.range()).is_some_and(|written| !written.is_empty()), "{token:?}");
        assert!(token.span.start >= end, "{token:?} overlaps");
        end = token.span.end;
    }
    for finding in &parsed.findings {
        assert!(text.get(finding.place.span.range()).is_some(), "{finding:?} of {text:?}");
    }
    for item in &parsed.module.items {
        assert!(text.get(item.span.range()).is_some(), "{item:?}");
    }
    parsed
}

fn refused(text: &str) -> String {
    match survives(text).findings.as_slice() {
        [finding] => match &finding.fact {
            Fact::Form(FormFact::Unreadable { why }) => why.clone(),
            other => panic!("{other:?}"),
        },
        others => panic!("{} findings", others.len()),
    }
}

#[test]
fn nesting_is_bounded() {
    let deep = 100_000;
    assert!(refused(&format!("let a = {}1{}", "(".repeat(deep), ")".repeat(deep))).contains("64"));
    assert!(refused(&format!("let a = {}", "(".repeat(deep))).contains("64"));
    assert!(refused(&format!("let a = {}", "sqrt(".repeat(deep))).contains("64"));
    assert!(refused(&format!("recipe a {{ stack {{ {}", "repeat 2 { ".repeat(deep))).contains("64"));
    assert!(refused(&"{".repeat(deep)).contains("64"));
    let within = format!("let a = {}1{}", "(".repeat(64), ")".repeat(64));
    assert_eq!(survives(&within).findings, []);
    let within = format!("recipe a {{ stack {{ {} {} }} }}", "repeat 2 { ".repeat(62), "}".repeat(62));
    assert_eq!(survives(&within).findings, []);
}

#[test]
fn expressions_are_bounded() {
    for operator in ["+ 1", "- 1", "* 1", "/ 1", "^ 1", "-", "+ (1)", "+ sqrt(1)", "+ 1 nm"] {
        let text = format!("let a = 1 {} 1", operator.repeat(100_000));
        assert!(refused(&text).contains("500"), "{operator}");
    }
    let nested = format!("let a = {}1{}", "(".repeat(60), "+ 1) ".repeat(60));
    assert_eq!(survives(&nested).findings, []);
    for operator in ["+ 1", "^ 1", "-"] {
        let text = format!("let a = 1 {} 1", format!("{operator} ").repeat(499).trim_end_matches("+ 1 "));
        survives(&text);
    }
    // Many short ones in a row are no long one.
    let many = "let a = 1 + 2 - 3\n".repeat(1000);
    assert_eq!(survives(&many).findings, []);
    let rows = format!("material a {{ index table {{ {} }} }}", "400 nm -1.5 -2, ".repeat(3000));
    assert_eq!(survives(&rows).findings, []);
}

#[test]
fn a_file_of_errors_is_told_in_a_hundred() {
    let parsed = survives(&"let let = ;\n".repeat(5000));
    assert_eq!(parsed.findings.len(), 100);
    let Some(Fact::Form(FormFact::Syntax { hint: Some(hint), .. })) =
        parsed.findings.last().map(|last| &last.fact)
    else {
        panic!("{:?}", parsed.findings.last());
    };
    assert!(hint.contains("more errors"), "{hint}");
}

#[test]
fn every_beginning_of_a_text_is_read() {
    for end in (0..EVERYTHING.len()).filter(|end| EVERYTHING.is_char_boundary(*end)) {
        survives(&EVERYTHING[..end]);
    }
    for (_, text) in handbook() {
        for end in (0..text.len().min(2000)).filter(|end| end % 37 == 0 && text.is_char_boundary(*end)) {
            survives(&text[..end]);
        }
    }
}

#[test]
fn every_text_that_lacks_a_token_is_read() {
    let tokens = parse(EVERYTHING, FileId(0)).tokens;
    for token in tokens {
        let mut text = EVERYTHING.to_owned();
        text.replace_range(token.span.range(), "");
        survives(&text);
    }
}

/// Words and marks of the language, and some that are not.
pub(super) fn piece() -> impl Strategy<Value = String> {
    let words = crate::syntax::KEYWORDS
        .iter()
        .flat_map(|(_, words)| *words)
        .chain(crate::syntax::keywords::CLAUSES)
        .chain(crate::syntax::keywords::INNER)
        .map(|word| (*word).to_owned());
    let marks = [
        "{",
        "}",
        "{",
        "}",
        "(",
        ")",
        ",",
        "..",
        "=",
        "<=",
        ">=",
        "±",
        "+/-",
        "+",
        "-",
        "*",
        "/",
        "^",
        "nm",
        "%",
        "62",
        "1.5e3",
        "2_0",
        "\"x\"",
        "\"",
        "# c\n",
        "## d\n",
        "\n",
        "\n",
        "b",
        "1/cm",
        "°",
        "µm",
        "//",
        ";",
        "₂",
        "\u{A0}",
        "1..2",
        "1e999",
        "2027-01-31",
        "<<<<<<<",
        "'",
        "\\",
        "\u{FEFF}",
        "\r\n",
    ];
    let all: Vec<String> = words.chain(marks.map(str::to_owned)).collect();
    prop::sample::select(all)
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 300, ..ProptestConfig::default() })]

    #[test]
    fn any_text_is_read(text in "\\PC*") {
        survives(&text);
    }

    #[test]
    fn any_bytes_are_read(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        survives(&String::from_utf8_lossy(&bytes));
    }

    #[test]
    fn any_soup_of_tokens_is_read(pieces in prop::collection::vec(piece(), 0..120), glued in any::<bool>()) {
        survives(&pieces.join(if glued { "" } else { " " }));
    }
}
