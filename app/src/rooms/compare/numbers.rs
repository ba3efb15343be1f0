//! Fourth row: coefficients with their doubt, and the figures that decide.

use super::{
    layout::Layout,
    rows::RowPlace,
    words::{self, Scene},
};
use assize_core::project::{
    evaluate::ColumnEvaluation,
    figures::{Figure, find},
};
use eframe::egui::{
    Align2, FontId, Galley, Id, Rect, ScrollArea, Sense, Stroke, StrokeKind, Ui, UiBuilder, Vec2, pos2, vec2,
};
use std::sync::Arc;

/// Figures of the short list, in this order; the others are details.
const SHORT: [&str; 8] = [
    "worst_read_back",
    "leftover_bend",
    "left_out",
    "detection_limit",
    "detection_limit.above",
    "detection_limit.below",
    "smallest_change",
    "residual_sd",
];
/// Height of a line, points.
const LINE: f32 = 15.5;
/// Height of a coefficient with its unit under it, points.
const COEFFICIENT: f32 = 28.0;
/// Between a name and its value, points.
const GAP: f32 = 8.0;
/// From the name of a coefficient to its value, points.
const INDENT: f32 = 19.0;
/// Air inside the panel, points: at the sides, and over and under.
const PAD: (f32, f32) = (10.0, 7.0);

/// Draws the row; alone on the screen it shows the details too.
pub(super) fn show(ui: &mut Ui, scene: Scene<'_>, row: RowPlace, details: bool) {
    for place in &scene.layout.columns {
        let column = &scene.view.evaluation.columns[place.index];
        let rect = Layout::cell(*place, row.plot);
        ui.painter().rect_filled(rect, scene.theme.spacing.corner, scene.theme.panel);
        let rule = Stroke::new(scene.theme.spacing.hair, scene.theme.rule);
        ui.painter().rect_stroke(rect, scene.theme.spacing.corner, rule, StrokeKind::Inside);
        let inner = rect.shrink2(vec2(PAD.0, PAD.1));
        if column.outcome.is_err() {
            let look = (scene.theme.small(), scene.theme.soft_ink);
            let galley = words::shortened(ui, "no numbers without a fit", look, inner.width());
            words::text(ui, inner.left_top(), Align2::LEFT_TOP, galley);
            continue;
        }
        let panel = Panel::new(ui, scene, column, details);
        match panel.beside(ui, inner.size()) {
            Some(look) => panel.draw_beside(ui, inner, &look),
            None => panel.draw_listed(ui, inner, place.index),
        }
    }
}

/// A line of the list: what stands left, what stands right, and the figure behind it.
struct Line<'a> {
    figure: &'a Figure,
    name: Arc<Galley>,
    value: Arc<Galley>,
}

/// How coefficients stand beside the figures.
struct Look {
    font: FontId,
    /// Units under the values, else after them.
    stacked: bool,
    /// Width that they take, points.
    width: f32,
}

/// The figures of one column.
struct Panel<'a> {
    scene: Scene<'a>,
    column: &'a ColumnEvaluation,
    coefficients: Vec<&'a Figure>,
    lines: Vec<Line<'a>>,
}

impl<'a> Panel<'a> {
    fn new(ui: &Ui, scene: Scene<'a>, column: &'a ColumnEvaluation, details: bool) -> Self {
        let is_coefficient = |f: &&Figure| f.key.starts_with("coefficient.");
        let figures: Vec<&Figure> = if details {
            column.figures.iter().filter(|f| !is_coefficient(f)).collect()
        } else {
            SHORT.iter().filter_map(|key| find(&column.figures, key)).collect()
        };
        let lines = figures.iter().map(|f| line(ui, scene, f, value(column, f, &figures))).collect();
        Self { scene, column, coefficients: column.figures.iter().filter(is_coefficient).collect(), lines }
    }

    /// The roomiest look in which both lists stand side by side; `None` when there is no room for that.
    fn beside(&self, ui: &Ui, room: Vec2) -> Option<Look> {
        if self.lines.len() as f32 * LINE > room.y + 1.0 {
            return None;
        }
        // Words that say why there is no number may be shortened, numbers may not.
        let numbers = self.lines.iter().filter(|l| l.figure.value.is_some());
        let needed = numbers.map(|l| l.name.size().x + GAP + l.value.size().x).fold(0.0, f32::max);
        let theme = self.scene.theme;
        let looks = [(theme.body(), true), (theme.small(), true), (theme.body(), false), (theme.small(), false)];
        looks.into_iter().find_map(|(font, stacked)| {
            let width = self.coefficients_width(ui, &font, stacked);
            let height = self.coefficients.len() as f32 * if stacked { COEFFICIENT } else { LINE };
            let fits = width + GAP + needed <= room.x && height <= room.y + 1.0;
            fits.then_some(Look { font, stacked, width })
        })
    }

    fn coefficients_width(&self, ui: &Ui, font: &FontId, stacked: bool) -> f32 {
        let theme = self.scene.theme;
        let width = |text: &str, font| ui.painter().layout_no_wrap(text.to_owned(), font, theme.ink).size().x;
        let one = |f: &&Figure| {
            let (value, unit) = (width(&f.text, font.clone()), width(&f.unit, theme.small()));
            INDENT + if stacked { value.max(unit) } else { value + 6.0 + unit }
        };
        self.coefficients.iter().map(one).fold(0.0, f32::max)
    }

    fn draw_beside(&self, ui: &Ui, rect: Rect, look: &Look) {
        let theme = self.scene.theme;
        let step = if look.stacked { COEFFICIENT } else { LINE };
        for (i, figure) in self.coefficients.iter().enumerate() {
            let top = rect.top() + i as f32 * step;
            let put = |at, text: &str, font: FontId, colour| {
                words::text(ui, at, Align2::LEFT_TOP, ui.painter().layout_no_wrap(text.to_owned(), font, colour))
            };
            put(pos2(rect.left(), top), &figure.label, theme.small(), theme.soft_ink);
            let left = rect.left() + INDENT;
            let value = put(pos2(left, top - 1.0), &figure.text, look.font.clone(), theme.ink);
            let unit_at = if look.stacked { pos2(left, top + 13.5) } else { pos2(value.right() + 6.0, top) };
            let unit = put(unit_at, &figure.unit, theme.small(), theme.soft_ink);
            say(ui, self.column, figure, value.union(unit));
        }
        draw_lines(ui, self.column, &self.lines, rect.with_min_x(rect.left() + look.width + GAP));
    }

    /// Too narrow for two lists: one over the other, what decides first; it scrolls.
    fn draw_listed(mut self, ui: &mut Ui, mut rect: Rect, index: usize) {
        // Whole lines only: half a figure could be misread.
        rect.set_height((rect.height() / LINE).floor().max(1.0) * LINE);
        let scene = self.scene;
        self.lines.extend(self.coefficients.iter().map(|f| line(ui, scene, f, f.shown())));
        let mut inside = ui.new_child(UiBuilder::new().max_rect(rect).id_salt(("numbers", index)));
        ScrollArea::vertical().id_salt("numbers").auto_shrink(false).show(&mut inside, |ui| {
            let size = vec2(ui.available_width(), self.lines.len() as f32 * LINE);
            let (rect, _) = ui.allocate_exact_size(size, Sense::hover());
            draw_lines(ui, self.column, &self.lines, rect);
        });
    }
}

fn line<'a>(ui: &Ui, scene: Scene<'_>, figure: &'a Figure, value: String) -> Line<'a> {
    let theme = scene.theme;
    Line {
        figure,
        name: ui.painter().layout_no_wrap(figure.label.clone(), theme.small(), theme.soft_ink),
        value: ui.painter().layout_no_wrap(value, theme.small(), theme.ink),
    }
}

fn draw_lines(ui: &Ui, column: &ColumnEvaluation, lines: &[Line<'_>], rect: Rect) {
    // Names end on one line, unless a value is so long that its name must step aside.
    let usual = lines.iter().map(|l| l.value.size().x).filter(|w| *w <= 0.6 * rect.width()).fold(0.0, f32::max);
    for (i, line) in lines.iter().enumerate() {
        let top = rect.top() + i as f32 * LINE;
        let most = rect.width() - line.name.size().x - GAP;
        let cut = line.value.size().x > most;
        let value = if cut { words::narrowed(ui, &line.value, most) } else { Arc::clone(&line.value) };
        let edge = rect.right() - usual.max(value.size().x).min(most) - GAP;
        words::text(ui, pos2(edge, top), Align2::RIGHT_TOP, Arc::clone(&line.name));
        words::text(ui, pos2(rect.right(), top), Align2::RIGHT_TOP, value);
        let whole = Rect::from_min_max(pos2(rect.left(), top), pos2(rect.right(), top + LINE));
        let response = say(ui, column, line.figure, whole);
        if cut {
            response.on_hover_text(format!("{}: {}", line.figure.label, line.value.text()));
        }
    }
}

/// A figure as shown; in the short list the residual SD stands in both units on one line.
fn value(column: &ColumnEvaluation, figure: &Figure, list: &[&Figure]) -> String {
    let input = find(&column.figures, "residual_sd_input").filter(|f| f.value.is_some());
    match input {
        Some(input) if figure.key == "residual_sd" && !list.iter().any(|f| f.key == input.key) => {
            format!("{} · {}", figure.shown(), input.shown())
        }
        _ => figure.shown(),
    }
}

/// `Line residual SD: 6.0 µV/V`, for screen readers and tests.
fn say(ui: &Ui, column: &ColumnEvaluation, figure: &Figure, rect: Rect) -> eframe::egui::Response {
    let id: Id = ui.scope_id().with((&column.head, &figure.key));
    words::label(ui, id, rect, &format!("{} {}: {}", column.head, figure.label, figure.shown()))
}
