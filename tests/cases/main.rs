//! Whole recipes through the built command: spectra, requirement values and codes that were found outside the project.
//!
//! Each folder holds a recipe. `spectra.csv` and `requirements.csv` were computed from its text by the recursive Airy
//! sum (G. B. Airy, Phil. Mag. 2, 20 (1833), applied film by film), written apart from the engine and its matrices.

// In tests a panic is the report, in helpers too.
#![allow(clippy::unwrap_used)]

use std::path::{Path, PathBuf};
use std::process::Command;

fn folder(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/cases").join(name)
}

fn rows(name: &str, file: &str) -> Vec<csv::StringRecord> {
    let path = folder(name).join(file);
    let mut reader = csv::ReaderBuilder::new().comment(Some(b'#')).from_path(path).unwrap();
    reader.records().map(|record| record.unwrap()).collect()
}

/// Standard output of the command, run in the case's folder.
fn overcoat(name: &str, arguments: &[&str]) -> String {
    let root = folder(name);
    let output = Command::new(env!("CARGO_BIN_EXE_overcoat"))
        .current_dir(&root)
        .args(arguments)
        .args(["--root", "."])
        .output()
        .unwrap();
    String::from_utf8(output.stdout).unwrap()
}

fn report(name: &str) -> serde_json::Value {
    serde_json::from_str(&overcoat(name, &["check", "recipe.coat", "--format", "json"])).unwrap()
}

fn spectra_agree(name: &str) {
    let rows = rows(name, "spectra.csv");
    let number = |row: &csv::StringRecord, column: usize| row[column].parse::<f64>().unwrap();
    let mut at = 0;
    while at < rows.len() {
        let (angle, polarised) = (rows[at][0].to_owned(), rows[at][1].to_owned());
        let block: Vec<_> =
            rows[at..].iter().take_while(|row| row[0] == angle && row[1] == polarised).collect();
        at += block.len();
        let (first, last) = (number(block[0], 2), number(block[block.len() - 1], 2));
        let (over, step) = (format!("{first}..{last}nm"), format!("{}nm", number(block[1], 2) - first));
        let angle = format!("{angle}deg");
        let mut arguments = vec!["spectrum", "recipe.coat", "--at", &angle, "--over", &over, "--step", &step];
        if polarised != "mean" {
            arguments.extend(["--polarised", &polarised]);
        }
        let text = overcoat(name, &arguments);
        assert_eq!(text.lines().next(), Some("wavelength_nm,reflectance,transmittance,absorptance"));
        let found: Vec<Vec<f64>> = text
            .lines()
            .skip(1)
            .map(|line| line.split(',').map(|cell| cell.parse().unwrap()).collect())
            .collect();
        assert_eq!(found.len(), block.len(), "{name} at {angle} {polarised}");
        for (found, expected) in found.iter().zip(block) {
            for (column, value) in found.iter().enumerate() {
                let expected = number(expected, column + 2);
                assert!((value - expected).abs() <= 1e-9, "{name} at {angle} {polarised}: {found:?}");
            }
        }
    }
}

fn requirements_agree(name: &str) {
    let report = report(name);
    let found = report["recipes"][0]["requirements"].as_array().unwrap();
    for row in rows(name, "requirements.csv") {
        let text = &row[0];
        let one = found.iter().find(|one| one["text"] == text).unwrap_or_else(|| panic!("{name}: no {text}"));
        let value = one["value"].as_f64().unwrap();
        let (expected, within) = (row[1].parse::<f64>().unwrap(), row[5].parse::<f64>().unwrap());
        assert!((value - expected).abs() <= within, "{name}: {text} is {value}");
        assert_eq!(one["met"].as_bool().unwrap(), &row[4] == "true", "{name}: {text}");
        let wavelength = one["at"]["wavelength_nm"].as_f64();
        match row[2].parse::<f64>() {
            Ok(at) => assert!((wavelength.unwrap() - at).abs() <= 0.5, "{name}: {text} at {wavelength:?}"),
            Err(_) => assert_eq!(wavelength, None, "{name}: {text}"),
        }
        let angle = one["at"]["angle_deg"].as_f64().unwrap();
        assert!((angle - row[3].parse::<f64>().unwrap()).abs() <= 1e-6, "{name}: {text} at {angle} deg");
    }
}

/// Every diagnostic as its code and line, compared with `expected.txt`: the same, each as often.
fn codes_agree(name: &str) {
    let report = report(name);
    let mut found: Vec<(String, String)> = report["diagnostics"]
        .as_array()
        .unwrap()
        .iter()
        .map(|one| (one["code"].as_str().unwrap().to_owned(), one["line"].to_string()))
        .collect();
    for line in std::fs::read_to_string(folder(name).join("expected.txt")).unwrap().lines() {
        let Some((code, lines)) = line.split_once(' ').filter(|_| !line.starts_with('#')) else { continue };
        let fits = |one: &(String, String)| one.0 == code && lines.split('|').any(|line| line == one.1);
        let at = found.iter().position(fits).unwrap_or_else(|| panic!("{name}: no {line} among {found:?}"));
        found.remove(at);
    }
    assert!(found.is_empty(), "{name}: unexpected {found:?}");
}

#[test]
fn laser_mirror() {
    spectra_agree("laser_mirror");
    requirements_agree("laser_mirror");
}

#[test]
fn picture_glass() {
    spectra_agree("picture_glass");
    requirements_agree("picture_glass");
}

#[test]
fn plate_splitter() {
    spectra_agree("plate_splitter");
    requirements_agree("plate_splitter");
}

#[test]
fn window_stack() {
    spectra_agree("window_stack");
    requirements_agree("window_stack");
}

#[test]
fn broken() {
    codes_agree("broken");
}

#[test]
fn process() {
    codes_agree("process");
}
