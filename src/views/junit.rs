//! The JUnit view, for build servers: a suite for each file, a case for each requirement and each other finding.

use super::amount::Scale;
use super::{View, called};
use overcoat_lang::diagnostic::Diagnostic;
use overcoat_lang::report::RequirementReport;
use overcoat_lang::source::{FileId, Place};
use quick_junit::{NonSuccessKind, Report, SerializeError, TestCase, TestCaseStatus, TestSuite};
use std::collections::{BTreeMap, BTreeSet};

/// The report as JUnit XML.
pub(crate) fn render(view: &View<'_>) -> Result<String, SerializeError> {
    let mut cases: BTreeMap<FileId, Vec<TestCase>> = BTreeMap::new();
    let mut told = BTreeSet::new();
    for recipe in &view.report.recipes {
        let suite = cases.entry(recipe.recipe.place.file).or_default();
        if recipe.requirements.is_empty() {
            suite.push(verdict(&called(&recipe.recipe), recipe.met));
        }
        for requirement in &recipe.requirements {
            suite.push(requirement_case(view, &called(&recipe.recipe), requirement, &mut told));
        }
    }
    for (number, finding) in view.report.diagnostics.iter().enumerate() {
        if !told.contains(&number) {
            cases.entry(finding.place.file).or_default().push(finding_case(view, finding));
        }
    }
    let mut report = Report::new("overcoat check");
    for (file, cases) in cases {
        let mut suite = TestSuite::new(view.shown.name(file));
        suite.add_test_cases(cases);
        report.add_test_suite(suite);
    }
    let mut text = report.to_string()?;
    if !text.ends_with('\n') {
        text.push('\n');
    }
    Ok(text)
}

/// A recipe that promises nothing.
fn verdict(name: &str, met: bool) -> TestCase {
    let mut status = TestCaseStatus::success();
    if !met {
        status = TestCaseStatus::non_success(NonSuccessKind::Failure);
        status.set_message("the recipe is not met");
    }
    let mut case = TestCase::new("recipe", status);
    case.set_classname(name);
    case
}

/// A requirement, with the findings that belong to it.
fn requirement_case(
    view: &View<'_>,
    recipe: &str,
    report: &RequirementReport,
    told: &mut BTreeSet<usize>,
) -> TestCase {
    let places = [report.requirement.place, report.asked_at];
    let mut status = TestCaseStatus::success();
    if !report.met {
        status = TestCaseStatus::non_success(NonSuccessKind::Failure);
        let findings = view.report.diagnostics.iter().enumerate();
        let (number, finding) = findings
            .filter(|(number, finding)| {
                view.fails(finding) && !told.contains(number) && about(finding, &places)
            })
            .map(|(number, finding)| (Some(number), Some(finding)))
            .next()
            .unwrap_or((None, None));
        told.extend(number);
        status.set_message(finding.map_or("the requirement is not met", |finding| finding.message.as_str()));
        if let Some(finding) = finding {
            status.set_type(finding.code.slug()).set_description(described(view, finding));
        }
    }
    let mut case = TestCase::new(report.requirement.text.as_str(), status);
    case.set_classname(recipe);
    if let Some(value) = report.value {
        let scale = Scale::of(&report.requirement.quantity, &report.requirement.bound);
        case.set_system_out(format!("value {}", scale.value(value, &[report.min, report.max])));
    }
    case
}

/// Whether a finding stands at one of a requirement's places.
fn about(finding: &Diagnostic, places: &[Place]) -> bool {
    let within = |outer: &Place| {
        outer.file == finding.place.file
            && outer.span.start <= finding.place.span.start
            && finding.place.span.end <= outer.span.end
    };
    places.iter().any(within)
}

fn finding_case(view: &View<'_>, finding: &Diagnostic) -> TestCase {
    let at = view.shown.located(finding.place);
    let mut status = match (&finding.waived, view.fails(finding)) {
        (Some(_), _) => TestCaseStatus::skipped(),
        (None, true) => TestCaseStatus::non_success(NonSuccessKind::Failure),
        (None, false) => TestCaseStatus::success(),
    };
    if let Some(waived) = &finding.waived {
        status.set_message(format!("waived because {}", waived.reason)).set_type(finding.code.slug());
    } else if view.fails(finding) {
        status
            .set_message(&finding.message)
            .set_type(finding.code.slug())
            .set_description(described(view, finding));
    }
    let mut case = TestCase::new(format!("{}:{} {}", at.line, at.column, finding.code.slug()), status);
    case.set_classname(finding.code.family().word());
    if finding.waived.is_some() || !view.fails(finding) {
        case.set_system_out(described(view, finding));
    }
    case
}

/// All that a finding says, with its places.
fn described(view: &View<'_>, finding: &Diagnostic) -> String {
    let at = view.shown.located(finding.place);
    let mut lines = vec![format!("{}:{}:{}: {}", at.file, at.line, at.column, finding.message)];
    lines.extend(finding.related.iter().map(|related| {
        let at = view.shown.located(related.place);
        format!("{}:{}:{}: {}", at.file, at.line, at.column, related.message)
    }));
    lines.extend(finding.notes.iter().cloned());
    lines.extend(finding.fix.iter().map(|fix| fix.title.clone()));
    lines.join("\n")
}
