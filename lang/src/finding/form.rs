//! Facts about the text: syntax, names, units, files.

use crate::source::Place;

/// A fact about the text.
#[derive(Clone, Debug, PartialEq)]
pub enum FormFact {
    /// Something else was expected.
    Syntax {
        /// What could stand here, in the shop's words, most useful first.
        expected: Vec<String>,
        /// What stands here; none at the end of the text.
        found: Option<String>,
        /// A remedy, where one is plain.
        hint: Option<String>,
    },
    /// A text that can't be read at all, with why: not UTF-8, a NUL byte, nested too deep.
    Unreadable {
        /// Why, as the end of a sentence.
        why: String,
    },
    /// A name that nothing defines.
    UnknownName {
        /// What kind of thing was looked for: `material`, `chamber`, `quantity`, `unit`, …
        kind: &'static str,
        /// The name as written.
        name: String,
        /// The nearest names that exist, best first.
        near: Vec<String>,
        /// Where it could be imported from: module path, or `handbook`.
        import: Option<String>,
    },
    /// A name that the file it is to come from does not define.
    NotInFile {
        /// The name.
        name: String,
        /// The file as written.
        path: String,
        /// The nearest names there, best first.
        near: Vec<String>,
    },
    /// A name of another kind than the place needs.
    WrongKind {
        /// The name.
        name: String,
        /// What it is.
        is: &'static str,
        /// What is needed.
        needed: &'static str,
        /// Where it is defined.
        defined: Place,
    },
    /// A name defined twice.
    DuplicateName {
        /// The name.
        name: String,
        /// Where it was first defined.
        first: Place,
    },
    /// A name that would read as a keyword.
    KeywordAsName {
        /// The name.
        name: String,
    },
    /// A quantity of another dimension than the place needs.
    UnitMismatch {
        /// What it is for: "a stress", "the right side of +".
        role: String,
        /// The dimension needed, with an example unit.
        needed: String,
        /// The dimension found.
        found: String,
        /// A unit that would fit, to be added by a fix where the number is bare.
        suggestion: Option<String>,
    },
    /// Something that must be said is not.
    MissingStatement {
        /// What: "`over` with a band".
        what: String,
        /// Of what: "the requirement".
        of: String,
        /// Why it is needed, or what to write.
        hint: String,
    },
    /// A statement that may stand once stands again.
    Repeated {
        /// The statement's keyword.
        what: String,
        /// The first one.
        first: Place,
    },
    /// A stack whose ends or order can't be.
    StackOrder {
        /// What is wrong, a clause: "it begins with a layer".
        problem: String,
        /// What to do.
        remedy: String,
    },
    /// Definitions that need themselves; the names, first one repeated at the end.
    Cycle {
        /// What goes round: "imports", "lets", "materials", "spectra".
        kind: &'static str,
        /// The names in turn.
        chain: Vec<String>,
    },
    /// A path that leaves the project.
    ImportOutside {
        /// As written.
        path: String,
        /// Why: "leads above the project's root", "is a link that leaves it", "is absolute".
        why: String,
    },
    /// A file that does not exist or can't be read.
    UnreadableFile {
        /// As written.
        path: String,
        /// Why.
        why: String,
        /// Files that are there, nearest first.
        near: Vec<String>,
    },
    /// A table that can't be used.
    TableMalformed {
        /// The file, or none for a table in place.
        file: Option<String>,
        /// The row as counted in the file, from 1; for a table in place the row of the table.
        row: Option<usize>,
        /// The column's name or number.
        column: Option<String>,
        /// What is wrong with it.
        problem: String,
    },
    /// A number that can't be meant here.
    InvalidValue {
        /// What it is: "a thickness", "the number of repeats".
        what: String,
        /// The value with its unit, as text.
        value: String,
        /// What it must be.
        must: String,
    },
}
