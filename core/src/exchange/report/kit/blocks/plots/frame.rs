//! From the units of the axes to points on the page.

use crate::exchange::report::kit::document::Plot;
use crate::exchange::report::kit::error::{PlotProblem, ReportError};

/// The frame of a plot: where on the page which values lie.
///
/// # Formula
/// x ↦ left + (x − x₀)/(x₁ − x₀)·width, y ↦ bottom − (y − y₀)/(y₁ − y₀)·height
///
/// # Shapes and units
/// The rectangle is left, top, right, bottom in points, y running down; ranges are in the units
/// of the axes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Frame {
    /// Left, top, right and bottom edge.
    pub rect: [f32; 4],
    x: (f64, f64),
    y: (f64, f64),
}

impl Frame {
    /// The frame of a plot whose ranges passed [`check`].
    pub(super) fn new(rect: [f32; 4], plot: &Plot) -> Self {
        Self { rect, x: plot.x.range, y: plot.y.range }
    }

    /// Position within the frame: 0 to 1 from left to right and from bottom to top.
    pub(super) fn part(&self, [x, y]: [f64; 2]) -> [f64; 2] {
        [part(x, self.x), part(y, self.y)]
    }

    /// The point on the page that belongs to a position within the frame.
    pub(super) fn at_part(&self, [u, v]: [f64; 2]) -> [f32; 2] {
        let [left, top, right, bottom] = self.rect.map(f64::from);
        [(left + u * (right - left)) as f32, (bottom - v * (bottom - top)) as f32]
    }

    /// The point on the page that belongs to a pair of values.
    pub(super) fn at(&self, values: [f64; 2]) -> [f32; 2] {
        self.at_part(self.part(values))
    }

    /// Height on the page of a value of y.
    pub(super) fn at_y(&self, y: f64) -> f32 {
        self.at([self.x.0, y])[1]
    }

    /// Distance from the left of the page of a value of x.
    pub(super) fn at_x(&self, x: f64) -> f32 {
        self.at([x, self.y.0])[0]
    }

    /// Whether a value lies on the horizontal axis.
    pub(super) fn holds_x(&self, x: f64) -> bool {
        holds(part(x, self.x))
    }

    /// Whether a value lies on the vertical axis.
    pub(super) fn holds_y(&self, y: f64) -> bool {
        holds(part(y, self.y))
    }
}

/// Position of a value within a range; halves are taken so that the widest ranges do not overflow.
fn part(value: f64, (from, to): (f64, f64)) -> f64 {
    (value / 2.0 - from / 2.0) / (to / 2.0 - from / 2.0)
}

/// The edge belongs to the frame, rounding included.
fn holds(part: f64) -> bool {
    (-1e-9..=1.0 + 1e-9).contains(&part)
}

/// Whether the axes of a plot can be drawn.
///
/// # Errors
/// [`PlotProblem::NotFinite`] for an end or tick that is not finite, [`PlotProblem::EmptyRange`]
/// for an axis whose end is not above its start.
pub(super) fn check(plot: &Plot) -> Result<(), ReportError> {
    let fail = |problem| Err(ReportError::Plot { title: plot.title.clone(), problem });
    for axis in [&plot.x, &plot.y] {
        let (from, to) = axis.range;
        let finite = from.is_finite() && to.is_finite();
        if !finite || axis.ticks.iter().any(|(at, _)| !at.is_finite()) {
            return fail(PlotProblem::NotFinite);
        }
        if to / 2.0 - from / 2.0 <= 0.0 {
            return fail(PlotProblem::EmptyRange { from, to });
        }
    }
    if !plot.height_pt.is_finite() || plot.height_pt <= 0.0 {
        return fail(PlotProblem::NotFinite);
    }
    Ok(())
}
