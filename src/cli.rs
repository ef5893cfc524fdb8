//! The command's arguments.

use clap::builder::styling::{AnsiColor, Styles};
use clap::{Args, Parser, Subcommand, ValueEnum};
use std::path::PathBuf;

const STYLES: Styles = Styles::styled()
    .header(AnsiColor::Green.on_default().bold())
    .usage(AnsiColor::Green.on_default().bold())
    .literal(AnsiColor::Cyan.on_default())
    .placeholder(AnsiColor::Cyan.on_default());

const EXIT_STATUS: &str = "\
Exit status:
  0  everything asked for is met
  1  something is missed: a requirement, a limit of the chamber, a denied warning
  2  a recipe can't be understood, a file can't be read, or the command line is wrong
  3  a fault of the tool's own";

const CHECK_EXAMPLES: &str = "\
Examples:
  overcoat check
      All recipes below this folder.
  overcoat check recipes/front.coat --deny warnings
      One file; warnings count as missed.
  overcoat check --format junit --output overcoat.xml
      For a build server.";

const SPECTRUM_EXAMPLES: &str = "\
Examples:
  overcoat spectrum front.coat --over 300..1100nm --step 5nm > front.csv
  overcoat spectrum splitter.coat --recipe plate --at 45deg --polarised s";

const YIELD_EXAMPLES: &str = "\
Examples:
  overcoat yield front.coat
  overcoat yield front.coat --parts 20000 --format csv --output parts.csv
      A row for each part: what was drawn, and every value.";

/// Checks optical-coating recipes before they reach the chamber.
///
/// Recipes are text files that end in `.coat`. `overcoat check` evaluates each stack with the interference of
/// light in thin films, and says which promises it breaks and which limits of the chamber it exceeds.
#[derive(Debug, Parser)]
#[command(version, styles = STYLES, after_long_help = EXIT_STATUS, max_term_width = 100)]
pub(crate) struct Cli {
    #[command(subcommand)]
    pub(crate) command: Command,
    #[command(flatten)]
    pub(crate) global: Global,
}

/// Options of every command.
#[derive(Debug, Args)]
pub(crate) struct Global {
    /// Colour the output.
    ///
    /// `auto` colours on a terminal, unless the environment variable NO_COLOR is set.
    #[arg(long, global = true, value_enum, default_value_t = Colour::Auto, value_name = "WHEN")]
    pub(crate) color: Colour,
    /// The project's root; nothing outside it is read.
    ///
    /// Without it, the root is the nearest folder upward from the paths that holds `.git` or `overcoat.toml`,
    /// and where there is none, the paths' own folder.
    #[arg(long, global = true, value_name = "FOLDER")]
    pub(crate) root: Option<PathBuf>,
}

/// When to colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum Colour {
    /// On a terminal.
    Auto,
    /// Also in a pipe.
    Always,
    /// Never.
    Never,
}

#[derive(Debug, Subcommand)]
pub(crate) enum Command {
    /// Check recipes: what they promise, what the chamber can do, where the numbers come from.
    ///
    /// Every `.coat` file below the paths is checked, hidden folders and what `.gitignore` names left out. A
    /// file named outright is always checked.
    #[command(after_help = CHECK_EXAMPLES, after_long_help = format!("{CHECK_EXAMPLES}\n\n{EXIT_STATUS}"))]
    Check(Check),
    /// Print reflectance, transmittance and absorptance of a recipe as CSV.
    ///
    /// The columns are wavelength_nm, reflectance, transmittance and absorptance; ratios are fractions of the
    /// incident power. Each number is the shortest that reads back as the same double.
    #[command(after_help = SPECTRUM_EXAMPLES)]
    Spectrum(Spectrum),
    /// Work out how many parts of a recipe will pass, with what its chamber varies drawn anew for each.
    ///
    /// Prints the yield with its interval, and for every requirement how many parts meet it, how its value is distributed
    /// and which variation is behind that. The same recipe gives the same parts on every machine.
    #[command(after_help = YIELD_EXAMPLES)]
    Yield(Yield),
    /// Lay recipes out in the one layout.
    ///
    /// Comments stay where they are and the meaning never changes. A file with syntax errors is reported and
    /// left as it is.
    Fmt(Fmt),
    /// Explain a code of the checker's messages, for example `layer_too_thin`.
    ///
    /// Without a code, lists all codes.
    Explain(Explain),
    /// Show the optical constants and spectra that come with the tool.
    ///
    /// Without a name, lists all entries with the range of their data.
    Handbook(Handbook),
    /// Print a script that completes this command's arguments in a shell.
    Completions(Completions),
}

#[derive(Debug, Args)]
pub(crate) struct Check {
    /// Files, or folders whose `.coat` files are checked.
    #[arg(default_value = ".", value_name = "PATH")]
    pub(crate) paths: Vec<PathBuf>,
    /// What to print.
    #[arg(long, value_enum, default_value_t = Format::Human)]
    pub(crate) format: Format,
    /// Fail on this code too, or on every warning with `warnings`; may be repeated.
    ///
    /// Adds to `deny` in overcoat.toml. Waived findings never fail.
    #[arg(long, value_name = "CODE", value_delimiter = ',')]
    pub(crate) deny: Vec<String>,
    /// Write to this file instead of the standard output.
    #[arg(long, value_name = "FILE")]
    pub(crate) output: Option<PathBuf>,
    /// The day on which waivers are judged, for example 2027-01-31; today by default.
    ///
    /// Give it to get the same result from the same files on any day.
    #[arg(long, value_name = "DATE")]
    pub(crate) today: Option<jiff::civil::Date>,
    /// How many parts a `require yield` is worked out from, in place of what it says.
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u32).range(1..=MOST_PARTS))]
    pub(crate) parts: Option<u32>,
    /// Leave out `require yield`: it counts as neither met nor missed.
    #[arg(long, conflicts_with = "parts")]
    pub(crate) no_yield: bool,
}

/// More parts than this are a slip of the pen.
const MOST_PARTS: i64 = 10_000_000;

/// How a check is told.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum Format {
    /// For people: each message with its place in the text, then a table for each recipe.
    Human,
    /// One JSON object: recipes with their numbers, and all diagnostics.
    Json,
    /// SARIF 2.1.0, for code-review tools.
    Sarif,
    /// JUnit XML, for build servers.
    Junit,
}

#[derive(Debug, Args)]
pub(crate) struct Spectrum {
    /// The file with the recipe.
    #[arg(value_name = "FILE")]
    pub(crate) file: PathBuf,
    /// Which recipe; needed where the file holds several.
    #[arg(long, value_name = "NAME")]
    pub(crate) recipe: Option<String>,
    /// The band, for example 400..700nm, 0.4..0.7um or 1.8..3.1eV.
    ///
    /// By default the smallest band that holds all bands and wavelengths of the recipe's requirements, or
    /// 380 to 780 nm where it has none, as far as all its materials have data.
    #[arg(long, value_name = "BAND")]
    pub(crate) over: Option<String>,
    /// The step from one row to the next; the last row is the end of the band.
    #[arg(long, default_value = "1nm", value_name = "LENGTH")]
    pub(crate) step: String,
    /// The angle of incidence.
    #[arg(long, default_value = "0deg", value_name = "ANGLE")]
    pub(crate) at: String,
    /// The polarisation; the mean of both by default.
    #[arg(long, value_enum, value_name = "S|P")]
    pub(crate) polarised: Option<Polarised>,
    /// The side that the light comes from.
    #[arg(long, value_enum, default_value_t = From::Incident, value_name = "SIDE")]
    pub(crate) from: From,
}

/// A polarisation.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum Polarised {
    /// The electric field stands across the plane of incidence.
    S,
    /// The electric field lies in the plane of incidence.
    P,
}

/// A side of the stack.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum From {
    /// The side of `incident`.
    Incident,
    /// The side of `exit`, or of the substrate where that is a half-space.
    Exit,
}

#[derive(Debug, Args)]
pub(crate) struct Yield {
    /// The file with the recipe.
    #[arg(value_name = "FILE")]
    pub(crate) file: PathBuf,
    /// Which recipe; needed where the file holds several.
    #[arg(long, value_name = "NAME")]
    pub(crate) recipe: Option<String>,
    /// How many parts; by default as many as the recipe's own `require yield` says, or 2000.
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u32).range(1..=MOST_PARTS))]
    pub(crate) parts: Option<u32>,
    /// What to print.
    #[arg(long, value_enum, default_value_t = Table::Human)]
    pub(crate) format: Table,
    /// Write to this file instead of the standard output.
    #[arg(long, value_name = "FILE")]
    pub(crate) output: Option<PathBuf>,
}

/// How a yield is told.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum Table {
    /// For people.
    Human,
    /// One JSON object.
    Json,
    /// A row for each part: its number, whether it passes, what was drawn, the value of each requirement.
    Csv,
}

#[derive(Debug, Args)]
pub(crate) struct Fmt {
    /// Files, or folders whose `.coat` files are laid out; `-` for the standard input.
    #[arg(default_value = ".", value_name = "PATH")]
    pub(crate) paths: Vec<PathBuf>,
    /// Change nothing: list the files that are laid out otherwise, and end with status 1 if there is one.
    #[arg(long)]
    pub(crate) check: bool,
}

#[derive(Debug, Args)]
pub(crate) struct Explain {
    /// The code.
    #[arg(value_name = "CODE")]
    pub(crate) code: Option<String>,
}

#[derive(Debug, Args)]
pub(crate) struct Handbook {
    /// The entry.
    #[arg(value_name = "NAME")]
    pub(crate) name: Option<String>,
    /// List the entries that hold all of these words, or beginnings of words, in their name, description or source.
    #[arg(long, value_name = "WORD", num_args = 1.., conflicts_with = "name")]
    pub(crate) search: Vec<String>,
    /// Wavelengths at which to print the optical constants, for example 550nm; several with commas.
    #[arg(long, value_name = "WAVELENGTH", value_delimiter = ',', requires = "name")]
    pub(crate) at: Vec<String>,
}

#[derive(Debug, Args)]
pub(crate) struct Completions {
    /// The shell.
    #[arg(value_enum)]
    pub(crate) shell: clap_complete::Shell,
}
