//! One plot: its frame, its window, its numbers at the edges. What it shows comes as shapes.

use super::ticks::{Axis, Range};
use crate::theme::Theme;
use eframe::egui::{
    Align2, Color32, Id, Pos2, Rect, Response, Role, Sense, Shape, Stroke, StrokeKind, Ui, UiBuilder, Vec2b,
    WidgetInfo, pos2,
};
use egui_plot::{Plot, PlotBounds, PlotGeometry, PlotItem, PlotItemBase, PlotPoint, PlotTransform};
use std::ops::RangeInclusive;

/// A plot about to be shown.
pub(super) struct Sheet<'a> {
    /// Where its readings are looked up between frames.
    pub(super) id: Id,
    /// Its frame.
    pub(super) rect: Rect,
    /// Its window, both axes.
    pub(super) window: (Range, Range),
    /// Which axes move when it is dragged.
    pub(super) pan: Vec2b,
    /// What it shows, in words.
    pub(super) label: &'a str,
}

/// A plot that was shown.
pub(super) struct Shown {
    /// Where its points lie.
    pub(super) transform: PlotTransform,
    /// Pointer and double click.
    pub(super) response: Response,
    /// The window after the pointer moved it, when it did.
    pub(super) moved: Option<(Range, Range)>,
    /// A double click asks for the first window again.
    pub(super) reset: bool,
}

impl Shown {
    /// Keeps a window that a person moved, for all plots that share it; a double click gives it back.
    ///
    /// `coarser`: how many times coarser this plot's upright axis is than the shared one.
    pub(super) fn keep(&self, ui: &Ui, across: &mut Option<Range>, up: &mut Option<Range>, coarser: f64) {
        if let Some((x, y)) = self.moved {
            (*across, *up) = (Some(x), Some((y.0 / coarser, y.1 / coarser)));
        }
        if self.reset {
            (*across, *up) = (None, None);
        }
        if self.reset || self.moved.is_some() {
            // Plots drawn before this one follow in the next frame.
            ui.ctx().request_repaint();
        }
    }
}

impl Sheet<'_> {
    /// Shows the plot; `draw` adds shapes, clipped to the frame.
    pub(super) fn show<F>(&self, ui: &mut Ui, theme: &Theme, draw: F) -> Shown
    where
        F: Fn(&Ui, &PlotTransform, &mut Vec<Shape>),
    {
        let window = (sound(self.window.0), sound(self.window.1));
        let ((left, right), (bottom, top)) = window;
        ui.painter().rect_filled(self.rect, theme.spacing.corner, theme.panel);
        let mut inside = ui.new_child(UiBuilder::new().max_rect(self.rect));
        let plot = Plot::new("plot")
            .id(self.id)
            .width(self.rect.width())
            .height(self.rect.height())
            .show_axes(false)
            .show_grid(false)
            .show_background(false)
            .show_x(false)
            .show_y(false)
            .allow_boxed_zoom(false)
            .allow_scroll(false)
            .allow_zoom(true)
            .allow_drag(self.pan)
            .sense(Sense::CLICK | Sense::DRAG);
        let item = Layer { draw, base: PlotItemBase::new("layer".to_owned()) };
        let shown = plot.show(&mut inside, |plot| {
            plot.set_plot_bounds_x(left..=right);
            plot.set_plot_bounds_y(bottom..=top);
            plot.add(item);
        });
        let label = self.label;
        shown.response.widget_info(|| WidgetInfo::labeled(Role::Figure, true, label));
        ui.painter().rect_stroke(
            self.rect,
            theme.spacing.corner,
            Stroke::new(theme.spacing.hair, theme.rule),
            StrokeKind::Inside,
        );
        let bounds = shown.transform.bounds();
        let now = ((bounds.min()[0], bounds.max()[0]), (bounds.min()[1], bounds.max()[1]));
        let reset = shown.response.double_clicked();
        Shown {
            moved: (now != window && !reset).then_some(now),
            reset,
            transform: shown.transform,
            response: shown.response,
        }
    }
}

/// A range that a plot can show: finite and with some width. The plot would choose another one for
/// itself otherwise, and that would look like a person's doing in every frame.
fn sound((low, high): Range) -> Range {
    let middle = 0.5 * low + 0.5 * high;
    let least = (middle.abs() * 1e-12).max(1e-300);
    match high - low {
        span if span.is_finite() && span >= least => (low, high),
        span if span.is_finite() && middle.is_finite() => (middle - least, middle + least),
        _ => (-1.0, 1.0),
    }
}

/// Shapes drawn with the plot's own transform, after pan and zoom of this frame.
struct Layer<F> {
    draw: F,
    base: PlotItemBase,
}

impl<F: Fn(&Ui, &PlotTransform, &mut Vec<Shape>)> PlotItem for Layer<F> {
    fn shapes(&self, ui: &Ui, transform: &PlotTransform, shapes: &mut Vec<Shape>) {
        (self.draw)(ui, transform, shapes);
    }

    fn initialize(&mut self, _x_range: RangeInclusive<f64>) {}

    fn color(&self) -> Color32 {
        Color32::TRANSPARENT
    }

    fn allow_hover(&self) -> bool {
        false
    }

    fn geometry(&self) -> PlotGeometry<'_> {
        PlotGeometry::None
    }

    fn bounds(&self) -> PlotBounds {
        PlotBounds::NOTHING
    }

    fn base(&self) -> &PlotItemBase {
        &self.base
    }

    fn base_mut(&mut self) -> &mut PlotItemBase {
        &mut self.base
    }
}

/// A place of the plot on the screen.
pub(super) fn place(transform: &PlotTransform, x: f64, y: f64) -> Pos2 {
    transform.position_from_point(&PlotPoint::new(x, y))
}

/// Level grid lines at the ticks; upright ones would only add noise between columns.
pub(super) fn grid(transform: &PlotTransform, axis: &Axis, theme: &Theme, shapes: &mut Vec<Shape>) {
    let frame = *transform.frame();
    let line = Stroke::new(theme.spacing.hair, theme.hair);
    shapes.extend(axis.ticks.iter().map(|tick| {
        let at = transform.position_from_point_y(tick.value).round() + 0.5;
        Shape::hline(frame.x_range(), at, line)
    }));
}

/// Numbers under a plot; the last one carries the unit, which may reach `beyond` the frame, points.
pub(super) fn numbers_below(ui: &Ui, transform: &PlotTransform, (axis, beyond): (&Axis, f32), theme: &Theme) {
    let frame = *transform.frame();
    let layout = |text: String| ui.painter().layout_no_wrap(text, theme.small(), theme.soft_ink);
    let inside = |x: f32| x >= frame.left() - 1.0 && x <= frame.right() + 1.0;
    let mut free_to = frame.right() + beyond;
    // From the right, so that the one with the unit always stands.
    for (i, tick) in axis.ticks.iter().rev().enumerate() {
        let x = transform.position_from_point_x(tick.value);
        let plain = layout(tick.text.clone());
        let half = plain.size().x / 2.0;
        let galley = match axis.scale.unit.as_str() {
            unit if i == 0 && !unit.is_empty() => layout(format!("{} {unit}", tick.text)),
            _ => plain,
        };
        let left = (x - half).min(if i == 0 { free_to - galley.size().x } else { f32::INFINITY });
        if inside(x) && left + galley.size().x <= free_to + 0.5 {
            free_to = left - 6.0;
            ui.painter().galley(pos2(left, frame.bottom() + 4.0), galley, theme.soft_ink);
        }
    }
}

/// Numbers left of a plot, `gap` points off its frame; the unit stands inside the plot.
pub(super) fn numbers_left(ui: &Ui, transform: &PlotTransform, (axis, gap): (&Axis, f32), theme: &Theme) {
    let frame = *transform.frame();
    for tick in &axis.ticks {
        let y = transform.position_from_point_y(tick.value);
        if y >= frame.top() - 1.0 && y <= frame.bottom() + 1.0 {
            let at = pos2(frame.left() - gap, y);
            ui.painter().text(at, Align2::RIGHT_CENTER, &tick.text, theme.small(), theme.soft_ink);
        }
    }
}
