//! The SARIF 2.1.0 view, for code-review tools.
//!
//! SARIF is an OASIS standard: Static Analysis Results Interchange Format (SARIF) Version 2.1.0, 2020.

use super::{Located, View};
use overcoat_lang::code::Code;
use overcoat_lang::diagnostic::{Diagnostic, Fix, Severity, Waived};
use overcoat_lang::source::{FileId, Place};
use serde_json::json;
use serde_sarif::sarif::{
    ArtifactChange, ArtifactContent, ArtifactLocation, Location, Message, MultiformatMessageString,
    PhysicalLocation, Region, Replacement, ReportingConfiguration, ReportingDescriptor, Result as Finding,
    ResultLevel, Run, Sarif, Suppression, Tool, ToolComponent,
};
use std::collections::BTreeMap;

const SCHEMA: &str = "https://json.schemastore.org/sarif-2.1.0.json";

/// The report as a SARIF log.
pub(crate) fn render(view: &View<'_>) -> Result<String, serde_json::Error> {
    let mut seen = BTreeMap::new();
    let results =
        view.report.diagnostics.iter().map(|finding| result(view, finding, &mut seen)).collect::<Vec<_>>();
    let driver = ToolComponent::builder()
        .name("overcoat")
        .version(env!("CARGO_PKG_VERSION"))
        .semantic_version(env!("CARGO_PKG_VERSION"))
        .rules(Code::ALL.iter().map(|code| rule(*code)).collect::<Vec<_>>())
        .build();
    let run = Run::builder()
        .tool(Tool::builder().driver(driver).build())
        .column_kind(json!("unicodeCodePoints"))
        .results(results)
        .build();
    let log = Sarif::builder().schema(SCHEMA).version(json!("2.1.0")).runs(vec![run]).build();
    let mut text = serde_json::to_string_pretty(&log)?;
    text.push('\n');
    Ok(text)
}

fn rule(code: Code) -> ReportingDescriptor {
    let explanation = code.explanation();
    ReportingDescriptor::builder()
        .id(code.slug())
        .name(code.slug())
        .short_description(MultiformatMessageString::builder().text(code.headline()).build())
        .help(MultiformatMessageString::builder().text(explanation).markdown(explanation).build())
        .default_configuration(ReportingConfiguration::builder().level(json!(level(code.severity()))).build())
        .build()
}

fn level(severity: Severity) -> ResultLevel {
    match severity {
        Severity::Error => ResultLevel::Error,
        Severity::Warning => ResultLevel::Warning,
        Severity::Hint => ResultLevel::Note,
    }
}

/// A finding; `seen` counts how often the same code stands on the same words of a file.
fn result(view: &View<'_>, finding: &Diagnostic, seen: &mut BTreeMap<String, usize>) -> Finding {
    let mut text = finding.message.clone();
    for note in &finding.notes {
        text.push('\n');
        text.push_str(note);
    }
    let related: Vec<Location> = finding
        .related
        .iter()
        .enumerate()
        .map(|(number, related)| {
            Location::builder()
                .id(number as i64 + 1)
                .physical_location(physical(view, related.place))
                .message(Message::from(&related.message))
                .build()
        })
        .collect();
    let location = Location::builder().physical_location(physical(view, finding.place)).build();
    let index = Code::ALL.iter().position(|code| *code == finding.code).unwrap_or_default();
    let mut result = Finding::builder()
        .rule_id(finding.code.slug())
        .rule_index(index as i64)
        .level(level(view.gravity(finding)))
        .message(Message::from(&text))
        .locations(vec![location])
        .partial_fingerprints(fingerprint(view, finding, seen))
        .build();
    result.related_locations = (!related.is_empty()).then_some(related);
    result.fixes = finding.fix.as_ref().map(|fix| vec![fix_entry(view, fix)]);
    result.suppressions = finding.waived.as_ref().map(|waived| vec![suppression(view, waived)]);
    result
}

/// What stays the same when lines move: the code, the file, the words of the line, and which of several it is.
fn fingerprint(
    view: &View<'_>,
    finding: &Diagnostic,
    seen: &mut BTreeMap<String, usize>,
) -> BTreeMap<String, String> {
    let source = view.shown.sources.get(finding.place.file);
    let line = view.shown.located(finding.place).line as usize;
    let words = source.text.lines().nth(line.saturating_sub(1)).unwrap_or("").split_whitespace();
    let words: Vec<&str> = words.take(40).collect();
    let base = format!("{}/{}/{}", finding.code.slug(), source.path, words.join(" "));
    let count = seen.entry(base.clone()).or_default();
    *count += 1;
    BTreeMap::from([("codeFileWords/v1".to_owned(), format!("{base}/{count}"))])
}

fn physical(view: &View<'_>, place: Place) -> PhysicalLocation {
    PhysicalLocation::builder()
        .artifact_location(artifact(view, place.file))
        .region(region(view.shown.located(place)))
        .build()
}

fn artifact(view: &View<'_>, file: FileId) -> ArtifactLocation {
    ArtifactLocation::builder().uri(uri(view.shown.name(file))).build()
}

/// A relative path as a URI reference (RFC 3986): all but its unreserved characters and `/` in percent form.
fn uri(path: &str) -> String {
    let mut uri = String::new();
    for byte in path.bytes() {
        if byte.is_ascii_alphanumeric() || b"-._~/".contains(&byte) {
            uri.push(char::from(byte));
        } else {
            uri.push_str(&format!("%{byte:02X}"));
        }
    }
    uri
}

fn region(at: Located<'_>) -> Region {
    Region::builder()
        .start_line(i64::from(at.line))
        .start_column(i64::from(at.column))
        .end_line(i64::from(at.end_line))
        .end_column(i64::from(at.end_column))
        .build()
}

fn fix_entry(view: &View<'_>, fix: &Fix) -> serde_sarif::sarif::Fix {
    let mut by_file: BTreeMap<FileId, Vec<Replacement>> = BTreeMap::new();
    for edit in &fix.edits {
        let replacement = Replacement::builder()
            .deleted_region(region(view.shown.located(edit.place)))
            .inserted_content(ArtifactContent::builder().text(&edit.text).build())
            .build();
        by_file.entry(edit.place.file).or_default().push(replacement);
    }
    let changes = by_file.into_iter().map(|(file, replacements)| {
        ArtifactChange::builder().artifact_location(artifact(view, file)).replacements(replacements).build()
    });
    serde_sarif::sarif::Fix::builder()
        .description(Message::from(&fix.title))
        .artifact_changes(changes.collect::<Vec<_>>())
        .build()
}

/// A waiver: written in the source, with its reason.
fn suppression(view: &View<'_>, waived: &Waived) -> Suppression {
    let until = waived.until.as_ref().map_or(String::new(), |until| format!(", until {until}"));
    Suppression::builder()
        .kind(json!("inSource"))
        .status(json!("accepted"))
        .justification(format!("{}{until}", waived.reason))
        .location(Location::builder().physical_location(physical(view, waived.place)).build())
        .build()
}

#[cfg(test)]
mod tests {
    #[test]
    fn paths_become_uri_references() {
        assert_eq!(super::uri("../a b/Ta₂.coat"), "../a%20b/Ta%E2%82%82.coat");
    }
}
