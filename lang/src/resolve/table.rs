//! Tables: rows of numbers from CSV files or written in place.

use super::{ModuleId, Resolver};
use crate::finding::FormFact;
use crate::source::Span;
use crate::syntax::ast::{Expr, Table, Text};
use crate::units::Dimension;
use std::sync::Arc;

/// A CSV file: its column names and its rows, each with its line in the file.
#[derive(Debug)]
pub(super) struct Csv {
    columns: Vec<String>,
    rows: Vec<(usize, Vec<f64>)>,
}

/// Rows longer than this are a mistake in the file, not a table of optical constants.
const MOST_COLUMNS: usize = 64;

/// What a table is to hold.
#[derive(Clone, Copy)]
pub(super) struct Shape {
    /// The columns after the wavelength.
    pub(super) columns: &'static [&'static str],
    /// How many of them may be left out at the end; they count as 0.
    pub(super) optional: usize,
    /// Whether the columns of a file must bear these names.
    pub(super) named: bool,
}

/// Wavelength, n and k; k may be left out.
pub(super) const NK: Shape = Shape { columns: &["n", "k"], optional: 1, named: true };
/// Wavelength and k.
pub(super) const K: Shape = Shape { columns: &["k"], optional: 0, named: true };
/// Wavelength and one value.
pub(super) const CURVE: Shape = Shape { columns: &["value"], optional: 0, named: false };

/// A row: the wavelength in nm, then the values of the shape's columns.
pub(super) type Row = (f64, Vec<f64>);

impl Resolver<'_> {
    /// The rows of a table: at least two, wavelengths ascending.
    pub(super) fn table(&mut self, module: ModuleId, table: &Table, shape: Shape) -> Option<Vec<Row>> {
        match table {
            Table::File(path) => self.table_file(module, path, shape),
            Table::Inline { rows, span } => self.table_inline(module, rows, *span, shape),
        }
    }

    /// The rows of a table in a file.
    pub(super) fn table_file(&mut self, module: ModuleId, written: &Text, shape: Shape) -> Option<Vec<Row>> {
        let csv = self.csv(module, written)?;
        let malformed = |row: Option<usize>, column: Option<String>, problem: String| {
            FormFact::TableMalformed { file: Some(written.value.clone()), row, column, problem }
        };
        let wavelength = csv.columns.iter().position(|name| name.starts_with("wavelength_"));
        let factor = match wavelength.map(|at| csv.columns[at].as_str()) {
            Some("wavelength_nm") => 1.0,
            Some("wavelength_um") => 1e3,
            _ => {
                let problem = "has no column named `wavelength_nm` or `wavelength_um`".to_owned();
                self.report(module, written.span, malformed(None, None, problem));
                return None;
            }
        };
        let wavelength = wavelength?;
        let mut columns = Vec::new();
        for (number, name) in shape.columns.iter().enumerate() {
            let at = if shape.named {
                csv.columns.iter().position(|column| column == name)
            } else {
                (0..csv.columns.len()).filter(|at| *at != wavelength).nth(number)
            };
            if at.is_none() && number + shape.optional < shape.columns.len() {
                let problem = format!("has no column named `{name}`");
                self.report(module, written.span, malformed(None, None, problem));
                return None;
            }
            columns.push(at);
        }
        let mut rows: Vec<Row> = Vec::with_capacity(csv.rows.len());
        for (line, cells) in &csv.rows {
            let nm = cells[wavelength] * factor;
            let name = Some(csv.columns[wavelength].clone());
            if let Some(problem) = wrong_wavelength(nm, cells[wavelength], rows.last().map(|row| row.0)) {
                self.report(module, written.span, malformed(Some(*line), name, problem));
                return None;
            }
            let values: Vec<f64> = columns.iter().map(|at| at.map_or(0.0, |at| cells[at])).collect();
            for ((value, at), column) in values.iter().zip(&columns).zip(shape.columns) {
                if let Some(problem) = wrong_value(column, *value) {
                    let name = at.map_or((*column).to_owned(), |at| csv.columns[at].clone());
                    self.report(module, written.span, malformed(Some(*line), Some(name), problem));
                    return None;
                }
            }
            rows.push((nm, values));
        }
        if rows.len() < 2 {
            let problem = format!("holds {}, and at least two are needed", rows_word(rows.len()));
            self.report(module, written.span, malformed(None, None, problem));
            return None;
        }
        Some(rows)
    }

    fn table_inline(
        &mut self,
        module: ModuleId,
        rows: &[Vec<Expr>],
        span: Span,
        shape: Shape,
    ) -> Option<Vec<Row>> {
        let mut read: Vec<Row> = Vec::with_capacity(rows.len());
        let mut sound = true;
        for (number, cells) in rows.iter().enumerate() {
            let row = number + 1;
            let malformed = |column: Option<&str>, problem: String| FormFact::TableMalformed {
                file: None,
                row: Some(row),
                column: column.map(str::to_owned),
                problem,
            };
            let whole = cells
                .first()
                .map_or(span, |first| cells.last().map_or(first.span, |last| first.span.to(last.span)));
            let least = 1 + shape.columns.len() - shape.optional;
            if cells.len() < least || cells.len() > 1 + shape.columns.len() {
                let wanted = shape.columns.join(" and ");
                let count = if cells.len() == 1 {
                    "one number".to_owned()
                } else {
                    format!("{} numbers", cells.len())
                };
                let problem = format!("has {count}; a wavelength and {wanted} are needed");
                self.report(module, whole, malformed(None, problem));
                sound = false;
                continue;
            }
            let nm = self.wavelength(module, &cells[0], "the first number of a row");
            let mut values = Vec::new();
            for (cell, column) in cells[1..].iter().zip(shape.columns) {
                let value = self.quantity(module, cell, Dimension::Ratio, column);
                if let Some(problem) = value.and_then(|value| wrong_value(column, value)) {
                    self.report(module, cell.span, malformed(Some(column), problem));
                    sound = false;
                }
                values.push(value);
            }
            values.resize(shape.columns.len(), Some(0.0));
            let (Some(nm), Some(values)) = (nm, values.into_iter().collect::<Option<Vec<f64>>>()) else {
                sound = false;
                continue;
            };
            if let Some(problem) = wrong_wavelength(nm, nm, read.last().map(|row| row.0)) {
                self.report(module, cells[0].span, malformed(Some("wavelength"), problem));
                sound = false;
                continue;
            }
            read.push((nm, values));
        }
        if sound && read.len() < 2 {
            let problem = format!("holds {}, and at least two are needed", rows_word(read.len()));
            let fact = FormFact::TableMalformed { file: None, row: None, column: None, problem };
            self.report(module, span, fact);
            return None;
        }
        sound.then_some(read)
    }

    /// A CSV file, read once for all that use it; problems are reported where it is first used.
    fn csv(&mut self, module: ModuleId, written: &Text) -> Option<Arc<Csv>> {
        let path = self.path_of(module, written)?;
        if let Some(known) = self.tables.get(&path) {
            return known.clone();
        }
        let read = match self.files.read(&path) {
            Ok(bytes) => read_csv(&bytes).map_err(|(row, column, problem)| FormFact::TableMalformed {
                file: Some(written.value.clone()),
                row,
                column,
                problem,
            }),
            Err(error) => Err(self.unreadable(&written.value, &path, error)),
        };
        let table = match read {
            Ok(csv) => Some(Arc::new(csv)),
            Err(fact) => {
                self.report(module, written.span, fact);
                None
            }
        };
        self.tables.insert(path, table.clone());
        table
    }
}

fn rows_word(count: usize) -> String {
    match count {
        0 => "no row".to_owned(),
        1 => "one row".to_owned(),
        several => format!("{several} rows"),
    }
}

/// What is wrong with a wavelength, if anything: `nm` converted, `shown` as written.
fn wrong_wavelength(nm: f64, shown: f64, before: Option<f64>) -> Option<String> {
    if !(nm.is_finite() && nm > 0.0) {
        return Some(format!("is {shown}, and a wavelength is greater than 0"));
    }
    match before {
        Some(before) if nm == before => Some(format!("is {shown}, which the row before has already")),
        Some(before) if nm < before => {
            Some(format!("is {shown}, less than in the row before; rows must ascend"))
        }
        _ => None,
    }
}

/// What is wrong with a value of this column, if anything.
fn wrong_value(column: &str, value: f64) -> Option<String> {
    match column {
        _ if !value.is_finite() => Some(format!("is {value}, which is no number")),
        "n" if value <= 0.0 => Some(format!("is {value}, and n is greater than 0")),
        "k" if value < 0.0 => Some(format!("is {value}, and k is 0 or more")),
        _ => None,
    }
}

type CsvProblem = (Option<usize>, Option<String>, String);

/// Reads a CSV file with a header; `#` starts a comment line.
fn read_csv(bytes: &[u8]) -> Result<Csv, CsvProblem> {
    let mut text =
        crate::syntax::decode(bytes).map_err(|_| (None, None, "is not a text in UTF-8".to_owned()))?;
    // Every row then ends with a line break, and the reader's line after a row is the one below it.
    text.push('\n');
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .flexible(true)
        .from_reader(text.as_bytes());
    let columns: Vec<String> = match reader.headers() {
        Ok(header) => header.iter().map(str::to_owned).collect(),
        Err(error) => return Err((None, None, format!("can't be read: {error}"))),
    };
    if let ([only], Some(mark)) =
        (columns.as_slice(), columns.first().and_then(|name| name.find([';', '\t'])))
    {
        let mark = if only[mark..].starts_with(';') { "`;`" } else { "tabs" };
        return Err((
            None,
            None,
            format!("parts its cells by {mark}; part them by `,` and write decimals with `.`"),
        ));
    }
    if let Some(twice) = columns.iter().enumerate().find(|(at, name)| columns[..*at].contains(name)) {
        return Err((None, Some(twice.1.clone()), "is the name of two columns; keep one".to_owned()));
    }
    if columns.len() < 2 || columns.len() > MOST_COLUMNS {
        return Err((
            None,
            None,
            "needs a first line that names its columns, for example `wavelength_nm,n,k`".to_owned(),
        ));
    }
    let mut rows = Vec::new();
    let mut record = csv::StringRecord::new();
    while reader.read_record(&mut record).map_err(|error| (None, None, format!("can't be read: {error}")))? {
        let line = reader.position().line() as usize - 1;
        if record.len() != columns.len() {
            let problem = format!("has {} cells, and the first line names {}", record.len(), columns.len());
            return Err((Some(line), None, problem));
        }
        let mut cells = Vec::with_capacity(columns.len());
        for (cell, name) in record.iter().zip(&columns) {
            match cell.parse::<f64>() {
                Ok(value) if value.is_finite() => cells.push(value),
                _ => {
                    let problem = if cell.is_empty() {
                        "is empty".to_owned()
                    } else {
                        format!("is `{}`, which is no number", cell.chars().take(40).collect::<String>())
                    };
                    return Err((Some(line), Some(name.clone()), problem));
                }
            }
        }
        rows.push((line, cells));
    }
    Ok(Csv { columns, rows })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_are_those_of_the_file() {
        let csv = read_csv(b"# a comment\nwavelength_nm,n,k\n400, 1.5, 0\n# more\n500,1.4,x\n");
        let problem = csv.expect_err("the last row is wrong");
        assert_eq!(problem.0, Some(5));
        assert_eq!(problem.1.as_deref(), Some("k"));
    }

    #[test]
    fn a_ragged_row_is_named() {
        let problem = read_csv(b"wavelength_nm,n,k\n400,1.5\n").expect_err("a cell is missing");
        assert_eq!(problem.0, Some(2));
    }
}
