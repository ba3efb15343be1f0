//! The ends of the traces in a near-zero plot: where the cursor meets the curve, and the ■ at the
//! smallest value missed rarely enough.

use super::{
    near_column::{NearColumn, Shared},
    sheet,
    state::TraceEnds,
};
use crate::theme::MarkShape;
use assize_core::project::evaluate::near_zero::near;
use eframe::egui::{Rect, Shape, Stroke, Ui, pos2, vec2};
use egui_plot::PlotTransform;

/// Size of the marks, points.
const MARK: f32 = 9.0;

/// Where the traces of a column end.
pub(super) fn ends(column: &NearColumn<'_>, transform: &PlotTransform) -> TraceEnds {
    let frame = *transform.frame();
    let on_screen = |x: Option<f64>| {
        let (x, y) = column.curve_at(x?)?;
        Some(sheet::place(transform, x, y))
    };
    // The circle lies on the cursor; the curve passes there by the definition of the trace.
    let circle = column.readout.traced.map(|x| {
        let x = column.shared.facts.around.unwrap_or(0.0) + x;
        sheet::place(transform, x, column.cursor)
    });
    TraceEnds {
        column: column.index,
        circle,
        foot: circle.map(|c| pos2(c.x, frame.bottom())),
        square: on_screen(column.probe.as_ref().map_or(column.readout.missed, |p| Some(p.x))),
        square_other: on_screen(column.readout.missed_other),
    }
}

/// Draws circle, squares and the lines down to the axis.
pub(super) fn draw(column: &NearColumn<'_>, transform: &PlotTransform, ends: &TraceEnds, shapes: &mut Vec<Shape>) {
    let theme = column.shared.scene.theme;
    let look = theme.fit(column.index);
    let frame = *transform.frame();
    if let (Some(circle), Some(foot)) = (ends.circle, ends.foot)
        && frame.contains(circle)
    {
        let stroke = Stroke::new(1.6, look.colour);
        shapes.extend(Shape::dotted_line(&[circle, foot], look.colour, 4.0, 1.0));
        shapes.push(Shape::circle_filled(circle, 5.0, theme.panel));
        shapes.push(Shape::circle_stroke(circle, 5.0, stroke));
    }
    for square in [ends.square, ends.square_other].into_iter().flatten() {
        if !frame.contains(square) {
            continue;
        }
        let foot = pos2(square.x, frame.bottom());
        shapes.push(Shape::line_segment([square, foot], Stroke::new(1.4, look.colour)));
        let rect = Rect::from_center_size(square, vec2(MARK, MARK));
        shapes.push(Shape::rect_filled(rect, 0.0, look.colour));
    }
}

/// Read-outs outside the window are said at its edge.
pub(super) fn beyond(
    column: &NearColumn<'_>,
    ui: &Ui,
    transform: &PlotTransform,
    ends: &TraceEnds,
    shapes: &mut Vec<Shape>,
) {
    let Shared { scene, .. } = column.shared;
    let frame = *transform.frame();
    let all = [
        (column.readout.traced, ends.circle, MarkShape::Note),
        (column.readout.missed, ends.square.filter(|_| column.probe.is_none()), MarkShape::Stop),
    ];
    let mut y = frame.center().y - 20.0;
    for (value, at, shape) in all {
        let (Some(value), Some(at)) = (value, at) else {
            continue;
        };
        if frame.contains(at) {
            continue;
        }
        let size = near(scene.view.project, value, 2);
        let (text, left) = match at {
            at if at.x > frame.right() => (format!("{size} →"), false),
            at if at.x < frame.left() => (format!("← {size}"), true),
            at if at.y < frame.top() => (format!("{size} ↑"), false),
            _ => (format!("{size} ↓"), false),
        };
        let galley = ui.painter().layout_no_wrap(text, scene.theme.small(), scene.theme.fit(column.index).text);
        let width = galley.size().x + MARK + 5.0;
        let x = if left { frame.left() + 7.0 } else { frame.right() - 7.0 - width };
        let rect = Rect::from_min_size(pos2(x, y), vec2(width, galley.size().y));
        shapes.push(Shape::rect_filled(rect.expand(2.0), 2.0, scene.theme.panel));
        shape.shapes(rect.left_center() + vec2(MARK / 2.0, 0.0), MARK, scene.theme.fit(column.index).colour, shapes);
        shapes.push(Shape::galley(rect.min + vec2(MARK + 5.0, 0.0), galley, scene.theme.ink));
        y += 19.0;
    }
}
