//! How fast the kernels are, as ratios to the formulas as one first writes them down: `cargo bench -p overcoat-engine`.
//!
//! Every variant of a case runs once in each round, so that a busy machine slows all of them alike; told is the median of the
//! rounds' ratios. An evaluation is one film at one wavelength for one polarisation. `-- --json` prints the numbers for
//! `tests/reference/speed.py`, and `-- --count CASE TIMES` runs one case so many times under AVX2, for counting instructions.

#![expect(clippy::print_stdout, clippy::print_stderr, reason = "a benchmark prints its table")]

#[path = "engine/cases.rs"]
mod cases;
#[path = "engine/natural.rs"]
mod natural;
#[path = "engine/peak.rs"]
mod peak;
#[path = "engine/timing.rs"]
mod timing;

use overcoat_engine::Vectors;

fn main() {
    let arguments: Vec<String> = std::env::args().skip(1).filter(|argument| argument != "--bench").collect();
    let words: Vec<&str> = arguments.iter().map(String::as_str).collect();
    match words[..] {
        [] => timing::table(false),
        ["--json"] => timing::table(true),
        ["--count", case, times] => {
            Vectors::Avx2.set();
            let case = cases::case(case).expect("a case: a, b, c or d");
            case.check();
            for _ in 0..times.parse().expect("how often") {
                (case.kernel)();
            }
            println!("{}", case.evaluations);
        }
        _ => eprintln!("no arguments, or --json, or --count CASE TIMES"),
    }
}
