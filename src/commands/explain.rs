//! `overcoat explain`: what a code means.

use crate::Status;
use crate::cli::Explain;
use crate::failure::Failure;
use crate::output;
use crate::settings::did_you_mean;
use overcoat_lang::code::Code;
use overcoat_lang::nearest;

pub(super) fn run(arguments: &Explain) -> Result<Status, Failure> {
    let Some(slug) = &arguments.code else {
        output::print(&list())?;
        return Ok(Status::Met);
    };
    let Some(code) = Code::from_slug(slug) else {
        let near = did_you_mean(&nearest(slug, Code::ALL.iter().map(|code| code.slug())));
        return Err(Failure::message(format!("`{slug}` is no code{near}; `overcoat explain` lists them")));
    };
    output::print(&format!("{}\n", code.explanation().trim_end()))?;
    Ok(Status::Met)
}

/// All codes, family by family.
fn list() -> String {
    let longest = Code::ALL.iter().map(|code| code.slug().len()).max().unwrap_or_default();
    let mut text = String::new();
    let mut family = None;
    for code in Code::ALL {
        if family != Some(code.family()) {
            let gap = if family.is_some() { "\n" } else { "" };
            text.push_str(&format!("{gap}{}\n", code.family().word()));
            family = Some(code.family());
        }
        let (slug, severity) = (code.slug(), code.severity().word());
        text.push_str(&format!("  {slug:longest$}  {severity:7}  {}\n", code.headline()));
    }
    text
}
