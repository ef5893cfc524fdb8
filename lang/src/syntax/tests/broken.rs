//! Broken texts: what is said, where, and what is still understood.

use super::{EVERYTHING, handbook, told};
use crate::source::FileId;
use crate::syntax::ast::Item;
use crate::syntax::parse;

#[test]
fn an_error_takes_no_neighbour_with_it() {
    let text = "let lost = 45 deg *\nmaterial b { index 2.0 source \"y\" }\n";
    assert_eq!(told(text), ["1:19 `*`: expected a value, for example `62 nm`; found `material`"]);
    let parsed = parse(text, FileId(0));
    assert!(parsed.module.broken);
    let [only] = parsed.module.items.as_slice() else { panic!("{:?}", parsed.module) };
    assert!(matches!(&only.kind, Item::Material(material) if !material.body.broken));
}

#[test]
fn the_handbook_has_no_errors() {
    for (path, text) in handbook() {
        let parsed = parse(&text, FileId(0));
        assert_eq!(parsed.findings, [], "{path}");
        assert_eq!(parsed.module.items.len(), 1, "{path}");
    }
}

#[test]
fn every_construct_is_read() {
    let expected: [&str; 0] = [];
    assert_eq!(told(EVERYTHING), expected);
    assert_eq!(told(&EVERYTHING.replace('\n', "\r\n")), expected);
    assert_eq!(parse(EVERYTHING, FileId(0)).module.items.len(), 21);
}
