//! The tests of one column that are judged together, so that many looks raise few false alarms.

use super::context::Context;
use crate::{
    fit::{Fit, Weights},
    inference::{
        applications::{Applications, Looks, applications},
        forced_zero::{ForcedZero, forced_zero},
        holm::{FAMILY_LEVEL, Judged, holm},
        hysteresis::{Hysteresis, hysteresis},
        order::{Drift, DriftTest, Settling, drift, settling},
        spread::{Spread, SpreadReference, spread},
    },
    model::Family,
    project::{
        Project,
        evaluate::observe::{Observation, fitted},
        plan::ZeroState,
    },
    readings::Direction,
};

/// Draws of the reference of the spread test, and of a first look that decides whether they are worth while.
const DRAWS: usize = 999;
const LOOK: usize = 39;

/// The tests of a column with what they found.
pub(super) struct Tests {
    /// p_S of the shape.
    pub shape: Option<f64>,
    /// Does the scatter grow?
    pub spread: Option<Spread>,
    /// Did it move over the run?
    pub drift: Option<DriftTest>,
    /// Did it still settle?
    pub settling: Option<Settling>,
    /// Do rising and falling differ?
    pub hysteresis: Option<Hysteresis>,
    /// Does the free line miss zero, where the column forces it?
    pub zero: Option<(Fit, ForcedZero)>,
    /// Do applications differ more than looks?
    pub applications: Option<Applications>,
}

/// What the family makes of each.
pub(super) struct Judging {
    pub shape: Option<Judged>,
    pub spread: Option<Judged>,
    pub drift: Option<Judged>,
    pub settling: Option<Judged>,
    pub hysteresis: Option<Judged>,
    pub zero: Option<Judged>,
}

impl Tests {
    pub(super) fn of(c: &Context<'_>) -> Self {
        let fit = c.fit();
        let order: Option<Vec<f64>> = c.seen.iter().map(|o| o.order).collect();
        let approach: Vec<Direction> = c.seen.iter().map(|o| o.direction).collect();
        let drift = match drift(fit, order.as_deref()) {
            Drift::Tested(test) => Some(test),
            Drift::Confounded | Drift::NoOrder | Drift::TooFew => None,
        };
        Self {
            shape: c.e.shape.p,
            // Residuals of the wrong shape say nothing about the scatter.
            spread: if c.e.shape.rejected() { None } else { funnel(fit) },
            drift,
            settling: settling(fit, order.as_deref()),
            hysteresis: hysteresis(&fit.points, &approach),
            zero: free_line(c).and_then(|free| Some((forced_zero(&free)?, free))).map(|(zero, free)| (free, zero)),
            applications: looks_against_applications(c.project, c.observations),
        }
    }

    pub(super) fn judge(&self) -> Judging {
        let p = [
            self.shape,
            self.spread.map(|s| s.p),
            self.drift.as_ref().map(|d| d.test.p),
            self.settling.as_ref().map(|s| s.test.p),
            self.hysteresis.and_then(|h| h.p),
            self.zero.as_ref().map(|(_, zero)| zero.p),
            self.applications.map(|a| a.test.p),
        ];
        let judged = holm(&p, FAMILY_LEVEL);
        Judging {
            shape: judged[0],
            spread: judged[1],
            drift: judged[2],
            settling: judged[3],
            hysteresis: judged[4],
            zero: judged[5],
        }
    }
}

/// The spread test; its reference is drawn only when a first look suggests a funnel.
pub(super) fn funnel(fit: &Fit) -> Option<Spread> {
    let first = spread(fit, &SpreadReference::new(fit, LOOK, 1)?)?;
    if first.p > 0.2 {
        return Some(first);
    }
    spread(fit, &SpreadReference::new(fit, DRAWS, 1)?)
}

/// The line with a free constant that a forced zero is held against: through the same observations, or for
/// a factor from one standard through all of them.
pub(super) fn free_line(c: &Context<'_>) -> Option<Fit> {
    let line = Family::Polynomial(1);
    match c.fit().family {
        Family::LineThroughZero => c.refit(&line, c.fit().weights).ok(),
        Family::OnePoint => {
            let plan = &c.project.plan;
            let zero_is_value = matches!(plan.zero_state, ZeroState::Zero | ZeroState::LiveZero);
            let part = c.column.spec.zeros.unwrap_or(plan.zeros_part);
            let used = fitted(c.observations, part, zero_is_value);
            let points: Vec<_> = used.iter().map(|&i| c.observations[i].point()).collect();
            crate::fit::fit(&line, &points, Weights::Equal).ok()
        }
        _ => None,
    }
}

/// Applications of standards against the looks at each; zeros are not counted among them.
pub(super) fn looks_against_applications(project: &Project, observations: &[Observation]) -> Option<Applications> {
    let values = |o: &Observation| o.readings.iter().filter_map(|id| Some(project.reading(*id)?.value)).collect();
    let looks: Vec<Looks> =
        observations.iter().filter(|o| !o.is_zero()).map(|o| Looks { x: o.x, values: values(o) }).collect();
    applications(&looks)
}
