//! Quantities that are means under a light of their own: luminous, solar, photocurrent, emittance.

use super::super::optics::{Trouble, weight};
use super::super::require::{Asked, Candidate};
use super::power::{absorptance_in, explain, mean_over_angles};
use super::{angles, not_evaluated};
use crate::finding::Verdict;
use crate::model::{Quantity, Side};
use crate::units::EV_NM;
use overcoat_engine::{self as engine, Observer, SpectralWeight, VISIBLE_NM};

fn side(side: Side) -> engine::Quantity {
    match side {
        Side::Reflected => engine::Quantity::Reflectance,
        Side::Transmitted => engine::Quantity::Transmittance,
    }
}

/// The requirement's light; the resolver has seen to it that there is one.
fn source(asked: &Asked<'_>) -> Result<SpectralWeight, Trouble> {
    let under =
        asked.requirement.under.as_ref().ok_or_else(|| not_evaluated("a quantity without a light source"))?;
    weight(Some(under)).ok_or_else(|| not_evaluated("a quantity under this light source"))
}

/// ∫ q S V dλ / ∫ S V dλ over the visible.
///
/// Source: EN 410:2011, equations 1 and 5; ISO 9050:2003, equations 1 and 2.
pub(super) fn luminous(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    let Quantity::Luminous(of) = asked.requirement.quantity else { return Ok(Vec::new()) };
    let photopic = &Observer::Two.functions()[1];
    mean_over_angles(asked, &side(of), &[VISIBLE_NM], &source(asked)?.times(photopic))
}

/// ∫ q S dλ / ∫ S dλ, S being the sun's power.
///
/// Source: EN 410:2011, equations 7 and 10; ISO 9050:2003, equations 9 and 10.
pub(super) fn solar(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    let quantity = match asked.requirement.quantity {
        Quantity::Solar(of) => side(of),
        _ => engine::Quantity::Absorptance,
    };
    mean_over_angles(asked, &quantity, &asked.requirement.bands, &source(asked)?)
}

/// q ∫ A Φ dλ with the photon flux Φ = E λ / h c, in mA/cm²; or the rest of the band's photons.
///
/// Source: M. A. Green, Solar Cells, Prentice-Hall (1982), section 5.2 (from memory); h, c, e exact in the SI.
pub(super) fn photocurrent(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    let (target, lost) = match &asked.requirement.quantity {
        Quantity::Photocurrent(target) => (target, false),
        Quantity::PhotocurrentLoss(target) => (target, true),
        _ => return Ok(Vec::new()),
    };
    let under = asked.requirement.under.as_ref();
    if let Some(under) = under.filter(|under| !under.spectrum.irradiance) {
        let (name, defined) = (under.spectrum.name.clone(), under.spectrum.place);
        return Err(Trouble::Verdict(Verdict::NoIrradiance { name, defined }));
    }
    let photons = match under {
        Some(under) if under.photons => source(asked)?,
        _ => source(asked)?.photons(),
    };
    let quantity = absorptance_in(asked, target)?;
    let bands = &asked.requirement.bands;
    let mut found = mean_over_angles(asked, &quantity, bands, &photons)?;
    let flux = photons.integral(bands).unwrap_or(0.0);
    // W m⁻² nm⁻¹ × nm × nm over h c / e in eV nm is A/m²; ten of them are one mA/cm².
    let most = flux / EV_NM / 10.0;
    for candidate in &mut found {
        candidate.value = if lost { most * (1.0 - candidate.value) } else { most * candidate.value };
    }
    Ok(found)
}

/// 1 − R − T weighted with Planck's spectrum, at the requirement's angles or over the hemisphere.
///
/// Source: Kirchhoff's law; EN 12898:2019 for the weighting at normal incidence.
pub(super) fn emittance(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    let kelvin = asked.requirement.temperature.unwrap_or(0.0);
    let body =
        SpectralWeight::blackbody(kelvin).map_err(|_| not_evaluated("an emittance at this temperature"))?;
    let quantity = engine::Quantity::Absorptance;
    let bands = &asked.requirement.bands;
    if !asked.requirement.hemispherical {
        return mean_over_angles(asked, &quantity, bands, &body);
    }
    let stack = asked.engine;
    let mean =
        engine::hemispherical_mean(stack, &quantity, bands, &body).map_err(|error| explain(asked, &error))?;
    let mut found = angles::over(asked, &|_| Ok(mean.value))?;
    found.truncate(1);
    Ok(found)
}
