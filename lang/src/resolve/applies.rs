//! Which clauses a quantity has a use for: one that would be passed over in silence is an error.

use super::clause::Clauses;
use super::{ModuleId, Resolver};
use crate::model::{Bound, Quantity};
use crate::syntax::ast::Require;
use overcoat_engine::VISIBLE_NM;

impl Resolver<'_> {
    /// Reports every clause that the quantity or its bound has no use for; whether there was none.
    pub(super) fn all_apply(
        &mut self,
        module: ModuleId,
        written: &Require,
        quantity: &Quantity,
        bound: &Bound,
        clauses: &Clauses,
    ) -> bool {
        let mean = written.mean.is_some();
        let mut sound = true;
        if let (Some(span), Some(why)) = (written.mean, no_mean(quantity, bound)) {
            self.invalid(module, span, "this word", "`mean`", &format!("left out: {why}"));
            sound = false;
        }
        if let (Some(bound_written), Some(must)) = (&written.bound, no_curve(quantity, bound, mean)) {
            let shown = format!("`{}`", self.written(module, bound_written.span));
            self.invalid(module, bound_written.span, "this bound", &shown, must);
            sound = false;
        }
        for (word, span) in &clauses.places {
            if let Some(why) = useless(word, quantity, bound, mean, clauses) {
                let shown = format!("`{}`", self.written(module, *span));
                self.invalid(module, *span, "this clause", &shown, &format!("left out: {why}"));
                sound = false;
            }
        }
        sound
    }
}

/// Why there is no mean of it.
fn no_mean(quantity: &Quantity, bound: &Bound) -> Option<&'static str> {
    use Quantity::*;
    match (quantity, bound) {
        (_, Bound::Crosses { .. }) => Some("an edge is one wavelength"),
        (Photocurrent(_) | PhotocurrentLoss(_), _) => Some("a photocurrent is the sum over its band"),
        (Colour(_), _) => Some("a colour is that of the whole visible"),
        (Yield, _) => Some("a yield is one share of all parts"),
        _ => None,
    }
}

/// What a bound must be instead, that only a curve against wavelength can have.
fn no_curve(quantity: &Quantity, bound: &Bound, mean: bool) -> Option<&'static str> {
    match bound {
        Bound::Crosses { .. } if !quantity.is_curve() => Some(
            "one on a number: only reflectance, transmittance, absorptance and optical density have edges",
        ),
        Bound::AtMostMask(_) | Bound::AtLeastMask(_) if mean || !quantity.is_curve() => Some(
            "one on a number: a mask is for reflectance, transmittance, absorptance and optical density, without `mean`",
        ),
        _ => None,
    }
}

/// Why a clause can't say anything here.
fn useless(
    word: &str,
    quantity: &Quantity,
    bound: &Bound,
    mean: bool,
    clauses: &Clauses,
) -> Option<&'static str> {
    use Quantity::*;
    let edge = matches!(bound, Bound::Crosses { .. });
    let photons = clauses.under.as_ref().is_some_and(|under| under.photons);
    match (word, quantity) {
        ("over … parts", Yield) => None,
        ("over … parts", _) => Some("only a yield counts parts"),
        ("nominal", Yield) => Some("it is the yield that `nominal` leaves a requirement out of"),
        (_, Yield) => Some("a yield is that of all the other requirements"),
        ("observer", Colour(_)) => None,
        ("observer", _) => Some("only a colour is seen by an observer"),
        ("hemispherical", Emittance) => None,
        ("hemispherical", _) => Some("only an emittance is taken over the hemisphere"),
        ("at … deg" | "cone" | "polarised", Emittance) if clauses.hemispherical => {
            Some("`hemispherical` takes in every angle and both polarisations")
        }
        ("over", Luminous(_) | Colour(_)) if clauses.bands == [VISIBLE_NM] => None,
        ("over", Luminous(_) | Colour(_)) => Some("its band is the visible, 380 .. 780 nm"),
        ("at … nm", Luminous(_) | Colour(_)) => Some("it is one number for the whole visible"),
        ("at … nm", Solar(_) | SolarAbsorptance | Photocurrent(_) | PhotocurrentLoss(_) | Emittance) => {
            Some("it is one number for a whole band; write `over` with the band")
        }
        ("at … nm", _) if edge => Some("an edge is looked for over a band; write `over` or `within`"),
        // A mean without any band is reported as such.
        ("at … nm", _) if mean && !clauses.bands.is_empty() => Some("a mean is over the band"),
        ("under", Emittance) => Some("Planck's spectrum at the temperature weights an emittance"),
        ("under", Luminous(_) | Colour(_) | Solar(_) | SolarAbsorptance) if photons => {
            Some("this quantity is weighted by power; write the spectrum's name alone")
        }
        _ => None,
    }
}
