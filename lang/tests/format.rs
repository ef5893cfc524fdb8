//! The formatter's properties: a fixed point, the same meaning, comments kept, what is broken left as typed.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::source::FileId;
use overcoat_lang::syntax::{format, parse};
use proptest::prelude::*;
use std::path::{Path, PathBuf};

/// Every recipe text of the repository.
fn texts() -> Vec<(PathBuf, String)> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut found = Vec::new();
    let mut open = vec![root.join("handbook"), root.join("../examples"), root.join("../tests/cases")];
    while let Some(folder) = open.pop() {
        for entry in std::fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                open.push(path);
            } else if path.extension().is_some_and(|ending| ending == "coat") {
                found.push((path.clone(), std::fs::read_to_string(&path).unwrap()));
            }
        }
    }
    assert!(found.len() > 30, "{}", found.len());
    found
}

/// The text without its blanks, units in one spelling: what formatting must not change.
fn bare(text: &str) -> String {
    let text = text.replace("+/-", "±").replace("µm", "um").replace('°', "deg");
    text.split_whitespace().collect()
}

#[track_caller]
fn holds(text: &str, name: &str) {
    let once = format(text).unwrap_or_else(|fault| panic!("{name}: {fault:?}\n{text}"));
    let twice = format(&once).unwrap();
    assert_eq!(once, twice, "{name}: twice is not once");
    assert_eq!(bare(text), bare(&once), "{name}: something else than blanks changed");
    let (before, after) = (parse(text, FileId(0)), parse(&once, FileId(0)));
    assert_eq!(before.findings.len(), after.findings.len(), "{name}");
}

#[test]
fn every_text_of_the_repository_keeps_its_meaning() {
    for (path, text) in texts() {
        holds(&text, &path.display().to_string());
    }
}

#[test]
fn a_jumbled_text_comes_out_in_the_one_layout() {
    let text = "use a,b as c from \"x.coat\"\n\n\n\n# a note\nmaterial  m{source \"s\"\n  index   1.46   k 0.001 # flat\n\n valid 300..1200nm }\n\
                recipe r \"title\"{chamber c\n meets s , t\nstack{incident air\n  layer m 2*31nm as top +/- 1nm  # outermost\n repeat 3{layer m 1qw\nlayer m 5 nm fixed}\nsubstrate m}\n\
                require reflectance<=2% over 400 .. 700nm at 0,30,45° polarised s}\n";
    insta::assert_snapshot!(format(text).unwrap());
}

#[test]
fn what_is_broken_stays_as_typed() {
    let text = "material a { source \"x\"   index 1.46 }\nlet   lost =  45 deg   *\nmaterial   b { index 2.0 source \"y\" }\n";
    let formatted = format(text).unwrap();
    assert!(formatted.contains("let   lost =  45 deg   *"), "{formatted}");
    assert!(formatted.contains("material b {"), "{formatted}");
    holds(text, "broken");
}

#[test]
fn line_breaks_stay_as_the_file_has_them() {
    let text = "let a = 1\r\nlet   b=2\r\n";
    assert_eq!(format(text).unwrap(), "let a = 1\r\nlet b = 2\r\n");
    assert_eq!(format("").unwrap(), "");
}

/// Pieces of recipes, in any order.
fn piece() -> impl Strategy<Value = &'static str> {
    prop::sample::select(vec![
        "let",
        "a",
        "=",
        "62",
        "nm",
        "2 %",
        "(",
        ")",
        "+",
        "-",
        "*",
        "/",
        "{",
        "}",
        "material",
        "m",
        "source",
        "\"x\"",
        "index",
        "1.46",
        "k",
        "table",
        ",",
        "recipe",
        "stack",
        "incident",
        "air",
        "layer",
        "±",
        "+/-",
        "substrate",
        "require",
        "reflectance",
        "<=",
        "..",
        "over",
        "at",
        "45 deg",
        "# note\n",
        "## said\n",
        "\n",
        "\n\n",
        "repeat 3",
        "chamber",
        "deposit",
        "limit",
        "per run",
        "waive",
        "because",
        "until 2027-01-31",
        "µm",
        "use",
        "from",
        "^",
        "@",
    ])
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn any_soup_of_pieces_keeps_its_meaning(pieces in prop::collection::vec((piece(), 0..3usize), 0..60)) {
        let mut text = String::new();
        for (piece, blanks) in pieces {
            text.push_str(piece);
            text.push_str(&" ".repeat(blanks));
            if blanks == 0 {
                text.push('\n');
            }
        }
        holds(&text, "soup");
    }
}
