//! A stack at many wavelengths, prepared once for its materials and evaluated again for other thicknesses.

use crate::band::Probe;
use crate::error::OpticsError;
use crate::kernel::{Beam, Points, Program, Row, WIDTH, Wanted};
use crate::plan::Plan;
use crate::response::{Polarisation, Response};
use crate::stack::Stack;

/// A stack under light of one angle of incidence, with the constants of its materials at some wavelengths.
#[derive(Debug)]
pub struct Prepared {
    plan: Plan,
    program: Program,
    points: Points,
    beam: Beam,
    angle_rad: f64,
}

/// R and T of both polarisations at every wavelength.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Spectrum {
    /// R of s and of p.
    pub reflectance: [Vec<f64>; 2],
    /// T of s and of p.
    pub transmittance: [Vec<f64>; 2],
}

impl Prepared {
    /// At vacuum wavelengths in nm and an angle of incidence in rad.
    ///
    /// # Errors
    /// As [`Stack::response`].
    pub fn new(stack: &Stack, wavelengths_nm: &[f64], angle_rad: f64) -> Result<Prepared, OpticsError> {
        let plan = Plan::new(stack)?;
        let points = Points::new(&plan, wavelengths_nm)?;
        let beam = Beam::new(&plan, &points, &[angle_rad])?;
        Ok(Prepared { program: Program::new(&plan), plan, points, beam, angle_rad })
    }

    /// What the stack does to light of one polarisation, by wavelength.
    ///
    /// # Errors
    /// [`OpticsError::NotFinite`] where a resonance is finer than the numbers.
    pub fn responses(&self, polarisation: Polarisation) -> Result<Vec<Response>, OpticsError> {
        let shares = polarisation.shares();
        let modes = Probe::modes(shares);
        let mut responses = Vec::with_capacity(self.points.blocks() * WIDTH);
        self.beam.outcomes(&self.program, &self.points, modes, None, |outcomes| {
            for outcome in outcomes {
                responses.extend((0..WIDTH).map(|lane| {
                    let one = |mode: usize| outcome[mode].response(lane);
                    match *modes {
                        [mode] => one(mode),
                        _ => one(0).zip(one(1)).map(|(s, p)| Response::mean(s, p)),
                    }
                }));
            }
        });
        responses.truncate(self.points.count());
        let of = |(at, response): (usize, Option<Response>)| {
            let (wavelength_nm, angle_rad) = (self.points.wavelength(at), self.angle_rad);
            response.ok_or(OpticsError::NotFinite { wavelength_nm, angle_rad })
        };
        responses.into_iter().enumerate().map(of).collect()
    }

    /// R and T of both polarisations.
    ///
    /// # Errors
    /// [`OpticsError::NotFinite`] where a resonance is finer than the numbers.
    pub fn spectrum(&self) -> Result<Spectrum, OpticsError> {
        let mut spectrum = Spectrum::default();
        let [reflectance, transmittance] = [&mut spectrum.reflectance, &mut spectrum.transmittance];
        for list in reflectance.iter_mut().chain(transmittance.iter_mut()) {
            list.reserve(self.points.blocks() * WIDTH);
        }
        self.beam.outcomes(&self.program, &self.points, &[0, 1], None, |outcomes| {
            for outcome in outcomes {
                for mode in 0..2 {
                    reflectance[mode].extend(outcome[mode].reflectance.0);
                    transmittance[mode].extend(outcome[mode].transmittance());
                }
            }
        });
        for (reflectance, transmittance) in reflectance.iter_mut().zip(transmittance) {
            reflectance.truncate(self.points.count());
            transmittance.truncate(self.points.count());
            let lost = reflectance.iter().zip(&*transmittance).position(|(r, t)| !(r + t).is_finite());
            if let Some(at) = lost {
                let (wavelength_nm, angle_rad) = (self.points.wavelength(at), self.angle_rad);
                return Err(OpticsError::NotFinite { wavelength_nm, angle_rad });
            }
        }
        Ok(spectrum)
    }

    /// The change of the reflectance for unpolarised light with the thickness of every layer at every wavelength, into a list whose
    /// memory is used again.
    pub fn slopes(&self, to: &mut LayerSlopes) {
        let wanted = Wanted { reflectance: 1.0, transmittance: 0.0, absorptance: false, within: None };
        let lists = (&mut to.values, &mut to.slopes);
        self.beam.slopes(&self.program, &self.points, [0.5, 0.5], wanted, lists);
        to.layers = self.plan.coatings.iter().map(Vec::len).sum();
    }
}

/// R with its changes with the thickness of every layer. A film of one material is one layer.
#[derive(Clone, Debug, Default)]
pub struct LayerSlopes {
    layers: usize,
    values: Vec<Row>,
    slopes: Vec<Row>,
}

impl LayerSlopes {
    /// R at a wavelength, by its number.
    pub fn value(&self, wavelength: usize) -> f64 {
        self.values[wavelength / WIDTH].0[wavelength % WIDTH]
    }

    /// The change per nm of a layer, counted over all coatings in the light's order.
    pub fn slope(&self, wavelength: usize, layer: usize) -> f64 {
        self.slopes[wavelength / WIDTH * self.layers + layer].0[wavelength % WIDTH]
    }
}
