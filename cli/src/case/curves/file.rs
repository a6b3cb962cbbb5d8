//! A curve in a CSV file: a header row that names H and B with their units, then numbers.

use std::fs::File;
use std::io::Read;
use std::path::Path;

use super::RowPoint;
use crate::case::expression::{Dimension, Expression};
use crate::case::givens::Givens;

/// Most bytes of a curve file; a curve has some dozens of rows.
const MOST_BYTES: u64 = 4 << 20;
/// What the header should look like.
const HEADER: &str = "`H (A/m), B (T)`";

/// The points of a file. Rows count from 1, the header's own row.
#[derive(Clone, Debug, PartialEq)]
pub struct CurveFile {
    /// The points in SI units, in file order.
    pub points: Vec<RowPoint>,
}

/// Why a file is no curve.
#[derive(Debug, thiserror::Error)]
pub enum FileFault {
    /// It cannot be read.
    #[error("cannot be opened: {0}")]
    Unreadable(#[from] std::io::Error),
    /// Larger than any curve.
    #[error("has more than {} MiB, which no curve has", MOST_BYTES >> 20)]
    TooLarge,
    /// It is not text.
    #[error("is not text in UTF-8")]
    NotText,
    /// There is nothing in it.
    #[error("is empty; expected a header row such as {HEADER}")]
    Empty,
    /// The header is not what it should be.
    #[error("row {row}: {found}; expected a header row such as {HEADER}")]
    Header {
        /// Row of the header.
        row: usize,
        /// What is wrong with it.
        found: String,
    },
    /// A field that is no number.
    #[error("row {row}: expected a number for {column}, found `{found}`")]
    NoNumber {
        /// Row.
        row: usize,
        /// `H` or `B`.
        column: &'static str,
        /// The field.
        found: String,
    },
    /// Too few fields.
    #[error("row {row}: expected {expected} fields as in the header, found {found}")]
    Fields {
        /// Row.
        row: usize,
        /// How many the header has.
        expected: usize,
        /// How many the row has.
        found: usize,
    },
    /// The file is no CSV.
    #[error("is no table of comma-separated values: {0}")]
    Csv(#[from] csv::Error),
}

/// Where a quantity stands, and what one of its units is in SI.
#[derive(Clone, Copy, Debug)]
struct Column {
    index: usize,
    factor: f64,
}

impl CurveFile {
    /// Reads a file.
    ///
    /// # Errors
    /// A file that cannot be read, whose header does not tell both units, or whose rows are no numbers.
    pub fn read(path: &Path) -> Result<Self, FileFault> {
        let mut bytes = Vec::new();
        File::open(path)?.take(MOST_BYTES + 1).read_to_end(&mut bytes)?;
        if bytes.len() as u64 > MOST_BYTES {
            return Err(FileFault::TooLarge);
        }
        Self::parse(std::str::from_utf8(&bytes).map_err(|_| FileFault::NotText)?)
    }

    /// Reads the text of a file: values separated by commas, semicolons or tabs; `#` begins a comment line.
    ///
    /// # Errors
    /// As [`CurveFile::read`].
    pub fn parse(text: &str) -> Result<Self, FileFault> {
        let text = text.trim_start_matches('\u{feff}');
        let mut reader = csv::ReaderBuilder::new()
            .delimiter(delimiter(text))
            .comment(Some(b'#'))
            .trim(csv::Trim::All)
            .has_headers(false)
            .flexible(true)
            .from_reader(text.as_bytes());
        let mut columns: Option<([Column; 2], usize)> = None;
        let mut points = Vec::new();
        for record in reader.records() {
            let record = record?;
            // The position of a record that was read is always known.
            let row = record.position().map_or(0, |at| at.line() as usize);
            let Some((found, width)) = &columns else {
                columns = Some((header(&record, row)?, record.len()));
                continue;
            };
            if record.len() != *width {
                return Err(FileFault::Fields {
                    row,
                    expected: *width,
                    found: record.len(),
                });
            }
            points.push(RowPoint {
                row,
                h_a_per_m: number(&record, found[0], "H", row)?,
                b_t: number(&record, found[1], "B", row)?,
            });
        }
        match columns {
            Some(_) => Ok(Self { points }),
            None => Err(FileFault::Empty),
        }
    }
}

/// What separates the fields of the first line that is no comment.
fn delimiter(text: &str) -> u8 {
    let first = text
        .lines()
        .find(|line| !line.trim().is_empty() && !line.starts_with('#'))
        .unwrap_or_default();
    [b',', b';', b'\t']
        .into_iter()
        .find(|mark| first.as_bytes().contains(mark))
        .unwrap_or(b',')
}

fn number(
    record: &csv::StringRecord,
    column: Column,
    name: &'static str,
    row: usize,
) -> Result<f64, FileFault> {
    let field = record.get(column.index).unwrap_or_default();
    match field.parse::<f64>() {
        Ok(number) if number.is_finite() => Ok(number * column.factor),
        _ => Err(FileFault::NoNumber {
            row,
            column: name,
            found: field.to_owned(),
        }),
    }
}

/// The columns of H and B.
fn header(record: &csv::StringRecord, row: usize) -> Result<[Column; 2], FileFault> {
    let fault = |found: String| FileFault::Header { row, found };
    if record.iter().all(|field| field.parse::<f64>().is_ok()) {
        return Err(fault("the units of H and B are not told".to_owned()));
    }
    let find = |name: &str, dimension: Dimension, units: &str| {
        let mut named = record
            .iter()
            .enumerate()
            .filter_map(|(index, field)| Some((index, field, unit_of(field, name)?)));
        let Some((index, field, unit)) = named.next() else {
            return Err(fault(format!("there is no column {name}")));
        };
        if named.next().is_some() {
            return Err(fault(format!("there are two columns {name}")));
        }
        if unit.is_empty() {
            return Err(fault(format!(
                "the column `{field}` does not tell its unit ({units})"
            )));
        }
        match factor(unit, dimension) {
            Some(factor) => Ok(Column { index, factor }),
            None => Err(fault(format!("`{unit}` is no unit of {name}, such as {units}"))),
        }
    };
    Ok([
        find("H", Dimension::FIELD_STRENGTH, "A/m, kA/m or Oe")?,
        find("B", Dimension::FLUX_DENSITY, "T, mT or G")?,
    ])
}

/// The unit of a header's field if it is that of `name`: `H (A/m)`, `H [A/m]`; empty if none stands there.
fn unit_of<'a>(field: &'a str, name: &str) -> Option<&'a str> {
    let (before, unit) = match field.find(['(', '[']) {
        Some(open) => (
            &field[..open],
            field[open + 1..].trim_end().trim_end_matches([')', ']']),
        ),
        None => (field, ""),
    };
    before.trim().eq_ignore_ascii_case(name).then(|| unit.trim())
}

/// SI value of one unit, by the case file's own table of units.
fn factor(unit: &str, dimension: Dimension) -> Option<f64> {
    let value = Expression::parse(&format!("1 {unit}"))
        .ok()?
        .evaluate(&Givens::default())
        .ok()?;
    (value.dimension == dimension && value.si > 0.0).then_some(value.si)
}
