//! How fast the kernels are, as ratios to the formulas as one first writes them down: `cargo bench -p overcoat-engine`.
#[path = "engine/natural.rs"]
mod natural;

use std::hint::black_box;
use std::time::Instant;

use natural::Case;
use overcoat_engine::{
    Change, Complex64, Film, Index, Light, Polarisation, Prepared, Quantity, Sampler, Stack,
};

fn design(layers: usize, k: f64) -> Vec<(Complex64, f64)> {
    let indices = [2.35, 1.46, 1.9];
    (0..layers)
        .map(|at| (Complex64::new(indices[at % 3], k), 60.0 + (at * 37 % 61) as f64))
        .collect()
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

fn time(mut work: impl FnMut(), rounds: usize) -> f64 {
    let mut all: Vec<f64> = (0..rounds)
        .map(|_| {
            let start = Instant::now();
            work();
            start.elapsed().as_secs_f64()
        })
        .collect();
    all.sort_by(f64::total_cmp);
    all[rounds / 2]
}

fn main() {
    let angle_rad = 30_f64.to_radians();
    let wavelengths: Vec<f64> = (0..1001).map(|at| 400.0 + 0.4 * f64::from(at)).collect();
    for (name, k) in [("a", 0.0), ("b", 1e-4)] {
        let films = design(40, k);
        let substrate = Complex64::new(1.52, k);
        let prepared = Prepared::new(&stack(&films, substrate), &wavelengths, angle_rad).expect("valid");
        if std::env::var("ONLY").is_ok_and(|only| only == name) {
            for _ in 0..20000 { black_box(prepared.spectrum().expect("finite")); }
            return;
        }
        let natural = time(
            || {
                for &wavelength_nm in &wavelengths {
                    let case = Case { wavelength_nm, angle_rad, films: &films, substrate };
                    black_box((case.powers(false), case.powers(true)));
                }
            },
            15,
        );
        let own = time(|| _ = black_box(prepared.spectrum().expect("finite")), 301);
        println!("{name}: natural {:.1} M/s, kernel {:.0} M/s, ratio {:.1}", 80080e-6 / natural, 80080e-6 / own, natural / own);
        if k == 0.0 {
            let natural = time(
                || {
                    let mut to = vec![0.0; films.len()];
                    for &wavelength_nm in &wavelengths {
                        let case = Case { wavelength_nm, angle_rad, films: &films, substrate };
                        black_box((case.slopes(false, &mut to), case.slopes(true, &mut to)));
                    }
                },
                15,
            );
            let mut slopes = overcoat_engine::LayerSlopes::default();
            let own = time(|| prepared.slopes(black_box(&mut slopes)), 301);
            println!("d: natural {:.1} M/s, kernel {:.0} M/s, ratio {:.1}", 80080e-6 / natural, 80080e-6 / own, natural / own);
        }
    }
    let films = design(20, 0.0);
    let wavelengths: Vec<f64> = (0..301).map(|at| 400.0 + f64::from(at)).collect();
    let light = Light::parallel(angle_rad, Polarisation::Mean);
    let stack = stack(&films, Complex64::new(1.52, 0.0));
    let sampler =
        Sampler::new(&stack, &Quantity::Reflectance, &[(light, wavelengths.clone())], &[]).expect("valid");
    let change = |part: usize, film: usize| Change {
        film: (0, film),
        growth_nm: ((part * 7 + film * 13) % 101) as f64 * 0.02 - 1.0,
        shift: 0.0,
    };
    let parts = 1000;
    let own = time(
        || {
            for part in 0..parts {
                let changes: Vec<Change> = (0..20).map(|film| change(part, film)).collect();
                let values = sampler.part(&changes).and_then(|part| part.values(0, &light)).expect("values");
                let mean = values.iter().sum::<f64>() / values.len() as f64;
                black_box((mean, values.iter().copied().fold(0.0, f64::max)));
            }
        },
        21,
    );
    let natural = time(
        || {
            for part in 0..20 {
                let own: Vec<(Complex64, f64)> = films
                    .iter()
                    .enumerate()
                    .map(|(film, &(n, nm))| (n, nm + change(part, film).growth_nm))
                    .collect();
                for &wavelength_nm in &wavelengths {
                    let case = Case { wavelength_nm, angle_rad, films: &own, substrate: Complex64::new(1.52, 0.0) };
                    black_box((case.powers(false), case.powers(true)));
                }
            }
        },
        5,
    ) / 20.0
        * parts as f64;
    let evaluations = parts as f64 * 20.0 * 301.0 * 2.0 * 1e-6;
    println!("c: natural {:.1} M/s, kernel {:.0} M/s, ratio {:.1}", evaluations / natural, evaluations / own, natural / own);
}
