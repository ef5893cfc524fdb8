//! The JSON view. Ratios are fractions, lengths nm, angles degrees, times s, currents mA/cm²; lines and columns
//! count from 1, columns in characters. Keys may be added and are never renamed.

use super::{Located, View};
use overcoat_lang::diagnostic::{Diagnostic, Edit, Related};
use overcoat_lang::model::{Beam, Quantity};
use overcoat_lang::report::{At, RecipeReport, RequirementReport};
use serde::Serialize;

/// The whole answer.
#[derive(Debug, Serialize)]
struct Answer<'r> {
    /// Of this format.
    version: u32,
    summary: Summary,
    recipes: Vec<RecipeEntry<'r>>,
    diagnostics: Vec<DiagnosticEntry<'r>>,
}

/// Totals; a waived finding counts as waived only.
#[derive(Debug, Serialize)]
struct Summary {
    recipes: usize,
    met: usize,
    errors: usize,
    warnings: usize,
    hints: usize,
    /// Of the warnings and hints, those that make the check fail.
    denied: usize,
    waived: usize,
}

/// One recipe.
#[derive(Debug, Serialize)]
struct RecipeEntry<'r> {
    file: &'r str,
    /// The line of its name.
    line: u32,
    name: &'r str,
    title: Option<&'r str>,
    revision: Option<&'r str>,
    met: bool,
    requirements: Vec<RequirementEntry<'r>>,
    /// Null where no yield is asked for.
    #[serde(rename = "yield")]
    yields: Option<YieldEntry>,
    process: Option<ProcessEntry>,
}

/// How many parts will pass, with the interval that holds the true share with 95 % confidence.
#[derive(Debug, Serialize)]
struct YieldEntry {
    value: f64,
    low: f64,
    high: f64,
    parts: u32,
}

/// One requirement.
#[derive(Debug, Serialize)]
struct RequirementEntry<'r> {
    /// The sentence after `require` with single spaces.
    text: &'r str,
    /// The quantity's words in the language.
    quantity: String,
    met: bool,
    /// The value nearest to breaking the bound, or furthest beyond; null where it could not be evaluated.
    value: Option<f64>,
    bound: BoundEntry,
    /// How far the value is inside the bound; negative beyond it.
    margin: Option<f64>,
    at: AtEntry,
    file: &'r str,
    line: u32,
}

/// The bound at the place of the value: `min`, `max` or both.
#[derive(Debug, Serialize)]
struct BoundEntry {
    #[serde(skip_serializing_if = "Option::is_none")]
    min: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    max: Option<f64>,
}

/// Where the value is.
#[derive(Debug, Serialize)]
struct AtEntry {
    /// Null for a mean.
    wavelength_nm: Option<f64>,
    angle_deg: f64,
    /// `s`, `p` or `mean`.
    polarisation: &'static str,
}

/// What the runs of all coated sides need.
#[derive(Debug, Serialize)]
struct ProcessEntry {
    layers: usize,
    thickness_nm: f64,
    /// Null where a rate is missing.
    duration_s: Option<f64>,
}

/// One finding.
#[derive(Debug, Serialize)]
struct DiagnosticEntry<'r> {
    #[serde(flatten)]
    place: PlaceEntry<'r>,
    code: &'static str,
    severity: &'static str,
    message: &'r str,
    waived: bool,
    /// Why and until when, where it is waived.
    #[serde(skip_serializing_if = "Option::is_none")]
    waiver: Option<WaiverEntry<'r>>,
    /// Whether it makes the check fail although it is no error.
    denied: bool,
    related: Vec<RelatedEntry<'r>>,
    notes: &'r [String],
    #[serde(skip_serializing_if = "Option::is_none")]
    fix: Option<FixEntry<'r>>,
}

/// A range of a text; the end is exclusive.
#[derive(Debug, Serialize)]
struct PlaceEntry<'r> {
    file: &'r str,
    line: u32,
    column: u32,
    end_line: u32,
    end_column: u32,
}

#[derive(Debug, Serialize)]
struct RelatedEntry<'r> {
    #[serde(flatten)]
    place: PlaceEntry<'r>,
    message: &'r str,
}

#[derive(Debug, Serialize)]
struct WaiverEntry<'r> {
    #[serde(flatten)]
    place: PlaceEntry<'r>,
    reason: &'r str,
    until: Option<&'r str>,
}

#[derive(Debug, Serialize)]
struct FixEntry<'r> {
    title: &'r str,
    edits: Vec<EditEntry<'r>>,
}

#[derive(Debug, Serialize)]
struct EditEntry<'r> {
    #[serde(flatten)]
    place: PlaceEntry<'r>,
    text: &'r str,
}

/// The report as one JSON object.
pub(crate) fn render(view: &View<'_>) -> Result<String, serde_json::Error> {
    let totals = view.totals();
    let answer = Answer {
        version: 1,
        summary: Summary {
            recipes: totals.recipes,
            met: totals.met,
            errors: totals.errors,
            warnings: totals.warnings,
            hints: totals.hints,
            denied: totals.denied,
            waived: totals.waived,
        },
        recipes: view.report.recipes.iter().map(|recipe| recipe_entry(view, recipe)).collect(),
        diagnostics: view.report.diagnostics.iter().map(|finding| diagnostic_entry(view, finding)).collect(),
    };
    let mut text = serde_json::to_string_pretty(&answer)?;
    text.push('\n');
    Ok(text)
}

fn recipe_entry<'r>(view: &'r View<'_>, report: &'r RecipeReport) -> RecipeEntry<'r> {
    let recipe = &report.recipe;
    let place = view.shown.located(recipe.place);
    let process = report.process.as_ref().map(|process| ProcessEntry {
        layers: process.layers,
        thickness_nm: process.thickness,
        duration_s: process.duration,
    });
    RecipeEntry {
        file: place.file,
        line: place.line,
        name: &recipe.name,
        title: recipe.title.as_deref(),
        revision: recipe.revision.as_deref(),
        met: report.met,
        requirements: report.requirements.iter().map(|asked| requirement_entry(view, asked)).collect(),
        yields: report.yields.as_ref().map(|found| YieldEntry {
            value: found.value(),
            low: found.interval.0,
            high: found.interval.1,
            parts: found.parts,
        }),
        process,
    }
}

fn requirement_entry<'r>(view: &'r View<'_>, report: &'r RequirementReport) -> RequirementEntry<'r> {
    let requirement = &report.requirement;
    let place = view.shown.located(requirement.place);
    RequirementEntry {
        text: &requirement.text,
        quantity: words(&requirement.quantity),
        met: report.met,
        value: report.value,
        bound: BoundEntry { min: report.min, max: report.max },
        margin: report.margin,
        at: at_entry(report.at),
        file: place.file,
        line: place.line,
    }
}

fn at_entry(at: At) -> AtEntry {
    let polarisation = match at.polarisation {
        Beam::S => "s",
        Beam::P => "p",
        Beam::Mean => "mean",
    };
    AtEntry { wavelength_nm: at.wavelength, angle_deg: super::amount::degrees(at.angle), polarisation }
}

fn diagnostic_entry<'r>(view: &'r View<'_>, finding: &'r Diagnostic) -> DiagnosticEntry<'r> {
    let place = |place| place_entry(view.shown.located(place));
    let related =
        |related: &'r Related| RelatedEntry { place: place(related.place), message: &related.message };
    let edit = |edit: &'r Edit| EditEntry { place: place(edit.place), text: &edit.text };
    DiagnosticEntry {
        place: place(finding.place),
        code: finding.code.slug(),
        severity: finding.severity.word(),
        message: &finding.message,
        waived: finding.waived.is_some(),
        waiver: finding.waived.as_ref().map(|waived| WaiverEntry {
            place: place(waived.place),
            reason: &waived.reason,
            until: waived.until.as_deref(),
        }),
        denied: view.deny.denies(finding),
        related: finding.related.iter().map(related).collect(),
        notes: &finding.notes,
        fix: finding
            .fix
            .as_ref()
            .map(|fix| FixEntry { title: &fix.title, edits: fix.edits.iter().map(edit).collect() }),
    }
}

fn place_entry(at: Located<'_>) -> PlaceEntry<'_> {
    PlaceEntry {
        file: at.file,
        line: at.line,
        column: at.column,
        end_line: at.end_line,
        end_column: at.end_column,
    }
}

/// A quantity in the language's own words.
fn words(quantity: &Quantity) -> String {
    use overcoat_lang::model::Side;
    let light = |side: &Side| match side {
        Side::Reflected => "reflected",
        Side::Transmitted => "transmitted",
    };
    let share = |side: &Side| match side {
        Side::Reflected => "reflectance",
        Side::Transmitted => "transmittance",
    };
    match quantity {
        Quantity::Reflectance => "reflectance".to_owned(),
        Quantity::Transmittance => "transmittance".to_owned(),
        Quantity::Absorptance => "absorptance".to_owned(),
        Quantity::AbsorptanceIn(target) => format!("absorptance in {}", target.name),
        Quantity::OpticalDensity => "optical_density".to_owned(),
        Quantity::Luminous(side) => format!("luminous {}", share(side)),
        Quantity::Solar(side) => format!("solar {}", share(side)),
        Quantity::SolarAbsorptance => "solar absorptance".to_owned(),
        Quantity::Photocurrent(target) => format!("photocurrent in {}", target.name),
        Quantity::PhotocurrentLoss(target) => format!("photocurrent_loss in {}", target.name),
        Quantity::Colour(side) => format!("{} colour", light(side)),
        Quantity::Phase(side) => format!("{} phase", light(side)),
        Quantity::GroupDelay(side) => format!("{} group_delay", light(side)),
        Quantity::GroupDelayDispersion(side) => format!("{} group_delay_dispersion", light(side)),
        Quantity::PeakField => "peak_field".to_owned(),
        Quantity::Emittance => "emittance".to_owned(),
        Quantity::Yield => "yield".to_owned(),
    }
}
