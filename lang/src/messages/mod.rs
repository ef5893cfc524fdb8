//! temp
use crate::{code::Code, diagnostic::*, finding::*, source::*};
/// temp
pub fn render(finding: &Finding, _s: &Sources) -> Diagnostic {
    let code = match &finding.fact {
        Fact::Form(_) => Code::Syntax,
        Fact::Promise(p) => match p.verdict {
            Verdict::Missed { .. } => Code::RequirementMissed,
            Verdict::Thin { .. } => Code::MarginThin,
            _ => Code::NotEvaluated,
        },
        Fact::Process(p) => match p.trouble {
            Trouble::TooThin { .. } => Code::LayerTooThin,
            Trouble::TooThick { .. } => Code::LayerTooThick,
            Trouble::NotDeposited { .. } => Code::NotDepositedHere,
            Trouble::BelowResolution { .. } => Code::BelowResolution,
            Trouble::Forbidden { .. } => Code::ForbiddenInterface,
            Trouble::TooHot { .. } => Code::TooHot,
            Trouble::OverCapacity { .. } => Code::OverCapacity,
            Trouble::Limit { .. } => Code::LimitExceeded,
        },
        Fact::House(_) => Code::Unsourced,
        _ => Code::OutsideData,
    };
    Diagnostic {
        code,
        severity: code.severity(),
        message: format!("{:?}", finding.fact),
        place: finding.place,
        related: vec![],
        notes: vec![],
        fix: None,
        waived: None,
    }
}
