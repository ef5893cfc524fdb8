//! What machines read: JSON, SARIF and JUnit.

use crate::project::{FRONT, Project};
use serde_json::Value;

/// One requirement missed, one layer too thin, one warning that is waived.
const MIXED: &str = r#"material fluoride { source "witness plate W-12" index 1.38 }
material crown { index 1.52 }

chamber wren "box coater" {
    deposit fluoride { rate 0.5 nm/s thickness 100 .. 300 nm }
    overhead 10 min per run
}

recipe front "lens, one layer" {
    chamber wren
    stack {
        incident  air
        layer     fluoride 99.6 nm
        substrate crown
    }
    require reflectance <= 1.0 % over 500 .. 600 nm
    require mean reflectance   <= 1.6 % over 420 .. 680 nm
    waive unsourced because "melt data follow"
}
"#;

fn mixed() -> Value {
    let project = Project::new();
    project.write("lenses/front.coat", MIXED);
    project.json(&[])
}

fn finding<'v>(answer: &'v Value, code: &str) -> &'v Value {
    let findings = answer["diagnostics"].as_array().unwrap();
    findings.iter().find(|finding| finding["code"] == code).unwrap_or_else(|| panic!("no {code}: {answer:#}"))
}

#[test]
fn json_holds_the_summary_and_the_recipes() {
    let answer = mixed();
    assert_eq!(answer["version"], 1);
    let summary = &answer["summary"];
    assert_eq!((&summary["recipes"], &summary["met"]), (&1.into(), &0.into()));
    assert_eq!((&summary["errors"], &summary["waived"]), (&2.into(), &1.into()), "{answer:#}");
    let recipe = &answer["recipes"][0];
    assert_eq!(recipe["file"], "lenses/front.coat");
    assert_eq!((&recipe["name"], &recipe["title"]), (&"front".into(), &"lens, one layer".into()));
    assert_eq!(recipe["met"], false);
    let process = &recipe["process"];
    assert_eq!((&process["layers"], &process["thickness_nm"]), (&1.into(), &99.6.into()));
    // 99.6 nm at 0.5 nm/s, and 10 min.
    assert!((process["duration_s"].as_f64().unwrap() - 799.2).abs() < 1e-9);
}

#[test]
fn json_holds_each_requirement_with_its_numbers() {
    let answer = mixed();
    let requirement = &answer["recipes"][0]["requirements"][0];
    assert_eq!(requirement["text"], "reflectance <= 1.0 % over 500 .. 600 nm");
    assert_eq!(requirement["quantity"], "reflectance");
    assert_eq!(requirement["met"], false);
    assert_eq!(requirement["bound"], serde_json::json!({ "max": 0.01 }));
    assert_eq!((&requirement["file"], &requirement["line"]), (&"lenses/front.coat".into(), &16.into()));
    let value = requirement["value"].as_f64().unwrap();
    let margin = requirement["margin"].as_f64().unwrap();
    assert!((0.01 - value - margin).abs() < 1e-15 && margin < 0.0);
    let at = &requirement["at"];
    assert!((500.0..=600.0).contains(&at["wavelength_nm"].as_f64().unwrap()));
    assert_eq!((&at["angle_deg"], &at["polarisation"]), (&0.0.into(), &"mean".into()));
    let mean = &answer["recipes"][0]["requirements"][1];
    assert_eq!(mean["text"], "mean reflectance <= 1.6 % over 420 .. 680 nm");
    assert_eq!(mean["at"]["wavelength_nm"], Value::Null);
}

#[test]
fn json_holds_each_finding_with_its_places() {
    let answer = mixed();
    let thin = finding(&answer, "layer_too_thin");
    assert_eq!(thin["severity"], "error");
    assert_eq!((&thin["file"], &thin["line"]), (&"lenses/front.coat".into(), &13.into()));
    assert!(thin["column"].is_u64() && thin["end_line"].is_u64() && thin["end_column"].is_u64());
    assert_eq!(thin["waived"], false);
    assert_eq!(thin["related"][0]["line"], 5);
    assert!(thin["related"][0]["message"].is_string() && thin["notes"].is_array());
    let unsourced = finding(&answer, "unsourced");
    assert_eq!((&unsourced["waived"], &unsourced["severity"]), (&true.into(), &"warning".into()));
    assert_eq!(unsourced["waiver"]["reason"], "melt data follow");
}

#[test]
fn columns_count_characters() {
    let project = Project::with_front("let µ_Ω = 1 nm  let b = 2 nm + 3\n");
    let answer = project.json(&[]);
    let mismatch = finding(&answer, "unit_mismatch");
    assert_eq!((&mismatch["line"], &mismatch["column"]), (&1.into(), &32.into()), "{answer:#}");
}

#[test]
fn paths_are_seen_from_where_the_command_was_run() {
    let project = Project::new();
    project.write("lenses/front.coat", FRONT);
    project.write("house/notes.txt", "");
    let run = project.run_in("house", &["check", "--format", "json", "../lenses"]);
    let answer: Value = serde_json::from_str(&run.stdout).unwrap();
    assert_eq!(answer["recipes"][0]["file"], "../lenses/front.coat");
}

/// Required properties as in sections 3.13 to 3.30 of the OASIS standard SARIF 2.1.0.
#[test]
fn sarif_holds_what_the_standard_asks_for() {
    let project = Project::new();
    project.write("my lenses/front.coat", MIXED);
    let run = project.run(&["check", "--format", "sarif"]);
    assert_eq!(run.status, Some(1));
    serde_json::from_str::<serde_sarif::sarif::Sarif>(&run.stdout).unwrap();
    let log: Value = serde_json::from_str(&run.stdout).unwrap();
    assert_eq!(log["version"], "2.1.0");
    let run = &log["runs"][0];
    let driver = &run["tool"]["driver"];
    assert_eq!(driver["name"], "overcoat");
    let results = run["results"].as_array().unwrap();
    assert_eq!(results.len(), 3, "{log:#}");
    for result in results {
        let rule = &driver["rules"][result["ruleIndex"].as_u64().unwrap() as usize];
        assert_eq!(rule["id"], result["ruleId"]);
        assert!(rule["help"]["text"].is_string() && rule["shortDescription"]["text"].is_string());
        assert!(result["message"]["text"].is_string());
        assert!(["error", "warning", "note"].contains(&result["level"].as_str().unwrap()));
        let place = &result["locations"][0]["physicalLocation"];
        assert_eq!(place["artifactLocation"]["uri"], "my%20lenses/front.coat");
        assert!(place["region"]["startLine"].as_u64().unwrap() >= 1);
        assert!(result["partialFingerprints"].as_object().unwrap().len() == 1);
    }
    let of = |rule: &str| results.iter().find(|result| result["ruleId"] == rule).unwrap();
    assert_eq!(of("unsourced")["suppressions"][0]["kind"], "inSource");
    assert_eq!(of("unsourced")["suppressions"][0]["justification"], "melt data follow");
    assert_eq!(of("layer_too_thin")["relatedLocations"][0]["physicalLocation"]["region"]["startLine"], 5);
}

#[test]
fn sarif_fingerprints_stay_when_lines_move() {
    let prints = |text: &str| -> Vec<Value> {
        let run = Project::with_front(text).run(&["check", "--format", "sarif"]);
        let log: Value = serde_json::from_str(&run.stdout).unwrap();
        let results = log["runs"][0]["results"].as_array().unwrap().clone();
        results.into_iter().map(|result| result["partialFingerprints"].clone()).collect()
    };
    assert_eq!(prints(MIXED), prints(&format!("# moved down\n\n{MIXED}")));
}

#[test]
fn junit_has_a_case_for_each_requirement_and_each_other_finding() {
    let project = Project::new();
    project.write("front.coat", MIXED);
    let run = project.run(&["check", "--format", "junit"]);
    assert_eq!(run.status, Some(1));
    let report = quick_junit::Report::deserialize_from_str(&run.stdout).unwrap();
    assert_eq!(report.test_suites.len(), 1);
    let suite = &report.test_suites[0];
    assert_eq!(suite.name.as_str(), "front.coat");
    let names: Vec<&str> = suite.test_cases.iter().map(|case| case.name.as_str()).collect();
    assert!(names.contains(&"reflectance <= 1.0 % over 500 .. 600 nm"), "{names:?}");
    assert!(names.iter().any(|name| name.ends_with("layer_too_thin")), "{names:?}");
    assert_eq!((report.tests, report.failures), (4, 2), "{}", run.stdout);
}

#[test]
fn a_denied_warning_is_an_error_to_machines() {
    let text = FRONT.replace("source \"melt data\" ", "");
    let project = Project::with_front(&text);
    let answer = project.json(&["--deny", "warnings"]);
    assert_eq!(finding(&answer, "unsourced")["denied"], true);
    let run = project.run(&["check", "--format", "sarif", "--deny", "warnings"]);
    let log: Value = serde_json::from_str(&run.stdout).unwrap();
    assert_eq!(log["runs"][0]["results"][0]["level"], "error");
    let run = project.run(&["check", "--format", "junit", "--deny", "warnings"]);
    let report = quick_junit::Report::deserialize_from_str(&run.stdout).unwrap();
    assert_eq!(report.failures, 1, "{}", run.stdout);
}
