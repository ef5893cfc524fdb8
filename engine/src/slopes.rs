//! How a quantity changes with the thickness of every film: exact first derivatives.

use std::f64::consts::{LN_10, TAU};

use num_complex::Complex64;

use crate::adjoint::Passage;
use crate::band::Probe;
use crate::bodies::{Chain, Link};
use crate::coating::{Detail, Powers};
use crate::error::OpticsError;
use crate::facets;
use crate::kernel::{Beam, Points, WIDTH};
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
    let (plan, light) = (&*probe.plan, &probe.light);
    let each = |of: &dyn Fn(f64) -> Result<Slopes, OpticsError>| {
        wavelengths_nm.iter().map(|wavelength_nm| of(*wavelength_nm)).collect()
    };
    match *quantity {
        Quantity::Phase(outgoing, kind) => each(&|nm| phase::slopes(plan, light, outgoing, kind, nm)),
        Quantity::PeakField => each(&|nm| field::slopes(plan, light, nm)),
        _ => in_power(&probe, wavelengths_nm),
    }
}

/// The same of a quantity that adds up in power.
fn in_power(probe: &Probe<'_>, wavelengths_nm: &[f64]) -> Result<Vec<Slopes>, OpticsError> {
    let (plan, program) = (&*probe.plan, &*probe.program);
    let points = Points::new(plan, wavelengths_nm)?;
    let wanted = probe.quantity.wanted(probe.within.as_deref());
    let layers: usize = plan.coatings.iter().map(Vec::len).sum();
    let mut values = vec![0.0; wavelengths_nm.len()];
    let mut slopes = vec![0.0; wavelengths_nm.len() * layers];
    let (mut value_rows, mut slope_rows) = (Vec::new(), Vec::new());
    for (angle_rad, shares) in probe.all_rays() {
        let beam = Beam::new(plan, &points, &[angle_rad])?;
        beam.slopes(program, &points, shares, wanted, (&mut value_rows, &mut slope_rows));
        for at in 0..wavelengths_nm.len() {
            let (block, lane) = (at / WIDTH, at % WIDTH);
            let value = value_rows[block].0[lane];
            if !value.is_finite() {
                return Err(OpticsError::NotFinite { wavelength_nm: wavelengths_nm[at], angle_rad });
            }
            values[at] += value;
            let rows = &slope_rows[block * layers..(block + 1) * layers];
            let sums = &mut slopes[at * layers..(at + 1) * layers];
            sums.iter_mut().zip(rows).for_each(|(sum, row)| *sum += row.0[lane]);
        }
    }
    let of = |at: usize| {
        let (mut value, mut own) = (values[at], slopes[at * layers..(at + 1) * layers].to_vec());
        if *probe.quantity == Quantity::OpticalDensity {
            // What was added up is the transmittance.
            if value <= 0.0 {
                return Err(OpticsError::Dark { wavelength_nm: wavelengths_nm[at] });
            }
            own.iter_mut().for_each(|slope| *slope /= -LN_10 * value);
            value = -value.log10();
        }
        let mut rest = &own[..];
        let by_coating = plan.coatings.iter().map(|coating| {
            let (these, others) = rest.split_at(coating.len());
            rest = others;
            these.to_vec()
        });
        let by_coating: Vec<Vec<f64>> = by_coating.collect();
        Ok(Slopes::by_film(plan, value, &by_coating))
    };
    (0..wavelengths_nm.len()).map(of).collect()
}

/// The definition of [`in_power`] for one wavelength, against which the kernel is tested.
#[cfg(test)]
fn defined(probe: &Probe<'_>, wavelength_nm: f64) -> Result<Slopes, OpticsError> {
    let plan = &*probe.plan;
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

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;
    use crate::dispersion::{Index, MixingRule};
    use crate::graded::{Gradient, Profile, Steps};
    use crate::response::Polarisation;
    use crate::stack::{Body, Film};

    fn film() -> impl Strategy<Value = (usize, f64)> {
        (0..5_usize, prop_oneof![8 => 5.0..300.0_f64, 1 => Just(0.0), 1 => 300.0..20_000.0_f64])
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(96))]

        #[test]
        fn the_kernel_has_the_slopes_of_the_definition(
            coatings in proptest::collection::vec(proptest::collection::vec(film(), 0..9), 1..4),
            ks in proptest::collection::vec(prop_oneof![2 => Just(0.0), 1 => (-9.0..0.7_f64).prop_map(|k| 10_f64.powf(k))], 4),
            ns in proptest::collection::vec(1.2..3.0_f64, 4),
            angle in 0.0..1.4_f64,
            polarisation in prop_oneof![Just(Polarisation::S), Just(Polarisation::P), Just(Polarisation::Mean)],
            textured in any::<bool>(),
            kind in 0..5_usize,
            chosen in (0..4_usize, any::<bool>()),
        ) {
            let index = |at: usize| Index::constant(ns[at % 4], ks[at % 4]).expect("valid");
            let materials: Vec<Index> = (0..4).map(index).collect();
            let film = |&(at, thickness_nm): &(usize, f64)| {
                let Some(material) = materials.get(at) else {
                    let (front, back) = (materials[0].clone(), materials[1].clone());
                    let (shares, rule, steps) = ((0.0, 1.0), MixingRule::Bruggeman, Steps::Smooth(4));
                    let profile = Profile::Graded(Gradient { front, back, shares, rule, steps });
                    return Film { profile, thickness_nm };
                };
                Film::new(material.clone(), thickness_nm)
            };
            let bodies: Vec<Body> = (1..coatings.len())
                .map(|at| Body { index: materials[at].clone(), thickness_nm: 2e4 * at as f64 })
                .collect();
            let stack = Stack {
                incident: Index::constant(1.0, 0.0).expect("valid"),
                coatings: coatings.iter().map(|films| films.iter().map(film).collect()).collect(),
                bodies,
                exit: materials[3].clone(),
                facets_rad: textured.then_some(0.95),
            };
            let films: Vec<(usize, usize)> = coatings
                .iter()
                .enumerate()
                .flat_map(|(at, films)| (0..films.len()).map(move |film| (at, film)))
                .filter(|(at, film)| (at + film) % 3 != chosen.0)
                .collect();
            let quantity = match kind {
                0 => Quantity::Reflectance,
                1 => Quantity::Transmittance,
                2 => Quantity::Absorptance,
                3 => Quantity::OpticalDensity,
                _ => Quantity::AbsorptanceIn {
                    films,
                    bodies: (0..coatings.len() - 1).filter(|body| body % 2 == chosen.0 % 2).collect(),
                    exit: chosen.1,
                },
            };
            let angle = if textured { 0.0 } else { angle };
            let light = Light::parallel(angle, polarisation);
            let probe = Probe::new(&stack, &quantity, &light).expect("well formed");
            let wavelengths = [417.0, 550.0, 633.0, 1064.0];
            let Ok(found) = in_power(&probe, &wavelengths) else { return Ok(()) };
            for (found, nm) in found.iter().zip(wavelengths) {
                let Ok(defined) = defined(&probe, nm) else { continue };
                // A density beyond nine hangs on digits that neither has.
                // Nor does the definition follow an absorptance that rounding has made less than nothing.
                if quantity == Quantity::OpticalDensity && defined.value > 9.0
                    || quantity == Quantity::Absorptance && defined.value < 1e-12
                {
                    continue;
                }
                let size = if quantity == Quantity::OpticalDensity { 1e3 } else { 1.0 };
                prop_assert!((found.value - defined.value).abs() < 1e-10 * size, "{} {}", found.value, defined.value);
                for (one, other) in found.films.iter().flatten().zip(defined.films.iter().flatten()) {
                    prop_assert!(
                        (one - other).abs() <= 1e-11 * size + 1e-9 * other.abs(),
                        "{nm} {kind}: {:?} {:?}", found.films, defined.films
                    );
                }
            }
        }
    }
}
