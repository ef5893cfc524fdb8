//! How many parts pass: against closed formulas, the same whatever the layout and the threads, and as strict as the recipe.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::diagnostic::Diagnostic;
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::model::Requirement;
use overcoat_lang::report::{Column, Part, Report, Watch, YieldReport};
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load, simulate};
use std::f64::consts::PI;
use std::sync::Arc;

const MATERIALS: &str = "material film { source \"x\" index 2.0 }\nmaterial low { source \"x\" index 1.46 }\n\
     material crown { source \"x\" index 1.52 }\nmaterial dense { source \"x\" index 3.0 }\n\
     material grey { source \"x\" index 2.0 k 0.02 }\n";

fn report(text: &str) -> Report {
    let mut files = MemoryFiles::new();
    files.insert("main.coat", text.to_owned());
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    let options =
        Options { today, asked: None, remedies: true, yields: true, parts: None, whole_project: true };
    check(load(&files, &["main.coat".to_owned()]), &options)
}

/// Every part of a simulation.
#[derive(Default)]
struct Everything {
    columns: Vec<Column>,
    parts: Vec<Part>,
}

impl Watch for Everything {
    fn begin(&mut self, columns: &[Column], _: &[Arc<Requirement>], _: u32) {
        self.columns = columns.to_vec();
    }

    fn part(&mut self, part: &Part) -> bool {
        self.parts.push(part.clone());
        true
    }
}

fn simulated(text: &str, parts: u32) -> (YieldReport, Everything) {
    let mut files = MemoryFiles::new();
    files.insert("main.coat", format!("{MATERIALS}{text}"));
    let project = load(&files, &["main.coat".to_owned()]);
    let mut all = Everything::default();
    let recipe = project.modules[0].recipes[0].clone();
    let found = simulate(&recipe, Some(parts), &mut all).unwrap();
    (found, all)
}

/// Φ(x) by the series of its density (Abramowitz and Stegun, 26.2.10).
fn normal(x: f64) -> f64 {
    let (mut term, mut sum) = (x, x);
    for k in 1..200 {
        term *= -x * x / (2.0 * f64::from(k));
        sum += term / f64::from(2 * k + 1);
    }
    0.5 + sum / (2.0 * PI).sqrt()
}

/// The part of a normal distribution cut at 4 within ± x.
fn within(x: f64) -> f64 {
    (2.0 * normal(x.min(4.0)) - 1.0) / (2.0 * normal(4.0) - 1.0)
}

#[test]
fn a_quarter_wave_film_passes_by_the_error_function() {
    // R of one film is even about its quarter-wave: with r₁, r₂ at its faces and δ = 2π n d/λ,
    // R = (r₁² + r₂² + 2 r₁ r₂ cos 2δ)/(1 + r₁² r₂² + 2 r₁ r₂ cos 2δ) (Born and Wolf, Principles of Optics, 1.6).
    let (n, substrate, wavelength) = (2.0, 3.0, 800.0);
    let quarter = wavelength / 4.0 / n;
    let (r1, r2) = ((1.0 - n) / (1.0 + n), (n - substrate) / (n + substrate));
    for (sigma, bound) in [(2.0, 0.022), (1.0, 0.021), (3.0, 0.03)] {
        let (sum, product) = (r1 * r1 + r2 * r2, 2.0 * r1 * r2);
        let cosine = (bound * (1.0 + r1 * r1 * r2 * r2) - sum) / (product * (1.0 - bound));
        // 2δ differs from π by as much to either side.
        let reach = (PI - f64::acos(cosine)) / 2.0 * wavelength / (2.0 * PI * n);
        let text = format!(
            "chamber c {{ deposit film {{ rate 1 nm/s thickness varies sigma {sigma} nm each layer }} }}\n\
             recipe r {{ chamber c stack {{ incident air layer film {quarter} nm substrate dense }} \
             require reflectance <= {bound} at {wavelength} nm }}"
        );
        let (found, _) = simulated(&text, 20_000);
        let expected = within(reach / sigma);
        assert!((found.value() - expected).abs() < 5e-4, "{sigma} {bound}: {} {expected}", found.value());
        assert!(found.interval.0 < expected && expected < found.interval.1);
        // A rectangular distribution of the same width: the share of it that lies inside.
        let (found, _) = simulated(&text.replace("sigma", "±"), 20_000);
        let expected = (reach / sigma).min(1.0);
        assert!((found.value() - expected).abs() < 5e-4, "± {sigma} {bound}: {} {expected}", found.value());
    }
}

#[test]
fn shares_of_the_variance_are_the_squared_slopes_where_the_value_is_linear() {
    // Far from quarter-waves and for small draws: ∂R/∂d by differences, σ² of ± x being x²/3 (JCGM 100:2008, 4.3.7).
    let recipe = |film: f64, low: f64| {
        format!(
            "recipe r {{ chamber c stack {{ incident air layer film {film} nm layer low {low} nm substrate crown }} \
             require reflectance <= 50 % at 600 nm }}"
        )
    };
    let chamber = "chamber c { deposit film { rate 1 nm/s thickness varies ± 0.2 nm each run }\n\
                   deposit low { rate 1 nm/s thickness varies sigma 0.1 nm each layer } }\n";
    let value = |film: f64, low: f64| {
        let text = format!("{MATERIALS}{chamber}{}", recipe(film, low));
        report(&text).recipes[0].requirements[0].value.unwrap()
    };
    let slope =
        [value(41.01, 60.0) - value(40.99, 60.0), value(41.0, 60.01) - value(41.0, 59.99)].map(|d| d / 0.02);
    let variances = [slope[0].powi(2) * 0.04 / 3.0, slope[1].powi(2) * 0.01];
    let (found, _) = simulated(&format!("{chamber}{}", recipe(41.0, 60.0)), 4_096);
    let whole: f64 = variances.iter().sum();
    for (at, variance) in [(1, variances[0]), (0, variances[1])] {
        let shares = &found.requirements[0].shares;
        assert!((shares[at] - variance / whole).abs() < 0.01, "{at}: {shares:?} {}", variance / whole);
    }
    // And the corner is the value at the worst end of what is rectangular.
    let corner = found.requirements[0].corner.unwrap();
    let expected = value(41.0 + 0.2 * slope[0].signum(), 60.0);
    assert!((corner - expected).abs() < 1e-9, "{corner} {expected}");
}

const MIRROR: &str = "chamber c {\n deposit film { rate 1 nm/s thickness varies sigma 1 % each layer index varies ± 0.01 each run }\n\
     deposit low { rate 1 nm/s thickness varies ± 1 % each run thickness varies ± 1 % each part }\n angle varies ± 1 deg each part }\n\
     recipe r { chamber c stack { incident air repeat 3 { layer film 70 nm layer low 96 nm } layer film 70 nm ± 2 nm as last \
     substrate crown 2 mm layer low 96 nm exit air } \
     require reflectance >= 73 % over 520 .. 600 nm  require mean transmittance <= 29 % over 480 .. 640 nm under d65 \
     require reflectance <= 85 % at 560 nm at 20 deg polarised s nominal  require yield >= 99.99 % over 1_000 parts }\n";

#[test]
fn every_draw_is_made_for_what_it_is_said_of() {
    let (found, all) = simulated(MIRROR, 100);
    let told: Vec<(String, Option<String>, Option<usize>)> = all
        .columns
        .iter()
        .map(|column| (overcoat_lang::messages::cause(&column.cause), column.layer.clone(), column.run))
        .collect();
    let count = |what: &str| told.iter().filter(|column| column.0 == what).count();
    assert_eq!(count("the thickness of film, each layer"), 3, "the last has its own: {told:?}");
    assert_eq!(count("the thickness of last, each layer"), 1);
    assert_eq!(count("the index of film, each run"), 1);
    assert_eq!(count("the thickness of low, each run"), 2, "two sides are two runs");
    assert_eq!(count("the thickness of low, each part"), 1);
    assert_eq!(count("the angle of incidence, each part"), 1);
    assert_eq!(told.len(), 9);
    // What is nominal is left out.
    assert_eq!(found.requirements.len(), 2);
    for part in &all.parts {
        let sizes = [0.01 * 4.0, 0.01, 0.01, 2.0, 1_f64.to_radians()];
        assert!(part.draws.iter().all(|draw| draw.abs() <= sizes.iter().copied().fold(0.0, f64::max)));
    }
}

#[test]
fn the_same_recipe_gives_the_same_parts_whatever_its_layout_and_the_threads() {
    let (found, all) = simulated(MIRROR, 500);
    let (spread, other) = simulated(&MIRROR.replace("{ ", "{\n   # note\n   "), 500);
    assert_eq!((found.passed, all.parts.len()), (spread.passed, other.parts.len()));
    let same = |a: &Part, b: &Part| a.draws == b.draws && a.values == b.values && a.number == b.number;
    assert!(all.parts.iter().zip(&other.parts).all(|(a, b)| same(a, b)));
    let alone = rayon::ThreadPoolBuilder::new().num_threads(1).build().unwrap();
    let (single, _) = alone.install(|| simulated(MIRROR, 500));
    assert_eq!(single.passed, found.passed);
    assert_eq!(single.requirements[0].shares, found.requirements[0].shares);
}

#[test]
fn a_part_is_judged_as_strictly_as_the_recipe() {
    // Every part written out as a recipe of its own and checked in full: what is found must differ by less than a tenth of
    // the interval.
    let chamber = "chamber c { deposit film { rate 1 nm/s thickness varies sigma 1.5 nm each layer }\n\
                   deposit low { rate 1 nm/s thickness varies ± 2 nm each layer } }\n";
    for promise in [
        "reflectance <= BOUND over 450 .. 640 nm",
        "reflectance <= BOUND over 400 .. 900 nm at 0, 40 deg",
        "mean reflectance <= BOUND over 420 .. 700 nm under am15g photons",
        "reflected colour within BOUND of lab(9, 1, -2)",
        "luminous reflectance <= BOUND",
        "reflected group_delay <= BOUND fs at 545 nm",
        "peak_field <= BOUND at 600 nm",
    ] {
        let stack = |d: [f64; 4]| {
            format!(
                "incident air layer low {} nm layer film {} nm layer low {} nm layer film {} nm substrate crown",
                d[0], d[1], d[2], d[3]
            )
        };
        let written = [90.0, 130.0, 24.0, 16.0];
        let recipe = |promise: &str| {
            format!("{chamber}recipe r {{ chamber c stack {{ {} }} require {promise} }}", stack(written))
        };
        // A bound that about half of the parts meet leaves most in doubt.
        let (wide, _) = simulated(&recipe(&promise.replace("BOUND", "1")), 400);
        let promise = promise.replace("BOUND", &wide.requirements[0].quantiles.unwrap()[1].to_string());
        let (found, all) = simulated(&recipe(&promise), 400);
        // The draws come in the order of deposition, by cause within a layer.
        let order: Vec<usize> = all
            .columns
            .iter()
            .map(|column| {
                column
                    .layer
                    .as_ref()
                    .unwrap()
                    .rsplit(' ')
                    .next()
                    .unwrap()
                    .trim_end_matches(')')
                    .parse::<usize>()
                    .unwrap()
                    - 1
            })
            .collect();
        let mut text = MATERIALS.to_owned();
        for part in &all.parts {
            let mut drawn = written;
            order.iter().zip(&part.draws).for_each(|(layer, draw)| drawn[*layer] += draw);
            text.push_str(&format!(
                "recipe p{} {{ stack {{ {} }} require {promise} }}\n",
                part.number,
                stack(drawn)
            ));
        }
        let full = report(&text);
        let passed = full.recipes.iter().filter(|recipe| recipe.requirements[0].met).count();
        let width = found.interval.1 - found.interval.0;
        assert!(found.passed > 20 && found.passed < 380, "{promise}: {} tells nothing", found.passed);
        let apart = (passed as f64 - f64::from(found.passed)).abs() / 400.0;
        assert!(apart <= 0.1 * width, "{promise}: {passed} in full, {} by samples", found.passed);
    }
}

#[test]
fn where_nothing_varies_the_recipe_is_the_only_part() {
    let text = |bound: f64| {
        format!(
            "{MATERIALS}recipe r {{ stack {{ incident air layer film 70 nm substrate crown }} \
             require reflectance <= {bound} % at 560 nm require yield >= 95 % }}\n"
        )
    };
    let good = report(&text(50.0));
    assert_eq!(good.recipes[0].yields.as_ref().unwrap().value(), 1.0);
    assert!(good.recipes[0].met && good.diagnostics.iter().all(|one| !one.fails()));
    let bad = report(&text(1.0));
    assert_eq!(bad.recipes[0].yields.as_ref().unwrap().value(), 0.0);
    let said: Vec<&Diagnostic> =
        bad.diagnostics.iter().filter(|one| one.code.slug() == "yield_short").collect();
    assert!(said.len() == 1 && said[0].message.contains("nothing varies"), "{said:?}");
}

#[test]
fn a_short_yield_says_what_fails_what_drives_it_and_what_helps() {
    let found = report(&format!("{MATERIALS}{MIRROR}"));
    let short = found.diagnostics.iter().find(|one| one.code.slug() == "yield_short").unwrap();
    insta::assert_snapshot!(format!("{}\n{}", short.message, short.notes.join("\n")));
    let text = format!("{MATERIALS}{}", MIRROR.replace("sigma 1 % each layer", "± 0 % each layer"));
    assert!(report(&text).recipes[0].yields.is_some());
}

#[test]
fn the_angle_varies_for_every_quantity() {
    for promise in [
        "reflected group_delay_dispersion -9 .. 9 fs^2 at 545 nm",
        "peak_field <= 9 at 545 nm",
        "reflectance >= 0.1 % at 545 nm",
        "reflected colour within 90 of lab(50, 0, 0)",
        "absorptance in film <= 1 % over 540 .. 550 nm at 0 .. 10 deg",
        "reflectance <= 99 % at 545 nm at 20 deg cone 5 deg",
        "mean transmittance >= 1 % over 540 .. 550 nm from exit",
        "emittance <= 99 % over 500 .. 600 nm at 300 K hemispherical",
    ] {
        let text = format!(
            "chamber c {{ angle varies ± 2 deg each part }}\nrecipe r {{ chamber c stack {{ incident air layer film 70 nm \
             substrate crown }} require {promise} }}"
        );
        let (found, all) = simulated(&text, 50);
        assert!(found.passed == 50 && all.parts.iter().all(|part| part.values[0].is_some()), "{promise}");
    }
}

#[test]
fn a_layer_that_a_promise_hangs_on_is_told_and_can_be_waived() {
    let recipe = |waiver: &str| {
        format!(
            "{MATERIALS}material high {{ source \"x\" index 2.35 }}\n\
             chamber c {{ deposit high {{ rate 1 nm/s thickness varies sigma 1 % each layer }}\n\
             deposit low {{ rate 1 nm/s thickness varies sigma 0.1 % each layer }} }}\n\
             recipe r {{ chamber c stack {{ incident air layer low 88 nm layer high 110 nm as main layer low 35 nm \
             layer high 13 nm substrate crown }} require reflectance <= 0.95 % over 450 .. 640 nm require yield >= 5 % {waiver} }}\n"
        )
    };
    let told = |text: &str| {
        let report = report(text);
        report.diagnostics.into_iter().find(|one| one.code.slug() == "sensitive_layer")
    };
    let plain = told(&recipe("")).unwrap();
    assert!(plain.message.contains("main alone brings about") && plain.waived.is_none(), "{}", plain.message);
    let waived =
        told(&recipe("waive sensitive_layer on main because \"its own witness in every run\"")).unwrap();
    assert!(waived.waived.is_some());
}
