//! `overcoat yield`, and yields in a check.

use crate::project::Project;

const FRONT: &str = "material fluoride { source \"witness W-7\"  index 1.38 }\n\
     material crown { source \"melt sheet\"  index 1.52 }\n\
     chamber box { deposit fluoride { rate 1 nm/s  thickness varies ± 3 % each run } }\n\
     recipe front {\n    chamber box\n    stack { incident air  layer fluoride 97 nm  substrate crown }\n\
     require reflectance <= 1.27 % at 550 nm\n    require yield >= 50 % over 500 parts\n}\n";

#[test]
fn people_get_a_table() {
    let run = Project::with_front(FRONT).run(&["yield", "front.coat"]);
    assert_eq!((run.status, run.stderr.as_str()), (Some(0), ""), "{run:?}");
    insta::assert_snapshot!(run.stdout);
}

#[test]
fn programs_get_a_row_for_each_part_or_one_object() {
    let project = Project::with_front(FRONT);
    let run =
        project.run(&["yield", "front.coat", "--format", "csv", "--parts", "40", "--output", "parts.csv"]);
    assert_eq!((run.status, run.stdout.as_str()), (Some(0), ""), "{run:?}");
    let text = project.read("parts.csv");
    let rows: Vec<Vec<&str>> = text.lines().skip(1).map(|line| line.split(',').collect()).collect();
    assert_eq!(rows.len(), 40);
    let number = |row: &[&str], at: usize| row[at].parse::<f64>().unwrap();
    for row in &rows {
        // A quarter-wave reflects least: a part passes where its draw, a share of the thickness, is small.
        let (draw, value) = (number(row, 2), number(row, 3));
        assert!(draw.abs() <= 0.03 && (row[1] == "1") == (value <= 0.0127), "{row:?}");
    }
    let run = project.run(&["yield", "front.coat", "--format", "json"]);
    let answer: serde_json::Value = serde_json::from_str(&run.stdout).unwrap();
    assert_eq!(answer["parts"], 500);
    let shares = &answer["requirements"][0]["variance_shares"];
    assert!(shares[0].as_f64().is_some_and(|share| (0.0..=1.0).contains(&share)), "{answer}");
}

#[test]
fn a_check_tells_the_yield_and_can_leave_it_out() {
    let project = Project::with_front(FRONT);
    let run = project.run(&["check", "--format", "json", "--parts", "300"]);
    let answer: serde_json::Value = serde_json::from_str(&run.stdout).unwrap();
    let found = &answer["recipes"][0]["yield"];
    assert_eq!(found["parts"], 300);
    assert!(
        found["low"].as_f64() < found["value"].as_f64() && found["value"].as_f64() < found["high"].as_f64()
    );
    let run = project.run(&["check", "--format", "json", "--no-yield"]);
    let answer: serde_json::Value = serde_json::from_str(&run.stdout).unwrap();
    assert!(answer["recipes"][0]["yield"].is_null() && answer["recipes"][0]["met"] == true, "{answer}");
}

#[test]
fn a_yield_below_the_promise_ends_with_status_1_in_every_format() {
    let project = Project::with_front(&FRONT.replace(">= 50 %", ">= 99 %"));
    for format in ["human", "json", "csv"] {
        assert_eq!(project.run(&["yield", "front.coat", "--format", format]).status, Some(1), "{format}");
    }
}

#[test]
fn what_has_no_yield_says_why() {
    let project = Project::with_front("recipe bare { stack { incident air  substrate air } }\n");
    let run = project.run(&["yield", "front.coat"]);
    assert_eq!(run.status, Some(2), "{run:?}");
    assert!(run.stderr.contains("`bare` has no yield: it has no requirement that counts"), "{run:?}");
    let run = Project::with_front(FRONT).run(&["yield", "front.coat", "--parts", "0"]);
    assert_eq!(run.status, Some(2), "{run:?}");
    let nothing = FRONT.replace("thickness varies ± 3 % each run", "");
    let run = Project::with_front(&nothing).run(&["yield", "front.coat"]);
    assert!(run.stdout.contains("every part passes, for nothing varies"), "{run:?}");
}
