//! One recipe's numbers in lines for people.

use super::amount::{self, Scale};
use super::picture::harmless;
use super::{View, called};
use anstyle::{AnsiColor, Style};
use overcoat_lang::model::{Beam, Bound, Quantity};
use overcoat_lang::report::{RecipeReport, RequirementReport, YieldReport};
use std::fmt::Write;

/// Styles for verdicts; plain ones where nothing is coloured.
#[derive(Clone, Copy, Debug)]
pub(super) struct Paint {
    coloured: bool,
}

impl Paint {
    pub(super) fn new(coloured: bool) -> Paint {
        Paint { coloured }
    }

    fn style(self, style: Style) -> Style {
        if self.coloured { style } else { Style::new() }
    }

    pub(super) fn strong(self, text: &str) -> String {
        let style = self.style(Style::new().bold());
        format!("{style}{text}{style:#}")
    }

    pub(super) fn faint(self, text: &str) -> String {
        let style = self.style(Style::new().dimmed());
        format!("{style}{text}{style:#}")
    }

    pub(super) fn verdict(self, met: bool, text: &str) -> String {
        let colour = if met { AnsiColor::Green } else { AnsiColor::Red };
        let style = self.style(colour.on_default().bold());
        format!("{style}{text}{style:#}")
    }
}

/// A recipe: its verdict, its requirements, what its runs need.
pub(super) fn draw(view: &View<'_>, report: &RecipeReport, paint: Paint) -> String {
    let recipe = &report.recipe;
    let file = view.shown.located(recipe.place).file;
    let verdict = if report.met { "met" } else { "missed" };
    let revision = recipe
        .revision
        .as_ref()
        .map_or(String::new(), |revision| format!(", revision {}", harmless(revision)));
    let name = paint.strong(&harmless(&called(recipe)));
    let mut text = format!(
        "{name}{revision} {}: {}\n",
        paint.faint(&format!("({file})")),
        paint.verdict(report.met, verdict)
    );
    for requirement in &report.requirements {
        text.push_str(&row(requirement, report.yields.as_ref(), paint));
    }
    if report.requirements.is_empty() {
        text.push_str("  no requirements\n");
    }
    if let Some(process) = &report.process {
        let layers = if process.layers == 1 { "layer" } else { "layers" };
        let thickness = amount::trimmed(amount::significant(process.thickness, 6));
        let duration =
            process.duration.map_or(String::new(), |seconds| format!(", {}", amount::duration(seconds)));
        let _ = writeln!(text, "  process  {} {layers}, {thickness} nm{duration}", process.layers);
    }
    text
}

fn row(report: &RequirementReport, yields: Option<&YieldReport>, paint: Paint) -> String {
    let requirement = &report.requirement;
    let verdict = paint.verdict(report.met, if report.met { "met   " } else { "missed" });
    let mut text = format!("  {verdict}   {}\n", harmless(&requirement.text));
    let scale = Scale::of(&requirement.quantity, &requirement.bound);
    match report.value {
        Some(value) => {
            let shown = scale.value(value, &[report.min, report.max]);
            let of = match yields.filter(|_| matches!(requirement.quantity, Quantity::Yield)) {
                Some(found) if found.causes.is_empty() => ", for nothing varies".to_owned(),
                Some(found) => format!(
                    " of {} parts ({} to {})",
                    found.parts,
                    scale.value(found.interval.0, &[]),
                    scale.value(found.interval.1, &[])
                ),
                None => String::new(),
            };
            let _ = writeln!(text, "           {shown}{of}{}{}", place(report), margin(report, scale));
        }
        None => text.push_str("           not evaluated\n"),
    }
    text
}

/// Where a value is.
fn place(report: &RequirementReport) -> String {
    let mut text = String::new();
    let edge = matches!(report.requirement.bound, Bound::Crosses { .. });
    if let (Some(wavelength), false) = (report.at.wavelength, edge) {
        let _ = write!(text, " at {} nm", amount::trimmed(amount::significant(wavelength, 6)));
    }
    let angle = amount::degrees(report.at.angle);
    if angle != 0.0 {
        let _ = write!(text, " at {} deg", amount::trimmed(amount::significant(angle, 5)));
    }
    match report.at.polarisation {
        Beam::S => text.push_str(", s"),
        Beam::P => text.push_str(", p"),
        Beam::Mean => {}
    }
    text
}

/// The bound that counts and how far inside or beyond it the value is.
fn margin(report: &RequirementReport, scale: Scale) -> String {
    let bound = match (report.min, report.max) {
        (Some(min), Some(max)) => format!("from {} to {}", scale.bound(min), scale.bound(max)),
        (Some(min), None) => format!("at least {}", scale.bound(min)),
        (None, Some(max)) => format!("at most {}", scale.bound(max)),
        (None, None) => return String::new(),
    };
    match report.margin {
        Some(margin) if margin < 0.0 => format!("; {bound}, missed by {}", scale.difference(-margin)),
        Some(margin) => format!("; {bound}, {} to spare", scale.difference(margin)),
        None => format!("; {bound}"),
    }
}
