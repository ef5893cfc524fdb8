//! Sentences about parts that pass and parts that don't.

use super::Words;
use super::number::{ratio, rounded, significant};
use super::promise::{name, shown};
use crate::code::Code;
use crate::finding::{Sensitive, ShortYield};
use crate::model::Spread;
use crate::report::{Cause, Varying};
use crate::syntax::ast::{Each, SpreadKind};

/// A yield below its bound.
pub(super) fn short(recipe: &str, short: &ShortYield) -> Words {
    let bound = ratio(short.bound, 4);
    if !short.varies {
        return Words::new(
            Code::YieldShort,
            format!(
                "in `{recipe}`, no part passes, and {bound} must: nothing varies, and the recipe as written misses a requirement"
            ),
        );
    }
    let mut message = format!(
        "in `{recipe}`, {} of {} parts pass ({} to {} with 95 % confidence), and {bound} must",
        ratio(short.value, 3),
        short.parts,
        ratio(short.interval.0, 3),
        ratio(short.interval.1, 3)
    );
    if let Some((text, met)) = &short.weakest {
        message.push_str(&format!(": `{text}` fails most, in {} of them", ratio(1.0 - met, 3)));
        if let Some(driver) = &short.driver {
            message.push_str(&format!(
                ", driven by {} ({} of its variance)",
                cause(&driver.cause),
                ratio(driver.share, 2)
            ));
        }
    }
    let mut words = Words::new(Code::YieldShort, message);
    if let Some(driver) = &short.driver {
        words = words.related(
            driver.cause.place,
            format!("{} varies {} here", of(&driver.cause), size(&driver.cause, 1.0)),
        );
        words = words.note(match short.shrink {
            Some(share) => format!(
                "the yield is met where {} varies {} in place of {}",
                of(&driver.cause),
                size(&driver.cause, share),
                size(&driver.cause, 1.0)
            ),
            None => format!("the yield is short even where {} does not vary", of(&driver.cause)),
        });
    }
    if let Some((aid, value)) = &short.moved {
        let layer = &aid.layer;
        let called =
            layer.name.clone().unwrap_or_else(|| format!("{} (layer {})", layer.material, layer.number));
        words = words.note(format!(
            "with {called} {} → {} nm it is {}",
            rounded(layer.thickness, 2),
            rounded(aid.thickness, 2),
            ratio(*value, 3)
        ));
    }
    if let Some((requirement, value)) = &short.corner {
        words = words.note(format!(
            "with every ± at its worst end, {} is {}",
            name(requirement),
            shown(requirement, *value, 3)
        ));
    }
    words
}

/// A requirement that hangs on one layer.
pub(super) fn sensitive(recipe: &str, sensitive: &Sensitive) -> Words {
    Words::new(
        Code::SensitiveLayer,
        format!(
            "in `{recipe}`, {} alone brings about {} of the variance of `{}`, which {} of the parts meet; monitor it \
             best of all",
            sensitive.layer,
            ratio(sensitive.share, 2),
            sensitive.requirement,
            ratio(sensitive.met, 3)
        ),
    )
}

/// What varies and how often: "the thickness of nitride, each run".
pub fn cause(cause: &Cause) -> String {
    let each = match cause.each {
        Each::Layer => "each layer",
        Each::Run => "each run",
        Each::Part => "each part",
    };
    format!("{}, {each}", of(cause))
}

fn of(cause: &Cause) -> String {
    match cause.varying {
        Varying::Thickness => format!("the thickness of {}", cause.of),
        Varying::Index => format!("the index of {}", cause.of),
        Varying::Angle => "the angle of incidence".to_owned(),
    }
}

/// How much it varies, at a share of what it does: "± 1.5 %".
pub fn size(cause: &Cause, share: f64) -> String {
    let amount = match (cause.spread, cause.varying) {
        (Spread::Relative(of), _) => format!("{} %", significant(100.0 * share * of, 2)),
        (Spread::Absolute(nm), Varying::Thickness) => format!("{} nm", significant(share * nm, 2)),
        (Spread::Absolute(by), Varying::Index) => significant(share * by, 2),
        (Spread::Absolute(radians), Varying::Angle) => {
            format!("{} deg", significant((share * radians).to_degrees(), 2))
        }
    };
    match cause.kind {
        SpreadKind::Rectangular => format!("± {amount}"),
        SpreadKind::Normal => format!("sigma {amount}"),
    }
}
