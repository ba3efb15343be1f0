//! The description of a table.

/// A table.
#[derive(Debug, Clone, PartialEq)]
pub struct Table {
    /// Heading over the table.
    pub caption: Option<String>,
    /// The columns, at least one.
    pub columns: Vec<Column>,
    /// The rows, each with one cell per column. May be empty.
    pub rows: Vec<Row>,
    /// Small text under the table; it stays with the last row.
    pub note: Option<String>,
}

/// A column of a table.
#[derive(Debug, Clone, PartialEq)]
pub struct Column {
    /// Lines of the head; each wraps to the width of the column.
    pub head: Vec<String>,
    /// Where the text stands within the column.
    pub align: Align,
    /// Share of the width left over when all cells have what they need; 0 or more, no unit.
    pub weight: f32,
}

/// Where text stands within its column.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Align {
    /// At the left edge.
    Left,
    /// At the right edge.
    Right,
    /// Decimal points one beneath the other, the longest at the right edge.
    DecimalPoint,
}

/// A row of a table.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Row {
    /// One cell per column.
    pub cells: Vec<Cell>,
    /// Whether the row lies on a pale ground.
    pub shade: bool,
}

/// A cell of a table.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Cell {
    /// The text; it wraps to the width of the column.
    pub text: String,
    /// Whether it is struck through: no longer counted, still to be read.
    pub strike: bool,
    /// Whether it is printed softer.
    pub soft: bool,
}

impl Cell {
    /// A plain cell.
    pub fn new(text: impl Into<String>) -> Self {
        Self { text: text.into(), ..Self::default() }
    }
}
