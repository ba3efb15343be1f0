//! Delimited text to a checked table, every decision visible and changeable.
//!
//! [`read_table`] takes bytes apart: encoding, delimiter, decimal mark, heads, units and the meaning of columns are
//! recognised, unless [`TableOptions`] settles them, and stand in the [`Table`] beside the raw cells.
//! [`Table::records`] then reads the cells. Where a text can be read in two ways nothing is chosen: the error shows
//! both. The types here belong to the file format and are converted by hand to those of a project.

mod columns;
mod decimal;
mod delimiter;
mod draft;
mod encoding;
mod error;
mod layout;
mod notes;
mod opening;
mod options;
mod records;
mod role;
mod split;
mod units;
mod words;

#[cfg(test)]
mod corpus;
#[cfg(test)]
mod laws;
#[cfg(test)]
mod refusals;

pub use crate::quantity::number::DecimalMark;
pub use encoding::Encoding;
pub use error::{CellError, Place, TableError};
pub use options::{Delimiter, OptionError, Purpose, TableOptions, parse_columns, parse_decimal, parse_delimiter};
pub use records::{Number, Record};
pub use role::Role;
pub use words::{Direction, Kind, Stage};

use draft::Draft;
use opening::Opening;
use std::collections::BTreeMap;

/// One row of data.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Row {
    /// Line in the file where the row begins, from 1.
    pub line: usize,
    /// The cells as typed, without their quotation marks.
    pub cells: Vec<String>,
}

/// A table as it was understood.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Table {
    /// What it was read for.
    pub purpose: Purpose,
    /// How bytes stood for characters.
    pub encoding: Encoding,
    /// The mark between cells; `None` for a single column without one.
    pub delimiter: Option<Delimiter>,
    /// The mark between whole part and fraction; a point where no number has a mark.
    pub decimal: DecimalMark,
    /// How many rows are heads, a row of units included; heads in a comment line do not count.
    pub header_rows: usize,
    /// The head of each column without its unit; `column 1` and so on where there is none.
    pub headers: Vec<String>,
    /// The unit of each column, if one is given.
    pub units: Vec<Option<String>>,
    /// Position of each role, from 0.
    pub roles: BTreeMap<Role, usize>,
    /// The rows of data, at least one, each with one cell for each head.
    pub rows: Vec<Row>,
    /// Sentences on what was assumed, left out, or deserves a look.
    pub notes: Vec<String>,
    /// The lines above the heads, without the `#` of comments.
    pub preamble: Vec<String>,
}

impl Table {
    /// The unit of the column with that role, if it is given.
    #[must_use]
    pub fn unit(&self, role: Role) -> Option<&str> {
        self.units.get(*self.roles.get(&role)?)?.as_deref()
    }

    /// Position of the column with that head, for columns that have no role.
    #[must_use]
    pub fn column(&self, head: &str) -> Option<usize> {
        self.headers.iter().position(|header| header == head.trim())
    }
}

/// Reads a table from the bytes of a file.
///
/// # Shapes and units
/// Bytes of one file; rows of equal width. Nothing is converted: cells stay text, units stay as written.
///
/// # Errors
/// [`TableError`] names what was found, where, and what would be accepted; in particular
/// [`TableError::Ambiguous`] where a text can be read in two ways.
///
/// # Source
/// Quotation marks in cells: RFC 4180, section 2, rules 5 to 7. Recognition of marks and heads: common practice.
pub fn read_table(bytes: &[u8], options: &TableOptions) -> Result<Table, TableError> {
    let comma = (Some(Delimiter::Comma), Some(DecimalMark::Comma));
    if (options.delimiter, options.decimal) == comma {
        return Err(TableError::CommaAskedForBoth);
    }
    let decoded = encoding::decode(bytes, options.encoding)?;
    let text = &*decoded.text;
    if text.trim().is_empty() {
        return Err(TableError::Empty);
    }
    let opening = Opening::of(text);
    let delimiter = delimiter::recognise(text, &opening, options)?;
    let opening = opening.with_heads(text, delimiter, options);
    let mut split = split::split(text, opening.start, delimiter)?;
    let draft =
        Draft::of(std::mem::take(&mut split.rows), options, delimiter).map_err(|error| with_last_line(error, text))?;
    let decimal = decimal::recognise(&draft, options, delimiter)?;
    let mut table = Table {
        purpose: options.purpose,
        encoding: decoded.encoding,
        delimiter,
        decimal: decimal.mark,
        header_rows: draft.header_rows - usize::from(opening.heads_in_comment),
        headers: draft.columns.iter().map(|column| column.name.clone()).collect(),
        units: draft.columns.into_iter().map(|column| column.unit).collect(),
        roles: draft.assigned.roles,
        rows: draft.rows,
        notes: draft.assigned.notes,
        preamble: [opening.preamble.clone(), draft.preamble].concat(),
    };
    table.notes.extend(decimal.note);
    notes::add(&mut table, &opening, &split, decoded.not_utf8_in_line);
    Ok(table)
}

/// A file of comments alone has no row to take the line from.
fn with_last_line(error: TableError, text: &str) -> TableError {
    match error {
        TableError::NoRows { .. } => {
            TableError::NoRows { last_line: encoding::line_ends(text.trim_end().as_bytes()) + 1 }
        }
        other => other,
    }
}
