//! The model's stack as the engine has it, and what the engine says of it in the shop's names.

use super::films;
use crate::finding::{Fact, OpticsFact, Untold, Verdict};
use crate::model::{Element, Material, Requirement, SpectrumKind, Stack, Target, Weighting};
use overcoat_engine::{self as engine, Index, IndexError, OpticsError, Quantity, SpectralWeight};
use std::sync::Arc;

/// A stack that the engine can evaluate.
pub(super) struct Optics {
    /// As the light meets it from the incident side.
    forward: engine::Stack,
    /// As light from the exit side meets it; none where that is inside a textured piece.
    backward: Option<engine::Stack>,
    /// For each element of the model's stack, where the engine has it.
    seats: Vec<Seat>,
    /// The materials with their indices, for messages.
    materials: Vec<Arc<Material>>,
}

/// Where the engine has an element.
#[derive(Clone, Copy)]
enum Seat {
    /// Coating, first film, number of films, and which of them is the layer itself between its rough faces.
    Films(usize, usize, usize, usize),
    Body(usize),
}

/// Every material of a stack, each once, in the light's order.
pub(super) fn materials(stack: &Stack) -> Vec<Arc<Material>> {
    let mut found: Vec<Arc<Material>> = Vec::new();
    let mut add = |material: &Arc<Material>| {
        if !found.iter().any(|other| other.is(material)) {
            found.push(material.clone());
        }
    };
    add(&stack.incident.material);
    for element in &stack.elements {
        match element {
            Element::Layer(layer) => layer.material.materials().for_each(&mut add),
            Element::Body(body) => add(&body.material),
        }
    }
    add(&stack.exit.material);
    found
}

impl Optics {
    /// The engine's stack, its graded films integrated for light of some bands in nm and up to an angle in rad; none where a
    /// material has no index, which has been reported.
    ///
    /// # Errors
    /// A graded film that can't be integrated.
    pub(super) fn new(
        stack: &Stack,
        bands: &[(f64, f64)],
        angle: f64,
    ) -> Result<Option<Optics>, OpticsError> {
        let Some((forward, seats)) = engine_stack(stack) else { return Ok(None) };
        let bands = within_data(&forward, bands);
        let forward = forward.settled(&bands, angle)?;
        Ok(Some(Optics { backward: forward.reversed(), forward, seats, materials: materials(stack) }))
    }

    /// The stack as light from the incident side meets it.
    pub(super) fn forward(&self) -> &engine::Stack {
        &self.forward
    }

    /// The stack as the light of a requirement meets it.
    pub(super) fn facing(&self, from_exit: bool) -> Option<&engine::Stack> {
        if from_exit { self.backward.as_ref() } else { Some(&self.forward) }
    }

    /// The films, bodies and half-space that a name stands for, as the engine counts them; none where it stands for
    /// nothing in this stack.
    pub(super) fn target(&self, stack: &Stack, target: &Target, from_exit: bool) -> Option<Quantity> {
        let named = |name: &Option<String>| {
            // `flash` is every copy of that layer, `flash[3]` the third.
            let base = name.as_ref().map(|name| name.split('[').next().unwrap_or(name));
            base == Some(target.name.as_str()) || name.as_ref() == Some(&target.name)
        };
        let by_name = stack.layers().any(|layer| named(&layer.name));
        let chosen = |element: &Element| match element {
            Element::Layer(layer) if by_name => named(&layer.name),
            Element::Layer(layer) => layer
                .material
                .materials()
                .any(|material| target.material.as_ref().is_some_and(|of| of.is(material))),
            Element::Body(body) => {
                !by_name && target.material.as_ref().is_some_and(|of| of.is(&body.material))
            }
        };
        let (mut films, mut bodies) = (Vec::new(), Vec::new());
        for (element, seat) in stack.elements.iter().zip(&self.seats) {
            if chosen(element) {
                match *seat {
                    Seat::Films(coating, first, count, _) if from_exit => {
                        let last = self.forward.coatings.len() - 1;
                        let end = self.forward.coatings[coating].len() - 1;
                        films.extend((first..first + count).map(|film| (last - coating, end - film)));
                    }
                    Seat::Films(coating, first, count, _) => {
                        films.extend((first..first + count).map(|film| (coating, film)));
                    }
                    Seat::Body(body) if from_exit => bodies.push(self.forward.bodies.len() - 1 - body),
                    Seat::Body(body) => bodies.push(body),
                }
            }
        }
        let behind = if from_exit { &stack.incident.material } else { &stack.exit.material };
        let exit = !by_name && target.material.as_ref().is_some_and(|of| of.is(behind));
        let nothing = films.is_empty() && bodies.is_empty() && !exit;
        (!nothing).then_some(Quantity::AbsorptanceIn { films, bodies, exit })
    }

    /// The element of the model's stack that a film of the first coating belongs to, as the light of a requirement counts.
    pub(super) fn element_of(&self, film: usize, from_exit: bool) -> Option<usize> {
        let coatings = &self.forward.coatings;
        let (wanted, film) = if from_exit {
            let last = coatings.len() - 1;
            (last, (coatings[last].len() - 1).checked_sub(film)?)
        } else {
            (0, film)
        };
        self.seats.iter().position(|seat| {
            matches!(*seat, Seat::Films(coating, first, count, _) if coating == wanted && (first..first + count).contains(&film))
        })
    }

    /// The film that is a layer itself, for an element of the model's stack: coating and film, as the light of a requirement
    /// counts.
    pub(super) fn film_of(&self, element: usize, from_exit: bool) -> Option<(usize, usize)> {
        let Some(Seat::Films(coating, _, _, film)) = self.seats.get(element).copied() else { return None };
        if !from_exit {
            return Some((coating, film));
        }
        let coatings = &self.forward.coatings;
        Some((coatings.len() - 1 - coating, coatings[coating].len() - 1 - film))
    }

    /// The materials, for messages.
    pub(super) fn materials(&self) -> &[Arc<Material>] {
        &self.materials
    }

    /// The materials without constants somewhere in a band, nm.
    pub(super) fn gaps(&self, band: (f64, f64)) -> Vec<OpticsFact> {
        let mut gaps = Vec::new();
        for material in &self.materials {
            let range = material.index.as_ref().and_then(Index::range_nm);
            if let Some(range) = range.filter(|range| band.0 < range.0 || band.1 > range.1) {
                gaps.push(OpticsFact::OutsideData {
                    name: material.name.clone(),
                    defined: material.place,
                    asked: band,
                    range,
                });
            }
        }
        gaps
    }
}

/// What the engine's error means in the shop's names.
pub(super) fn explain(
    error: &OpticsError,
    materials: &[Arc<Material>],
    requirement: &Requirement,
    stack: &Stack,
) -> Trouble {
    let spectrum = requirement.under.as_ref().map(|under| &under.spectrum);
    match error {
        OpticsError::Material { index, cause } => {
            let is =
                |material: &&Arc<Material>| material.index.as_ref().is_some_and(|own| own.same_as(index));
            let (name, defined) = match materials.iter().find(is) {
                Some(material) => (material.name.clone(), material.place),
                None => ("a material".to_owned(), stack.place),
            };
            Trouble::Fact(Box::new(Fact::Optics(match *cause {
                IndexError::Outside { wavelength_nm, range_nm } => {
                    let asked = (wavelength_nm, wavelength_nm);
                    OpticsFact::OutsideData { name, defined, asked, range: range_nm }
                }
                IndexError::NotPhysical { wavelength_nm, n, k } => {
                    OpticsFact::NotPhysical { name, defined, wavelength: wavelength_nm, nk: Some((n, k)) }
                }
                IndexError::NotFinite { wavelength_nm } | IndexError::Wavelength { wavelength_nm } => {
                    OpticsFact::NotPhysical { name, defined, wavelength: wavelength_nm, nk: None }
                }
            })))
        }
        OpticsError::AbsorbingIncident { wavelength_nm, k } => {
            let medium = if requirement.from_exit { &stack.exit } else { &stack.incident };
            Trouble::Verdict(Verdict::AbsorbingIncident {
                material: medium.material.name.clone(),
                k: *k,
                wavelength: *wavelength_nm,
                place: medium.place,
            })
        }
        OpticsError::WeightOutside { band_nm, range_nm } => Trouble::Verdict(match spectrum {
            Some(spectrum) => Verdict::SpectrumOutside {
                name: spectrum.name.clone(),
                defined: spectrum.place,
                asked: *band_nm,
                range: *range_nm,
            },
            None => not_settled(f64::INFINITY, band_nm.0),
        }),
        OpticsError::WeightZero { band_nm } => Trouble::Verdict(Verdict::SpectrumDark {
            name: spectrum.map_or(String::new(), |spectrum| spectrum.name.clone()),
            asked: *band_nm,
        }),
        OpticsError::NotConverged { estimate, error, wavelength_nm } => {
            Trouble::Verdict(Verdict::NotConverged {
                estimate: *estimate,
                error: *error,
                wavelength: *wavelength_nm,
            })
        }
        OpticsError::Textured { .. } => Trouble::Verdict(Verdict::Textured(Untold::Tilted)),
        OpticsError::NoPhase { .. } | OpticsError::NoField { .. } if stack.exit.textured.is_some() => {
            Trouble::Verdict(Verdict::Textured(Untold::Waves))
        }
        OpticsError::NoPhase { why } | OpticsError::NoField { why } => {
            Trouble::Verdict(Verdict::Meaningless { why })
        }
        OpticsError::Dark { wavelength_nm } => {
            Trouble::Verdict(Verdict::NoLight { wavelength: Some(*wavelength_nm) })
        }
        OpticsError::NotFinite { wavelength_nm, .. } => {
            Trouble::Verdict(not_settled(f64::INFINITY, *wavelength_nm))
        }
        _ => {
            let start =
                requirement.bands.first().map(|band| band.0).or(requirement.wavelengths.first().copied());
            Trouble::Verdict(not_settled(f64::INFINITY, start.unwrap_or(0.0)))
        }
    }
}

fn not_settled(error: f64, wavelength: f64) -> Verdict {
    Verdict::NotConverged { estimate: 0.0, error, wavelength }
}

/// The engine's stack and where it has every element; none where a material has no index.
fn engine_stack(stack: &Stack) -> Option<(engine::Stack, Vec<Seat>)> {
    let mut coatings: Vec<Vec<engine::Film>> = vec![Vec::new()];
    let mut bodies = Vec::new();
    let mut seats = Vec::with_capacity(stack.elements.len());
    for (element, pieces) in stack.elements.iter().zip(films::pieces(stack)?) {
        match element {
            Element::Layer(_) => {
                let coating = coatings.len() - 1;
                let first = coatings[coating].len();
                seats.push(Seat::Films(coating, first, pieces.films.len(), first + pieces.core));
                coatings[coating].extend(pieces.films);
            }
            Element::Body(body) => {
                seats.push(Seat::Body(bodies.len()));
                let index = body.material.index.clone()?;
                bodies.push(engine::Body { index, thickness_nm: body.thickness });
                coatings.push(Vec::new());
            }
        }
    }
    let incident = stack.incident.material.index.clone()?;
    let exit = stack.exit.material.index.clone()?;
    let facets_rad = stack.exit.textured.map(|(angle, _)| angle);
    Some((engine::Stack { incident, coatings, bodies, exit, facets_rad }, seats))
}

/// The bands as far as all materials have data: what lies beyond is told where it is asked for.
fn within_data(stack: &engine::Stack, bands: &[(f64, f64)]) -> Vec<(f64, f64)> {
    let data = stack.range_nm().unwrap_or((0.0, f64::INFINITY));
    let cut = |band: &(f64, f64)| (band.0.max(data.0), band.1.min(data.1));
    bands.iter().map(cut).filter(|band| band.0 <= band.1).collect()
}

/// Why a requirement has no value.
#[derive(Clone, Debug)]
pub(super) enum Trouble {
    /// A fact about materials.
    Fact(Box<Fact>),
    /// A fact about the requirement.
    Verdict(Verdict),
}

/// The engine's weight of a requirement.
pub(super) fn weight(under: Option<&Weighting>) -> Option<SpectralWeight> {
    let Some(under) = under else { return Some(SpectralWeight::constant()) };
    let weight = of_spectrum(under.spectrum.kind.as_ref()?)?;
    Some(if under.photons { weight.photons() } else { weight })
}

fn of_spectrum(kind: &SpectrumKind) -> Option<SpectralWeight> {
    match kind {
        SpectrumKind::Table(rows) => SpectralWeight::table(rows).ok(),
        SpectrumKind::Blackbody(kelvin) => SpectralWeight::blackbody(*kelvin).ok(),
        SpectrumKind::Product(factors) => {
            let factors: Option<Vec<SpectralWeight>> =
                factors.iter().map(|factor| of_spectrum(factor.kind.as_ref()?)).collect();
            SpectralWeight::product(&factors?).ok()
        }
    }
}
