//! Phases on reflection and transmission, and how they change with the frequency: group delay and its dispersion.
//!
//! Fields go as exp(−iωt), so that a positive group delay dφ/dω is a pulse that leaves later. The amplitudes are those of
//! the tangential electric field: r at the front face, t from the front face of the coating to its last. At normal
//! incidence r is the same for s and p, and negative where the light meets the higher index.
//!
//! The derivatives are exact: the recursion runs in [`Taylor`] series in ω, the materials' dispersion included.
//! Source: P. Yeh, *Optical Waves in Layered Media* (1988), chapter 6, for the quantities; the recursion is that of
//! [`matrix`](crate::matrix).

use num_complex::Complex64;

use crate::adjoint::{Change, Passage};
use crate::error::OpticsError;
use crate::matrix::{Medium, Mode, Step};
use crate::number::Number;
use crate::plan::{Layer, Plan};
use crate::quantity::{Light, Outgoing, PhaseKind};
use crate::response::Polarisation;
use crate::slopes::Slopes;
use crate::taylor::Taylor;

/// The speed of light in vacuum, nm/fs.
const LIGHT_NM_FS: f64 = 299.792_458;

/// An amplitude below this has no phase that its rounding would not hide.
const DARK: f64 = 1e-13;

/// The phase (rad), the group delay (fs) or the group-delay dispersion (fs²) at a vacuum wavelength in nm.
pub(crate) fn phase(
    plan: &Plan,
    light: &Light,
    outgoing: Outgoing,
    kind: PhaseKind,
    wavelength_nm: f64,
) -> Result<f64, OpticsError> {
    let mode = mode(plan, light)?;
    let amplitude = amplitude(plan, light.angle_rad, mode, outgoing, wavelength_nm)?;
    let series = Number::ln(&amplitude);
    let value = match kind {
        PhaseKind::Phase { aim_rad } => {
            let turns = ((aim_rad - series.0[0].im) / std::f64::consts::TAU).round();
            series.0[0].im + turns * std::f64::consts::TAU
        }
        PhaseKind::Delay => series.0[1].im,
        PhaseKind::Dispersion => 2.0 * series.0[2].im,
    };
    if value.is_finite() {
        Ok(value)
    } else {
        Err(OpticsError::NotFinite { wavelength_nm, angle_rad: light.angle_rad })
    }
}

/// The one polarisation that a phase is of.
fn mode(plan: &Plan, light: &Light) -> Result<Mode, OpticsError> {
    let refuse = |why| Err(OpticsError::NoPhase { why });
    if !plan.bodies.is_empty() {
        return refuse("reflections at the two sides of a thick piece add in power, not in amplitude");
    }
    if plan.is_textured() {
        return refuse("on a textured face every ray has met facets at its own places");
    }
    if light.cone_half_angle_rad > 0.0 {
        return refuse("the rays of a cone have phases of their own");
    }
    match light.polarisation {
        Polarisation::S => Ok(Mode::S),
        Polarisation::P => Ok(Mode::P),
        Polarisation::Mean if light.angle_rad == 0.0 => Ok(Mode::S),
        Polarisation::Mean => refuse("at an angle s and p have phases of their own"),
    }
}

/// The same with its derivatives in the thickness of every film.
pub(crate) fn slopes(
    plan: &Plan,
    light: &Light,
    outgoing: Outgoing,
    kind: PhaseKind,
    wavelength_nm: f64,
) -> Result<Slopes, OpticsError> {
    let value = phase(plan, light, outgoing, kind, wavelength_nm)?;
    let waves = Waves::new(plan, light.angle_rad, wavelength_nm)?;
    let passage = waves.passage(mode(plan, light)?);
    let pairs = passage.pairs();
    let (difference, sum) = passage.amplitudes(&pairs[0]);
    let of = |change: Change<Taylor>| {
        // Of the logarithm of the amplitude.
        let change = match outgoing {
            Outgoing::Reflected => change.numerator * sum / difference - change.denominator,
            Outgoing::Transmitted => -change.denominator,
        };
        match kind {
            PhaseKind::Phase { .. } => change.0[0].im,
            PhaseKind::Delay => change.0[1].im,
            PhaseKind::Dispersion => 2.0 * change.0[2].im,
        }
    };
    let layers = passage.changes(&pairs).into_iter().map(of).collect();
    Ok(Slopes::by_film(plan, value, &[layers]))
}

/// A coating at one wavelength and angle, all of it as series in ω.
struct Waves<'a> {
    plan: &'a Plan,
    media: Vec<Medium<Taylor>>,
    steps: Vec<Step<Taylor>>,
    wave_number: Taylor,
}

impl Waves<'_> {
    fn new(plan: &Plan, angle_rad: f64, wavelength_nm: f64) -> Result<Waves<'_>, OpticsError> {
        // The plain evaluation has every check, of angles and of incident media that absorb among them.
        plan.at(wavelength_nm, angle_rad)?;
        let omega = std::f64::consts::TAU * LIGHT_NM_FS / wavelength_nm;
        let mut indices = Vec::with_capacity(plan.materials.len());
        for index in &plan.materials {
            let at = |cause| OpticsError::Material { index: index.clone(), cause };
            indices.push(index.series(wavelength_nm, omega).map_err(at)?);
        }
        plan.mix(&mut indices, wavelength_nm)?;
        let media = plan.tilted_media(&indices, angle_rad);
        let wave_number = Taylor::variable(omega, 1.0 / LIGHT_NM_FS);
        let step = |layer: &Layer| Step::new(&media[layer.material], &wave_number.scale(layer.thickness_nm));
        let steps = plan.coatings[0].iter().map(step).collect();
        Ok(Waves { plan, media, steps, wave_number })
    }

    fn passage(&self, mode: Mode) -> Passage<'_, Taylor> {
        let (entry, exit) = (&self.media[0], &self.media[self.plan.exit]);
        Passage { steps: self.steps.iter().collect(), entry, exit, wave_number: self.wave_number, mode }
    }
}

fn amplitude(
    plan: &Plan,
    angle_rad: f64,
    mode: Mode,
    outgoing: Outgoing,
    wavelength_nm: f64,
) -> Result<Taylor, OpticsError> {
    let waves = Waves::new(plan, angle_rad, wavelength_nm)?;
    let passage = waves.passage(mode);
    let (difference, sum) = passage.amplitudes(&passage.front());
    let (part, whole) = match outgoing {
        Outgoing::Reflected => (difference, 1.0),
        // The field behind over the field that arrives, up to a positive factor.
        Outgoing::Transmitted => {
            ((passage.entry.wave(mode).c * passage.exit.wave(mode).b).scale(2.0), f64::MIN_POSITIVE)
        }
    };
    let size = |number: &Taylor| -> f64 { Complex64::norm(number.0[0]) };
    if size(&part) <= DARK * whole * size(&sum) {
        return Err(OpticsError::NoPhase { why: "no light comes out that could have one" });
    }
    Ok(part / sum)
}
