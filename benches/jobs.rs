//! How long whole jobs take, process start included: `cargo bench -p overcoat --bench jobs`.
//!
//! The recipes are made here and live in a temporary folder. Told are the median of several runs, the processor time of one, and
//! the most memory that any run up to there has held.

#![expect(clippy::print_stdout, reason = "a benchmark prints its table")]

use std::error::Error;
use std::fmt::Write as _;
use std::fs;
use std::path::Path;
use std::process::{Command, Stdio};
use std::time::Instant;

use nix::sys::resource::{UsageWho, getrusage};

const MATERIALS: &str = "\
material titania { source \"bench\" index cauchy 2.2230, 0.02660 um^2, 0.00210 um^4 valid 380 .. 1700 nm }
material silica { source \"bench\" index cauchy 1.4484, 0.00354 um^2 valid 380 .. 1700 nm }
";

const THREE: &str = "\
    require reflectance <= 99.9 % over 400 .. 700 nm
    require mean reflectance <= 99 % over 400 .. 1100 nm under am15g photons
    require transmittance >= 0.00001 % over 900 .. 1200 nm at 30 deg polarised s
";

const THREE_MORE: &str = "\
    require mean transmittance >= 1 % over 450 .. 650 nm
    require luminous reflectance <= 99 % under d65
    require reflectance >= 0.00001 % over 500 .. 600 nm at 45 deg
";

/// Twenty films whose thicknesses follow from a number.
fn recipe(name: &str, number: usize, chamber: &str, requirements: &str) -> String {
    let mut text = format!("recipe {name} {{\n{chamber}    stack {{\n        incident air\n");
    for film in 0..20 {
        let material = if film % 2 == 0 { "silica" } else { "titania" };
        // A linear congruential generator's low steps are random enough for thicknesses.
        let step = (number * 7919 + film * 104_729 + number * film * 31) % 1521;
        let _ = writeln!(text, "        layer {material} {:.1} nm", 20.0 + step as f64 / 10.0);
    }
    text.push_str("        substrate silica\n    }\n");
    text.push_str(requirements);
    text.push_str("}\n");
    text
}

/// Runs a job some times and prints its line.
fn time(what: &str, folder: &Path, arguments: &[&str], runs: usize) -> Result<(), Box<dyn Error>> {
    let mut walls = Vec::with_capacity(runs);
    let cpu = || -> Result<f64, Box<dyn Error>> {
        let usage = getrusage(UsageWho::RUSAGE_CHILDREN)?;
        let (user, system) = (usage.user_time(), usage.system_time());
        let seconds = |time: nix::sys::time::TimeVal| time.tv_sec() as f64 + time.tv_usec() as f64 * 1e-6;
        Ok(seconds(user) + seconds(system))
    };
    let before = cpu()?;
    for _ in 0..runs {
        let start = Instant::now();
        let status = Command::new(env!("CARGO_BIN_EXE_overcoat"))
            .args(arguments)
            .current_dir(folder)
            .stdout(Stdio::null())
            .stderr(Stdio::null())
            .status()?;
        walls.push(start.elapsed().as_secs_f64() * 1e3);
        if status.code().is_none_or(|code| code > 1) {
            return Err(format!("{what}: {status}").into());
        }
    }
    walls.sort_by(f64::total_cmp);
    let memory = getrusage(UsageWho::RUSAGE_CHILDREN)?.max_rss() as f64 / 1024.0;
    let cpu = (cpu()? - before) * 1e3 / runs as f64;
    println!("{what:58} {:9.1} ms {cpu:9.1} ms {memory:7.0} MB", walls[runs / 2]);
    Ok(())
}

fn main() -> Result<(), Box<dyn Error>> {
    let whole = tempfile::tempdir()?;
    println!("{:58} {:>12} {:>12} {:>10}", "job", "wall", "processor", "memory");
    time("start and stop (--version)", whole.path(), &["--version"], 21)?;

    let one = whole.path().join("one");
    fs::create_dir(&one)?;
    fs::write(one.join("overcoat.toml"), "")?;
    let requirements = format!("{THREE}{THREE_MORE}");
    fs::write(one.join("one.coat"), format!("{MATERIALS}{}", recipe("one", 1, "", &requirements)))?;
    time("check of one recipe, 20 films, 6 requirements", &one, &["check", "one.coat"], 21)?;

    let examples = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    time("check of examples/, without yields", &examples, &["check", ".", "--no-yield"], 11)?;
    time("check of examples/", &examples, &["check", "."], 5)?;

    for count in [500, 1000, 2000] {
        let folder = whole.path().join(count.to_string());
        fs::create_dir(&folder)?;
        fs::write(folder.join("overcoat.toml"), "")?;
        for number in 0..count {
            let text = format!("{MATERIALS}{}", recipe("r", number, "", THREE));
            fs::write(folder.join(format!("r{number}.coat")), text)?;
        }
        let what = format!("check of {count} recipes, 20 films, 3 requirements each");
        time(&what, &folder, &["check", "."], 3)?;
    }

    let parts = whole.path().join("parts");
    fs::create_dir(&parts)?;
    let chamber = "\
chamber c {
    deposit titania { thickness varies sigma 1 % each layer }
    deposit silica { thickness varies sigma 1 % each layer }
}
";
    // The bounds lie where half of the parts pass.
    let bounds = "\
    require reflectance <= 96 % over 400 .. 700 nm
    require mean reflectance <= 65 % over 400 .. 700 nm
    require transmittance >= 5 % over 900 .. 1200 nm at 30 deg polarised s
";
    let text = format!("{MATERIALS}{chamber}{}", recipe("r", 3, "    chamber c\n", bounds));
    fs::write(parts.join("parts.coat"), text)?;
    let csv = ["yield", "parts.coat", "--format", "csv", "--output", "parts.csv", "--parts"];
    time("yield of 2 000 parts, 20 films, 3 requirements", &parts, &[&csv[..], &["2000"]].concat(), 7)?;
    time("yield of 200 000 parts", &parts, &[&csv[..], &["200000"]].concat(), 1)?;
    Ok(())
}
