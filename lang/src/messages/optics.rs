//! Sentences about optical constants and light.

use super::Words;
use super::number::{band, significant, wavelength};
use crate::code::Code;
use crate::finding::OpticsFact;

pub(super) fn words(fact: &OpticsFact) -> Words {
    match fact {
        OpticsFact::OutsideData { name, defined, asked, range } => {
            let asked_word = if asked.0 == asked.1 { "at" } else { "all over" };
            Words::new(
                Code::OutsideData,
                format!(
                    "`{name}` has no data {asked_word} {}: they reach from {} to {}, and nothing is extrapolated",
                    band(*asked),
                    wavelength(range.0),
                    wavelength(range.1)
                ),
            )
            .related(*defined, format!("`{name}` is defined here"))
        }
        OpticsFact::NotPhysical { name, defined, wavelength: nm, nk } => {
            let what = match nk {
                Some((n, k)) => {
                    format!("n = {} and k = {}, which no film has", significant(*n, 4), significant(*k, 4))
                }
                None => "no finite number".to_owned(),
            };
            Words::new(
                Code::InvalidValue,
                format!(
                    "the model of `{name}` gives {what} at {}; correct it or narrow its `valid` range",
                    wavelength(*nm)
                ),
            )
            .related(*defined, format!("`{name}` is defined here"))
        }
    }
}
