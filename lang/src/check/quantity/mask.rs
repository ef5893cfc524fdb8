//! Masks: bounds that are curves against wavelength.

use super::super::optics::Trouble;
use super::super::require::{Asked, Candidate, Judged};
use super::power::{engine_quantity, explain, light};
use super::{angles, not_evaluated};
use crate::finding::Verdict;
use crate::model::{Angles, Mask, Requirement};
use crate::report::At;
use overcoat_engine as engine;

/// The stretches of wavelengths that a mask is compared over, nm: the requirement's own, or all that the mask covers.
pub(super) fn looked_at(requirement: &Requirement, mask: &Mask) -> Vec<(f64, f64)> {
    let points = requirement.wavelengths.iter().map(|nm| (*nm, *nm));
    let own: Vec<(f64, f64)> = requirement.bands.iter().copied().chain(points).collect();
    if own.is_empty() { vec![covers(mask)] } else { own }
}

fn covers(mask: &Mask) -> (f64, f64) {
    let first = mask.rows.first().map_or(0.0, |row| row.0);
    (first, mask.rows.last().map_or(0.0, |row| row.0))
}

/// The place where the quantity is nearest to its mask, or furthest beyond.
pub(super) fn judge(asked: &Asked<'_>, mask: &Mask, most: bool) -> Result<Judged, Trouble> {
    let covers = covers(mask);
    let bands = looked_at(asked.requirement, mask);
    if let Some(beyond) = bands.iter().find(|band| band.0 < covers.0 || band.1 > covers.1) {
        let (path, asked) = (mask.path.clone(), *beyond);
        return Err(Trouble::Verdict(Verdict::MaskApart { path, asked, covers }));
    }
    let at_angle = |angle: f64| -> Result<Judged, Trouble> {
        let each = bands
            .iter()
            .map(|band| in_band(asked, mask, most, *band, angle))
            .collect::<Result<Vec<_>, _>>()?;
        Judged::worst(each).ok_or_else(|| not_evaluated("a mask without wavelengths"))
    };
    let judged = match &asked.requirement.angles {
        Angles::List(list) => {
            Judged::worst(list.iter().map(|angle| at_angle(*angle)).collect::<Result<Vec<_>, _>>()?)
        }
        Angles::Range(..) => {
            let found = angles::over(asked, &|angle| Ok(at_angle(angle)?.margin))?;
            let worst = found.iter().min_by(|a, b| a.value.total_cmp(&b.value)).map(|worst| worst.at.angle);
            worst.map(at_angle).transpose()?
        }
    };
    judged.ok_or_else(|| not_evaluated("a mask at no angle"))
}

fn in_band(
    asked: &Asked<'_>,
    mask: &Mask,
    most: bool,
    band: (f64, f64),
    angle: f64,
) -> Result<Judged, Trouble> {
    let quantity = engine_quantity(asked)?;
    let stack = asked.engine;
    let light = light(asked, angle);
    let over = engine::extremes_against(stack, &quantity, &light, band, &mask.rows);
    let over = over.map_err(|error| explain(asked, &error))?.ok_or_else(|| {
        let (path, asked, covers) = (mask.path.clone(), band, covers(mask));
        Trouble::Verdict(Verdict::MaskApart { path, asked, covers })
    })?;
    let worst = if most { over.max } else { over.min };
    let bound = at(mask, worst.wavelength_nm);
    let place =
        At { wavelength: Some(worst.wavelength_nm), angle, polarisation: asked.requirement.polarisation };
    let candidate = Candidate { value: bound + worst.value, at: place };
    Ok(if most {
        Judged::within(candidate, None, Some(bound))
    } else {
        Judged::within(candidate, Some(bound), None)
    })
}

/// The mask's value at a wavelength that it covers.
pub(in super::super) fn at(mask: &Mask, nm: f64) -> f64 {
    let after = mask.rows.partition_point(|row| row.0 <= nm).clamp(1, mask.rows.len() - 1);
    let ((x0, y0), (x1, y1)) = (mask.rows[after - 1], mask.rows[after]);
    y0 + (y1 - y0) * ((nm - x0) / (x1 - x0)).clamp(0.0, 1.0)
}
