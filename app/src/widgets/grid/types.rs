//! What goes into the table and what comes out of it.

use std::ops::Range;

use crate::theme::MarkShape;

/// What the table shows; the caller's data.
pub trait GridSource {
    /// Number of existing rows, the entry row not counted.
    fn rows(&self) -> usize;

    /// The columns, from left to right.
    fn columns(&self) -> &[Column];

    /// What stands left of a row: its place, unless the caller's rows have numbers of their own.
    fn number(&self, row: usize) -> usize {
        row + 1
    }

    /// What a cell shows; `row` is below `rows()`, `col` below the number of columns.
    fn cell(&self, row: usize, col: usize) -> CellView;

    /// The text an edit of a cell starts with, and what is copied: as it was typed.
    fn raw(&self, row: usize, col: usize) -> String {
        self.cell(row, col).text
    }
}

/// One column.
#[derive(Debug, Clone, PartialEq)]
pub struct Column {
    /// Head, and the name a screen reader says: "R3 Standard".
    pub header: String,
    /// Unit beside the head; empty without one.
    pub unit: String,
    /// Width in points.
    pub width: f32,
    /// Whether the column takes a share of the room left over.
    pub grows: bool,
    /// Side its texts stand at.
    pub align: ColumnAlign,
    /// Whether a person can change its cells.
    pub editable: bool,
    /// Whether letters start typing here, instead of being passed on as requests.
    pub letters: bool,
}

impl Column {
    /// An editable column of numbers.
    #[must_use]
    pub fn number(header: impl Into<String>, unit: impl Into<String>, width: f32) -> Self {
        Self {
            header: header.into(),
            unit: unit.into(),
            width,
            grows: false,
            align: ColumnAlign::Right,
            editable: true,
            letters: false,
        }
    }

    /// An editable column of words.
    #[must_use]
    pub fn words(header: impl Into<String>, width: f32) -> Self {
        Self { align: ColumnAlign::Left, letters: true, ..Self::number(header, "", width) }
    }

    /// The same column, not editable.
    #[must_use]
    pub fn read_only(self) -> Self {
        Self { editable: false, ..self }
    }

    /// The same column, taking a share of the room left over.
    #[must_use]
    pub fn growing(self) -> Self {
        Self { grows: true, ..self }
    }
}

/// Side at which a column's texts stand.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ColumnAlign {
    /// Words.
    Left,
    /// Numbers.
    Right,
}

/// What one cell shows.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct CellView {
    /// The text.
    pub text: String,
    /// How the text is set.
    pub style: CellStyle,
    /// A mark at the left of the cell.
    pub mark: Option<MarkShape>,
    /// What is said under the pointer; empty for nothing.
    pub hover: String,
}

impl CellView {
    /// A cell of ordinary text.
    #[must_use]
    pub fn plain(text: impl Into<String>) -> Self {
        Self { text: text.into(), ..Self::default() }
    }
}

/// How the text of a cell is set.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum CellStyle {
    /// Ink.
    #[default]
    Normal,
    /// Soft ink: computed, or less important.
    Soft,
    /// Struck through: set aside.
    Struck,
    /// Dotted line and a question mark: looks like a slip.
    Questioned,
}

/// The empty row at the bottom, in which new rows are typed.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct EntryRow {
    /// Column in which Enter adds the row; `None` for the last editable one.
    pub last_column: Option<usize>,
    /// Columns that keep their text for the next row, such as the standard.
    pub repeats: Vec<usize>,
    /// What to do, in soft ink while the row is empty.
    pub hint: String,
}

/// What the person did.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum GridEvent {
    /// A cell was typed over; only when the text changed.
    Edit {
        /// Row from 0.
        row: usize,
        /// Column from 0.
        col: usize,
        /// The text, trimmed.
        text: String,
    },
    /// The entry row was finished.
    NewRow {
        /// Column and text of each cell that is not empty.
        cells: Vec<(usize, String)>,
    },
    /// A block was pasted.
    Paste {
        /// First row; the number of rows when pasted into the entry row.
        row: usize,
        /// First column.
        col: usize,
        /// Rows of trimmed texts, of unequal length if pasted so; may reach beyond the table.
        cells: Vec<Vec<String>>,
    },
    /// Cells were emptied (Delete, or cut).
    Clear {
        /// Rows.
        rows: Range<usize>,
        /// Columns, editable or not.
        cols: Range<usize>,
    },
    /// The cursor came to another row.
    Selected {
        /// Row from 0; the number of rows for the entry row.
        row: usize,
    },
    /// A letter key while nothing is edited.
    Request {
        /// Row from 0; the number of rows for the entry row.
        row: usize,
        /// The character.
        key: char,
    },
}
