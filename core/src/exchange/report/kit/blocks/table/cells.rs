//! Cells in their columns: widths measured, lines broken and aligned.

use super::super::strips::{CellLines, Spacing};
use super::widths::{Wish, fits_words, widths};
use crate::exchange::report::kit::document::{Align, Cell, Row, Table};
use crate::exchange::report::kit::draw::Owner;
use crate::exchange::report::kit::error::ReportError;
use crate::exchange::report::kit::style::{CELL, CELL_HEAD, Ink, LEFT, MEASURE, Style};
use crate::exchange::report::kit::text::{Line, Typesetter};

/// Between the ends of the rules and the text.
const INSET: f32 = 4.0;
/// Size of the letters as a part of the usual one, and gap between columns in points: the first
/// at which no word has to be broken is taken, else the last.
const LOOKS: [(f32, f32); 4] = [(1.0, 11.0), (1.0, 7.0), (0.88, 6.0), (0.77, 4.5)];
/// A word longer than this is broken rather than make the table small.
const WORD_MOST: f32 = 110.0;
/// A head wider than this wraps rather than widen its column.
const HEAD_MOST: f32 = 64.0;

/// The columns of a table with their place on the page.
pub(super) struct Grid<'a> {
    table: &'a Table,
    columns: Vec<Place>,
    factor: f32,
}

/// Where a column stands, in points.
struct Place {
    left: f32,
    width: f32,
    /// Widest part after the decimal point, the point included.
    after: f32,
}

/// Widest parts before and after the decimal point of a column.
#[derive(Clone, Copy, Default)]
struct Decimals {
    before: f32,
    after: f32,
}

impl<'a> Grid<'a> {
    /// Measures all cells and deals out the width of the page.
    pub(super) fn new(setter: &Typesetter, table: &'a Table) -> Result<Self, ReportError> {
        let count = table.columns.len();
        let mut wishes = Vec::with_capacity(count);
        let mut decimals = Vec::with_capacity(count);
        for column in 0..count {
            let parts = decimal_parts(setter, table, column)?;
            wishes.push(wish(setter, table, column, parts)?);
            decimals.push(parts);
        }
        let (factor, gap) = look(&wishes);
        for wish in &mut wishes {
            wish.natural *= factor;
            wish.word *= factor;
        }
        let room = room(count, gap);
        let mut left = LEFT + INSET;
        let mut columns = Vec::with_capacity(count);
        for (width, parts) in widths(&wishes, room).into_iter().zip(decimals) {
            columns.push(Place { left, width, after: parts.after * factor });
            left += width + gap.min(MEASURE / 2.0 / (count as f32 - 1.0).max(1.0));
        }
        Ok(Self { table, columns, factor })
    }

    /// How the head is set.
    pub(super) fn head_style(&self) -> Style {
        CELL_HEAD.scaled(self.factor)
    }

    /// How rows are spaced.
    pub(super) fn spacing(&self) -> Spacing {
        Spacing { leading: CELL.leading * self.factor, above: 1.8, below: 1.8 }
    }

    /// Number of columns.
    pub(super) fn columns(&self) -> usize {
        self.columns.len()
    }

    /// The cells of the head.
    pub(super) fn head(&self, setter: &Typesetter, owners: &[Owner]) -> Result<Vec<CellLines>, ReportError> {
        let style = self.head_style();
        let mut cells = Vec::with_capacity(owners.len());
        for ((column, place), &owner) in self.table.columns.iter().zip(&self.columns).zip(owners) {
            let lines = setter.lines(&column.head.join("\n"), style, place.width)?;
            cells.push(CellLines { owner, style, lines: place.aligned(lines, column.align), struck: false });
        }
        Ok(cells)
    }

    /// The cells of a row.
    pub(super) fn row(&self, setter: &Typesetter, row: &Row, owners: &[Owner]) -> Result<Vec<CellLines>, ReportError> {
        let mut cells = Vec::with_capacity(owners.len());
        for (i, (cell, &owner)) in row.cells.iter().zip(owners).enumerate() {
            let place = &self.columns[i];
            let style = style(cell).scaled(self.factor);
            let lines = match self.table.columns[i].align {
                Align::DecimalPoint => place.by_point(setter, &cell.text, style)?,
                align => place.aligned(setter.lines(&cell.text, style, place.width)?, align),
            };
            cells.push(CellLines { owner, style, lines, struck: cell.strike });
        }
        Ok(cells)
    }

    /// The single cell of a table without rows.
    pub(super) fn nothing(&self, setter: &Typesetter, owner: Owner) -> Result<CellLines, ReportError> {
        let style = CELL.in_ink(Ink::Soft).scaled(self.factor);
        let line = setter.line("no rows", style)?;
        Ok(CellLines { owner, style, lines: vec![(LEFT + INSET, line)], struck: false })
    }
}

impl Place {
    fn aligned(&self, lines: Vec<Line>, align: Align) -> Vec<(f32, Line)> {
        let left = |line: &Line| match align {
            Align::Left => self.left,
            Align::Right | Align::DecimalPoint => self.left + self.width - line.width,
        };
        lines.into_iter().map(|line| (left(&line), line)).collect()
    }

    /// A number with its decimal point on the column's axis. What has no digit, or does not fit
    /// on the axis, stands at the right edge instead.
    fn by_point(&self, setter: &Typesetter, text: &str, style: Style) -> Result<Vec<(f32, Line)>, ReportError> {
        if let Some((before, _)) = at_point(text) {
            let line = setter.line(text, style)?;
            let axis = self.left + self.width - self.after;
            let left = axis - setter.needs(before, style)?.natural;
            let right = left + line.width;
            let inside = left >= self.left - 0.1 && right <= self.left + self.width + 0.1;
            if inside && !text.contains('\n') {
                return Ok(vec![(left, line)]);
            }
        }
        let lines = setter.lines(text, style, self.width)?;
        Ok(self.aligned(lines, Align::Right))
    }
}

/// The largest look at which no word has to be broken.
fn look(wishes: &[Wish]) -> (f32, f32) {
    let [.., last] = LOOKS;
    LOOKS.into_iter().find(|&(factor, gap)| fits_words(wishes, room(wishes.len(), gap) / factor)).unwrap_or(last)
}

/// Width left for text, with at most half of the page for gaps.
fn room(columns: usize, gap: f32) -> f32 {
    MEASURE - 2.0 * INSET - (gap * (columns as f32 - 1.0)).min(MEASURE / 2.0)
}

fn style(cell: &Cell) -> Style {
    if cell.soft || cell.strike { CELL.in_ink(Ink::Soft) } else { CELL }
}

/// A number cut before its decimal point, or after its last digit if it has none; `None` for a
/// text that does not begin with a number (signs as − or ± may stand before it).
fn at_point(text: &str) -> Option<(&str, &str)> {
    let first = text.find(|c: char| c.is_alphanumeric())?;
    if !text[first..].starts_with(|c: char| c.is_ascii_digit()) {
        return None;
    }
    let number = |c: char| c.is_ascii_digit() || matches!(c, ' ' | '\u{2009}' | '\u{202F}' | '\u{A0}');
    let end = text[first..].find(|c| !number(c)).map_or(text.len(), |n| first + n);
    let digits = text[..end].trim_end().len();
    Some(text.split_at(digits))
}

fn decimal_parts(setter: &Typesetter, table: &Table, column: usize) -> Result<Decimals, ReportError> {
    let mut widest = Decimals::default();
    if table.columns[column].align != Align::DecimalPoint {
        return Ok(widest);
    }
    for row in &table.rows {
        let cell = &row.cells[column];
        if let Some((before, after)) = at_point(&cell.text) {
            widest.before = widest.before.max(setter.needs(before, CELL)?.natural);
            widest.after = widest.after.max(setter.needs(after, CELL)?.natural);
        }
    }
    Ok(widest)
}

fn wish(setter: &Typesetter, table: &Table, column: usize, decimals: Decimals) -> Result<Wish, ReportError> {
    let described = &table.columns[column];
    let on_axis = decimals.before + decimals.after;
    let mut wish = Wish { natural: on_axis, word: on_axis, weight: described.weight };
    for row in &table.rows {
        let needs = setter.needs(&row.cells[column].text, CELL)?;
        wish.natural = wish.natural.max(needs.natural);
        wish.word = wish.word.max(needs.word.min(WORD_MOST));
    }
    for head in &described.head {
        let needs = setter.needs(head, CELL_HEAD)?;
        wish.word = wish.word.max(needs.word.min(WORD_MOST));
        wish.natural = wish.natural.max(needs.natural.min(HEAD_MOST)).max(needs.word);
    }
    Ok(wish)
}
