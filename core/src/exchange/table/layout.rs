//! Which rows are preamble, which are heads, and where the numbers begin.
//!
//! Edge cases: a title above the table, alone in its row or padded with delimiters; names in two rows; a row of
//! units below the names; no heads at all; heads of another width than the rows, which is an error and not a
//! preamble; a first row of numbers that is too narrow, likewise.

use super::{
    Row,
    error::TableError,
    options::{Delimiter, TableOptions},
    role::Role,
    units::{heading, is_units_row},
};
use crate::quantity::number::{NumberError, parse_number, shorten};
use std::collections::BTreeMap;

/// How many rows are searched for the names of the columns.
const SEARCHED: usize = 64;

/// The parts of a table, as positions among its rows.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Layout {
    /// First row of heads; all above is preamble.
    pub(super) heads: usize,
    /// First row of data.
    pub(super) data: usize,
    /// Cells in a row.
    pub(super) width: usize,
    /// Whether a head names the readings.
    pub(super) named: bool,
}

/// Finds the parts and checks that every data row has the width of the table.
pub(super) fn lay_out(
    rows: &[Row],
    options: &TableOptions,
    delimiter: Option<Delimiter>,
) -> Result<Layout, TableError> {
    let usual = usual_width(rows);
    let names = named_row(rows, usual, options);
    let layout = match (options.header_rows, names) {
        (Some(count), names) => as_asked(rows, usual, count, names),
        (None, Some(at)) => {
            let units = has_units_below(rows, at);
            let data = at + 1 + usize::from(units);
            Layout { heads: at, data, width: filled_width(&rows[at]), named: true }
        }
        (None, None) => without_names(rows, usual, delimiter)?,
    };
    if layout.data >= rows.len() {
        return Err(no_rows(rows));
    }
    match unequal(&rows[layout.data..], layout.width, delimiter) {
        Some(error) => Err(error),
        None => Ok(layout),
    }
}

/// The width that most rows have, without columns that are empty in all of them; at least 1.
pub(super) fn usual_width(rows: &[Row]) -> usize {
    let mut counts: BTreeMap<usize, usize> = BTreeMap::new();
    for row in rows {
        *counts.entry(row.cells.len()).or_default() += 1;
    }
    let last = rows.last().map_or(1, |row| row.cells.len());
    let most = counts.iter().max_by_key(|(width, count)| (**count, **width == last)).map_or(1, |(w, _)| *w);
    let wide = rows.iter().filter(|row| row.cells.len() >= most);
    wide.map(filled_width).max().unwrap_or(1).clamp(1, most.max(1))
}

/// Whether a cell looks like a number, be its form accepted or not.
pub(super) fn number_like(cell: &str) -> bool {
    !matches!(parse_number(cell, None), Err(NumberError::Empty | NumberError::NotANumber { .. }))
}

/// Whether one of the heads names the readings, by the mapping asked for or by its own name.
pub(super) fn names_reading(heads: &[String], options: &TableOptions) -> bool {
    let asked = options.columns.get(&Role::Reading);
    heads.iter().any(|text| {
        let name = heading(text).name;
        match asked {
            Some(asked) => [text.trim(), &name].iter().any(|n| n.to_lowercase() == asked.to_lowercase()),
            None => Role::from_name(&name) == Some(Role::Reading),
        }
    })
}

fn has_number(row: &Row) -> bool {
    row.cells.iter().any(|cell| number_like(cell))
}

/// The number of cells up to the last that holds anything.
pub(super) fn filled_width(row: &Row) -> usize {
    row.cells.iter().rposition(|cell| !cell.trim().is_empty()).map_or(0, |last| last + 1)
}

fn filled(row: &Row) -> impl Iterator<Item = &String> {
    row.cells.iter().filter(|cell| !cell.trim().is_empty())
}

fn fits(row: &Row, width: usize) -> bool {
    row.cells.len() >= width && filled_width(row) <= width
}

/// Of another width than the table, or a lone text in a row padded with delimiters.
fn is_preamble(row: &Row, width: usize) -> bool {
    !fits(row, width) || (width > 1 && !has_number(row) && filled(row).count() == 1)
}

/// The row that names the columns, if one of the first rows does.
pub(super) fn named_row(rows: &[Row], usual: usize, options: &TableOptions) -> Option<usize> {
    rows.iter()
        .take(SEARCHED)
        .position(|row| filled_width(row) >= usual.min(2) && names_reading(&row.cells, options) && !has_number(row))
}

/// The rows asked for, from the first that is as wide as the table; a row that names the columns is among them,
/// with a row of units below it, and titles of the same width above them are left out.
fn as_asked(rows: &[Row], usual: usize, count: usize, names: Option<usize>) -> Layout {
    let first = |width| rows.iter().position(|row| !is_preamble(row, width)).unwrap_or(rows.len());
    let Some(at) = names.filter(|_| count > 0) else {
        let heads = first(usual);
        return Layout { heads, data: heads.saturating_add(count), width: usual, named: false };
    };
    let width = filled_width(&rows[at]);
    let below = 1 + usize::from(has_units_below(rows, at));
    let above = count.saturating_sub(below).min(at.saturating_sub(first(width)));
    Layout { heads: at - above, data: (at - above).saturating_add(count), width, named: true }
}

fn has_units_below(rows: &[Row], at: usize) -> bool {
    rows.get(at + 1).is_some_and(|row| is_units_row(&row.cells))
}

fn without_names(rows: &[Row], width: usize, delimiter: Option<Delimiter>) -> Result<Layout, TableError> {
    let all_numbers = |row: &Row| filled(row).all(|cell| number_like(cell));
    let begins = |row: &Row| !is_preamble(row, width) || all_numbers(row);
    let first = rows.iter().position(begins).ok_or_else(|| no_rows(rows))?;
    let texts = rows[first..].iter().position(has_number).ok_or_else(|| no_rows(rows))?;
    let data = first + texts;
    let units = texts > 1 && is_units_row(&rows[data - 1].cells);
    let heads = match texts {
        0..=2 => texts,
        3 if units => 3,
        _ => 1 + usize::from(units),
    };
    // Heads of another width right above the numbers are not a title.
    let above = data.checked_sub(1).map(|above| &rows[above]).filter(|_| heads == 0);
    if let Some(head) = above.filter(|row| filled(row).count() > 1 && !has_number(row)) {
        let error = unequal(&rows[data..], filled_width(head), delimiter);
        return Err(error.unwrap_or_else(|| no_rows(rows)));
    }
    Ok(Layout { heads: data - heads, data, width, named: false })
}

fn no_rows(rows: &[Row]) -> TableError {
    TableError::NoRows { last_line: rows.last().map_or(1, |row| row.line) }
}

/// The error for rows of another width, if there are any.
fn unequal(rows: &[Row], expected: usize, delimiter: Option<Delimiter>) -> Option<TableError> {
    let mut others = rows.iter().filter(|row| !fits(row, expected));
    let row = others.next()?;
    if delimiter == Some(Delimiter::Comma) && is_split_numbers(row, expected) {
        return Some(comma_for_both(row, expected));
    }
    let more = others.take(19).map(|row| row.line).collect();
    Some(TableError::UnequalColumns { line: row.line, found: row.cells.len(), expected, more })
}

/// Whether the row has more cells than the table, all whole numbers, as when decimal commas split them.
fn is_split_numbers(row: &Row, expected: usize) -> bool {
    let whole = |cell: &String| {
        let figures = cell.trim().trim_start_matches(['-', '+', '\u{2212}']);
        !figures.is_empty() && figures.bytes().all(|b| b.is_ascii_digit())
    };
    (expected + 1..=2 * expected).contains(&row.cells.len()) && row.cells.iter().all(whole)
}

fn comma_for_both(row: &Row, expected: usize) -> TableError {
    let text = shorten(&row.cells.join(","));
    let joined = row.cells.len() - expected;
    if joined == expected {
        return TableError::CommaForBoth { line: row.line, column: 1, text };
    }
    let (left, right) = row.cells.split_at(2 * joined);
    let first = [in_pairs(left), right.to_vec()].concat().join(" and ");
    let (left, right) = row.cells.split_at(expected - joined);
    let second = [left.to_vec(), in_pairs(right)].concat().join(" and ");
    TableError::Ambiguous {
        line: row.line,
        column: 1,
        text,
        readings: [shorten(&first), shorten(&second)],
        hint: "the comma stands both between cells and in numbers: use semicolons or tabs between cells, or \
               decimal points"
            .to_owned(),
    }
}

fn in_pairs(cells: &[String]) -> Vec<String> {
    cells.chunks(2).map(|pair| pair.join(".")).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rows(text: &str) -> Vec<Row> {
        let cells = |line: &str| line.split(',').map(str::to_owned).collect();
        text.lines().enumerate().map(|(i, line)| Row { line: i + 1, cells: cells(line) }).collect()
    }

    fn parts(text: &str, header_rows: Option<usize>) -> Result<(usize, usize, usize), TableError> {
        let options = TableOptions { header_rows, ..TableOptions::default() };
        lay_out(&rows(text), &options, Some(Delimiter::Comma)).map(|l| (l.heads, l.data, l.width))
    }

    #[test]
    fn heads_are_found_below_titles() {
        for (text, wanted) in [
            ("1,2\n3,4", (0, 0, 2)),
            ("load,signal\n1,2", (0, 1, 2)),
            ("Gauge 4\nload,signal\n1,2", (1, 2, 2)),
            ("Gauge 4,,\nload,signal,note\n1,2,x", (1, 2, 3)),
            ("Gauge 4,3 May\nstandard,u_standard,reading\n1,2,3", (1, 2, 3)),
            ("Serial,12345\nstandard,reading\n1,2", (1, 2, 2)),
            ("applied,read\nload,signal\n1,2", (0, 2, 2)),
            ("load,signal\nkN,mV/V\n1,2", (0, 2, 2)),
            ("applied,read\nload,signal\nkN,mV/V\n1,2", (0, 3, 2)),
            ("a,b\nc,d\ne,f\nload,signal\n1,2", (3, 4, 2)),
            ("standard,reading\nn/a,n/a\n1,2", (0, 1, 2)),
            ("standard,reading,\n1,2,\n3,4", (0, 1, 2)),
        ] {
            assert_eq!(parts(text, None), Ok(wanted), "{text}");
        }
    }

    #[test]
    fn the_number_of_heads_can_be_asked_for() {
        assert_eq!(parts("2024,2025\n1,2", Some(1)), Ok((0, 1, 2)));
        assert_eq!(parts("load,signal\n1,2", Some(0)), Ok((0, 0, 2)));
        assert_eq!(parts("group,one\nstandard,reading\n1,2", Some(2)), Ok((0, 2, 2)));
        assert_eq!(parts("a,b\n1,2", Some(2)), Err(TableError::NoRows { last_line: 2 }));
        assert_eq!(parts("a,b\n1,2", Some(usize::MAX)), Err(TableError::NoRows { last_line: 2 }));
    }

    #[test]
    fn rows_of_another_width_are_an_error_wherever_they_stand() {
        for (text, line, found, expected, more) in [
            ("standard,reading\n1,2\n3\n4,5\n6,x,y", 3, 1, 2, vec![5]),
            ("1\n2,3\n4,5", 1, 1, 2, vec![]),
            ("load,signal,note\n1,2\n3,4", 2, 2, 3, vec![3]),
        ] {
            let wanted = TableError::UnequalColumns { line, found, expected, more };
            assert_eq!(parts(text, None), Err(wanted), "{text}");
        }
    }

    #[test]
    fn decimal_commas_between_commas_are_named_as_such() {
        let error = parts("load,signal\n1,5,2,5\n2,5,3,5", None).unwrap_err();
        assert!(matches!(&error, TableError::CommaForBoth { line: 2, text, .. } if text == "1,5,2,5"));
        let TableError::Ambiguous { readings, .. } = parts("standard,reading\n0,1,234", None).unwrap_err() else {
            panic!("two ways to read it");
        };
        assert_eq!(readings, ["0.1 and 234", "0 and 1.234"]);
    }
}
