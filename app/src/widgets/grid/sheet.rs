//! The table as the keyboard sees it: existing rows, the entry row below them, the columns.

use super::{Column, EntryRow, GridSource};

/// Row of a place in the entry row, however many rows there are.
///
/// The caller adds rows between two frames; the cursor must stay in the entry row meanwhile.
pub(super) const ENTRY: usize = usize::MAX;

/// A cell; `row` may be `ENTRY`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub(super) struct Place {
    pub(super) row: usize,
    pub(super) col: usize,
}

/// The caller's data with the entry row.
pub(super) struct Sheet<'a> {
    pub(super) source: &'a dyn GridSource,
    pub(super) entry: Option<&'a EntryRow>,
    rows: usize,
}

impl<'a> Sheet<'a> {
    pub(super) fn new(source: &'a dyn GridSource, entry: Option<&'a EntryRow>) -> Self {
        Self { source, entry, rows: source.rows() }
    }

    /// Existing rows.
    pub(super) fn rows(&self) -> usize {
        self.rows
    }

    /// Existing rows and the entry row.
    pub(super) fn total_rows(&self) -> usize {
        self.rows + usize::from(self.entry.is_some())
    }

    pub(super) fn columns(&self) -> &'a [Column] {
        self.source.columns()
    }

    pub(super) fn last_col(&self) -> usize {
        self.columns().len().saturating_sub(1)
    }

    /// Whether there is no cell at all.
    pub(super) fn is_empty(&self) -> bool {
        self.total_rows() == 0 || self.columns().is_empty()
    }

    /// Row counted from the top; the entry row comes after the last.
    pub(super) fn index(&self, row: usize) -> usize {
        row.min(self.rows)
    }

    /// The row at `index` from the top, or the last one.
    pub(super) fn row_at(&self, index: usize) -> usize {
        match self.entry {
            Some(_) if index >= self.rows => ENTRY,
            _ => index.min(self.rows.saturating_sub(1)),
        }
    }

    /// The place, or the nearest one that exists.
    pub(super) fn clamp(&self, place: Place) -> Place {
        Place { row: self.row_at(place.row), col: place.col.min(self.last_col()) }
    }

    pub(super) fn editable(&self, col: usize) -> bool {
        self.columns().get(col).is_some_and(|column| column.editable)
    }

    /// The next editable column after `col`.
    pub(super) fn editable_after(&self, col: usize) -> Option<usize> {
        (col + 1..self.columns().len()).find(|col| self.editable(*col))
    }

    /// The last editable column before `col`.
    pub(super) fn editable_before(&self, col: usize) -> Option<usize> {
        (0..col).rev().find(|col| self.editable(*col))
    }

    /// The first editable column, else the first.
    pub(super) fn first_editable(&self) -> usize {
        (0..self.columns().len()).find(|col| self.editable(*col)).unwrap_or(0)
    }

    /// The last editable column, else the last.
    pub(super) fn last_editable(&self) -> usize {
        self.editable_before(self.columns().len()).unwrap_or_else(|| self.last_col())
    }

    /// Whether the entry row keeps the text of a column for the next row.
    pub(super) fn repeats(&self, col: usize) -> bool {
        self.entry.is_some_and(|entry| entry.repeats.contains(&col))
    }

    /// Column in which Enter adds the row.
    pub(super) fn finishing_col(&self) -> usize {
        self.entry.and_then(|entry| entry.last_column).unwrap_or_else(|| self.last_editable())
    }

    /// Where typing a new row starts: after the columns that repeat once they are filled.
    pub(super) fn entry_start(&self, draft: &[String]) -> usize {
        let filled = |col: usize| draft.get(col).is_some_and(|text| !text.is_empty());
        (0..self.columns().len())
            .find(|col| self.editable(*col) && !(self.repeats(*col) && filled(*col)))
            .unwrap_or_else(|| self.first_editable())
    }

    /// The name of a cell as a screen reader says it.
    pub(super) fn name(&self, place: Place) -> String {
        let header = self.columns().get(place.col).map_or("", |column| column.header.as_str());
        format!("R{} {header}", self.index(place.row) + 1)
    }
}
