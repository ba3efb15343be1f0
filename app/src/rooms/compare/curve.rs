//! First row: readings, function, mean band and prediction band.

use super::{
    cache::Samples,
    corner,
    dots::{Dot, extent},
    layout::{ColumnPlace, Layout},
    lines, marks,
    marks::Placed,
    sheet::{self, Sheet},
    state::State,
    ticks::{self, Axis, Range},
    words::{self, Scene},
};
use assize_core::project::evaluate::{ColumnEvaluation, FitEvaluation};
use eframe::egui::{Align2, Pos2, Rangef, Shape, Ui, Vec2b};
use egui_plot::PlotTransform;

/// Size of a mark in this row, points.
const MARK: f32 = 8.0;
/// Least distances of the numbers on the axes, points.
const APART: (f32, f32) = (56.0, 30.0);

/// Values shown at first: from 0 when the lowest standard is not far from it.
pub(super) fn values(dots: &[Dot]) -> Range {
    let Some((low, high)) = extent(dots.iter().map(|d| d.x)) else {
        return (0.0, 1.0);
    };
    let low = if low > 0.0 && low < 0.2 * high { 0.0 } else { low };
    padded((low, high), 0.04)
}

/// A range with some air at both ends; one without width gets some.
pub(super) fn padded((low, high): Range, share: f64) -> Range {
    let span = high - low;
    let pad = if span > 0.0 { share * span } else { low.abs().max(1e-12) * 0.1 };
    (low - pad, high + pad)
}

/// Draws the row; answers which observation the pointer is on.
pub(super) fn show(ui: &mut Ui, scene: Scene<'_>, state: &mut State, y: Rangef) -> Option<usize> {
    let dots = state.cache.dots.clone();
    let x = state.windows.value.unwrap_or_else(|| values(&dots));
    let output = || padded(extent(dots.iter().map(|d| d.y)).unwrap_or((0.0, 1.0)), 0.1);
    let window = (x, state.windows.output.unwrap_or_else(output));
    let mut hover = None;
    for place in &scene.layout.columns {
        let column = &scene.view.evaluation.columns[place.index];
        if let Ok(e) = &column.outcome {
            let shown = plot(ui, scene, state, (*place, e), (window, y, &dots));
            hover = shown.or(hover);
        }
    }
    hover
}

fn plot(
    ui: &mut Ui,
    scene: Scene<'_>,
    state: &mut State,
    (place, e): (ColumnPlace, &FitEvaluation),
    (window, y, dots): ((Range, Range), Rangef, &[Dot]),
) -> Option<usize> {
    let (plan, column) = (&scene.view.project.plan, &scene.view.evaluation.columns[place.index]);
    let rect = Layout::cell(place, y);
    let x_axis = ticks::axis(&plan.input.unit, window.0, (rect.width(), APART.0), false);
    let y_axis = ticks::axis(&plan.output.unit, window.1, (rect.height(), APART.1), false);
    let count = (rect.width() / 2.0) as usize;
    let samples = state.cache.samples(&scene.view, place.index, (drawn_over(e, window.0), count), true);
    let marks: Vec<Placed<'_>> = seen(dots, e).map(|dot| Placed { dot, x: dot.x, y: dot.y }).collect();
    let (name, verdict) = (words::in_a_sentence(&column.head), words::spoken(&column.captions.curve));
    let sheet = Sheet {
        id: ui.scope_id().with(("curve", place.index)),
        rect,
        window,
        pan: Vec2b::TRUE,
        label: &format!("curve of {name}: {} readings, {verdict}", marks.len()),
    };
    let paint = Paint { scene, column, place: place.index, y_axis: &y_axis, samples: &samples, marks: &marks };
    let now = state.hover;
    let shown = sheet.show(ui, scene.theme, |ui, transform, shapes| paint.draw(ui, transform, now, shapes));
    sheet::numbers_below(ui, &shown.transform, (&x_axis, scene.beyond(place.index)), scene.theme);
    if scene.layout.first() == Some(place.index) {
        sheet::numbers_left(ui, &shown.transform, (&y_axis, 8.0), scene.theme);
    }
    let windows = &mut state.windows;
    shown.keep(ui, &mut windows.value, &mut windows.output, 1.0);
    let dot = marks::under(&shown.transform, &marks, false, shown.response.hover_pos()?)?;
    shown.response.show_tooltip_text(&dot.words);
    dot.observation
}

/// Marks a column shows here: zeros only where they are fitted.
fn seen<'a>(dots: &'a [Dot], e: &'a FitEvaluation) -> impl Iterator<Item = &'a Dot> {
    dots.iter().filter(|d| !d.zero || e.zeros_fitted)
}

/// The function is drawn over its standards and a little beyond, never far outside.
fn drawn_over(e: &FitEvaluation, window: Range) -> Range {
    let used = extent(e.fit.points.iter().map(|p| p.x)).map_or(window, |range| padded(range, 0.03));
    let (low, high) = (used.0.max(window.0), used.1.min(window.1));
    if low < high { (low, high) } else { window }
}

struct Paint<'a> {
    scene: Scene<'a>,
    column: &'a ColumnEvaluation,
    place: usize,
    y_axis: &'a Axis,
    samples: &'a Samples,
    marks: &'a [Placed<'a>],
}

impl Paint<'_> {
    fn draw(&self, ui: &Ui, transform: &PlotTransform, hover: Option<usize>, shapes: &mut Vec<Shape>) {
        let theme = self.scene.theme;
        let look = theme.fit(self.place);
        sheet::grid(transform, self.y_axis, theme, shapes);
        let band = |f: fn(&(f64, f64, f64, f64)) -> f64| {
            self.samples.bands.iter().map(move |row| (row.0, row.1 - f(row), row.1 + f(row)))
        };
        lines::ribbon(transform, band(|row| row.3), look.colour.gamma_multiply(0.10), shapes);
        lines::ribbon(transform, band(|row| row.2), look.colour.gamma_multiply(0.18), shapes);
        lines::fit_line(transform, &self.samples.curve, (look, 1.8), shapes);
        marks::draw(transform, self.marks, (MARK, false, hover), theme, shapes);
        self.words(ui, transform, shapes);
    }

    /// The output's unit, once, and the verdict on the curve, each in a free corner.
    fn words(&self, ui: &Ui, transform: &PlotTransform, shapes: &mut Vec<Shape>) {
        let theme = self.scene.theme;
        let mut taken: Vec<Pos2> = self.marks.iter().map(|m| sheet::place(transform, m.x, m.y)).collect();
        for piece in &self.samples.curve {
            taken.extend(piece.iter().map(|(x, y)| sheet::place(transform, *x, *y)));
        }
        let frame = *transform.frame();
        let mut put = |text: &str, colour, corners: &[Align2]| {
            let galley = words::shortened(ui, text, (theme.small(), colour), frame.width() - 14.0);
            if let Some(rect) = corner::free(frame, galley.size(), corners, &taken) {
                taken.extend([rect.left_top(), rect.center(), rect.right_bottom()]);
                shapes.push(Shape::galley(rect.min, galley, colour));
            }
        };
        if self.scene.layout.first() == Some(self.place) && !self.y_axis.scale.unit.is_empty() {
            put(&self.y_axis.scale.unit, theme.soft_ink, &[Align2::LEFT_TOP, Align2::RIGHT_TOP, Align2::LEFT_BOTTOM]);
        }
        put(
            &self.column.captions.curve.text,
            theme.soft_ink,
            &[Align2::RIGHT_BOTTOM, Align2::LEFT_BOTTOM, Align2::RIGHT_TOP, Align2::LEFT_TOP],
        );
    }
}
