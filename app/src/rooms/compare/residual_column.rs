//! One residual plot.

use super::{
    dots::{Dot, Measure},
    lines, marks,
    marks::Placed,
    residual_words,
    scale::Scales,
    sheet::{self, Sheet},
    state::{Against, State},
    ticks::{self, Axis, Range},
    words::{self, Scene},
};
use crate::theme::Theme;
use assize_core::{
    model::Family,
    quantity::{
        Unit,
        format::{signed, with_unit},
    },
};
use eframe::egui::{Rangef, Rect, Shape, Stroke, Ui, Vec2b};
use egui_plot::PlotTransform;
use std::sync::Arc;

/// Size of a mark in this row, points.
pub(super) const MARK: f32 = 9.0;
/// Least distances of the numbers on the axes, points.
const APART: (f32, f32) = (56.0, 34.0);

/// What is the same in all columns.
pub(super) struct Shared<'a> {
    /// Project, places, look.
    pub(super) scene: Scene<'a>,
    /// Readings as marks.
    pub(super) dots: Arc<[Dot]>,
    /// What residuals are measured in.
    pub(super) measure: Measure,
    /// What they stand against.
    pub(super) against: Against,
    /// Window across.
    pub(super) x: Range,
    /// Shared window up; a column's own is this times its coarseness.
    pub(super) y: Range,
    /// Who leaves the shared scale.
    pub(super) scales: Scales,
    /// Unit of the residuals.
    pub(super) unit: Unit,
    /// Unit across.
    pub(super) x_unit: Unit,
}

/// One plot of the row.
pub(super) struct ResidualColumn<'a> {
    /// What all columns share.
    pub(super) shared: &'a Shared<'a>,
    /// Position in the evaluation.
    pub(super) index: usize,
    /// One a mark.
    pub(super) residuals: &'a [Option<f64>],
}

impl ResidualColumn<'_> {
    /// Draws the plot; answers which observation the pointer is on.
    pub(super) fn show(&self, ui: &mut Ui, state: &mut State, rect: Rect) -> Option<usize> {
        let (scene, shared) = (self.shared.scene, self.shared);
        let coarser = self.coarser();
        let y = (shared.y.0 * coarser, shared.y.1 * coarser);
        let x_axis = ticks::axis(&shared.x_unit, shared.x, (rect.width(), APART.0), false);
        let y_axis = ticks::axis(&shared.unit, y, (rect.height(), APART.1), true);
        let marks = self.marks();
        let means = self.means();
        let label = self.label(marks.len());
        let sheet = Sheet {
            id: ui.scope_id().with(("residuals", self.index)),
            rect,
            window: (shared.x, y),
            pan: Vec2b::TRUE,
            label: &label,
        };
        let hover = state.hover;
        let shown = sheet.show(ui, scene.theme, |ui, transform, shapes| {
            sheet::grid(transform, &y_axis, scene.theme, shapes);
            zero_line(transform, scene.theme, shapes);
            lines::fit_line(transform, std::slice::from_ref(&means), (scene.theme.fit(self.index), 1.2), shapes);
            marks::draw(transform, &marks, (MARK, self.apart(), hover), scene.theme, shapes);
            residual_words::draw(ui, transform, (self, &y_axis), shapes);
        });
        sheet::numbers_below(ui, &shown.transform, (&x_axis, scene.beyond(self.index)), scene.theme);
        if self.numbered() {
            sheet::numbers_left(ui, &shown.transform, (&y_axis, 8.0), scene.theme);
        }
        let windows = &mut state.windows;
        let across = match shared.against {
            Against::Value => &mut windows.value,
            Against::Order => &mut windows.order,
        };
        shown.keep(ui, across, &mut windows.residual, coarser);
        let pointer = shown.response.hover_pos()?;
        let dot = marks::under(&shown.transform, &marks, self.apart(), pointer)?;
        let at = marks.iter().find(|m| std::ptr::eq(m.dot, dot)).map_or(0.0, |m| m.y);
        shown.response.show_tooltip_text(format!("{}\n{}", dot.words, self.residual_words(at, &y_axis)));
        dot.observation
    }

    /// Times coarser than the shared scale.
    pub(super) fn coarser(&self) -> f64 {
        self.shared.scales.coarser.get(self.index).copied().unwrap_or(1.0)
    }

    /// Numbers stand at the first axis, and again wherever the scale differs from the one to the left.
    pub(super) fn numbered(&self) -> bool {
        let of = |index: usize| self.shared.scales.coarser.get(index).copied();
        match self.shared.scene.layout.left_of(self.index) {
            Some(left) => of(left) != of(self.index),
            None => true,
        }
    }

    /// Replicates stand apart only where they would cover each other.
    fn apart(&self) -> bool {
        self.shared.against == Against::Value
    }

    /// Marks where they stand in this plot.
    pub(super) fn marks(&self) -> Vec<Placed<'_>> {
        let across = |dot: &Dot| match self.shared.against {
            Against::Value => dot.x,
            Against::Order => dot.order,
        };
        let pairs = self.shared.dots.iter().zip(self.residuals);
        pairs.filter_map(|(dot, r)| Some(Placed { dot, x: across(dot), y: (*r)? })).collect()
    }

    /// Means of the residuals at each value, ascending; none in run order.
    fn means(&self) -> Vec<(f64, f64)> {
        if self.shared.against == Against::Order {
            return Vec::new();
        }
        let pairs = self.shared.dots.iter().zip(self.residuals).filter(|(dot, _)| !dot.aside);
        let mut all: Vec<(f64, f64)> = pairs.filter_map(|(dot, r)| Some((dot.x, (*r)?))).collect();
        all.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mean = |level: &[(f64, f64)]| (level[0].0, level.iter().map(|p| p.1).sum::<f64>() / level.len() as f64);
        all.chunk_by(|a, b| a.0.total_cmp(&b.0).is_eq()).map(mean).collect()
    }

    /// Nothing is fitted: residuals are errors.
    pub(super) fn declared(&self) -> bool {
        self.shared.scene.view.evaluation.columns[self.index].spec.family == Family::Declared
    }

    /// `residuals of the line: bows: reads up to 0.023 kN low at 5 kN`.
    fn label(&self, count: usize) -> String {
        let column = &self.shared.scene.view.evaluation.columns[self.index];
        let what = if self.declared() { "errors against" } else { "residuals of" };
        format!(
            "{what} {}: {}; {count} readings, {}",
            words::in_a_sentence(&column.head),
            words::spoken(&column.captions.residuals),
            self.shared.measure.words()
        )
    }

    /// In the unit of the axis, so that it can be found there.
    fn residual_words(&self, value: f64, axis: &Axis) -> String {
        let what = if self.declared() { "error" } else { "residual" };
        format!("{what} {}", with_unit(&signed(value * axis.scale.factor, 2), &axis.scale.unit))
    }
}

/// The line of no residual.
fn zero_line(transform: &PlotTransform, theme: &Theme, shapes: &mut Vec<Shape>) {
    let y = transform.position_from_point_y(0.0);
    let frame = *transform.frame();
    if Rangef::new(frame.top(), frame.bottom()).contains(y) {
        shapes.push(Shape::hline(frame.x_range(), y, Stroke::new(1.5, theme.edge)));
    }
}
