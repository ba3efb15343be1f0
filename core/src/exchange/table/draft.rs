//! A table under one assumed delimiter, before its decimal mark is known.

use super::{
    Row,
    columns::{Assigned, Column, assign, columns},
    error::TableError,
    layout::lay_out,
    options::{Delimiter, TableOptions},
    role::Role,
};

/// Rows, heads and roles under one delimiter.
#[derive(Debug)]
pub(super) struct Draft {
    /// Rows above the heads, as text.
    pub(super) preamble: Vec<String>,
    /// How many rows the heads take.
    pub(super) header_rows: usize,
    /// The heads, left to right.
    pub(super) columns: Vec<Column>,
    /// Their roles.
    pub(super) assigned: Assigned,
    /// Whether a head names the readings.
    pub(super) named: bool,
    /// The rows of data, each as wide as the table.
    pub(super) rows: Vec<Row>,
}

/// A cell of a column of numbers.
#[derive(Debug, Clone, Copy)]
pub(super) struct NumberCell<'a> {
    /// Line in the file.
    pub(super) line: usize,
    /// Position among the columns, from 0.
    pub(super) at: usize,
    /// The text, trimmed and not empty.
    pub(super) text: &'a str,
}

impl Draft {
    /// Lays the rows out and gives the columns their roles.
    pub(super) fn of(
        mut rows: Vec<Row>,
        options: &TableOptions,
        delimiter: Option<Delimiter>,
    ) -> Result<Self, TableError> {
        let layout = lay_out(&rows, options, delimiter)?;
        let columns = columns(&rows[layout.heads..layout.data], layout.width);
        let assigned = assign(&columns, options)?;
        let mark = delimiter.map(|d| d.as_char().to_string()).unwrap_or_default();
        let preamble = rows[..layout.heads].iter().map(|row| row.cells.join(&mark)).collect();
        let mut data = rows.split_off(layout.data);
        for row in &mut data {
            row.cells.truncate(layout.width);
        }
        let header_rows = layout.data - layout.heads;
        Ok(Self { preamble, header_rows, columns, assigned, named: layout.named, rows: data })
    }

    /// The cells that should be numbers with a decimal mark, row by row.
    pub(super) fn numbers(&self) -> impl Iterator<Item = NumberCell<'_>> {
        let positions = Role::NUMERIC.map(|role| self.assigned.roles.get(&role).copied());
        self.rows.iter().flat_map(move |row| {
            positions.into_iter().flatten().filter_map(move |at| {
                let text = row.cells.get(at)?.trim();
                let line = row.line;
                (!text.is_empty()).then_some(NumberCell { line, at, text })
            })
        })
    }
}
