//! Bands, limits and curves, cut off at the frame.

use super::axes::{Labels, on_ground};
use super::frame::Frame;
use crate::exchange::report::kit::document::{Band, Dash, Limit, Line, Plot};
use crate::exchange::report::kit::draw::{Draw, Pen, open, polygon};
use crate::exchange::report::kit::error::{PlotProblem, ReportError};
use crate::exchange::report::kit::style::{Ink, PLOT_LABEL};

/// How far beyond the frame, in frames, outlines still run. The clip hides that part; without the
/// cut, coordinates could grow beyond what a PDF can say.
const BEYOND: f64 = 0.25;

/// Draws what lies beneath the marks.
///
/// A curve has a gap where a point is not finite. A band ends there.
pub(super) fn draw(plot: &Plot, frame: &Frame, labels: &Labels, draws: &mut Vec<Draw>) -> Result<(), ReportError> {
    draws.push(Draw::ClipIn(frame.rect));
    for band in &plot.bands {
        draw_band(plot, band, frame, draws)?;
    }
    for (limit, label) in plot.hlines.iter().zip(&labels.hlines) {
        if frame.holds_y(limit.at) {
            let y = frame.at_y(limit.at);
            let [left, top, right, _] = frame.rect;
            draws.push(Draw::stroke([left, y], [right, y], limit_pen(limit)));
            let above = y - PLOT_LABEL.leading - 0.5;
            let label_top = if above < top + 1.0 { y + 1.0 } else { above };
            if !limit.label.is_empty() {
                on_ground(right - label.width - 4.0, label_top, label, draws);
            }
        }
    }
    for (limit, label) in plot.vlines.iter().zip(&labels.vlines) {
        if frame.holds_x(limit.at) {
            let x = frame.at_x(limit.at);
            let [_, top, right, bottom] = frame.rect;
            draws.push(Draw::stroke([x, top], [x, bottom], limit_pen(limit)));
            let beside = x + 4.0;
            let fits = beside + label.width + 2.0 <= right;
            let label_left = if fits { beside } else { x - 4.0 - label.width };
            if !limit.label.is_empty() {
                on_ground(label_left, top + 2.0, label, draws);
            }
        }
    }
    for line in &plot.lines {
        draw_line(line, frame, draws);
    }
    draws.push(Draw::ClipOut);
    Ok(())
}

fn limit_pen(limit: &Limit) -> Pen {
    pen(limit.dash, 0.7, Ink::Black)
}

/// A pen of the given pattern; strokes and gaps grow with the width.
pub(super) fn pen(dash: Dash, width: f32, ink: Ink) -> Pen {
    let unit = width.max(0.7);
    let (dash, round) = match dash {
        Dash::Solid => (Vec::new(), false),
        Dash::Dashed => (vec![4.6 * unit, 2.8 * unit], false),
        Dash::Dotted => (vec![0.0, 2.4 * unit], true),
    };
    Pen { ink, width, dash, round }
}

fn draw_band(plot: &Plot, band: &Band, frame: &Frame, draws: &mut Vec<Draw>) -> Result<(), ReportError> {
    let (xs, lo, hi) = (band.xs.len(), band.lo.len(), band.hi.len());
    if xs != lo || xs != hi {
        return Err(ReportError::Plot { title: plot.title.clone(), problem: PlotProblem::RaggedBand { xs, lo, hi } });
    }
    let near = |value: f64| value.clamp(-BEYOND, 1.0 + BEYOND);
    let place = |x: f64, y: f64| frame.at_part(frame.part([x, y]).map(near));
    let whole = |i: &usize| [band.xs[*i], band.lo[*i], band.hi[*i]].iter().all(|v| v.is_finite());
    let positions: Vec<usize> = (0..xs).collect();
    for piece in positions.chunk_by(|a, b| whole(a) == whole(b)) {
        if piece.len() < 2 || !whole(&piece[0]) {
            continue;
        }
        let upper = piece.iter().map(|&i| place(band.xs[i], band.hi[i]));
        let lower = piece.iter().rev().map(|&i| place(band.xs[i], band.lo[i]));
        let outline: Vec<[f32; 2]> = upper.chain(lower).collect();
        draws.push(Draw::Shape { path: polygon(&outline), fill: Some(Ink::Grey(band.grey)), pen: None });
    }
    Ok(())
}

fn draw_line(line: &Line, frame: &Frame, draws: &mut Vec<Draw>) {
    let mut path = Vec::new();
    let mut end = None;
    for pair in line.points.windows(2) {
        let from = frame.part(pair[0]);
        let to = frame.part(pair[1]);
        let Some((from, to)) = cut(from, to) else {
            continue;
        };
        let piece = [frame.at_part(from), frame.at_part(to)];
        let fresh = end != Some(piece[0]);
        path.extend(open(&piece).into_iter().skip(usize::from(!fresh)));
        end = Some(piece[1]);
    }
    if path.is_empty() {
        return;
    }
    draws.push(Draw::Shape { path, fill: None, pen: Some(pen(line.dash, line.width, Ink::Grey(line.grey))) });
}

/// The part of a straight line that lies within the frame and a rim around it; `None` if there is
/// none or an end is not finite.
///
/// # Source
/// Liang & Barsky, A New Concept and Method for Line Clipping, ACM Trans. Graphics 3 (1984) 1-22.
fn cut(from: [f64; 2], to: [f64; 2]) -> Option<([f64; 2], [f64; 2])> {
    if from.iter().chain(&to).any(|v| !v.is_finite()) {
        return None;
    }
    let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
    let step = [to[0] - from[0], to[1] - from[1]];
    for axis in 0..2 {
        for (toward, room) in [(-step[axis], from[axis] + BEYOND), (step[axis], 1.0 + BEYOND - from[axis])] {
            if toward == 0.0 && room < 0.0 {
                return None;
            }
            if toward < 0.0 {
                enter = enter.max(room / toward);
            } else if toward > 0.0 {
                leave = leave.min(room / toward);
            }
        }
    }
    let at = |t: f64| [from[0] + t * step[0], from[1] + t * step[1]];
    let ends = |t: f64| {
        if t <= 0.0 {
            from
        } else if t >= 1.0 {
            to
        } else {
            at(t)
        }
    };
    (enter <= leave).then(|| (ends(enter), ends(leave)))
}

#[cfg(test)]
mod tests {
    use super::{BEYOND, cut};

    #[test]
    fn a_line_within_the_frame_is_left_alone() {
        assert_eq!(cut([0.1, 0.2], [0.9, 0.8]), Some(([0.1, 0.2], [0.9, 0.8])));
    }

    #[test]
    fn a_steep_line_keeps_its_slope_where_it_is_cut() {
        let (from, to) = cut([0.0, 0.0], [1.0, 1000.0]).expect("it starts inside");
        assert_eq!(from, [0.0, 0.0]);
        assert!((to[1] - (1.0 + BEYOND)).abs() < 1e-12);
        assert!((to[0] * 1000.0 - to[1]).abs() < 1e-12);
    }

    #[test]
    fn a_line_outside_is_dropped() {
        assert_eq!(cut([0.2, 3.0], [0.8, 4.0]), None);
        assert_eq!(cut([-2.0, 0.5], [-1.0, 0.5]), None);
        assert_eq!(cut([0.0, f64::NAN], [1.0, 1.0]), None);
    }
}
