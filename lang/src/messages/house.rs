//! Sentences about provenance and order in the house.

use super::Words;
use crate::code::Code;
use crate::finding::HouseFact;
use crate::syntax::ast::Date;

pub(super) fn words(fact: &HouseFact) -> Words {
    match fact {
        HouseFact::HandbookData { material, recipe, defined } => Words::new(
            Code::HandbookData,
            format!("in `{recipe}`, published data stand for the shop's own film of `{material}`; measure a witness plate"),
        )
        .related(*defined, "the handbook's entry"),
        HouseFact::Unsourced { material, recipe, used_at } => Words::new(
            Code::Unsourced,
            format!("nothing says where the numbers of `{material}` come from; write `source \"…\"`"),
        )
        .related(*used_at, format!("recipe `{recipe}` rests on them")),
        HouseFact::Unused { name, imported, remove } => {
            let what = if *imported { "is imported here and nothing in this file uses it" } else { "is used by nothing" };
            Words::new(Code::UnusedName, format!("`{name}` {what}; take it out"))
                .fix(format!("remove `{name}`"), *remove, "")
        }
        HouseFact::Unmet { specification } => Words::new(
            Code::UnmetSpecification,
            format!("no recipe meets `{specification}`; name it after `meets` in one, or take it out"),
        ),
        HouseFact::WaiverUnused { code, on, recipe } => {
            let on = on.as_ref().map_or(String::new(), |on| format!(" on `{on}`"));
            Words::new(
                Code::WaiverUnused,
                format!("`{recipe}` waives `{}`{on}, and nothing of the kind is found; take the waiver out", code.slug()),
            )
        }
        HouseFact::WaiverExpired { code, until, recipe, covers } => {
            let still = match covers {
                0 => "covers nothing any more",
                1 => "would still cover one finding",
                _ => "would still cover several findings",
            };
            Words::new(
                Code::WaiverExpired,
                format!("`{recipe}` waives `{}` until {}, which is past; it {still}", code.slug(), date(until)),
            )
        }
    }
}

fn date(date: &Date) -> String {
    format!("{:04}-{:02}-{:02}", date.year, date.month, date.day)
}
