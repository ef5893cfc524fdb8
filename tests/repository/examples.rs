//! The example house: all met, nothing to complain of.

use crate::below_root;

#[test]
fn every_recipe_of_the_example_house_is_met_without_a_warning() {
    let output = std::process::Command::new(env!("CARGO_BIN_EXE_overcoat"))
        .args(["check", "examples", "--deny", "warnings", "--format", "json", "--today", "2026-12-01"])
        .current_dir(below_root("."))
        .output()
        .unwrap();
    let text = String::from_utf8(output.stdout).unwrap();
    assert_eq!(output.status.code(), Some(0), "{text}");
    let report: serde_json::Value = serde_json::from_str(&text).unwrap();
    let summary = &report["summary"];
    assert!(summary["recipes"].as_u64() >= Some(14), "{summary}");
    assert_eq!(summary["recipes"], summary["met"]);
    assert_eq!((&summary["errors"], &summary["warnings"]), (&0.into(), &0.into()));
    // The house lives with some findings and says why.
    assert!(summary["waived"].as_u64() >= Some(1), "{summary}");
}
