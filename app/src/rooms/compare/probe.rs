//! The ■ dragged along a curve: how often a true value would be missed, and why.

use super::{misses, near_facts::NearFacts, state::State, ticks::Range, words::Scene};
use crate::theme::FitLook;
use eframe::egui::{Mesh, Pos2, Shape, Stroke, pos2};
use egui_plot::PlotTransform;

/// Slices of the bell.
const SLICES: usize = 48;
/// Width of the bell on the screen, points.
const WIDTH: f32 = 46.0;

/// A true value on trial in one column.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Probing {
    /// The true value (or change), input unit.
    pub(super) x: f64,
    /// What it comes to, in words.
    pub(super) words: String,
    /// Signal and relative height of the bell.
    bell: Vec<(f64, f64)>,
    threshold: f64,
    /// Signals on the other side of the threshold count as seen.
    rises: bool,
}

impl Probing {
    /// The probe of a column, when its ■ is the one that was taken.
    pub(super) fn new(
        scene: Scene<'_>,
        facts: &NearFacts,
        state: &State,
        column: usize,
        window: Range,
    ) -> Option<Self> {
        let probe = state.probe.filter(|p| p.column == column)?;
        let evaluation = scene.view.evaluation;
        let e = evaluation.columns.get(column)?.outcome.as_ref().ok()?;
        let missed = misses::miss(evaluation, e, probe.x, state.cursor)?;
        let at = match facts.around {
            Some(_) => facts.band.mean + e.fit.curve.derivative(facts.around?) * probe.x,
            None => facts.band.mean + e.fit.curve.value(probe.x) - e.fit.curve.value(0.0),
        };
        Some(Self {
            x: probe.x,
            words: misses::miss_words(scene.view.project, facts, probe.x, missed),
            bell: misses::spread(evaluation, e, probe.x, (window, SLICES)),
            threshold: state.cursor,
            rises: at >= facts.band.mean,
        })
    }

    /// Draws the bell beside the upright line through the ■; what is missed is filled.
    pub(super) fn draw(
        &self,
        transform: &PlotTransform,
        look: &FitLook,
        at: Option<(f64, f64)>,
        shapes: &mut Vec<Shape>,
    ) {
        let Some((x, _)) = at else { return };
        let base = transform.position_from_point_x(x);
        let edge = |(y, height): &(f64, f64)| pos2(base + WIDTH * *height as f32, transform.position_from_point_y(*y));
        let missed = |y: f64| {
            if self.rises { y <= self.threshold } else { y >= self.threshold }
        };
        let tail: Vec<Pos2> = self.bell.iter().filter(|(y, _)| missed(*y)).map(&edge).collect();
        let mut mesh = Mesh::default();
        let colour = look.colour.gamma_multiply(0.35);
        for (i, point) in tail.iter().enumerate() {
            mesh.colored_vertex(pos2(base, point.y), colour);
            mesh.colored_vertex(*point, colour);
            if i > 0 {
                let at = 2 * i as u32;
                mesh.add_triangle(at - 2, at - 1, at);
                mesh.add_triangle(at - 1, at, at + 1);
            }
        }
        if tail.len() > 1 {
            shapes.push(Shape::mesh(mesh));
        }
        let outline: Vec<Pos2> = self.bell.iter().map(edge).collect();
        shapes.push(Shape::line(outline, Stroke::new(1.0, look.colour)));
    }
}
