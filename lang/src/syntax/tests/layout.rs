//! The formatter: unchanged where it was right, twice as once, the same tree, comments kept.

use super::torture::piece;
use super::{EVERYTHING, handbook};
use crate::source::FileId;
use crate::syntax::tokens::TokenKind;
use crate::syntax::{format, parse};
use proptest::prelude::*;

fn once(text: &str) -> String {
    let formatted = format(text).unwrap_or_else(|fault| panic!("{fault:?} of\n{text}"));
    assert_eq!(format(&formatted).as_deref(), Ok(formatted.as_str()), "twice is not once");
    formatted
}

#[test]
fn formatted_text_is_unchanged() {
    assert_eq!(once(EVERYTHING), EVERYTHING);
    assert_eq!(once(""), "");
}

#[test]
fn line_ends_stay_those_of_the_file() {
    let text = EVERYTHING.replace('\n', "\r\n");
    assert_eq!(once(&text), text);
}

#[test]
fn the_handbook_and_the_whole_language_in_one_line_can_be_formatted() {
    for (_, text) in handbook() {
        once(&text);
    }
    let mut line = String::new();
    for token in parse(EVERYTHING, FileId(0)).tokens {
        if !matches!(token.kind, TokenKind::Comment | TokenKind::Description) {
            line.push_str(&EVERYTHING[token.span.range()]);
            line.push(' ');
        }
    }
    once(&line);
    once(&line.replace(' ', "\n"));
}

#[test]
fn spellings_and_blanks_become_one() {
    let text = "recipe  r{reference 600nm at 45°\n\n\n  stack {\n\n    layer b  1.5 µm +/-2%  as c\n incident air\n\n }}";
    insta::assert_snapshot!(once(text), @r"
    recipe r {
        reference 600 nm at 45 deg

        stack {
            layer    b 1.5 um ± 2 % as c
            incident air
        }
    }
    ");
}

#[test]
fn comments_stay_where_they_were() {
    let text = "\
# head
material a { # opening
# own line
source \"x\" # trailing

index table { # rows
400 nm 2.1, # first
# between
500 nm 2.0 # last
} # after the table
# before the brace
} # after the brace
let b = 1 + # inside
2
# end";
    insta::assert_snapshot!(once(text), @r#"
    # head
    material a {  # opening
        # own line
        source "x"  # trailing

        index table {  # rows
            400 nm 2.1,  # first
            # between
            500 nm 2.0  # last
        }  # after the table
        # before the brace
    }  # after the brace
    let b = 1 +  # inside
            2
    # end
    "#);
}

#[test]
fn long_lines_are_broken_before_clauses() {
    let text = "recipe r {\nrequire mean reflectance <= 11 % over 300 .. 1100 nm and 1200 .. 1300 nm at 0, 15, 30, 45, 60 deg under am15g photons\nwaive margin_thin because \"this reason is as long as reasons sometimes are, and then some more words\" until 2027-06-30\n}";
    insta::assert_snapshot!(once(text), @r#"
    recipe r {
        require mean reflectance <= 11 %  over 300 .. 1100 nm and 1200 .. 1300 nm  at 0, 15, 30, 45,
                60 deg  under am15g photons
        waive margin_thin
                because "this reason is as long as reasons sometimes are, and then some more words"
                until 2027-06-30
    }
    "#);
}

#[test]
fn what_cannot_be_read_stays_as_typed() {
    let text = "let  a=1\nlet b =   *  2\nrecipe r {\n  meets   a\n  reference   = 2\n  stack {layer  b  5nm}\n}\nlet  c=3";
    insta::assert_snapshot!(once(text), @r"
    let a = 1
    let b =   *  2
    recipe r {
        meets a
        reference   = 2
        stack { layer b 5 nm }
    }
    let c = 3
    ");
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 300, ..ProptestConfig::default() })]

    /// Broken or not, the formatter either finds a fixed point or owns up to a fault.
    #[test]
    fn any_soup_of_tokens_keeps_its_meaning(pieces in prop::collection::vec(piece(), 0..60)) {
        let text = pieces.join(" ");
        if let Ok(formatted) = format(&text) {
            prop_assert_eq!(format(&formatted), Ok(formatted));
        }
    }

    /// Blanks and line ends anywhere in a sound text change nothing but blank lines and one-line blocks.
    #[test]
    fn any_blanks_are_laid_out(blanks in prop::collection::vec(prop::sample::select(vec![" ", "\n", "\n\n", "  ", "\t"]), 40)) {
        let mut text = String::new();
        for (index, token) in parse(EVERYTHING, FileId(0)).tokens.iter().enumerate() {
            text.push_str(&EVERYTHING[token.span.range()]);
            let comment = matches!(token.kind, TokenKind::Comment | TokenKind::Description);
            text.push_str(if comment { "\n" } else { blanks[index * 7 % blanks.len()] });
        }
        once(&text);
    }
}

#[test]
fn an_item_in_the_middle_of_a_line_does_not_end_the_blocks_after_it() {
    once("recipe let\n{ material\n}\n");
}
