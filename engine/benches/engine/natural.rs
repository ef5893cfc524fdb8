//! The formulas as one first writes them down: complex 2×2 matrices, one wavelength and one polarisation at a time.

use std::f64::consts::TAU;

use overcoat_engine::Complex64;

const I: Complex64 = Complex64::new(0.0, 1.0);
const ONE: Complex64 = Complex64::new(1.0, 0.0);

type Matrix = [[Complex64; 2]; 2];

/// Light from vacuum at an angle onto films, each with its index and thickness in nm, on a substrate.
pub(crate) struct Case<'a> {
    pub(crate) wavelength_nm: f64,
    pub(crate) angle_rad: f64,
    pub(crate) films: &'a [(Complex64, f64)],
    pub(crate) substrate: Complex64,
}

fn times(a: &Matrix, b: &Matrix) -> Matrix {
    let mut product = [[Complex64::ZERO; 2]; 2];
    for row in 0..2 {
        for column in 0..2 {
            product[row][column] = a[row][0] * b[0][column] + a[row][1] * b[1][column];
        }
    }
    product
}

/// A medium as light of one polarisation meets it.
struct Medium {
    /// The phase that a thickness of 1 nm adds.
    rate: Complex64,
    admittance: Complex64,
}

impl Medium {
    fn matrix(&self, thickness_nm: f64) -> Matrix {
        let phase = self.rate * thickness_nm;
        let (sine, cosine) = (phase.sin(), phase.cos());
        [[cosine, -I * sine / self.admittance], [-I * self.admittance * sine, cosine]]
    }
}

impl Case<'_> {
    /// The cosine is the dearest number of all: it is worked out once for each medium and polarisation, as anyone would.
    fn medium(&self, index: Complex64, sine: f64, p: bool) -> Medium {
        let inside = sine / index;
        let cosine = (ONE - inside * inside).sqrt();
        let admittance = if p { index / cosine } else { index * cosine };
        Medium { rate: TAU * index * cosine / self.wavelength_nm, admittance }
    }

    /// The admittances of the media before and behind the films.
    fn sides(&self, sine: f64, p: bool) -> (Complex64, Complex64) {
        (self.medium(ONE, sine, p).admittance, self.medium(self.substrate, sine, p).admittance)
    }

    /// R and T of one polarisation.
    pub(crate) fn powers(&self, p: bool) -> (f64, f64) {
        let sine = self.angle_rad.sin();
        let mut whole = [[ONE, Complex64::ZERO], [Complex64::ZERO, ONE]];
        for &(index, thickness_nm) in self.films {
            whole = times(&whole, &self.medium(index, sine, p).matrix(thickness_nm));
        }
        let (before, behind) = self.sides(sine, p);
        let b = whole[0][0] + whole[0][1] * behind;
        let c = whole[1][0] + whole[1][1] * behind;
        let r = (before * b - c) / (before * b + c);
        let t = 4.0 * before.re * behind.re / (before * b + c).norm_sqr();
        (r.norm_sqr(), t)
    }

    /// R of one polarisation and its change with every thickness, per nm: products from the front, fields from behind.
    pub(crate) fn slopes(&self, p: bool, to: &mut [f64]) -> f64 {
        let sine = self.angle_rad.sin();
        let (before, behind) = self.sides(sine, p);
        let film = |&(index, thickness_nm): &(Complex64, f64)| {
            let medium = self.medium(index, sine, p);
            let matrix = medium.matrix(thickness_nm);
            (medium, matrix)
        };
        let films: Vec<(Medium, Matrix)> = self.films.iter().map(film).collect();
        let mut fields = vec![[ONE, behind]; films.len() + 1];
        for (at, (_, m)) in films.iter().enumerate().rev() {
            let [b, c] = fields[at + 1];
            fields[at] = [m[0][0] * b + m[0][1] * c, m[1][0] * b + m[1][1] * c];
        }
        let [b, c] = fields[0];
        let (n, d) = (before * b - c, before * b + c);
        let r = n / d;
        let mut front = [[ONE, Complex64::ZERO], [Complex64::ZERO, ONE]];
        for (at, (Medium { rate, admittance }, matrix)) in films.iter().enumerate() {
            let [b, c] = fields[at];
            let (db, dc) = (-I * rate * c / admittance, -I * rate * admittance * b);
            let (db, dc) = (front[0][0] * db + front[0][1] * dc, front[1][0] * db + front[1][1] * dc);
            let (dn, dd) = (before * db - dc, before * db + dc);
            to[at] = 2.0 * (r.conj() * (dn - r * dd) / d).re;
            front = times(&front, matrix);
        }
        r.norm_sqr()
    }
}
