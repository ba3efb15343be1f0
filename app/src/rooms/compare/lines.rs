//! Lines and fills from samples to the screen, cut off at the frame of the plot.

use super::sheet::place;
use crate::theme::FitLook;
use eframe::egui::{Color32, Mesh, Pos2, Rect, Shape, Stroke, pos2};
use egui_plot::PlotTransform;

/// Appends a fit's line in its colour and pattern.
pub(super) fn fit_line(
    transform: &PlotTransform,
    pieces: &[Vec<(f64, f64)>],
    (look, width): (&FitLook, f32),
    shapes: &mut Vec<Shape>,
) {
    let stroke = Stroke::new(width, look.colour);
    for piece in pieces {
        for run in cut(transform, piece) {
            look.pattern.shapes(&run, stroke, shapes);
        }
    }
}

/// The parts of a line that lie in the frame, on the screen.
///
/// What lies outside is cut off here: dashes cost by their length, and a steep curve leaves the frame
/// between two samples.
pub(super) fn cut(transform: &PlotTransform, line: &[(f64, f64)]) -> Vec<Vec<Pos2>> {
    let frame = transform.frame().expand(8.0);
    let mut runs: Vec<Vec<Pos2>> = Vec::new();
    let mut open = false;
    for pair in line.windows(2) {
        let [a, b] = [pair[0], pair[1]].map(|(x, y)| place(transform, x, y));
        let Some((from, to)) = inside(frame, a, b) else {
            open = false;
            continue;
        };
        match runs.last_mut().filter(|_| open) {
            Some(run) => run.push(to),
            None => runs.push(vec![from, to]),
        }
        open = to == b;
    }
    runs
}

/// The part of a segment inside a rectangle.
///
/// Source: Y.-D. Liang & B. A. Barsky (1984), ACM Transactions on Graphics 3, 1–22 (from memory).
fn inside(frame: Rect, a: Pos2, b: Pos2) -> Option<(Pos2, Pos2)> {
    if !a.is_finite() || !b.is_finite() {
        return None;
    }
    let d = b - a;
    let (mut enter, mut leave) = (0.0f32, 1.0f32);
    let edges = [
        (-d.x, a.x - frame.left()),
        (d.x, frame.right() - a.x),
        (-d.y, a.y - frame.top()),
        (d.y, frame.bottom() - a.y),
    ];
    for (towards, room) in edges {
        if towards == 0.0 {
            if room < 0.0 {
                return None;
            }
        } else if towards < 0.0 {
            enter = enter.max(room / towards);
        } else {
            leave = leave.min(room / towards);
        }
    }
    if enter > leave {
        return None;
    }
    let from = if enter > 0.0 { a + d * enter } else { a };
    let to = if leave < 1.0 { a + d * leave } else { b };
    Some((from, to))
}

/// Appends a fill between two lines over the same places: x, lower and upper.
pub(super) fn ribbon(
    transform: &PlotTransform,
    rows: impl Iterator<Item = (f64, f64, f64)>,
    colour: Color32,
    shapes: &mut Vec<Shape>,
) {
    let frame = transform.frame().expand(8.0);
    let mut mesh = Mesh::default();
    let mut count = 0u32;
    for (x, low, high) in rows {
        let x = transform.position_from_point_x(x);
        let y = |v: f64| transform.position_from_point_y(v).clamp(frame.top(), frame.bottom());
        if !x.is_finite() || !low.is_finite() || !high.is_finite() {
            continue;
        }
        mesh.colored_vertex(pos2(x, y(low)), colour);
        mesh.colored_vertex(pos2(x, y(high)), colour);
        if count > 0 {
            let at = 2 * count;
            mesh.add_triangle(at - 2, at - 1, at);
            mesh.add_triangle(at - 1, at, at + 1);
        }
        count += 1;
    }
    if count > 1 {
        shapes.push(Shape::mesh(mesh));
    }
}

/// Appends slanting hair lines over a rectangle: nothing was measured here.
pub(super) fn hatch(area: Rect, stroke: Stroke, shapes: &mut Vec<Shape>) {
    const APART: f32 = 9.0;
    if !area.is_positive() {
        return;
    }
    let (height, mut x) = (area.height(), area.left() - area.height());
    // Starting on a fixed raster keeps the hatching still while the area grows.
    x -= x.rem_euclid(APART);
    while x < area.right() {
        let (a, b) = (pos2(x, area.bottom()), pos2(x + height, area.top()));
        if let Some((from, to)) = inside(area, a, b) {
            shapes.push(Shape::line_segment([from, to], stroke));
        }
        x += APART;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use egui_plot::PlotBounds;

    fn transform() -> PlotTransform {
        let frame = Rect::from_min_max(pos2(0.0, 0.0), pos2(100.0, 100.0));
        PlotTransform::new(frame, PlotBounds::from_min_max([0.0, 0.0], [10.0, 10.0]), false)
    }

    #[test]
    fn a_steep_line_that_crosses_between_samples_is_kept() {
        let runs = cut(&transform(), &[(4.9, -1e6), (5.1, 1e6)]);
        assert_eq!(runs.len(), 1);
        assert!(runs[0].iter().all(|p| (p.x - 50.0).abs() < 0.01));
        assert!((runs[0][0].y - 108.0).abs() < 0.1 && (runs[0][1].y + 8.0).abs() < 0.1);
    }

    #[test]
    fn what_lies_outside_is_gone_and_the_rest_stays_in_pieces() {
        let outside = [(0.0, 20.0), (10.0, 30.0)];
        assert!(cut(&transform(), &outside).is_empty());
        let out_and_in = [(0.0, 5.0), (2.0, 5.0), (4.0, 50.0), (6.0, 50.0), (8.0, 5.0), (9.0, 5.0)];
        assert_eq!(cut(&transform(), &out_and_in).len(), 2);
        assert!(cut(&transform(), &[(0.0, f64::NAN), (1.0, 5.0)]).is_empty());
    }
}
