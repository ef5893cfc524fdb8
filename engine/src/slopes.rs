//! How a quantity changes with the thickness of every film: exact first derivatives.

use std::f64::consts::{LN_10, TAU};

use num_complex::Complex64;

use crate::adjoint::Passage;
use crate::band::Probe;
use crate::bodies::{Chain, Link};
use crate::coating::{Detail, Powers};
use crate::error::OpticsError;
use crate::facets;
use crate::matrix::Mode;
use crate::plan::Plan;
use crate::quantity::{Light, Quantity};
use crate::real::{Real, Slope};
use crate::stack::Stack;
use crate::tilted::{Face, Side, Tilted};
use crate::{field, phase};

/// A value with its derivatives.
#[derive(Clone, Debug, PartialEq)]
pub struct Slopes {
    /// The value.
    pub value: f64,
    /// Its derivative in the thickness of each film, per nm, by coating and by film within it, in the light's order. A graded
    /// film is stretched as a whole.
    pub films: Vec<Vec<f64>>,
}

impl Slopes {
    fn zero(plan: &Plan) -> Slopes {
        let films = (0..plan.coatings.len()).map(|at| vec![0.0; plan.films(at).unwrap_or(0)]).collect();
        Slopes { value: 0.0, films }
    }

    fn add(&mut self, share: f64, other: &Slopes) {
        self.value += share * other.value;
        for (mine, others) in self.films.iter_mut().flatten().zip(other.films.iter().flatten()) {
            *mine += share * others;
        }
    }

    /// The derivatives by film from those by layer.
    pub(crate) fn by_film(plan: &Plan, value: f64, layers: &[Vec<f64>]) -> Slopes {
        let mut slopes = Slopes::zero(plan);
        slopes.value = value;
        for ((films, coating), layers) in slopes.films.iter_mut().zip(&plan.coatings).zip(layers) {
            for group in coating.iter().zip(layers).collect::<Vec<_>>().chunk_by(|a, b| a.0.film == b.0.film)
            {
                let whole: f64 = group.iter().map(|(layer, _)| layer.thickness_nm).sum();
                let share = |nm: f64| if whole > 0.0 { nm / whole } else { 1.0 / group.len() as f64 };
                films[group[0].0.film] =
                    group.iter().map(|(layer, slope)| share(layer.thickness_nm) * *slope).sum();
            }
        }
        slopes
    }
}

/// A quantity with its derivatives in the thickness of every film, at vacuum wavelengths in nm: one entry a wavelength.
///
/// # Errors
/// As [`value`](crate::value).
pub fn slopes(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    wavelengths_nm: &[f64],
) -> Result<Vec<Slopes>, OpticsError> {
    let probe = Probe::new(stack, quantity, light)?;
    wavelengths_nm.iter().map(|wavelength_nm| at(&probe, *wavelength_nm)).collect()
}

fn at(probe: &Probe<'_>, wavelength_nm: f64) -> Result<Slopes, OpticsError> {
    let (plan, light) = (&*probe.plan, &probe.light);
    match *probe.quantity {
        Quantity::Phase(outgoing, kind) => return phase::slopes(plan, light, outgoing, kind, wavelength_nm),
        Quantity::PeakField => return field::slopes(plan, light, wavelength_nm),
        _ => {}
    }
    let indices = plan.indices(wavelength_nm)?;
    let mut sum = Slopes::zero(plan);
    for (angle_rad, shares) in probe.all_rays() {
        let tilted = plan.tilted(&indices, wavelength_nm, angle_rad)?;
        for (mode, share) in [Mode::S, Mode::P].into_iter().zip(shares) {
            if share != 0.0 {
                sum.add(share, &of_mode(&tilted, probe.quantity, mode)?);
            }
        }
    }
    if *probe.quantity != Quantity::OpticalDensity {
        return Ok(sum);
    }
    // What was added up is the transmittance.
    if sum.value <= 0.0 {
        return Err(OpticsError::Dark { wavelength_nm });
    }
    let transmittance = sum.value;
    sum.films.iter_mut().flatten().for_each(|slope| *slope /= -LN_10 * transmittance);
    Ok(Slopes { value: -transmittance.log10(), films: sum.films })
}

/// One mode at one angle; of an optical density it is the transmittance.
fn of_mode(tilted: &Tilted<'_>, quantity: &Quantity, mode: Mode) -> Result<Slopes, OpticsError> {
    let by_film = matches!(quantity, Quantity::AbsorptanceIn { .. });
    let detail = if by_film { Detail::ByFilm } else { Detail::Whole };
    let plan = tilted.plan;
    // Every layer's own links: those of its coating with slopes, all others without.
    let constant = tilted.links(mode, &|face, mode| still(face.solve(mode, detail).powers));
    let mut value = total(tilted, quantity, constant.clone())?.value;
    let mut layers: Vec<Vec<f64>> = Vec::with_capacity(plan.coatings.len());
    for (coating, own) in plan.coatings.iter().enumerate() {
        let moving = moving(tilted, coating, own.len(), mode, detail);
        let mut slopes = Vec::with_capacity(own.len());
        for link in moving {
            let mut links = constant.clone();
            links[coating] = link;
            let found = total(tilted, quantity, links)?;
            value = found.value;
            slopes.push(found.slope);
        }
        layers.push(slopes);
    }
    Ok(Slopes::by_film(plan, value, &layers))
}

/// Powers that don't change.
fn still(powers: Powers<f64>) -> Powers<Slope> {
    Powers {
        reflectance: Slope::of(powers.reflectance),
        transmittance: Slope::of(powers.transmittance),
        ln_transmittance: Slope::of(powers.ln_transmittance),
        films: powers.films.into_iter().map(Slope::of).collect(),
    }
}

/// A coating's link in the chain as it changes with each of its layers.
fn moving(
    tilted: &Tilted<'_>,
    coating: usize,
    layers: usize,
    mode: Mode,
    detail: Detail,
) -> Vec<Link<Slope>> {
    let wave_number = Complex64::new(TAU / tilted.wavelength_nm, 0.0);
    let of = |face: Face<'_>, mode: Mode| {
        let mut steps: Vec<_> = face.steps.iter().collect();
        if face.side == Side::Back {
            steps.reverse();
        }
        let passage = Passage { steps, entry: face.entry, exit: face.exit, wave_number, mode };
        let mut slopes = passage.slopes(detail);
        if face.side == Side::Back {
            slopes.reverse();
        }
        slopes
    };
    if coating == tilted.flat() {
        let each: Vec<[Vec<Powers<Slope>>; 2]> = tilted
            .facets
            .iter()
            .map(|facet| [Mode::S, Mode::P].map(|mode| of(tilted.on_facet(facet), mode)))
            .collect();
        let one = |layer: usize| {
            let [s, p] = [0, 1].map(|mode: usize| {
                let met = each.iter().zip(&tilted.facets);
                facets::together(met.map(|(modes, facet)| (modes[mode][layer].clone(), facet.share)))
            });
            Link { front: s.mean(&p), back: None }
        };
        return (0..layers).map(one).collect();
    }
    let front = of(tilted.face(coating, Side::Front), mode);
    if coating < tilted.plan.bodies.len() {
        let back = of(tilted.face(coating, Side::Back), mode);
        return front.into_iter().zip(back).map(|(front, back)| Link { front, back: Some(back) }).collect();
    }
    front.into_iter().map(|front| Link { front, back: None }).collect()
}

/// The quantity of a whole chain.
fn total(tilted: &Tilted<'_>, quantity: &Quantity, links: Vec<Link<Slope>>) -> Result<Slope, OpticsError> {
    let chain = Chain::new(links, tilted.between()).ok_or(tilted.not_finite())?;
    Ok(match quantity {
        Quantity::Reflectance => chain.reflectance,
        Quantity::Transmittance | Quantity::OpticalDensity => chain.transmittance,
        Quantity::Absorptance => chain.absorptance(),
        Quantity::AbsorptanceIn { films, bodies, exit } => {
            let mut sum = if *exit { chain.transmittance } else { Slope::of(0.0) };
            for body in bodies {
                sum = sum + chain.body(*body);
            }
            for (coating, layers) in tilted.plan.coatings.iter().enumerate() {
                if !films.iter().any(|film| film.0 == coating) {
                    continue;
                }
                for (layer, share) in layers.iter().zip(chain.films(coating)) {
                    if films.contains(&(coating, layer.film)) {
                        sum = sum + share;
                    }
                }
            }
            sum
        }
        // These have slopes of their own.
        Quantity::Phase(..) | Quantity::PeakField => Slope::of(0.0),
    })
}
