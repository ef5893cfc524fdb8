//! The definition of the slopes of a quantity in power: every layer's own derivative carried through the whole chain, one wavelength
//! at a time. The kernel is tested against it.

use std::f64::consts::{LN_10, TAU};

use num_complex::Complex64;
use proptest::prelude::*;

use crate::adjoint::Passage;
use crate::band::Probe;
use crate::bodies::{Chain, Link};
use crate::coating::{Detail, Powers};
use crate::dispersion::{Index, MixingRule};
use crate::error::OpticsError;
use crate::facets;
use crate::graded::{Gradient, Profile, Steps};
use crate::matrix::Mode;
use crate::quantity::{Light, Quantity};
use crate::real::{Real, Slope};
use crate::response::Polarisation;
use crate::slopes::{Slopes, in_power};
use crate::stack::{Body, Film, Stack};
use crate::tilted::{Face, Side, Tilted};

fn add(sum: &mut Slopes, share: f64, other: &Slopes) {
    sum.value += share * other.value;
    for (mine, others) in sum.films.iter_mut().flatten().zip(other.films.iter().flatten()) {
        *mine += share * others;
    }
}

/// A quantity that adds up in power with its derivatives, at one wavelength.
fn defined(probe: &Probe<'_>, wavelength_nm: f64) -> Result<Slopes, OpticsError> {
    let plan = &*probe.plan;
    let indices = plan.indices(wavelength_nm)?;
    let mut sum = Slopes::zero(plan);
    for (angle_rad, shares) in probe.all_rays() {
        let tilted = plan.tilted(&indices, wavelength_nm, angle_rad)?;
        for (mode, share) in [Mode::S, Mode::P].into_iter().zip(shares) {
            if share != 0.0 {
                add(&mut sum, share, &of_mode(&tilted, probe.quantity, mode)?);
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
