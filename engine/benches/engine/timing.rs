//! All variants of a case round by round, and the table of their ratios.

use std::time::Instant;

use overcoat_engine::Vectors;

use crate::{cases, peak};

/// How many rounds there are.
const ROUNDS: usize = 15;
/// Fused multiply-adds of one measurement.
const INSTRUCTIONS: u64 = 3_000_000;

fn seconds(work: impl FnOnce()) -> f64 {
    let start = Instant::now();
    work();
    start.elapsed().as_secs_f64()
}

fn median(mut values: Vec<f64>) -> f64 {
    values.sort_by(f64::total_cmp);
    values[values.len() / 2]
}

/// What one round measures: evaluations a second of the natural formulas, and of the kernel with its ratio and its evaluations
/// per fused multiply-add.
struct Round {
    natural: f64,
    kernels: [(f64, f64, f64); 2],
}

fn round(case: &cases::Case) -> Round {
    let natural_taken = seconds(|| (case.natural)());
    let natural = case.evaluations * case.share / natural_taken;
    let one = |vectors: Vectors| {
        vectors.set();
        // For as long as the natural formulas took: what else the machine does interrupts a long measurement more often than a
        // short one, and would make the ratio too large.
        let once = seconds(|| (case.kernel)());
        let times = (natural_taken / once).round().max(1.0) as usize;
        let taken = seconds(|| (0..times).for_each(|_| (case.kernel)()));
        let speed = case.evaluations * times as f64 / taken;
        let avx2 = vectors == Vectors::Avx2;
        let slots = INSTRUCTIONS as f64 / seconds(|| peak::run(avx2, INSTRUCTIONS));
        (speed, speed / natural, speed / slots)
    };
    Round { natural, kernels: [one(Vectors::Widest), one(Vectors::Avx2)] }
}

/// Measures and prints.
pub(crate) fn table(json: bool) {
    let mut lines = Vec::new();
    if !json {
        println!(
            "Million evaluations (film × wavelength × polarisation) a second, one core; medians of {ROUNDS} rounds.\n"
        );
        println!("case  natural | widest   ratio  per FMA slot |   AVX2   ratio  per FMA slot");
    }
    for name in ["a", "b", "c", "d"] {
        let case = cases::case(name).expect("a case");
        for vectors in [Vectors::Widest, Vectors::Avx2, Vectors::Scalar] {
            vectors.set();
            case.check();
        }
        let rounds: Vec<Round> = (0..ROUNDS).map(|_| round(&case)).collect();
        let of = |part: fn(&Round) -> f64| median(rounds.iter().map(part).collect());
        let natural = of(|round| round.natural);
        let widest = of(|round| round.kernels[0].0);
        let avx2 = of(|round| round.kernels[1].0);
        if json {
            lines.push(format!(
                "{{\"case\":\"{name}\",\"natural\":{natural:.0},\"widest\":{widest:.0},\"avx2\":{avx2:.0}}}"
            ));
            continue;
        }
        println!(
            "{name:4} {:8.1} | {:6.0} {:6.1}× {:13.3} | {:6.0} {:6.1}× {:13.3}   {}",
            natural * 1e-6,
            widest * 1e-6,
            of(|round| round.kernels[0].1),
            of(|round| round.kernels[0].2),
            avx2 * 1e-6,
            of(|round| round.kernels[1].1),
            of(|round| round.kernels[1].2),
            case.what,
        );
    }
    if json {
        println!("[{}]", lines.join(","));
    }
}
