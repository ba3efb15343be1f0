//! A row of cells, each some lines of text, as slices.
//!
//! A row of usual height is one slice. A very high one is cut between lines, so that no text is
//! too long for a page.

use super::super::draw::{Draw, Owner, Placed};
use super::super::flow::Slice;
use super::super::style::{Ink, Style};
use super::super::text::Line;

/// Lines of the highest row that is still one slice.
const WHOLE: usize = 14;

/// A cell, its lines already in place from left to right.
pub(super) struct CellLines {
    /// What the text belongs to.
    pub owner: Owner,
    /// How it is set; all cells of a row have the same leading.
    pub style: Style,
    /// Left end and text of each line.
    pub lines: Vec<(f32, Line)>,
    /// Whether the lines are struck through.
    pub struck: bool,
}

/// Height of the lines and of the empty strips above and below a row, in points.
#[derive(Debug, Clone, Copy)]
pub(super) struct Spacing {
    pub leading: f32,
    pub above: f32,
    pub below: f32,
}

/// The slices of a row.
pub(super) fn slices(cells: &[CellLines], spacing: Spacing) -> Vec<Slice> {
    let rows = cells.iter().map(|c| c.lines.len()).max().unwrap_or(0).max(1);
    let step = if rows <= WHOLE { rows } else { WHOLE };
    (0..rows)
        .step_by(step)
        .map(|from| {
            let to = (from + step).min(rows);
            let above = if from == 0 { spacing.above } else { 0.0 };
            let below = if to == rows { spacing.below } else { 0.0 };
            let mut slice = Slice { height: above + (to - from) as f32 * spacing.leading + below, ..Slice::default() };
            for cell in cells {
                draw(cell, from..to, above, spacing.leading, &mut slice.drawings);
            }
            slice
        })
        .collect()
}

fn draw(cell: &CellLines, rows: std::ops::Range<usize>, above: f32, leading: f32, drawings: &mut Vec<Placed>) {
    let first = rows.start;
    for (i, (left, line)) in cell.lines.iter().enumerate().take(rows.end).skip(first) {
        let top = above + (i - first) as f32 * leading;
        let text = Draw::text(*left, top, line.clone(), cell.style);
        drawings.push(Placed::new(cell.owner, text));
        if cell.struck && line.width > 0.0 {
            let y = top + cell.style.baseline() - cell.style.size * 0.27;
            let stroke = Draw::rule(left - 1.0, left + line.width + 1.0, y, Ink::Black, 0.7);
            drawings.push(Placed::new(cell.owner, stroke));
        }
    }
}
