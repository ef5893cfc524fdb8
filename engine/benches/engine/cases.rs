//! What is measured: the cases a to d, each as the natural formulas and as the engine's kernels evaluate it.

use std::cell::RefCell;
use std::hint::black_box;

use overcoat_engine::{
    Change, Complex64, Film, Index, LayerSlopes, Light, Polarisation, Prepared, Quantity, Sampler, Stack,
};

use crate::natural::Case as Point;

/// 30°, in rad.
const ANGLE: f64 = std::f64::consts::FRAC_PI_6;

/// One case.
pub(crate) struct Case {
    pub(crate) name: &'static str,
    pub(crate) what: &'static str,
    /// In one run of the kernel.
    pub(crate) evaluations: f64,
    pub(crate) kernel: Box<dyn Fn()>,
    /// The natural formulas, which may do a share of the work only.
    pub(crate) natural: Box<dyn Fn()>,
    pub(crate) share: f64,
    agree: Box<dyn Fn() -> f64>,
}

impl Case {
    /// Both have the same results.
    pub(crate) fn check(&self) {
        let off = (self.agree)();
        assert!(off < 1e-12, "{}: off by {off}", self.name);
    }
}

/// A case by its name.
pub(crate) fn case(name: &str) -> Option<Case> {
    match name {
        "a" => Some(spectrum("a", "40 lossless films, 1 001 wavelengths, R and T", 0.0)),
        "b" => Some(spectrum("b", "the same, all absorbing", 1e-4)),
        "c" => Some(parts()),
        "d" => Some(slopes()),
        _ => None,
    }
}

type Films = Vec<(Complex64, f64)>;

fn design(layers: usize, k: f64) -> Films {
    let indices = [2.35, 1.46, 1.9];
    (0..layers).map(|at| (Complex64::new(indices[at % 3], k), 60.0 + (at * 37 % 61) as f64)).collect()
}

fn stack(films: &[(Complex64, f64)], substrate: Complex64) -> Stack {
    let mut known: Vec<(Complex64, Index)> = Vec::new();
    let mut index = |n: Complex64| {
        if let Some(found) = known.iter().find(|known| known.0 == n) {
            return found.1.clone();
        }
        let index = Index::constant(n.re, n.im).expect("valid");
        known.push((n, index.clone()));
        index
    };
    Stack {
        incident: Index::constant(1.0, 0.0).expect("valid"),
        coatings: vec![films.iter().map(|&(n, nm)| Film::new(index(n), nm)).collect()],
        bodies: vec![],
        exit: index(substrate),
        facets_rad: None,
    }
}

fn visible() -> Vec<f64> {
    (0..1001).map(|at| 400.0 + 0.4 * f64::from(at)).collect()
}

fn spectrum(name: &'static str, what: &'static str, k: f64) -> Case {
    let (films, substrate, wavelengths) = (design(40, k), Complex64::new(1.52, k), visible());
    let prepared = Prepared::new(&stack(&films, substrate), &wavelengths, ANGLE).expect("valid");
    let natural = move || -> Vec<[(f64, f64); 2]> {
        let at = |&wavelength_nm: &f64| {
            let point = Point { wavelength_nm, angle_rad: ANGLE, films: &films, substrate };
            [point.powers(false), point.powers(true)]
        };
        wavelengths.iter().map(at).collect()
    };
    let natural = std::rc::Rc::new(natural);
    let (one, prepared) = (natural.clone(), std::rc::Rc::new(prepared));
    let other = prepared.clone();
    Case {
        name,
        what,
        evaluations: 40.0 * 1001.0 * 2.0,
        kernel: Box::new(move || _ = black_box(prepared.spectrum().expect("finite"))),
        natural: Box::new(move || _ = black_box(natural())),
        share: 1.0,
        agree: Box::new(move || {
            let found = other.spectrum().expect("finite");
            let off = |(at, powers): (usize, &[(f64, f64); 2])| {
                let of = |mode: usize| {
                    let r = (found.reflectance[mode][at] - powers[mode].0).abs();
                    r.max((found.transmittance[mode][at] - powers[mode].1).abs())
                };
                of(0).max(of(1))
            };
            one().iter().enumerate().map(off).fold(0.0, f64::max)
        }),
    }
}

fn slopes() -> Case {
    let (films, substrate, wavelengths) = (design(40, 0.0), Complex64::new(1.52, 0.0), visible());
    let prepared = Prepared::new(&stack(&films, substrate), &wavelengths, ANGLE).expect("valid");
    let prepared = std::rc::Rc::new(prepared);
    let natural = move || -> Vec<Vec<f64>> {
        let at = |&wavelength_nm: &f64| {
            let point = Point { wavelength_nm, angle_rad: ANGLE, films: &films, substrate };
            let (mut s, mut p) = (vec![0.0; films.len()], vec![0.0; films.len()]);
            point.slopes(false, &mut s);
            point.slopes(true, &mut p);
            s.iter().zip(&p).map(|(s, p)| 0.5 * (s + p)).collect()
        };
        wavelengths.iter().map(at).collect()
    };
    let natural = std::rc::Rc::new(natural);
    let (one, other) = (natural.clone(), prepared.clone());
    let memory = RefCell::new(LayerSlopes::default());
    Case {
        name: "d",
        what: "dR/dd of all 40 films at all wavelengths",
        evaluations: 40.0 * 1001.0 * 2.0,
        kernel: Box::new(move || prepared.slopes(black_box(&mut memory.borrow_mut()))),
        natural: Box::new(move || _ = black_box(natural())),
        share: 1.0,
        agree: Box::new(move || {
            let mut found = LayerSlopes::default();
            other.slopes(&mut found);
            let off = |(at, slopes): (usize, &Vec<f64>)| {
                let off = |(film, slope): (usize, &f64)| (found.slope(at, film) - slope).abs();
                slopes.iter().enumerate().map(off).fold(0.0, f64::max)
            };
            one().iter().enumerate().map(off).fold(0.0, f64::max)
        }),
    }
}

/// How the films of a part are off.
fn changes(part: usize) -> Vec<Change> {
    let growth = |film: usize| ((part * 7 + film * 13) % 101) as f64 * 0.02 - 1.0;
    (0..20).map(|film| Change { film: (0, film), growth_nm: growth(film), shift: 0.0 }).collect()
}

/// The mean and the greatest value.
fn summary(values: &[f64]) -> (f64, f64) {
    let mean = values.iter().sum::<f64>() / values.len() as f64;
    (mean, values.iter().copied().fold(0.0, f64::max))
}

fn parts() -> Case {
    const PARTS: usize = 10_000;
    /// The natural formulas take so many of them, for about as long.
    const FEW: usize = 150;
    let (films, substrate) = (design(20, 0.0), Complex64::new(1.52, 0.0));
    let wavelengths: Vec<f64> = (0..301).map(|at| 400.0 + f64::from(at)).collect();
    let light = Light::parallel(ANGLE, Polarisation::Mean);
    let beams = [(light, wavelengths.clone())];
    let sampler =
        Sampler::new(&stack(&films, substrate), &Quantity::Reflectance, &beams, &[]).expect("valid");
    let kernel = move |part: usize| {
        let values = sampler.part(&changes(part)).and_then(|part| part.values(0, &light));
        summary(&values.expect("values"))
    };
    let natural = move |part: usize| {
        let own: Films =
            films.iter().zip(changes(part)).map(|(&(n, nm), change)| (n, nm + change.growth_nm)).collect();
        let at = |&wavelength_nm: &f64| {
            let point = Point { wavelength_nm, angle_rad: ANGLE, films: &own, substrate };
            0.5 * (point.powers(false).0 + point.powers(true).0)
        };
        summary(&wavelengths.iter().map(at).collect::<Vec<f64>>())
    };
    let (kernel, natural) = (std::rc::Rc::new(kernel), std::rc::Rc::new(natural));
    let (one, other) = (kernel.clone(), natural.clone());
    Case {
        name: "c",
        what: "10 000 parts of 20 films, 301 wavelengths, mean and greatest R",
        evaluations: PARTS as f64 * 20.0 * 301.0 * 2.0,
        kernel: Box::new(move || (0..PARTS).for_each(|part| _ = black_box(kernel(part)))),
        natural: Box::new(move || (0..FEW).for_each(|part| _ = black_box(natural(part)))),
        share: FEW as f64 / PARTS as f64,
        agree: Box::new(move || {
            let off = |part: usize| {
                let (a, b) = (one(part), other(part));
                (a.0 - b.0).abs().max((a.1 - b.1).abs())
            };
            (0..3).map(off).fold(0.0, f64::max)
        }),
    }
}
