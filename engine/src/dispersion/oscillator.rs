//! Permittivity as a sum of oscillators: Lorentz, Drude, Tauc–Lorentz.

use num_complex::Complex64;

use super::model::Model;
use super::{Index, check, ev_to_nm, tauc_lorentz};
use crate::error::ModelError;
use crate::kernel::WIDTH;
use crate::number::Number;

/// One term of a permittivity. Energies in eV.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Oscillator {
    /// f E₀²/(E₀² − E² − iΓE). Source: H. A. Lorentz, *The Theory of Electrons* (1909).
    Lorentz {
        /// f, the oscillator's share of the static permittivity.
        strength: f64,
        /// E₀.
        centre_ev: f64,
        /// Γ, the full width.
        width_ev: f64,
    },
    /// −Ep²/(E² + iΓE). Source: P. Drude, Ann. Phys. 306, 566 (1900).
    Drude {
        /// Ep, the unscreened plasma energy.
        plasma_ev: f64,
        /// Γ, the damping.
        width_ev: f64,
    },
    /// An amorphous semiconductor's interband absorption above its gap, with the real part that
    /// Kramers–Kronig demands. Source: G. E. Jellison and F. A. Modine, Appl. Phys. Lett. 69, 371 (1996),
    /// with the erratum 69, 2137 (1996).
    TaucLorentz {
        /// A.
        strength_ev: f64,
        /// E₀.
        centre_ev: f64,
        /// C, the full width.
        width_ev: f64,
        /// Eg, below which nothing is absorbed.
        gap_ev: f64,
    },
}

impl Index {
    /// ε = ε∞ + Σ of the oscillators, N = √ε with k ≥ 0.
    ///
    /// # Errors
    /// A parameter that is not a number; ε∞ < 0; strengths or widths below 0; centres not above 0; a
    /// Tauc–Lorentz width or centre that is not above 0, or its gap below 0.
    pub fn oscillators(eps_inf: f64, terms: Vec<Oscillator>) -> Result<Index, ModelError> {
        check("ε∞", eps_inf, eps_inf >= 0.0, "0 or above")?;
        let (mut knots, mut lines) = (Vec::new(), Vec::new());
        for term in &terms {
            match *term {
                Oscillator::Lorentz { strength, centre_ev, width_ev } => {
                    check("the strength of a Lorentz oscillator", strength, strength >= 0.0, "0 or above")?;
                    check("the centre of a Lorentz oscillator", centre_ev, centre_ev > 0.0, "above 0 eV")?;
                    check("the width of a Lorentz oscillator", width_ev, width_ev >= 0.0, "0 eV or above")?;
                    let centre = ev_to_nm(centre_ev);
                    lines.push((centre, 0.5 * centre * width_ev / centre_ev));
                }
                Oscillator::Drude { plasma_ev, width_ev } => {
                    check("the plasma energy of a Drude term", plasma_ev, plasma_ev >= 0.0, "0 eV or above")?;
                    check("the width of a Drude term", width_ev, width_ev >= 0.0, "0 eV or above")?;
                }
                Oscillator::TaucLorentz { strength_ev, centre_ev, width_ev, gap_ev } => {
                    let must = "above 0 eV";
                    check(
                        "the strength of a Tauc–Lorentz term",
                        strength_ev,
                        strength_ev >= 0.0,
                        "0 eV or above",
                    )?;
                    check("the centre of a Tauc–Lorentz term", centre_ev, centre_ev > 0.0, must)?;
                    check("the width of a Tauc–Lorentz term", width_ev, width_ev > 0.0, must)?;
                    check("the gap of a Tauc–Lorentz term", gap_ev, gap_ev >= 0.0, "0 eV or above")?;
                    if gap_ev > 0.0 {
                        knots.push(ev_to_nm(gap_ev));
                    }
                    let centre = ev_to_nm(centre_ev);
                    lines.push((centre, 0.5 * centre * width_ev / centre_ev));
                }
            }
        }
        knots.sort_by(f64::total_cmp);
        Ok(Index::basic(Model::Oscillators { eps_inf, terms }, None, knots, lines))
    }
}

/// ε at a photon energy in eV.
pub(super) fn permittivity<N: Number>(eps_inf: f64, terms: &[Oscillator], energy_ev: &N) -> N {
    let square = energy_ev.clone() * energy_ev.clone();
    let damping = |width: f64| N::constant(Complex64::new(0.0, width)) * energy_ev.clone();
    let term = |term: &Oscillator| match *term {
        Oscillator::Lorentz { strength, centre_ev, width_ev } => {
            let centre = centre_ev * centre_ev;
            N::real(strength * centre) / (N::real(centre) - square.clone() - damping(width_ev))
        }
        Oscillator::Drude { plasma_ev, width_ev } => {
            -(N::real(plasma_ev * plasma_ev) / (square.clone() + damping(width_ev)))
        }
        Oscillator::TaucLorentz { strength_ev, centre_ev, width_ev, gap_ev } => {
            tauc_lorentz::permittivity(strength_ev, centre_ev, width_ev, gap_ev, energy_ev)
        }
    };
    terms.iter().map(term).fold(N::real(eps_inf), |sum, part| sum + part)
}

/// The same at several photon energies in eV, its real and its imaginary parts; `None` with a Tauc–Lorentz term.
pub(super) fn permittivity_all(
    eps_inf: f64,
    terms: &[Oscillator],
    energies_ev: &[f64; WIDTH],
) -> Option<[[f64; WIDTH]; 2]> {
    let (mut re, mut im) = ([eps_inf; WIDTH], [0.0; WIDTH]);
    for term in terms {
        // Both are s/(c − E² − iΓE); Drude's has its centre at no energy.
        let (strength, centre, width) = match *term {
            Oscillator::Lorentz { strength, centre_ev, width_ev } => {
                let centre = centre_ev * centre_ev;
                (strength * centre, centre, width_ev)
            }
            Oscillator::Drude { plasma_ev, width_ev } => (plasma_ev * plasma_ev, 0.0, width_ev),
            Oscillator::TaucLorentz { .. } => return None,
        };
        for lane in 0..WIDTH {
            let energy = energies_ev[lane];
            let (off, damping) = (centre - energy * energy, width * energy);
            let size = off * off + damping * damping;
            re[lane] += strength * off / size;
            im[lane] += strength * damping / size;
        }
    }
    Some([re, im])
}
