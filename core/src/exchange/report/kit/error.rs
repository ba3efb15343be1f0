//! What can go wrong while a report is set, with the data to say so.

/// Why a report could not be made.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum ReportError {
    /// A character that none of the fonts can draw.
    #[error("no font here can print {character:?} (U+{:04X}) in \"{text}\"", u32::from(*character))]
    NoGlyph {
        /// The text that holds the character.
        text: String,
        /// The first character without a glyph.
        character: char,
    },
    /// A bundled font could not be read: the program itself is damaged.
    #[error("the bundled font {name} cannot be read")]
    Font {
        /// File name of the font.
        name: &'static str,
    },
    /// A table whose parts do not fit together.
    #[error("table \"{caption}\": {problem}")]
    Table {
        /// The caption, empty if it has none.
        caption: String,
        /// What is wrong with it.
        problem: TableProblem,
    },
    /// A plot that cannot be drawn.
    #[error("plot \"{title}\": {problem}")]
    Plot {
        /// The title of the plot.
        title: String,
        /// What is wrong with it.
        problem: PlotProblem,
    },
    /// A piece that may not be broken is higher than a page.
    #[error("a piece {height:.0} pt high does not fit on a page that has room for {room:.0} pt")]
    TooTall {
        /// Height of the piece in points.
        height: f32,
        /// Height between running head and footer in points.
        room: f32,
    },
    /// A file that cannot be attached.
    #[error("\"{name}\" cannot be attached: {reason}")]
    Attachment {
        /// Name of the file.
        name: String,
        /// Why not.
        reason: &'static str,
    },
    /// The PDF writer refused, in its own words.
    #[error("the PDF could not be written: {reason}")]
    Export {
        /// What the writer said.
        reason: String,
    },
}

/// What is wrong with a table.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum TableProblem {
    /// There is no column.
    #[error("it has no columns")]
    NoColumns,
    /// A row has more or fewer cells than there are columns.
    #[error("row {row} has {cells} cells for {columns} columns")]
    RaggedRow {
        /// The row, counted from 0.
        row: usize,
        /// Cells in that row.
        cells: usize,
        /// Columns of the table.
        columns: usize,
    },
}

/// What is wrong with a plot.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum PlotProblem {
    /// A coordinate is infinite or not a number.
    #[error("a coordinate is not a finite number")]
    NotFinite,
    /// An axis whose end is not above its start.
    #[error("an axis runs from {from} to {to}")]
    EmptyRange {
        /// Start of the axis, in its unit.
        from: f64,
        /// End of the axis, in its unit.
        to: f64,
    },
    /// A mark that would fall outside the frame and so be lost without a word.
    #[error("the mark at ({x}, {y}) lies outside the frame")]
    MarkOutside {
        /// Position along x, in the unit of that axis.
        x: f64,
        /// Position along y, in the unit of that axis.
        y: f64,
    },
    /// A band whose edges differ in length.
    #[error("a band has {xs} positions, {lo} lower and {hi} upper edges")]
    RaggedBand {
        /// Number of positions.
        xs: usize,
        /// Number of lower edges.
        lo: usize,
        /// Number of upper edges.
        hi: usize,
    },
    /// More plots side by side than there is room for, or none.
    #[error("{count} plots side by side: 1 to 3 fit")]
    Count {
        /// How many were asked for.
        count: usize,
    },
}
