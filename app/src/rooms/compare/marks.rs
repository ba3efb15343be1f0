//! Reading marks in a plot, and which of them the pointer is on.

use super::{
    dots::{Dot, thinned},
    sheet::place,
};
use crate::theme::{MarkShape, Theme};
use eframe::egui::{Pos2, Shape, Stroke};
use egui_plot::PlotTransform;

/// How near the pointer must come to a mark, points.
const REACH: f32 = 9.0;
/// How far replicates are moved apart at most, points to either side.
const JITTER: f32 = 3.0;

/// A mark and where it stands in the plot.
#[derive(Debug, Clone, Copy)]
pub(super) struct Placed<'a> {
    /// The mark.
    pub(super) dot: &'a Dot,
    /// Across.
    pub(super) x: f64,
    /// Up.
    pub(super) y: f64,
}

/// Where a mark comes to stand on the screen; replicates side by side when `apart`.
fn on_screen(transform: &PlotTransform, mark: &Placed<'_>, apart: bool) -> Pos2 {
    let mut at = place(transform, mark.x, mark.y);
    if apart {
        at.x += JITTER * mark.dot.jitter;
    }
    at
}

/// Appends marks in ink; × lies over what is set aside, a ring around the one under the pointer.
pub(super) fn draw(
    transform: &PlotTransform,
    marks: &[Placed<'_>],
    (size, apart, hover): (f32, bool, Option<usize>),
    theme: &Theme,
    shapes: &mut Vec<Shape>,
) {
    let places: Vec<(f64, f64)> = marks.iter().map(|m| (m.x, m.y)).collect();
    let frame = transform.frame().expand(size);
    for i in thinned(&places) {
        let mark = &marks[i];
        let at = on_screen(transform, mark, apart);
        if !at.is_finite() || !frame.contains(at) {
            continue;
        }
        let ink = if mark.dot.aside { theme.soft_ink } else { theme.ink };
        mark.dot.shape.shapes(at, size, ink, shapes);
        if mark.dot.aside {
            MarkShape::SetAside.shapes(at, size + 4.0, theme.ink, shapes);
        }
        if hover.is_some() && mark.dot.observation == hover {
            shapes.push(Shape::circle_stroke(at, size, Stroke::new(1.5, theme.focus)));
        }
    }
}

/// The mark next to the pointer, if one is near enough.
pub(super) fn under<'a>(
    transform: &PlotTransform,
    marks: &[Placed<'a>],
    apart: bool,
    pointer: Pos2,
) -> Option<&'a Dot> {
    let away = |m: &Placed<'_>| on_screen(transform, m, apart).distance(pointer);
    let near = marks.iter().map(|m| (away(m), m.dot)).filter(|(d, _)| *d <= REACH);
    near.min_by(|a, b| a.0.total_cmp(&b.0)).map(|(_, dot)| dot)
}
