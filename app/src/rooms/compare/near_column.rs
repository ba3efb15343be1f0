//! One near-zero plot: band, cursor, curve, and the ends of its traces.

use super::{
    labels::{self, Label},
    layout::ColumnPlace,
    lines, near_ends,
    near_facts::NearFacts,
    probe::Probing,
    readout::Readout,
    sheet,
    state::{State, TraceEnds},
    ticks::{Axis, Range},
    words::{self, Scene},
};
use crate::theme::Theme;
use assize_core::project::evaluate::{Caption, ColumnEvaluation, FitEvaluation};
use eframe::egui::{Rangef, Rect, Shape, Stroke, Ui, pos2, vec2};
use egui_plot::PlotTransform;

/// What is the same in all columns.
#[derive(Clone, Copy)]
pub(super) struct Shared<'a> {
    /// Project, places, look.
    pub(super) scene: Scene<'a>,
    /// What the row is about.
    pub(super) facts: &'a NearFacts,
    /// Window of all plots, across and up.
    pub(super) window: (Range, Range),
    /// Ticks of the upright axis.
    pub(super) y_axis: &'a Axis,
}

/// One plot of the row.
pub(super) struct NearColumn<'a> {
    pub(super) shared: Shared<'a>,
    column: &'a ColumnEvaluation,
    /// Position in the evaluation.
    pub(super) index: usize,
    /// From left to right.
    pub(super) x: Rangef,
    pub(super) cursor: f64,
    pub(super) readout: Readout,
    /// The drawn curve, in unbroken pieces.
    pieces: Vec<Vec<(f64, f64)>>,
    pub(super) probe: Option<Probing>,
}

impl<'a> NearColumn<'a> {
    pub(super) fn new(shared: Shared<'a>, state: &mut State, place: ColumnPlace) -> Self {
        let Shared { scene, facts, window, .. } = shared;
        let index = place.index;
        let column = &scene.view.evaluation.columns[index];
        let straight = column.outcome.as_ref().ok().and_then(|e| straight(e, facts, window.0));
        let pieces = match straight {
            Some(line) => vec![line],
            None => {
                let count = (place.x.span() / 2.0) as usize;
                state.cache.samples(&scene.view, index, (window.0, count), false).curve.clone()
            }
        };
        Self {
            probe: Probing::new(scene, facts, state, index, window.1),
            readout: state.readouts.get(index).cloned().unwrap_or_default(),
            cursor: state.cursor,
            x: place.x,
            shared,
            column,
            index,
            pieces,
        }
    }

    /// The drawn curve, in unbroken pieces.
    pub(super) fn pieces(&self) -> &[Vec<(f64, f64)>] {
        &self.pieces
    }

    /// Window of all plots of the row, across and up.
    pub(super) fn window(&self) -> (Range, Range) {
        self.shared.window
    }

    /// Heights of all lines that run through the plot, output unit.
    pub(super) fn drawn_lines(&self) -> Vec<f64> {
        let facts = self.shared.facts;
        let mut all = facts.thresholds.clone();
        all.extend([facts.edges.0, facts.edges.1, self.cursor]);
        all
    }

    fn fit(&self) -> Option<&FitEvaluation> {
        self.column.outcome.as_ref().ok().map(|e| &**e)
    }

    /// The verdict over the plot; while a ■ is dragged, how often that value would be missed.
    pub(super) fn caption(&self, ui: &Ui, cell: Rect) {
        let id = ui.scope_id().with(("near zero words", self.index));
        match &self.probe {
            Some(probe) => words::caption(ui, id, cell, &Caption::plain(probe.words.clone()), self.shared.scene.theme),
            None => words::caption(ui, id, cell, &self.readout.caption, self.shared.scene.theme),
        }
    }

    /// What the plot shows, in words.
    pub(super) fn label(&self) -> String {
        let what = match self.shared.facts.around {
            Some(_) => "smallest change by",
            None => "near zero of",
        };
        format!("{what} {}: {}", words::in_a_sentence(&self.column.head), words::spoken(&self.readout.caption))
    }

    /// The read-outs by name, for screen readers and tests.
    pub(super) fn values(&self, ui: &Ui, rect: Rect) {
        let head = &self.column.head;
        let left = Rect::from_min_max(rect.left_bottom() - vec2(0.0, 4.0), rect.center_bottom());
        let right = Rect::from_min_max(rect.center_bottom() - vec2(0.0, 4.0), rect.right_bottom());
        let traced = (format!("{head} traces to"), &self.readout.traced_text);
        let missed = (format!("{head} misses at most"), &self.readout.missed_text);
        words::value(ui, ui.scope_id().with(("traces", self.index)), left, (&traced.0, traced.1));
        words::value(ui, ui.scope_id().with(("misses", self.index)), right, (&missed.0, missed.1));
    }

    /// Draws everything inside the frame; answers where the traces end.
    pub(super) fn draw(
        &self,
        ui: &Ui,
        transform: &PlotTransform,
        names: &[Label],
        shapes: &mut Vec<Shape>,
    ) -> TraceEnds {
        let Shared { scene, facts, y_axis, .. } = self.shared;
        let theme = scene.theme;
        let look = theme.fit(self.index);
        gap(transform, facts, theme, shapes);
        sheet::grid(transform, y_axis, theme, shapes);
        upright(transform, facts.around.unwrap_or(0.0), theme, shapes);
        self.band(transform, shapes);
        lines::fit_line(transform, &self.pieces, (look, 1.8), shapes);
        self.cursor_line(transform, shapes);
        if let Some(probe) = &self.probe {
            probe.draw(transform, look, self.curve_at(probe.x), shapes);
        }
        let ends = near_ends::ends(self, transform);
        near_ends::draw(self, transform, &ends, shapes);
        near_ends::beyond(self, ui, transform, &ends, shapes);
        let mut names = names.to_vec();
        if scene.layout.first() == Some(self.index) {
            labels::unit(ui, transform, (self, &y_axis.scale.unit), theme, shapes);
            names.extend(Label::of_gap(facts, scene.view.project.plan.input.unit.as_str()));
        }
        labels::draw(ui, transform, self, &names, theme, shapes);
        ends
    }

    /// The height of the drawn curve over a value (or change).
    pub(super) fn curve_at(&self, x: f64) -> Option<(f64, f64)> {
        let fit = &self.fit()?.fit;
        let point = match self.shared.facts.around {
            Some(at) => (at + x, self.shared.facts.band.mean + fit.curve.derivative(at) * x),
            None => (x, fit.curve.value(x)),
        };
        (point.0.is_finite() && point.1.is_finite()).then_some(point)
    }

    fn band(&self, transform: &PlotTransform, shapes: &mut Vec<Shape>) {
        let theme = self.shared.scene.theme;
        let frame = *transform.frame();
        let at = |v: f64| transform.position_from_point_y(v);
        let (low, high) = self.shared.facts.edges;
        let rect = Rect::from_x_y_ranges(frame.x_range(), at(high)..=at(low));
        shapes.push(Shape::rect_filled(rect, 0.0, theme.brass_fill));
        let edge = Stroke::new(1.0, theme.brass.gamma_multiply(0.45));
        shapes.extend([low, high].map(|v| Shape::hline(frame.x_range(), at(v), edge)));
        let dash = Stroke::new(1.0, theme.brass);
        for threshold in self.shared.facts.thresholds.iter().filter(|t| **t != self.cursor) {
            let line = [pos2(frame.left(), at(*threshold)), pos2(frame.right(), at(*threshold))];
            shapes.extend(Shape::dashed_line(&line, dash, 5.0, 4.0));
        }
    }

    fn cursor_line(&self, transform: &PlotTransform, shapes: &mut Vec<Shape>) {
        let y = transform.position_from_point_y(self.cursor);
        let stroke = Stroke::new(2.0, self.shared.scene.theme.brass);
        shapes.push(Shape::hline(transform.frame().x_range(), y, stroke));
    }
}

/// Hair lines over what no standard covers.
fn gap(transform: &PlotTransform, facts: &NearFacts, theme: &Theme, shapes: &mut Vec<Shape>) {
    let Some((from, to)) = facts.gap else { return };
    let x = |v: f64| transform.position_from_point_x(v);
    let frame = *transform.frame();
    let area = Rect::from_x_y_ranges(x(from)..=x(to), frame.y_range()).intersect(frame);
    lines::hatch(area, Stroke::new(1.0, theme.hair), shapes);
}

/// The upright line at zero (or at the standard).
fn upright(transform: &PlotTransform, at: f64, theme: &Theme, shapes: &mut Vec<Shape>) {
    let frame = *transform.frame();
    let x = transform.position_from_point_x(at);
    if frame.x_range().contains(x) {
        shapes.push(Shape::vline(x, frame.y_range(), Stroke::new(1.0, theme.rule)));
    }
}

/// Where there is no zero: the straight line through the mean of the readings at the standard.
fn straight(e: &FitEvaluation, facts: &NearFacts, window: Range) -> Option<Vec<(f64, f64)>> {
    let at = facts.around?;
    let slope = e.fit.curve.derivative(at);
    let line = |x: f64| (x, facts.band.mean + slope * (x - at));
    slope.is_finite().then(|| vec![line(window.0), line(window.1)])
}
