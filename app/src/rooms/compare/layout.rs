//! Where everything stands: columns side by side, rows one over the other.

use super::{
    rows::{self, Row, RowPlace},
    state::State,
};
use crate::rooms::View;
use assize_core::project::columns::ColumnSpec;
use eframe::egui::{Rangef, Rect, pos2};

/// A column takes at least this, with the space to the next one, points.
const LEAST_WIDTH: f32 = 300.0;
/// Least and most width of the list of columns that have no room, points.
const ASIDE: (f32, f32) = (84.0, 150.0);
/// Between columns, points: room for the numbers of an axis that a column has for itself.
const BETWEEN: f32 = 40.0;
/// Heights of the heads and of the line at the bottom, points.
const HEAD: f32 = 26.0;
const STATUS: f32 = 30.0;
/// A window lower than this shows one row at a time.
const LOW: f32 = 700.0;

/// A column where it stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct ColumnPlace {
    /// Position in the evaluation.
    pub(super) index: usize,
    /// From left to right.
    pub(super) x: Rangef,
}

/// Where everything stands.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Layout {
    /// The whole room.
    pub(super) room: Rect,
    /// Columns shown.
    pub(super) columns: Vec<ColumnPlace>,
    /// Columns without room.
    pub(super) aside: Vec<usize>,
    /// Where these are listed.
    pub(super) aside_rect: Rect,
    /// Heights of the heads.
    pub(super) head: Rangef,
    /// Rows.
    pub(super) rows: Vec<RowPlace>,
    /// The line at the bottom.
    pub(super) status: Rect,
    /// One row at a time.
    pub(super) alone: bool,
}

impl Layout {
    /// The layout of a room in a window of the given height.
    ///
    /// `gutter` is the width for row names, zero readings and axis numbers; `wraps` tells whether a row has a caption that needs two lines at a width.
    pub(super) fn new(
        view: &View<'_>,
        state: &State,
        (room, window_height, gutter): (Rect, f32, f32),
        wraps: impl Fn(Row, &[ColumnPlace]) -> bool,
    ) -> Self {
        let alone = window_height < LOW;
        let order = order(view, &state.asked);
        let free = room.width() - gutter;
        let fits = |width: f32| ((width / LEAST_WIDTH).floor() as usize).max(1);
        let all = fits(free + BETWEEN) >= order.len();
        let count = if all { order.len() } else { fits(free - ASIDE.0).min(order.len()) };
        let aside_width = (free - count as f32 * LEAST_WIDTH).clamp(ASIDE.0, ASIDE.1);
        let width = if all { free } else { free - aside_width - BETWEEN };
        let mut shown = order[..count].to_vec();
        shown.sort_unstable();
        let mut aside = order[count..].to_vec();
        aside.sort_unstable();
        let head = Rangef::new(room.top(), room.top() + HEAD);
        let status = Rect::from_min_max(pos2(room.left(), room.bottom() - STATUS), room.max);
        let columns = columns(&shown, room.left() + gutter, width);
        let tall = |row: Row| wraps(row, &columns);
        let rows = rows::rows(state, alone, Rangef::new(head.max, status.top()), tall);
        Self {
            columns,
            aside_rect: Rect::from_min_max(
                pos2(room.right() - aside_width, room.top()),
                pos2(room.right(), status.top()),
            ),
            rows,
            aside,
            room,
            head,
            status,
            alone,
        }
    }

    /// The rectangle of a column in a range of heights.
    pub(super) fn cell(column: ColumnPlace, y: Rangef) -> Rect {
        Rect::from_x_y_ranges(column.x, y)
    }

    /// The column left of a column, if one is shown there.
    pub(super) fn left_of(&self, index: usize) -> Option<usize> {
        let here = self.columns.iter().position(|c| c.index == index)?;
        Some(self.columns.get(here.checked_sub(1)?)?.index)
    }

    /// The first column shown, which carries the numbers of a shared axis.
    pub(super) fn first(&self) -> Option<usize> {
        self.columns.first().map(|c| c.index)
    }
}

/// Positions of the columns by their claim on room: chosen, advised, asked for, then in their order.
fn order(view: &View<'_>, asked: &[ColumnSpec]) -> Vec<usize> {
    let e = view.evaluation;
    let at = |spec: &ColumnSpec| e.columns.iter().position(|c| c.spec == *spec);
    let advised = e.advice.column.as_ref().and_then(at);
    let wanted = asked.iter().filter_map(at);
    let mut order: Vec<usize> = Vec::new();
    for i in e.chosen.into_iter().chain(advised).chain(wanted).chain(0..e.columns.len()) {
        if !order.contains(&i) {
            order.push(i);
        }
    }
    order
}

fn columns(shown: &[usize], left: f32, width: f32) -> Vec<ColumnPlace> {
    let n = shown.len().max(1) as f32;
    let each = ((width - BETWEEN * (n - 1.0)) / n).max(1.0);
    let place = |(i, &index): (usize, &usize)| {
        let start = (left + i as f32 * (each + BETWEEN)).round();
        ColumnPlace { index, x: Rangef::new(start, (start + each).round()) }
    };
    shown.iter().enumerate().map(place).collect()
}
