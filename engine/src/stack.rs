//! A stack: films and thick bodies between two half-spaces.

use crate::dispersion::Index;
use crate::error::OpticsError;
use crate::graded::Profile;
use crate::plan::Plan;
use crate::response::{Absorption, Polarisation, Response};

/// A film, thin enough that the waves reflected at its two faces interfere.
#[derive(Clone, Debug)]
pub struct Film {
    /// What it is made of.
    pub profile: Profile,
    /// Its thickness, nm.
    pub thickness_nm: f64,
}

impl Film {
    /// A film of one material, with its thickness in nm.
    pub fn new(index: Index, thickness_nm: f64) -> Film {
        Film { profile: Profile::Uniform(index), thickness_nm }
    }
}

/// A body so thick that the light reflected at its two faces adds in power, not in amplitude.
#[derive(Clone, Debug)]
pub struct Body {
    /// Its optical constants.
    pub index: Index,
    /// Its thickness, nm.
    pub thickness_nm: f64,
}

/// Films on the faces of any number of thick bodies, between the half-space that the light comes from and
/// the one that it leaves by. Everything is in the order the light meets it.
///
/// ```
/// use overcoat_engine::{Film, Index, Polarisation, Stack};
/// let air = Index::constant(1.0, 0.0).unwrap();
/// let film = Film::new(Index::constant(1.38, 0.0).unwrap(), 550.0 / 4.0 / 1.38);
/// let glass = Index::constant(1.52, 0.0).unwrap();
/// let stack = Stack { incident: air, coatings: vec![vec![film]], bodies: vec![], exit: glass, facets_rad: None };
/// let response = stack.response(550.0, 0.0, Polarisation::Mean).unwrap();
/// assert!((response.reflectance - 0.0126).abs() < 1e-5);
/// ```
#[derive(Clone, Debug)]
pub struct Stack {
    /// The half-space that the light comes from. It must not absorb.
    pub incident: Index,
    /// The films on each face, possibly none: one more coating than there are bodies.
    pub coatings: Vec<Vec<Film>>,
    /// The thick bodies.
    pub bodies: Vec<Body>,
    /// The half-space behind. Light that enters it counts as transmitted.
    pub exit: Index,
    /// The facets' angle, rad, where the exit half-space is textured with upright pyramids.
    pub facets_rad: Option<f64>,
}

impl Stack {
    /// The same part with the light from the other side; none where it would come from inside a textured piece.
    pub fn reversed(&self) -> Option<Stack> {
        let turned = |film: &Film| Film { profile: film.profile.reversed(), ..film.clone() };
        self.facets_rad.is_none().then(|| Stack {
            incident: self.exit.clone(),
            coatings: self
                .coatings
                .iter()
                .rev()
                .map(|films| films.iter().rev().map(turned).collect())
                .collect(),
            bodies: self.bodies.iter().rev().cloned().collect(),
            exit: self.incident.clone(),
            facets_rad: None,
        })
    }

    /// Reflectance, transmittance and absorptance at a vacuum wavelength in nm and an angle of incidence in
    /// rad, as fractions of the incident power.
    ///
    /// # Errors
    /// A stack that is not well formed, a material without constants there, an incident medium that absorbs,
    /// an angle that is not from 0 to below 90°.
    pub fn response(
        &self,
        wavelength_nm: f64,
        angle_rad: f64,
        polarisation: Polarisation,
    ) -> Result<Response, OpticsError> {
        Plan::new(self)?.response(wavelength_nm, angle_rad, polarisation)
    }

    /// The same with the absorptance of every film and body for itself: the difference of the normal
    /// component of Poynting's vector at its two faces. The sum with R and T is 1 to 1e-12.
    ///
    /// # Errors
    /// As [`Stack::response`].
    pub fn absorption(
        &self,
        wavelength_nm: f64,
        angle_rad: f64,
        polarisation: Polarisation,
    ) -> Result<Absorption, OpticsError> {
        Plan::new(self)?.absorption(wavelength_nm, angle_rad, polarisation)
    }

    /// The range of vacuum wavelengths in nm over which all materials of the stack have constants; `None` is
    /// everywhere.
    pub fn range_nm(&self) -> Option<(f64, f64)> {
        self.materials().filter_map(Index::range_nm).reduce(|a, b| (a.0.max(b.0), a.1.min(b.1)))
    }

    /// Every material, in the light's order, repeated as often as it is used.
    pub fn materials(&self) -> impl Iterator<Item = &Index> {
        let films = self.coatings.iter().flatten().flat_map(|film| film.profile.materials());
        let bodies = self.bodies.iter().map(|body| &body.index);
        std::iter::once(&self.incident).chain(films).chain(bodies).chain(std::iter::once(&self.exit))
    }
}
