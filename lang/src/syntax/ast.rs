//! The syntax tree of one module: what was written, where, before any name or unit is understood.
//!
//! The parser always returns a tree. A statement that could not be read is left out and its block says
//! [`Block::broken`], so that later stages report causes and not consequences.

use crate::source::Span;

/// A name as written.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Name {
    /// The letters.
    pub text: String,
    /// Where.
    pub span: Span,
}

/// A text in quotes.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Text {
    /// The text with its escapes undone.
    pub value: String,
    /// Where, quotes included.
    pub span: Span,
}

/// A calendar date, checked to exist.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Date {
    /// Year, for example 2027.
    pub year: u16,
    /// Month, 1 to 12.
    pub month: u8,
    /// Day of the month, from 1.
    pub day: u8,
    /// Where.
    pub span: Span,
}

/// A unit as written, for example `nm` or `mA/cm2`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Unit {
    /// As written.
    pub text: String,
    /// Where.
    pub span: Span,
}

/// An expression.
#[derive(Clone, Debug, PartialEq)]
pub struct Expr {
    /// What it is.
    pub kind: ExprKind,
    /// Where.
    pub span: Span,
}

/// What an expression is.
#[derive(Clone, Debug, PartialEq)]
pub enum ExprKind {
    /// A number, perhaps with a unit.
    Number {
        /// The number, finite.
        value: f64,
        /// Its unit.
        unit: Option<Unit>,
    },
    /// The name of a `let`.
    Name(Name),
    /// A function with its arguments; arguments that name materials are [`ExprKind::Name`].
    Call {
        /// The function.
        function: Name,
        /// The arguments.
        arguments: Vec<Expr>,
    },
    /// `-x`.
    Negative(Box<Expr>),
    /// `x + y` and the like.
    Binary {
        /// The operator.
        operator: Operator,
        /// Left side.
        left: Box<Expr>,
        /// Right side.
        right: Box<Expr>,
    },
    /// `( x )`.
    Parenthesis(Box<Expr>),
}

/// An operator between two expressions.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Operator {
    /// `+`
    Add,
    /// `-`
    Subtract,
    /// `*`
    Multiply,
    /// `/`
    Divide,
    /// `^`
    Power,
}

/// `a .. b`. A bare `a` takes the unit of `b`.
#[derive(Clone, Debug, PartialEq)]
pub struct Range {
    /// Lower end as written.
    pub low: Expr,
    /// Upper end as written.
    pub high: Expr,
    /// Where.
    pub span: Span,
}

/// Statements between braces.
#[derive(Clone, Debug, PartialEq)]
pub struct Block<K> {
    /// Those that could be read, in order.
    pub statements: Vec<Statement<K>>,
    /// Whether some could not.
    pub broken: bool,
    /// Where, braces included.
    pub span: Span,
}

impl<K> Default for Block<K> {
    fn default() -> Self {
        Block { statements: Vec::new(), broken: true, span: Span::default() }
    }
}

/// One statement with its description.
#[derive(Clone, Debug, PartialEq)]
pub struct Statement<K> {
    /// The `##` lines before it, without the marks.
    pub description: Vec<String>,
    /// The word that it starts with.
    pub keyword: Span,
    /// What it says.
    pub kind: K,
    /// Where, from its keyword to its last token.
    pub span: Span,
}

/// A module: one file, or the blocks of one Markdown file.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Module {
    /// The items that could be read, in order.
    pub items: Vec<Statement<Item>>,
    /// Whether some could not.
    pub broken: bool,
}

/// What stands at the top of a module.
#[derive(Clone, Debug, PartialEq)]
pub enum Item {
    /// `use …`
    Use(Use),
    /// `let …`
    Let(Let),
    /// `material …`
    Material(Named<MaterialStatement>),
    /// `spectrum …`
    Spectrum(Named<SpectrumStatement>),
    /// `chamber …`
    Chamber(Named<ChamberStatement>),
    /// `specification …`
    Specification(Named<Require>),
    /// `recipe …`
    Recipe(Named<RecipeStatement>),
}

/// `KEYWORD name "title" { … }`.
#[derive(Clone, Debug, PartialEq)]
pub struct Named<K> {
    /// The item's name.
    pub name: Name,
    /// Its title, for people.
    pub title: Option<Text>,
    /// What it says.
    pub body: Block<K>,
}

/// `use a, b as c from "file.coat"`.
#[derive(Clone, Debug, PartialEq)]
pub struct Use {
    /// The names.
    pub names: Vec<UsedName>,
    /// From where.
    pub from: UseSource,
}

/// One name of a `use`.
#[derive(Clone, Debug, PartialEq)]
pub struct UsedName {
    /// Its name there.
    pub name: Name,
    /// Its name here, where it differs.
    pub alias: Option<Name>,
}

/// Where a `use` takes its names from.
#[derive(Clone, Debug, PartialEq)]
pub enum UseSource {
    /// A path, relative to the file.
    File(Text),
    /// The library that comes with the tool; the span is that of the word.
    Handbook(Span),
}

/// `let name = value`.
#[derive(Clone, Debug, PartialEq)]
pub struct Let {
    /// The name.
    pub name: Name,
    /// The value.
    pub value: Expr,
}

/// Rows of numbers, in a file or in place.
#[derive(Clone, Debug, PartialEq)]
pub enum Table {
    /// `table "file.csv"`
    File(Text),
    /// `table { 400 nm 2.11 0.004, … }`
    Inline {
        /// The rows; each holds one or more cells.
        rows: Vec<Vec<Expr>>,
        /// Where, braces included.
        span: Span,
    },
}

/// A statement of a material.
#[derive(Clone, Debug, PartialEq)]
pub enum MaterialStatement {
    /// `source "…"`
    Source(Text),
    /// `index …`
    Index {
        /// The model of n (and perhaps of k).
        model: IndexModel,
        /// Absorption added, after `k`.
        extinction: Option<Extinction>,
    },
    /// `valid 300 .. 1200 nm`
    Valid(Range),
    /// `density 2.7 g/cm3`
    Density(Expr),
    /// `stress -300 MPa`
    Stress(Expr),
    /// `caution "…"`
    Caution(Text),
}

/// A model of the refractive index.
#[derive(Clone, Debug, PartialEq)]
pub enum IndexModel {
    /// `1.46`
    Constant(Expr),
    /// `table …`: wavelength, n, k.
    Table(Table),
    /// `cauchy A, B, C`
    Cauchy(Vec<Expr>),
    /// `sellmeier B at C, …`
    Sellmeier(Vec<(Expr, Expr)>),
    /// `oscillators 1.0 { … }`
    Oscillators {
        /// ε∞.
        background: Expr,
        /// The terms.
        terms: Vec<Oscillator>,
    },
    /// `mixture of a 70 %, b 30 % by bruggeman`
    Mixture {
        /// The constituents with their shares by volume.
        parts: Vec<(Name, Expr)>,
        /// The rule's name; Bruggeman's where none is given.
        rule: Option<Name>,
    },
    /// `of oxide shifted 0.012`, `of oxide scaled 1.5 %`, or plainly `of oxide`
    Derived {
        /// The material that it derives from.
        of: Name,
        /// How n changes.
        change: Option<Change>,
    },
}

/// A change of n.
#[derive(Clone, Debug, PartialEq)]
pub enum Change {
    /// Added to n.
    Shifted(Expr),
    /// n times one plus this.
    Scaled(Expr),
}

/// One term of the oscillator model.
#[derive(Clone, Debug, PartialEq)]
pub struct Oscillator {
    /// Its kind: `lorentz`, `drude` or `tauc_lorentz`.
    pub kind: Name,
    /// Strength, plasma energy or A.
    pub strength: Expr,
    /// `at …`
    pub centre: Option<Expr>,
    /// `width …`
    pub width: Option<Expr>,
    /// `gap …`
    pub gap: Option<Expr>,
}

/// Absorption that is written after a model of n.
#[derive(Clone, Debug, PartialEq)]
pub enum Extinction {
    /// `k 0.003`
    Constant(Expr),
    /// `k urbach 0.02 at 300 nm width 0.25 eV`
    Urbach {
        /// k at the wavelength.
        k: Expr,
        /// The wavelength.
        at: Expr,
        /// The tail's energy.
        width: Expr,
    },
    /// `k table …`: wavelength, k.
    Table(Table),
}

/// A statement of a spectrum.
#[derive(Clone, Debug, PartialEq)]
pub enum SpectrumStatement {
    /// `source "…"`
    Source(Text),
    /// `table …`: wavelength, value.
    Table(Table),
    /// `blackbody 2856 K`
    Blackbody(Expr),
    /// `product a, b`
    Product(Vec<Name>),
    /// `irradiance W/m2`: the values are in this unit per nanometre.
    Irradiance(Unit),
}

/// A statement of a chamber.
#[derive(Clone, Debug, PartialEq)]
pub enum ChamberStatement {
    /// `deposit titania { … }`
    Deposit {
        /// The material.
        material: Name,
        /// How.
        body: Block<DepositStatement>,
    },
    /// `angle varies …`
    AngleVaries {
        /// How much.
        spread: Spread,
        /// How often it is drawn.
        each: Each,
    },
    /// `overhead 35 min per run`
    Overhead {
        /// The time.
        time: Expr,
        /// Per what.
        per: Per,
    },
    /// `resolution 0.5 nm`
    Resolution(Expr),
    /// `forbid silver on titania because "…"`
    Forbid {
        /// The later film.
        upper: Name,
        /// What it would lie on.
        lower: Name,
        /// Why.
        because: Option<Text>,
    },
    /// `limit thickness <= 6 um`
    Limit {
        /// What is limited.
        what: Name,
        /// How.
        bound: Bound,
    },
    /// `source "…"`
    Source(Text),
}

/// A statement of a deposition source.
#[derive(Clone, Debug, PartialEq)]
pub enum DepositStatement {
    /// `rate 0.3 nm/s`
    Rate(Expr),
    /// `thickness 5 .. 400 nm`
    Thickness(Range),
    /// `thickness varies …` or `index varies …`
    Varies {
        /// Which of the two.
        what: Varying,
        /// How much.
        spread: Spread,
        /// How often it is drawn.
        each: Each,
    },
    /// `temperature 250 degC`
    Temperature(Expr),
    /// `capacity 6 um per run`
    Capacity(Expr),
    /// `tooling 1.12`
    Tooling(Expr),
}

/// What a source's process varies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Varying {
    /// A film's thickness.
    Thickness,
    /// A material's index.
    Index,
}

/// How often a variation is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Each {
    /// Anew for every layer.
    Layer,
    /// Once for all layers of the material in a run.
    Run,
    /// Once per part.
    Part,
}

/// What an overhead counts by.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Per {
    /// Once a run.
    Run,
    /// Once a layer.
    Layer,
}

/// `± x` or `sigma x`.
#[derive(Clone, Debug, PartialEq)]
pub struct Spread {
    /// The distribution.
    pub kind: SpreadKind,
    /// Half width or standard deviation.
    pub value: Expr,
    /// Where, sign included.
    pub span: Span,
}

/// The distribution of a variation.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum SpreadKind {
    /// `±`: anywhere within alike.
    Rectangular,
    /// `sigma`: normal.
    Normal,
}

/// A `require` sentence.
#[derive(Clone, Debug, PartialEq)]
pub struct Require {
    /// The word `mean`.
    pub mean: Option<Span>,
    /// What is promised.
    pub quantity: QuantityWords,
    /// How much; none for a sentence that lacks it.
    pub bound: Option<Bound>,
    /// Where and under what.
    pub clauses: Vec<Clause>,
}

/// The words of a quantity, not yet understood: `reflectance`, `luminous reflectance`, `absorptance in silver`.
#[derive(Clone, Debug, PartialEq)]
pub struct QuantityWords {
    /// `luminous`, `reflected` and the like, where two words stand.
    pub qualifier: Option<Name>,
    /// The last word.
    pub name: Name,
    /// After `in`.
    pub target: Option<Name>,
    /// Where, all of it.
    pub span: Span,
}

/// A bound with its place.
#[derive(Clone, Debug, PartialEq)]
pub struct Bound {
    /// What it says.
    pub kind: BoundKind,
    /// Where.
    pub span: Span,
}

/// What a bound says.
#[derive(Clone, Debug, PartialEq)]
pub enum BoundKind {
    /// `<= v`
    AtMost(Expr),
    /// `>= v`
    AtLeast(Expr),
    /// `a .. b`
    Between(Range),
    /// `v ± t`
    Around {
        /// The aim.
        aim: Expr,
        /// The tolerance.
        tolerance: Expr,
    },
    /// `<= mask "file.csv"`
    AtMostMask(Text),
    /// `>= mask "file.csv"`
    AtLeastMask(Text),
    /// `crosses 50 % rising within 585 .. 595 nm`
    Crosses {
        /// The level.
        level: Expr,
        /// Rising with wavelength, or falling.
        rising: bool,
        /// Where the edge must lie.
        within: Option<Range>,
    },
    /// `within 3 of lab(32, -4, -18)`
    NearColour {
        /// The greatest difference, CIEDE2000.
        difference: Expr,
        /// L*, a*, b*.
        aim: Vec<Expr>,
    },
}

/// A clause with its place.
#[derive(Clone, Debug, PartialEq)]
pub struct Clause {
    /// What it says.
    pub kind: ClauseKind,
    /// Where.
    pub span: Span,
}

/// What a clause says.
#[derive(Clone, Debug, PartialEq)]
pub enum ClauseKind {
    /// `over 420 .. 680 nm and 700 .. 720 nm`
    Over(Vec<Range>),
    /// `over 5_000 parts`
    OverParts(Expr),
    /// `at 45 deg`, `at 532, 1064 nm`, `at 0 .. 30 deg`, `at 300 K`: the dimension tells which
    At(Vec<AtItem>),
    /// `cone 12 deg`
    Cone(Expr),
    /// `polarised s`
    Polarised(Name),
    /// `under am15g photons`
    Under {
        /// The spectrum.
        spectrum: Name,
        /// Weighted by photons, not by power.
        photons: bool,
    },
    /// `from exit`
    FromExit,
    /// `nominal`
    Nominal,
    /// `observer 10 deg`
    Observer(Expr),
    /// `hemispherical`
    Hemispherical,
}

/// An element of an `at` list.
#[derive(Clone, Debug, PartialEq)]
pub enum AtItem {
    /// One value.
    Value(Expr),
    /// A range.
    Range(Range),
}

/// A statement of a recipe.
// A recipe has a handful of statements: the size of the largest costs nothing.
#[allow(clippy::large_enum_variant)]
#[derive(Clone, Debug, PartialEq)]
pub enum RecipeStatement {
    /// `revision "B"`
    Revision(Text),
    /// `chamber curlew`
    Chamber(Name),
    /// `meets a, b`
    Meets(Vec<Name>),
    /// `reference 600 nm at 45 deg`
    Reference {
        /// The wavelength.
        wavelength: Expr,
        /// The angle of incidence.
        angle: Option<Expr>,
    },
    /// `stack { … }`
    Stack(Block<StackStatement>),
    /// `require …`
    Require(Require),
    /// `waive layer_too_thin on flash because "…" until 2027-06-30`
    Waive {
        /// The code.
        code: Name,
        /// The layer or other name that it is limited to.
        on: Option<Name>,
        /// The reason.
        because: Option<Text>,
        /// Its last day.
        until: Option<Date>,
    },
}

/// A statement of a stack.
#[derive(Clone, Debug, PartialEq)]
pub enum StackStatement {
    /// `incident air`
    Incident(Name),
    /// `exit air`
    Exit(Name),
    /// `substrate glass 3 mm`
    Substrate {
        /// The material.
        material: Name,
        /// Thick where given; a half-space otherwise.
        thickness: Option<Expr>,
    },
    /// `slab eva 450 um`
    Slab {
        /// The material.
        material: Name,
        /// Its thickness.
        thickness: Option<Expr>,
    },
    /// `textured 54.74 deg`
    Textured(Expr),
    /// `layer nitride 78 nm …`
    Layer(Layer),
    /// `repeat 8 { … }`
    Repeat {
        /// How often.
        count: Expr,
        /// What.
        body: Block<StackStatement>,
    },
}

/// A layer as written.
#[derive(Clone, Debug, PartialEq)]
pub struct Layer {
    /// Of what.
    pub material: LayerMaterial,
    /// How thick; none where it was left out.
    pub thickness: Option<Expr>,
    /// What follows, in the order written.
    pub options: Vec<LayerOption>,
}

/// What a layer is made of.
#[derive(Clone, Debug, PartialEq)]
pub enum LayerMaterial {
    /// One material.
    Plain(Name),
    /// `graded a to b`
    Graded {
        /// At the first face as written.
        from: Name,
        /// At the last face as written.
        to: Name,
    },
}

/// An option of a layer, with its place.
#[derive(Clone, Debug, PartialEq)]
pub struct LayerOption {
    /// What it says.
    pub kind: LayerOptionKind,
    /// Where.
    pub span: Span,
}

/// What an option of a layer says.
#[derive(Clone, Debug, PartialEq)]
pub enum LayerOptionKind {
    /// `as flash`
    As(Name),
    /// `± 1 nm` or `sigma 0.4 nm`
    Spread(Spread),
    /// `fixed`
    Fixed,
    /// `between 5 .. 40 nm`
    Between(Range),
    /// `rough 1.2 nm`
    Rough(Expr),
    /// `by bruggeman`, of a graded layer
    By(Name),
    /// `in 24 steps`, of a graded layer
    Steps(Expr),
}
