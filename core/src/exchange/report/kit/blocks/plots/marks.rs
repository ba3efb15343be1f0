//! Points.

use super::frame::Frame;
use crate::exchange::report::kit::document::{MarkShape, Plot};
use crate::exchange::report::kit::draw::{Draw, Pen, circle, polygon, rectangle};
use crate::exchange::report::kit::error::{PlotProblem, ReportError};
use crate::exchange::report::kit::style::Ink;

/// Half the width of a triangle, in points.
const REACH: f32 = 2.7;

/// Draws all points.
///
/// # Errors
/// [`PlotProblem::NotFinite`] and [`PlotProblem::MarkOutside`]: a point is never dropped silently.
pub(super) fn draw(plot: &Plot, frame: &Frame, draws: &mut Vec<Draw>) -> Result<(), ReportError> {
    let fail = |problem| Err(ReportError::Plot { title: plot.title.clone(), problem });
    for mark in &plot.marks {
        let (x, y) = (mark.x, mark.y);
        if !x.is_finite() || !y.is_finite() {
            return fail(PlotProblem::NotFinite);
        }
        if !frame.holds_x(x) || !frame.holds_y(y) {
            return fail(PlotProblem::MarkOutside { x, y });
        }
        sign(mark.shape, frame.at([x, y]), draws);
    }
    Ok(())
}

/// Draws the sign of a point with its middle at a place on the page.
pub(super) fn sign(shape: MarkShape, [x, y]: [f32; 2], draws: &mut Vec<Draw>) {
    let triangle = |way: f32| {
        polygon(&[[x, y - way * REACH * 1.1], [x + REACH, y + way * REACH * 0.8], [x - REACH, y + way * REACH * 0.8]])
    };
    let filled = |path| Draw::Shape { path, fill: Some(Ink::Black), pen: None };
    match shape {
        MarkShape::Rising => draws.push(filled(triangle(1.0))),
        MarkShape::Falling => {
            draws.push(Draw::Shape { path: triangle(-1.0), fill: None, pen: Some(Pen::new(Ink::Black, 0.75)) })
        }
        MarkShape::Dot => draws.push(filled(circle([x, y], 2.1))),
        MarkShape::Square => {
            draws.push(filled(rectangle([x - 2.1, y - 2.1, x + 2.1, y + 2.1])));
        }
        MarkShape::CrossedOut => {
            draws.push(Draw::Shape { path: circle([x, y], 1.9), fill: Some(Ink::Grey(0.72)), pen: None });
            for way in [1.0, -1.0] {
                let (from, to) = ([x - 3.0, y - way * 3.0], [x + 3.0, y + way * 3.0]);
                draws.push(Draw::stroke(from, to, Pen::new(Ink::Black, 0.9)));
            }
        }
    }
}
