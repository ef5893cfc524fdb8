//! The codes of all diagnostics: readable slugs with a family, a severity and an explanation.

use crate::diagnostic::Severity;

/// What kind of trouble a code is; decides what can be waived.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Family {
    /// The text itself.
    Form,
    /// Optical constants and light.
    Optics,
    /// What the part must do.
    Promise,
    /// What the chamber can do.
    Process,
    /// Met, but barely.
    Margin,
    /// Where numbers come from.
    Provenance,
    /// Order in the house.
    Housekeeping,
}

impl Family {
    /// Whether a `waive` statement may cover it: form, optics and promises can't be waived.
    pub fn waivable(self) -> bool {
        matches!(self, Family::Process | Family::Margin | Family::Provenance | Family::Housekeeping)
    }

    /// The family's name.
    pub fn word(self) -> &'static str {
        match self {
            Family::Form => "form",
            Family::Optics => "optics",
            Family::Promise => "promise",
            Family::Process => "process",
            Family::Margin => "margin",
            Family::Provenance => "provenance",
            Family::Housekeeping => "housekeeping",
        }
    }
}

macro_rules! codes {
    ($($variant:ident $slug:literal $family:ident $severity:ident $headline:literal),* $(,)?) => {
        /// A diagnostic's code.
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum Code {
            $(#[doc = $headline] $variant),*
        }

        impl Code {
            /// All codes, family by family.
            pub const ALL: &'static [Code] = &[$(Code::$variant),*];

            /// The readable slug, for example `layer_too_thin`.
            pub fn slug(self) -> &'static str {
                match self { $(Code::$variant => $slug),* }
            }

            /// Its family.
            pub fn family(self) -> Family {
                match self { $(Code::$variant => Family::$family),* }
            }

            /// How grave it is.
            pub fn severity(self) -> Severity {
                match self { $(Code::$variant => Severity::$severity),* }
            }

            /// One phrase that says what it is about.
            pub fn headline(self) -> &'static str {
                match self { $(Code::$variant => $headline),* }
            }

            /// Its explanation in Markdown: meaning, reason, an example that triggers it and one that does not.
            pub fn explanation(self) -> &'static str {
                match self { $(Code::$variant => include_str!(concat!("../codes/", $slug, ".md"))),* }
            }
        }
    };
}

codes! {
    Syntax "syntax" Form Error "the text can't be read here",
    UnknownName "unknown_name" Form Error "a name that nothing defines",
    DuplicateName "duplicate_name" Form Error "a name defined twice",
    UnitMismatch "unit_mismatch" Form Error "a quantity of the wrong dimension",
    MissingStatement "missing_statement" Form Error "something that must be said is not",
    StackOrder "stack_order" Form Error "a stack whose ends or order can't be",
    ImportCycle "import_cycle" Form Error "definitions that need themselves",
    ImportOutside "import_outside" Form Error "a path that leaves the project",
    TableMalformed "table_malformed" Form Error "a table that can't be used",
    InvalidValue "invalid_value" Form Error "a number that can't be meant",
    UnreadableFile "unreadable_file" Form Error "a file that can't be read",
    OutsideData "outside_data" Optics Error "a wavelength without optical constants",
    AbsorbingIncident "absorbing_incident" Optics Error "light that comes through an absorbing medium",
    NotConverged "not_converged" Optics Error "a number that did not settle",
    RequirementMissed "requirement_missed" Promise Error "a requirement is not met",
    YieldShort "yield_short" Promise Error "too few parts will pass",
    EdgeMisplaced "edge_misplaced" Promise Error "an edge is not where it must be",
    ColourOff "colour_off" Promise Error "a colour is too far from its aim",
    LimitExceeded "limit_exceeded" Process Error "a limit of the chamber is exceeded",
    LayerTooThin "layer_too_thin" Process Error "a layer is thinner than the source can make",
    LayerTooThick "layer_too_thick" Process Error "a layer is thicker than the source can make",
    NotDepositedHere "not_deposited_here" Process Error "the chamber has no source for a material",
    BelowResolution "below_resolution" Process Error "a thickness that the controller can't set",
    OverCapacity "over_capacity" Process Error "a source holds less than the run needs",
    ForbiddenInterface "forbidden_interface" Process Error "two films that must not touch",
    TooHot "too_hot" Process Error "a source runs hotter than the chamber allows",
    MarginThin "margin_thin" Margin Warning "a requirement is met only barely",
    SensitiveLayer "sensitive_layer" Margin Warning "a layer on which a promise hangs",
    HandbookData "handbook_data" Provenance Hint "published data stand for the shop's own film",
    Unsourced "unsourced" Provenance Warning "optical constants without a source",
    UnusedName "unused_name" Housekeeping Warning "a name that nothing uses",
    UnmetSpecification "unmet_specification" Housekeeping Warning "a specification that nothing meets",
    WaiverUnused "waiver_unused" Housekeeping Warning "a waiver that covers nothing",
    WaiverExpired "waiver_expired" Housekeeping Warning "a waiver past its date",
}

impl Code {
    /// The code with this slug.
    pub fn from_slug(slug: &str) -> Option<Code> {
        Code::ALL.iter().copied().find(|code| code.slug() == slug)
    }
}
