//! Words inside a residual plot: unit, legend, and a scale of its own.

use super::{
    residual_column::{MARK, ResidualColumn},
    state::Against,
    ticks::Axis,
    words,
};
use crate::theme::MarkShape;
use assize_core::quantity::format::significant;
use eframe::egui::{Align2, Shape, Ui, pos2, vec2};
use egui_plot::PlotTransform;

/// Unit and legend once; a scale of its own is said where it holds.
pub(super) fn draw(
    ui: &Ui,
    transform: &PlotTransform,
    (column, y_axis): (&ResidualColumn<'_>, &Axis),
    shapes: &mut Vec<Shape>,
) {
    let theme = column.shared.scene.theme;
    let frame = transform.frame().shrink2(vec2(8.0, 5.0));
    let put = |text: &str, corner: Align2, indent: f32, shapes: &mut Vec<Shape>| {
        let look = (theme.small(), theme.soft_ink);
        let galley = words::shortened(ui, text, look, frame.width() - indent);
        let rect = corner.align_size_within_rect(galley.size(), frame).translate(vec2(indent, 0.0));
        shapes.push(Shape::galley(rect.min, galley, theme.soft_ink));
        rect
    };
    let mut left = 0.0;
    if column.shared.scene.layout.first() == Some(column.index) {
        let mut all = vec![(None, y_axis.scale.unit.clone())];
        all.extend(legend(column).into_iter().map(|shape| (Some(shape), shape.meaning().to_owned())));
        for (shape, text) in all {
            if let Some(shape) = shape {
                let centre = pos2(frame.left() + left + MARK / 2.0, frame.top() + 7.5);
                shape.shapes(centre, MARK, theme.soft_ink, shapes);
                left += MARK + 4.0;
            }
            left += put(&text, Align2::LEFT_TOP, left, shapes).width() + 10.0;
        }
    } else {
        // The unit once more where numbers stand that nothing else explains.
        let unexplained = column.numbered() && column.coarser() <= 1.0;
        let words = [(unexplained, y_axis.scale.unit.as_str()), (column.declared(), "errors")];
        for (_, text) in words.into_iter().filter(|(said, _)| *said) {
            left += put(text, Align2::LEFT_TOP, left, shapes).width() + 10.0;
        }
    }
    if let Some(text) = own_words(column, y_axis, transform) {
        // Beside the legend where there is room, else at the foot.
        let width = ui.painter().layout_no_wrap(text.clone(), theme.small(), theme.soft_ink).size().x;
        let top = left + width <= frame.width();
        put(&text, if top { Align2::RIGHT_TOP } else { Align2::RIGHT_BOTTOM }, 0.0, shapes);
    }
    if column.shared.against == Against::Order && column.shared.scene.layout.first() == Some(column.index) {
        put("run order", Align2::LEFT_BOTTOM, 0.0, shapes);
    }
}

/// `own scale, 40 times coarser, to 300 µV/V`.
fn own_words(column: &ResidualColumn<'_>, y_axis: &Axis, transform: &PlotTransform) -> Option<String> {
    let coarser = column.coarser();
    (coarser > 1.0).then(|| {
        let bounds = transform.bounds();
        let reach = bounds.max()[1].abs().max(bounds.min()[1].abs()) * y_axis.scale.factor;
        let reach = significant(reach, 2);
        let times = significant(coarser, 1);
        format!("own scale, {times} times coarser, to {reach} {}", y_axis.scale.unit).trim_end().to_owned()
    })
}

/// Shapes of directions that occur, when more than one does.
fn legend(column: &ResidualColumn<'_>) -> Vec<MarkShape> {
    let marks = column.marks();
    let there = |shape: &MarkShape| marks.iter().any(|m| m.dot.shape == *shape);
    let all = [MarkShape::Rising, MarkShape::Falling, MarkShape::NoDirection];
    let mut found: Vec<MarkShape> = all.into_iter().filter(there).collect();
    if found.len() < 2 {
        found.clear();
    }
    if column.shared.dots.iter().any(|d| d.aside) {
        found.push(MarkShape::SetAside);
    }
    found
}
