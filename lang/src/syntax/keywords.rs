//! The words of the language, place by place: for the parser, its messages, highlighting and completion.

/// A kind of block, by what its statements are.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum BlockKind {
    /// The top of a file.
    Module,
    /// `material … { }`
    Material,
    /// `spectrum … { }`
    Spectrum,
    /// `chamber … { }`
    Chamber,
    /// `deposit … { }`
    Deposit,
    /// `specification … { }`
    Specification,
    /// `recipe … { }`
    Recipe,
    /// `stack { }` and `repeat … { }`
    Stack,
    /// Rows of a table, terms of an index: no statements.
    Data,
}

/// Every kind of block with the keywords that start its statements, most usual first.
pub const KEYWORDS: &[(BlockKind, &[&str])] = &[
    (BlockKind::Module, &["use", "let", "material", "spectrum", "chamber", "specification", "recipe"]),
    (BlockKind::Material, &["source", "index", "valid", "density", "stress", "caution"]),
    (BlockKind::Spectrum, &["source", "table", "blackbody", "product", "irradiance"]),
    (BlockKind::Chamber, &["deposit", "angle", "overhead", "resolution", "forbid", "limit", "source"]),
    (BlockKind::Deposit, &["rate", "thickness", "index", "temperature", "capacity", "tooling"]),
    (BlockKind::Specification, &["require"]),
    (BlockKind::Recipe, &["revision", "chamber", "meets", "reference", "stack", "require", "waive"]),
    (BlockKind::Stack, &["layer", "incident", "substrate", "exit", "repeat", "slab", "textured"]),
    (BlockKind::Data, &[]),
];

/// The words that start a clause inside a statement.
pub const CLAUSES: &[&str] = &[
    "over",
    "at",
    "cone",
    "polarised",
    "under",
    "from",
    "nominal",
    "observer",
    "hemispherical",
    "as",
    "sigma",
    "fixed",
    "between",
    "rough",
    "by",
    "in",
    "and",
    "per",
    "each",
    "on",
    "because",
    "until",
    "width",
    "gap",
    "crosses",
    "within",
    "k",
    "varies",
    "of",
    "to",
    "shifted",
    "scaled",
];

/// Words with a meaning inside a statement that may also be names.
pub const INNER: &[&str] = &[
    "mean",
    "mask",
    "rising",
    "falling",
    "photons",
    "parts",
    "steps",
    "graded",
    "lab",
    "table",
    "cauchy",
    "sellmeier",
    "oscillators",
    "mixture",
    "urbach",
    "lorentz",
    "drude",
    "tauc_lorentz",
    "run",
    "layer",
    "part",
    "handbook",
];

/// The functions of expressions.
pub const FUNCTIONS: &[&str] =
    &["sqrt", "abs", "min", "max", "sin", "cos", "tan", "asin", "acos", "atan", "n", "k", "quarter"];

impl BlockKind {
    /// The keywords that start a statement of this block.
    pub fn starters(self) -> &'static [&'static str] {
        KEYWORDS.iter().find(|(kind, _)| *kind == self).map_or(&[], |(_, words)| *words)
    }

    /// What people call it, with an article.
    pub fn phrase(self) -> &'static str {
        match self {
            BlockKind::Module => "the top of a file",
            BlockKind::Material => "a material",
            BlockKind::Spectrum => "a spectrum",
            BlockKind::Chamber => "a chamber",
            BlockKind::Deposit => "a `deposit` block",
            BlockKind::Specification => "a specification",
            BlockKind::Recipe => "a recipe",
            BlockKind::Stack => "a stack",
            BlockKind::Data => "a table",
        }
    }

    /// What may stand in it, for a message.
    pub(super) fn label(self) -> &'static str {
        match self {
            BlockKind::Module => {
                "an item: `use`, `let`, `material`, `spectrum`, `chamber`, `specification` or `recipe`"
            }
            BlockKind::Material => "a statement of a material, for example `index`",
            BlockKind::Spectrum => "a statement of a spectrum, for example `table`",
            BlockKind::Chamber => "a statement of a chamber, for example `deposit`",
            BlockKind::Deposit => "a statement of a source, for example `rate`",
            BlockKind::Specification => "a `require` sentence",
            BlockKind::Recipe => "a statement of a recipe, for example `stack`",
            BlockKind::Stack => "a statement of a stack, for example `layer`",
            BlockKind::Data => "a row",
        }
    }

    /// The kind of the block that follows a statement's keyword.
    pub(super) fn child(self, keyword: &str) -> BlockKind {
        match (self, keyword) {
            (BlockKind::Module, "material") => BlockKind::Material,
            (BlockKind::Module, "spectrum") => BlockKind::Spectrum,
            (BlockKind::Module, "chamber") => BlockKind::Chamber,
            (BlockKind::Module, "specification") => BlockKind::Specification,
            (BlockKind::Module, "recipe") => BlockKind::Recipe,
            (BlockKind::Chamber, "deposit") => BlockKind::Deposit,
            (BlockKind::Recipe, "stack") | (BlockKind::Stack, "repeat") => BlockKind::Stack,
            _ => BlockKind::Data,
        }
    }
}

/// Whether a word starts an item, a statement or a clause somewhere, so that it can't be a name.
pub fn reserved(word: &str) -> bool {
    CLAUSES.contains(&word) || starts_some(word)
}

/// Whether a word starts an item or a statement of some block.
pub(super) fn starts_some(word: &str) -> bool {
    KEYWORDS.iter().any(|(_, words)| words.contains(&word))
}

/// The blocks in which a word starts a statement.
pub(super) fn homes(word: &str) -> impl Iterator<Item = BlockKind> {
    KEYWORDS.iter().filter(move |(_, words)| words.contains(&word)).map(|(kind, _)| *kind)
}

/// Whether a word means something after a number.
pub(super) fn known(word: &str) -> bool {
    reserved(word) || INNER.contains(&word)
}
