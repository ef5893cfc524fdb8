//! Sentences about what a chamber can do.

use super::Words;
use super::number::{and_list, apart, length, rounded, significant, time};
use crate::code::Code;
use crate::finding::{LayerName, ProcessFact, SideName, Trouble};
use crate::model::LimitKind;

pub(super) fn words(fact: &ProcessFact) -> Words {
    let chamber = &fact.chamber;
    match &fact.trouble {
        Trouble::TooThin { layer, least } => {
            let digits = apart(layer.thickness, *least);
            let message = format!(
                "{} is {} thick, and {chamber} makes no less than {} of it",
                subject(layer),
                length(layer.thickness, digits),
                length(*least, digits)
            );
            copies(Words::new(Code::LayerTooThin, message), layer)
                .related(fact.said_at, "the range stands here")
        }
        Trouble::TooThick { layer, most } => {
            let digits = apart(layer.thickness, *most);
            let message = format!(
                "{} is {} thick, and {chamber} makes no more than {} of it in one layer",
                subject(layer),
                length(layer.thickness, digits),
                length(*most, digits)
            );
            copies(Words::new(Code::LayerTooThick, message), layer)
                .related(fact.said_at, "the range stands here")
        }
        Trouble::NotDeposited { layer, material, deposits } => {
            let has = match deposits.as_slice() {
                [] => "has no sources at all".to_owned(),
                names => format!("deposits {}", and_list(names)),
            };
            let message = format!(
                "{} can't be made here: {chamber} has no source of `{material}`; it {has}",
                subject(layer)
            );
            Words::new(Code::NotDepositedHere, message)
                .related(fact.said_at, format!("`{chamber}` is defined here"))
        }
        Trouble::BelowResolution { layer, step, nearest } => resolution(fact, layer, *step, *nearest),
        Trouble::Forbidden { layer, lower, lower_at, because } => {
            let why = because.as_ref().map_or(String::new(), |why| format!(": {why}"));
            let message = format!("{} lies on `{lower}`, which {chamber} forbids{why}", subject(layer));
            Words::new(Code::ForbiddenInterface, message)
                .related(*lower_at, format!("`{lower}` is here"))
                .related(fact.said_at, "it is forbidden here")
        }
        Trouble::TooHot { material, temperature, most, source_at } => Words::new(
            Code::TooHot,
            format!(
                "`{material}` is deposited at {} degC, {} degC more than {chamber} allows ({} degC)",
                rounded(*temperature, 1),
                rounded(temperature - most, 1),
                rounded(*most, 1)
            ),
        )
        .related(*source_at, "the source's temperature stands here")
        .related(fact.said_at, "the limit stands here"),
        Trouble::OverCapacity { side, material, needed, holds } => {
            let digits = apart(*needed, *holds).max(4);
            Words::new(
                Code::OverCapacity,
                format!(
                    "the run{} needs {} of `{material}`, {} more than {chamber}'s source holds ({})",
                    of(*side),
                    length(*needed, digits),
                    length(needed - holds, 3),
                    length(*holds, digits)
                ),
            )
            .related(fact.said_at, "the capacity stands here")
        }
        Trouble::Limit { .. } => limit(fact),
    }
}

fn resolution(fact: &ProcessFact, layer: &LayerName, step: f64, nearest: (f64, f64)) -> Words {
    let (low, high) = (plain(nearest.0), plain(nearest.1));
    let choice = if nearest.0 > 0.0 { format!("{low} or {high} nm") } else { format!("{high} nm") };
    let message = format!(
        "{} nm can't be set: {}'s controller works in steps of {} nm; write {choice}",
        plain(layer.thickness),
        fact.chamber,
        plain(step)
    );
    let words = copies(Words::new(Code::BelowResolution, message), layer)
        .related(fact.said_at, "the resolution stands here");
    let nearer = if nearest.0 > 0.0 && layer.thickness - nearest.0 <= nearest.1 - layer.thickness {
        low
    } else {
        high
    };
    match layer.thickness_place {
        Some(place) => words.fix(format!("write `{nearer} nm`"), place, format!("{nearer} nm")),
        None => words,
    }
}

/// A thickness or a step with all its digits, free of binary fractions.
fn plain(nm: f64) -> String {
    rounded(nm, 6)
}

fn limit(fact: &ProcessFact) -> Words {
    let Trouble::Limit { side, kind, value, bound, least, unknown } = &fact.trouble else {
        return Words::new(Code::LimitExceeded, String::new());
    };
    let (value, bound, chamber) = (*value, *bound, &fact.chamber);
    let beyond = (value - bound).abs();
    let (more, allows) = if *least { ("less", "at least ") } else { ("more", "") };
    let digits = apart(value, bound).max(4);
    let run = of(*side);
    let message = match kind {
        LimitKind::Layers => {
            format!(
                "the run{run} has {value} layers, {beyond} {more} than the {allows}{bound} that {chamber} allows"
            )
        }
        LimitKind::Thickness => format!(
            "the run{run} is {} thick, {} {more} than the {allows}{} that {chamber} allows",
            length(value, digits),
            length(beyond, 3),
            length(bound, digits)
        ),
        LimitKind::Duration => format!(
            "the run{run} takes {}, {} {more} than the {allows}{} that {chamber} allows",
            time(value),
            time(beyond),
            time(bound)
        ),
        LimitKind::Temperature => format!(
            "the run{run} reaches {} degC, {} degC {more} than the {allows}{} degC that {chamber} allows",
            rounded(value, 1),
            rounded(beyond, 1),
            rounded(bound, 1)
        ),
        LimitKind::FilmForce => {
            let tension = if value < 0.0 { "compressive" } else { "tensile" };
            format!(
                "the films{run} pull with {} N/m ({tension}), {} N/m beyond the {} N/m that {chamber} allows",
                significant(value, digits),
                significant(beyond, 3),
                significant(bound, digits)
            )
        }
    };
    let words = Words::new(Code::LimitExceeded, message).related(fact.said_at, "the limit stands here");
    if unknown.is_empty() {
        return words;
    }
    let what = if *kind == LimitKind::Duration { "rate" } else { "stress" };
    words.note(format!("{} without a {what} is left out of this", and_list(unknown)))
}

/// "this layer of nitride", or "layer `flash` of nitride".
fn subject(layer: &LayerName) -> String {
    match &layer.name {
        Some(name) => format!("layer `{name}` of {}", layer.material),
        None => format!("this layer of {}", layer.material),
    }
}

fn of(side: SideName) -> String {
    match side {
        SideName::Only => String::new(),
        SideName::Front => " of the front side".to_owned(),
        SideName::Back(2) => " of the back side".to_owned(),
        SideName::Back(number) => format!(" of side {number}"),
    }
}

fn copies(words: Words, layer: &LayerName) -> Words {
    if layer.copies > 1 {
        words.note(format!("the repeat around it makes {} of this layer", layer.copies))
    } else {
        words
    }
}
