//! Samples of curves and bands, kept until the project or the window of a plot changes.

use super::{
    dots::{self, Dot, Measure},
    near_facts::NearRow,
    readout::{self, Readout},
    ticks::Range,
};
use crate::rooms::View;
use assize_core::{inference::bands::Bands, project::evaluate::FitEvaluation};
use std::{collections::BTreeMap, sync::Arc};

/// A curve with its bands, sampled over a window.
#[derive(Debug, Clone, Default, PartialEq)]
pub(super) struct Samples {
    /// x and f̂(x), in unbroken pieces; a piece ends where the function has no value.
    pub(super) curve: Vec<Vec<(f64, f64)>>,
    /// x, f̂(x), half the mean band, half the prediction band; empty without a residual SD.
    pub(super) bands: Vec<(f64, f64, f64, f64)>,
}

/// What identifies samples: column, window (as bits), count.
type Key = (usize, u64, u64, usize);

/// Everything kept for one revision of the project.
#[derive(Debug)]
pub(super) struct Cache {
    /// Readings as marks.
    pub(super) dots: Arc<[Dot]>,
    /// What the near-zero row is about.
    pub(super) near: NearRow,
    samples: BTreeMap<Key, Arc<Samples>>,
    residuals: BTreeMap<(usize, u8), Arc<[Option<f64>]>>,
    read: Option<u64>,
}

impl Default for Cache {
    fn default() -> Self {
        Self {
            dots: Arc::from([]),
            near: NearRow::Line(String::new()),
            samples: BTreeMap::new(),
            residuals: BTreeMap::new(),
            read: None,
        }
    }
}

/// More sets of samples than this are never kept: zooming makes new ones all the time.
const KEPT: usize = 48;

impl Cache {
    pub(super) fn new(view: &View<'_>) -> Self {
        Self {
            dots: dots::dots(view.project, view.evaluation).into(),
            near: NearRow::new(view.evaluation, view.project.plan.level),
            ..Self::default()
        }
    }

    /// Samples of a column over a window, `count` of them; with bands when asked for.
    pub(super) fn samples(
        &mut self,
        view: &View<'_>,
        column: usize,
        (window, count): (Range, usize),
        bands: bool,
    ) -> Arc<Samples> {
        let key = (column, window.0.to_bits(), window.1.to_bits(), 2 * count + usize::from(bands));
        if self.samples.len() >= KEPT && !self.samples.contains_key(&key) {
            self.samples.clear();
        }
        let found = self.samples.entry(key).or_insert_with(|| {
            let e = view.evaluation.columns.get(column).and_then(|c| c.outcome.as_ref().ok());
            let level = view.project.plan.level;
            e.map(|e| sample(e, (window, count), bands.then_some(level))).unwrap_or_default().into()
        });
        Arc::clone(found)
    }

    /// Residuals of a column, one a mark.
    pub(super) fn residuals(&mut self, view: &View<'_>, column: usize, measure: Measure) -> Arc<[Option<f64>]> {
        let dots = &self.dots;
        let found = self.residuals.entry((column, measure as u8)).or_insert_with(|| {
            let e = view.evaluation.columns.get(column).and_then(|c| c.outcome.as_ref().ok());
            e.map_or_else(|| vec![None; dots.len()], |e| dots::residuals(dots, e, measure)).into()
        });
        Arc::clone(found)
    }

    /// Read-outs of a cursor when they differ from the last ones; `None`: nothing has changed.
    pub(super) fn readouts(&mut self, view: &View<'_>, cursor: f64) -> Option<Vec<Readout>> {
        if self.read == Some(cursor.to_bits()) {
            return None;
        }
        self.read = Some(cursor.to_bits());
        Some(match self.near.facts() {
            Some(facts) => readout::readouts(view.project, view.evaluation, facts, cursor),
            None => Vec::new(),
        })
    }
}

fn sample(e: &FitEvaluation, (window, count): (Range, usize), level: Option<f64>) -> Samples {
    let fit = &e.fit;
    let count = count.clamp(2, 2000);
    let at = |i: usize| window.0 + (window.1 - window.0) * i as f64 / (count - 1) as f64;
    let values: Vec<(f64, f64)> = (0..count).map(|i| (at(i), fit.curve.value(at(i)))).collect();
    let pieces = values.chunk_by(|a, b| a.1.is_finite() == b.1.is_finite());
    let curve = pieces.filter(|p| p[0].1.is_finite() && p.len() > 1).map(<[_]>::to_vec).collect();
    let bands = level.and_then(|level| Bands::new(fit, level, 1));
    let row = |bands: &Bands<'_>, x: f64| bands.at(x).map(|b| (x, b.value, b.mean, b.prediction));
    // Bands are smooth: every fourth place is enough.
    let bands = bands.map(|b| (0..count).step_by(4).filter_map(|i| row(&b, at(i))).collect());
    Samples { curve, bands: bands.unwrap_or_default() }
}
