//! What can be wrong with a table as a whole, and with a single cell.

use super::{encoding::Encoding, options::Delimiter, role::Role};
use crate::quantity::number::{DecimalMark, NumberError, shorten};
use std::fmt;

/// Why bytes are not taken for a table. Lines and columns count from 1, lines in the file.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum TableError {
    /// No byte, or only space.
    #[error("the file is empty; accepted: a table with a header and at least one row")]
    Empty,
    /// Bytes that do not stand for text.
    #[error(
        "line {line}: {found} does not belong in {encoding} text; accepted: a text file in UTF-8, UTF-16 with a \
         byte-order mark, or Latin-1 (save a workbook as delimited text first)"
    )]
    Encoding {
        /// The encoding that was tried.
        encoding: Encoding,
        /// The line that could not be read.
        line: usize,
        /// What was found there.
        found: String,
    },
    /// A quotation mark that nothing closes.
    #[error(
        "line {line}: a quotation mark is opened in this row and never closed; accepted: cells without it, or \
         closed by a second one"
    )]
    UnclosedQuote {
        /// The line in which the row begins.
        line: usize,
    },
    /// Nothing below the header.
    #[error(
        "no row of numbers was found, to the last line {last_line}; accepted: at least one row of numbers, below the \
         header if there is one, with a comma, semicolon or tab between cells"
    )]
    NoRows {
        /// The last line of the file that holds anything.
        last_line: usize,
    },
    /// Rows that are wider or narrower than the table.
    #[error(
        "line {line} has {found} cell{} where the table has {expected}{}; accepted: the same number of cells in \
         every row, and cells that hold the delimiter in quotation marks",
        plural(*.found), more_lines(.more)
    )]
    UnequalColumns {
        /// The first such line.
        line: usize,
        /// How many cells it has.
        found: usize,
        /// How many the table has.
        expected: usize,
        /// Further such lines, up to 19.
        more: Vec<usize>,
    },
    /// A column that is needed and not there.
    #[error(
        "no column {role} among {}; accepted: a column with the name {role}, or one named by \
         --columns {role}=…{}", listed(.headers), one_column(.headers)
    )]
    MissingColumn {
        /// The column needed.
        role: Role,
        /// The heads found, left to right.
        headers: Vec<String>,
    },
    /// Two columns under one name.
    #[error(
        "columns {} and {} are both {role}; accepted: one of them, named by its number with \
         --columns {role}={}", .columns[0], .columns[1], .columns[0]
    )]
    RepeatedColumn {
        /// What both would be.
        role: Role,
        /// Their numbers, from 1.
        columns: [usize; 2],
    },
    /// A column named in the options that the file does not have.
    #[error(
        "no head {name:?} for {role} among {}; accepted: one of these, or a column number from 1", listed(.headers)
    )]
    NoSuchHeader {
        /// What the column was to be.
        role: Role,
        /// The head asked for.
        name: String,
        /// The heads found, left to right.
        headers: Vec<String>,
    },
    /// One column asked to be two things.
    #[error(
        "column {column} {header:?} is asked to be both {} and {}; accepted: one column for each", .roles[0], .roles[1]
    )]
    ColumnTwice {
        /// Its number, from 1.
        column: usize,
        /// Its head.
        header: String,
        /// What it was asked to be.
        roles: [Role; 2],
    },
    /// Text that can be read in two ways.
    #[error("line {line}, column {column}: {text:?} can be read as {} or as {}; {hint}", .readings[0], .readings[1])]
    Ambiguous {
        /// The line of the first such text.
        line: usize,
        /// Its column, from 1.
        column: usize,
        /// The text.
        text: String,
        /// The two ways to read it.
        readings: [String; 2],
        /// How to say which is meant.
        hint: String,
    },
    /// The comma stands both between cells and in numbers.
    #[error(
        "line {line}, column {column}: {text:?} has a comma as decimal mark in a file whose cells are separated by \
         commas; accepted: semicolons or tabs between the cells, or decimal points"
    )]
    CommaForBoth {
        /// The line of the first such text.
        line: usize,
        /// Its column, from 1.
        column: usize,
        /// The text.
        text: String,
    },
    /// The options ask for the comma both between cells and in numbers.
    #[error(
        "the comma was asked for both as delimiter and as decimal mark; accepted: a semicolon or tab as delimiter \
         with a decimal comma, or a decimal point"
    )]
    CommaAskedForBoth,
}

/// Where a cell stands. Numbers count from 1, lines in the file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Place {
    /// Line in the file.
    pub line: usize,
    /// Column of the table.
    pub column: usize,
    /// The head of that column.
    pub header: String,
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "line {}, {}", self.line, column_text(self.column, &self.header))
    }
}

/// Why a cell is not taken.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum CellError {
    /// Not a number, or a number in a form that is refused.
    #[error("{place}: {why}; accepted: {accepted}")]
    NotANumber {
        /// Where it stands.
        place: Place,
        /// What was found, cut to a readable length.
        text: String,
        /// What is wrong with it.
        why: NumberError,
        /// What would be taken.
        accepted: String,
    },
    /// A cell that may not be empty.
    #[error("{place}: the cell is empty; accepted: {accepted}")]
    Missing {
        /// Where it stands.
        place: Place,
        /// What would be taken.
        accepted: String,
    },
    /// A standard uncertainty below zero.
    #[error("{place}: {text:?} is negative; accepted: a standard uncertainty of 0 or more")]
    Negative {
        /// Where it stands.
        place: Place,
        /// What was found.
        text: String,
    },
    /// A count that is not a whole number from 0.
    #[error("{place}: {text:?} is not a whole number; accepted: 0, 1, 2, … up to 4294967295")]
    NotWhole {
        /// Where it stands.
        place: Place,
        /// What was found, cut to a readable length.
        text: String,
    },
    /// A word that is not among those known.
    #[error("{place}: {text:?} is not known; accepted: {accepted}")]
    UnknownWord {
        /// Where it stands.
        place: Place,
        /// What was found, cut to a readable length.
        text: String,
        /// The words known.
        accepted: &'static str,
    },
    /// Cells beyond those listed.
    #[error("{count} further cells cannot be taken")]
    Further {
        /// How many.
        count: usize,
    },
}

/// A column by number, from 1, and head, if it has one of its own.
pub(super) fn column_text(number: usize, head: &str) -> String {
    let plain = format!("column {number}");
    if head == plain { plain } else { format!("{plain} ({})", shorten(head)) }
}

/// The number form that is accepted under a decimal mark.
pub(super) fn accepted_number(decimal: DecimalMark) -> String {
    let mark = decimal.as_char();
    format!("a number such as −12{mark}5 or 3{mark}2e-4, with a {decimal} and without thousands marks")
}

/// The delimiter as an option text.
pub(super) fn delimiter_option(delimiter: Option<Delimiter>) -> String {
    match delimiter {
        Some(Delimiter::Comma) => "--delimiter ,".to_owned(),
        Some(Delimiter::Semicolon) => "--delimiter ';'".to_owned(),
        Some(Delimiter::Tab) => "--delimiter tab".to_owned(),
        None => "--decimal ,".to_owned(),
    }
}

fn listed(headers: &[String]) -> String {
    const MOST: usize = 20;
    let mut list: Vec<String> = headers.iter().take(MOST).map(|header| format!("{:?}", shorten(header))).collect();
    if headers.len() > MOST {
        list.push(format!("{} more", headers.len() - MOST));
    }
    list.join(", ")
}

fn plural(count: usize) -> &'static str {
    if count == 1 { "" } else { "s" }
}

fn one_column(headers: &[String]) -> &'static str {
    match headers.len() {
        0 | 1 => "; only one column was found, and cells are separated by comma, semicolon or tab",
        _ => "",
    }
}

fn more_lines(lines: &[usize]) -> String {
    if lines.is_empty() {
        return String::new();
    }
    let list: Vec<String> = lines.iter().map(usize::to_string).collect();
    format!(" (likewise line {})", list.join(", "))
}
