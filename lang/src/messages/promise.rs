//! Sentences about what a part must do.

use super::number::{self, angle, apart, band, or_list, ratio, significant, wavelength};
use super::{Words, yields};
use crate::code::Code;
use crate::finding::{PromiseFact, Remedy, Untold, Verdict};
use crate::model::{Beam, Quantity, Requirement};
use crate::report::At;
use crate::source::Place;

pub(super) fn words(fact: &PromiseFact, place: Place) -> Words {
    let words = remedied(verdict(fact), fact);
    if fact.asked_at == place {
        return words;
    }
    words.related(fact.asked_at, format!("recipe `{}` promises it here", fact.recipe))
}

/// The same with the thickness that would mend it.
fn remedied(mut words: Words, fact: &PromiseFact) -> Words {
    let requirement = &*fact.requirement;
    let aid = match &fact.remedy {
        Remedy::NotSought => return words,
        Remedy::NoneHelps => {
            words.message.push_str("; no single film's thickness brings it nearer");
            return words;
        }
        Remedy::Thickness(aid) => aid,
    };
    let layer = &aid.layer;
    let called = match &layer.name {
        Some(name) => format!("{name} of {}", layer.material),
        None => format!("{} (layer {})", layer.material, layer.number),
    };
    let value = match &fact.verdict {
        Verdict::EdgeMisplaced { .. } => wavelength(aid.value),
        Verdict::Missed { value, bound, .. } => {
            let digits = apart(*value, *bound).max(apart(aid.value, *bound)).max(apart(aid.value, *value));
            shown(requirement, aid.value, digits.min(6))
        }
        _ => shown(requirement, aid.value, 3),
    };
    let change = format!(
        "{called} {} → {} nm",
        number::rounded(layer.thickness, 2),
        number::rounded(aid.thickness, 2)
    );
    words.message.push_str(&if aid.mends {
        format!("; {change} gives {value}")
    } else {
        format!("; no single film's thickness mends it, and {change} comes nearest with {value}")
    });
    if layer.copies > 1 {
        words = words.note(format!("the change is of all {} copies of that layer", layer.copies));
    }
    for broken in &aid.breaks {
        words = words.note(format!("with that change `{broken}` is missed, which is met now"));
    }
    match layer.thickness_place {
        Some(place) if aid.mends && aid.breaks.is_empty() => {
            words.fix(format!("set {called} to {}", aid.written), place, aid.written.clone())
        }
        _ => words,
    }
}

fn verdict(fact: &PromiseFact) -> Words {
    let requirement = &*fact.requirement;
    let recipe = &fact.recipe;
    match &fact.verdict {
        Verdict::Missed { value, bound, least, at } => {
            let digits = apart(*value, *bound);
            let show = |number: f64| shown(requirement, number, digits);
            let (side, allowed) = if *least { ("below", "required") } else { ("above", "allowed") };
            Words::new(
                Code::RequirementMissed,
                format!(
                    "in `{recipe}`, {} is {}{}, {} {side} the {} that is {allowed}",
                    name(requirement),
                    show(*value),
                    place_of(at),
                    apart_by(requirement, (value - bound).abs()),
                    show(*bound)
                ),
            )
        }
        Verdict::Thin { value, bound, least, margin, at } => {
            let digits = apart(*value, *bound);
            let side = if *least { "above" } else { "below" };
            Words::new(
                Code::MarginThin,
                format!(
                    "in `{recipe}`, {} is {}{}, only {} {side} its bound of {}",
                    name(requirement),
                    shown(requirement, *value, digits),
                    place_of(at),
                    apart_by(requirement, *margin),
                    shown(requirement, *bound, digits)
                ),
            )
        }
        Verdict::EdgeMisplaced { found, window, searched, at } => {
            let (what, window) = (name(requirement), band(*window));
            let message = match found {
                Some(nm) => format!(
                    "in `{recipe}`, the edge of {what} lies at {}{}, and must lie in {window}",
                    wavelength(*nm),
                    beam(at)
                ),
                None => format!(
                    "in `{recipe}`, {what} has no such edge{} in {}; it must lie in {window}",
                    beam(at),
                    band(*searched)
                ),
            };
            Words::new(Code::EdgeMisplaced, message)
        }
        Verdict::ColourOff { seen, aim, difference, most, at } => {
            let lab = |[l, a, b]: [f64; 3]| {
                format!("lab({}, {}, {})", number::rounded(l, 1), number::rounded(a, 1), number::rounded(b, 1))
            };
            let digits = apart(*difference, *most);
            Words::new(
                Code::ColourOff,
                format!(
                    "in `{recipe}`, the {} is {}{}, {} from the aim {}, and {} is allowed",
                    name(requirement),
                    lab(*seen),
                    beam(at),
                    significant(*difference, digits),
                    lab(*aim),
                    significant(*most, digits)
                ),
            )
        }
        Verdict::FieldHigh { value, most, layer, depth, at } => {
            let digits = apart(*value, *most);
            Words::new(
                Code::RequirementMissed,
                format!(
                    "in `{recipe}`, peak_field is {}{}, {} above the {} that is allowed: in {layer}, {} nm below its front face",
                    significant(*value, digits),
                    place_of(at),
                    significant(value - most, 3),
                    significant(*most, digits),
                    number::rounded(*depth, 1)
                ),
            )
        }
        Verdict::NoLight { wavelength: nm } => {
            let place = nm.map_or("in the visible".to_owned(), |nm| format!("at {}", wavelength(nm)));
            Words::new(
                Code::InvalidValue,
                format!("in `{recipe}`, {} has no value {place}: no light comes that way", name(requirement)),
            )
        }
        Verdict::Meaningless { why } => {
            let beam = match requirement.quantity {
                Quantity::PeakField => "",
                _ => " that is `polarised s` or `polarised p` or meets it at 0 deg",
            };
            Words::new(
                Code::InvalidValue,
                format!(
                    "in `{recipe}`, {} has no meaning: {why}; promise it of one coating on a half-space, in a parallel beam{beam}",
                    name(requirement)
                ),
            )
        }
        Verdict::YieldShort(short) => yields::short(recipe, short),
        Verdict::Sensitive(sensitive) => yields::sensitive(recipe, sensitive),
        Verdict::Textured(untold) => {
            let why = match untold {
                Untold::Inside => {
                    "light from inside a textured piece is not followed; promise it of light from the incident side"
                }
                Untold::Tilted => {
                    "how much light pyramids return at an angle depends on how their rows lie to the beam, which a recipe \
                     does not say; promise it at 0 deg, without a cone"
                }
                Untold::Waves => {
                    "every ray has met facets at places of its own; promise it of a flat stack with the same films"
                }
            };
            Words::new(
                Code::InvalidValue,
                format!("in `{recipe}`, {} has no value on a textured face: {why}", name(requirement)),
            )
        }
        Verdict::NoIrradiance { name, defined } => Words::new(
            Code::InvalidValue,
            format!(
                "in `{recipe}`, a photocurrent under `{name}` has no value: how strong that light is is not known; take \
                 `am15g`, `am15d`, `am0` or a table with `irradiance W/m2`"
            ),
        )
        .related(*defined, format!("`{name}` is defined here")),
        Verdict::NotEvaluated { what } => Words::new(
            Code::NotConverged,
            format!("in `{recipe}`, {} has no value: {what} can't be worked out", name(requirement)),
        ),
        Verdict::NotConverged { estimate, error, wavelength: nm } => {
            let known = if error.is_finite() {
                format!("it is {} give or take {}", significant(*estimate, 6), significant(*error, 2))
            } else {
                "no value can be told there; look for a thickness, an index or a k that can't be meant".to_owned()
            };
            Words::new(
                Code::NotConverged,
                format!("in `{recipe}`, {} did not settle near {}: {known}", name(requirement), wavelength(*nm)),
            )
        }
        Verdict::AbsorbingIncident { material, k, wavelength: nm, place } => Words::new(
            Code::AbsorbingIncident,
            format!(
                "in `{recipe}`, the light comes through `{material}`, which absorbs (k = {} at {}): reflectance has no \
                 meaning there; let it come from a clear medium",
                significant(*k, 3),
                wavelength(*nm)
            ),
        )
        .related(*place, format!("`{material}` stands at this end")),
        Verdict::UnknownTarget { name, near } => {
            let meant = if near.is_empty() { String::new() } else { format!("; did you mean {}?", or_list(near)) };
            Words::new(Code::UnknownName, format!("recipe `{recipe}` has no layer and no material `{name}`{meant}"))
        }
        Verdict::SpectrumOutside { name, defined, asked, range } => Words::new(
            Code::OutsideData,
            format!(
                "`{name}` has no values all over {}: they reach from {} to {}",
                band(*asked),
                wavelength(range.0),
                wavelength(range.1)
            ),
        )
        .related(*defined, format!("`{name}` is defined here")),
        Verdict::SpectrumDark { name, asked } => {
            Words::new(Code::InvalidValue, format!("`{name}` is dark all over {}, so that there is no mean", band(*asked)))
        }
        Verdict::MaskApart { path, asked, covers } => Words::new(
            Code::OutsideData,
            format!("\"{path}\" covers {}, and says nothing of part of {}", band(*covers), band(*asked)),
        ),
    }
}

/// What a requirement is about, in words: "mean reflectance", "absorptance in silver".
pub(super) fn name(requirement: &Requirement) -> String {
    let words: Vec<&str> = requirement.text.split_whitespace().collect();
    let bound = |word: &&&str| {
        word.starts_with(|first: char| first.is_ascii_digit() || "<>-+(".contains(first))
            || matches!(**word, "crosses" | "within")
    };
    let end = words.iter().position(|word| bound(&word)).unwrap_or(words.len());
    words[..end].join(" ")
}

/// A value of the requirement's quantity with its unit.
pub(super) fn shown(requirement: &Requirement, number: f64, digits: usize) -> String {
    match requirement.quantity {
        Quantity::OpticalDensity | Quantity::PeakField | Quantity::Colour(_) => significant(number, digits),
        Quantity::Photocurrent(_) | Quantity::PhotocurrentLoss(_) => {
            format!("{} mA/cm2", significant(number, digits))
        }
        Quantity::Phase(_) => format!("{} deg", significant(number, digits)),
        Quantity::GroupDelay(_) => format!("{} fs", significant(number, digits)),
        Quantity::GroupDelayDispersion(_) => format!("{} fs^2", significant(number, digits)),
        _ => ratio(number, digits),
    }
}

/// A difference of two values: of shares in points of a per cent, since 1 % of 2 % could mean two things.
fn apart_by(requirement: &Requirement, difference: f64) -> String {
    let text = shown(requirement, difference, 3);
    match text.strip_suffix(" %") {
        Some(points) => format!("{points} points"),
        None => text,
    }
}

/// Where a value is: the wavelength, the angle unless it is normal, the polarisation unless it is both.
fn place_of(at: &At) -> String {
    let wavelength = at.wavelength.map_or(String::new(), |nm| format!(" at {}", number::wavelength(nm)));
    format!("{wavelength}{}", beam(at))
}

fn beam(at: &At) -> String {
    let angle = if at.angle == 0.0 { String::new() } else { format!(" at {}", angle(at.angle)) };
    let polarisation = match at.polarisation {
        Beam::S => " polarised s",
        Beam::P => " polarised p",
        Beam::Mean => "",
    };
    format!("{angle}{polarisation}")
}
