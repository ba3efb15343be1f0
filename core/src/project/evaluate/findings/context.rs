//! What the findings of one column are made from, and how an effect is sized.

use super::super::{
    column::ends,
    finding::Place,
    observe::Observation,
    types::{ColumnEvaluation, FitEvaluation},
    words::tolerance,
};
use crate::{
    fit::{Fit, FitError, Point, Request, Weights, estimate, two_sided},
    inference::{departure::matters, holm::Judged},
    model::{Family, Units},
    project::{Project, evaluate::finding::Severity},
    quantity::format::{significant, with_unit},
};

/// One column with its data.
pub(super) struct Context<'a> {
    /// The project.
    pub project: &'a Project,
    /// The column.
    pub column: &'a ColumnEvaluation,
    /// Its fit and what was inferred.
    pub e: &'a FitEvaluation,
    /// All observations of the stage.
    pub observations: &'a [Observation],
    /// Those that the fit used, in the order of its points.
    pub seen: Vec<&'a Observation>,
    /// Student's factor of the fit at the plan's level.
    factor: f64,
}

impl<'a> Context<'a> {
    pub(super) fn new(
        project: &'a Project,
        observations: &'a [Observation],
        column: &'a ColumnEvaluation,
        e: &'a FitEvaluation,
    ) -> Self {
        let seen = e.used.iter().filter_map(|&i| observations.get(i)).collect();
        Self { project, column, e, observations, seen, factor: e.fit.coverage_factor(project.plan.level) }
    }

    pub(super) fn fit(&self) -> &'a Fit {
        &self.e.fit
    }

    pub(super) fn head(&self) -> &'a str {
        &self.column.head
    }

    pub(super) fn place(&self) -> Place {
        Place::Column(self.column.head.clone())
    }

    pub(super) fn unit(&self) -> &str {
        self.project.plan.input.unit.as_str()
    }

    /// An input size in words, two digits.
    pub(super) fn size(&self, input: f64) -> String {
        with_unit(&significant(input.abs(), 2), self.unit())
    }

    /// An input value as it was meant, with its unit.
    pub(super) fn at(&self, x: f64) -> String {
        with_unit(&super::super::words::plain(x), self.unit())
    }

    /// Lowest and highest standard; `None` with one.
    pub(super) fn ends(&self) -> Option<(f64, f64)> {
        ends(self.fit())
    }

    /// U of the mean of `k` converted readings at x, input unit; `None` while the scatter is not known.
    pub(super) fn expanded(&self, x: f64, k: u32) -> Option<f64> {
        half_width(self.fit(), self.factor, x, k)
    }

    /// Whether an effect, input unit, is worth more than a note at x: TOL/20 where limits are set, else U/5
    /// of the mean of as many readings as the plan foresees.
    pub(super) fn big(&self, size: f64, x: f64) -> bool {
        matters(size, tolerance(&self.project.plan, x), self.expanded(x, self.project.plan.detection.k))
    }

    /// Look for an effect that matters at x, else Note.
    pub(super) fn look_or_note(&self, size: f64, x: f64) -> Severity {
        if self.big(size, x) { Severity::Look } else { Severity::Note }
    }

    /// Another family or other weights through the same observations.
    pub(super) fn refit(&self, family: &Family, weights: Weights) -> Result<Fit, FitError> {
        let stated: Vec<f64> = self.seen.iter().map(|o| o.uncertainty.unwrap_or(f64::NAN)).collect();
        self.fitted_as(family, &self.fit().points, weights, &stated)
    }

    /// A fit of any weights; `stated` as [`Request::reading_uncertainty`].
    pub(super) fn fitted_as(
        &self,
        family: &Family,
        points: &[Point],
        weights: Weights,
        stated: &[f64],
    ) -> Result<Fit, FitError> {
        let reading_uncertainty = (weights == Weights::Typed).then_some(stated);
        let units = Units::of(&self.project.plan.input.unit, &self.project.plan.output.unit);
        estimate(&Request { reading_uncertainty, units, ..Request::new(family, points, weights) })
    }

    /// Where and how much the values of another fit differ most from this one's, input unit: (x, difference).
    pub(super) fn furthest(&self, other: &Fit) -> Option<(f64, f64)> {
        furthest(self.fit(), other)
    }

    /// Whether any place says that this column is the chosen one.
    pub(super) fn is_chosen(&self) -> bool {
        self.project.choice.as_ref().is_some_and(|c| c.column == self.column.spec)
    }
}

/// The standard at which two curves differ most as values of the first, and how much (second − first):
/// (x, difference), input unit.
pub(super) fn furthest(fit: &Fit, other: &Fit) -> Option<(f64, f64)> {
    let gap = |x: f64| (x, (fit.curve.value(x) - other.curve.value(x)) / fit.curve.derivative(x));
    let gaps = fit.levels().into_iter().map(|level| gap(level.x)).filter(|g| g.1.is_finite());
    gaps.max_by(|a, b| a.1.abs().total_cmp(&b.1.abs()))
}

/// U of the mean of k converted readings by any fit at x, input unit.
pub(super) fn expanded_by(fit: &Fit, level: f64, x: f64, k: u32) -> Option<f64> {
    half_width(fit, two_sided(level, fit.scatter_freedom()), x, k)
}

fn half_width(fit: &Fit, factor: f64, x: f64, k: u32) -> Option<f64> {
    let s = fit.scatter_sd()?;
    let variance = s * s * fit.variance_at(x) / f64::from(k.max(1)) + fit.mean_variance(x);
    Some(factor * libm::sqrt(variance) / fit.curve.derivative(x).abs()).filter(|u| u.is_finite())
}

/// Look when the family rejects and the effect matters, Note when it is tiny or stands alone, else nothing.
pub(super) fn weigh(judged: Judged, big: bool) -> Option<Severity> {
    match (judged.rejected, judged.alone) {
        (true, _) if big => Some(Severity::Look),
        (true, _) | (false, true) => Some(Severity::Note),
        (false, false) => None,
    }
}
