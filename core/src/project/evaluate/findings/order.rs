//! What happened in the order of the work: drift, settling, direction, readings that copy each other.

use super::{
    context::{Context, weigh},
    family::{Judging, Tests},
    finding,
};
use crate::{
    inference::{
        durbin_watson::{DurbinWatsonReference, durbin_watson},
        hysteresis::Hysteresis,
        order::{DriftTest, Settling},
    },
    project::evaluate::finding::{Finding, Severity},
    quantity::format::{p_value, significant},
};

pub(super) fn findings(c: &Context<'_>, tests: &Tests, judged: &Judging) -> Vec<Finding> {
    let mut found = Vec::new();
    found.extend(tests.drift.as_ref().and_then(|d| drift(c, d, judged)));
    found.extend(tests.settling.as_ref().and_then(|s| settling(c, s, judged)));
    found.extend(tests.hysteresis.as_ref().and_then(|h| hysteresis(c, h, judged)));
    // Drift, settling, hysteresis and a wrong shape make neighbours alike: one cause, one finding.
    if found.is_empty() && !c.e.shape.rejected() {
        found.extend(neighbours(c));
    }
    found
}

fn drift(c: &Context<'_>, d: &DriftTest, judged: &Judging) -> Option<Finding> {
    let (_, high) = c.ends()?;
    let size = d.over_run_input.abs();
    let severity = weigh(judged.drift?, c.big(size, high))?;
    let message =
        format!("it moved while you worked: about {} from first to last ({})", c.size(size), p_value(d.test.p));
    let hint = "repeat the zero and one standard at start, middle and end";
    Some(finding("drift", severity, c.place(), message, hint))
}

fn settling(c: &Context<'_>, s: &Settling, judged: &Judging) -> Option<Finding> {
    let (low, high) = c.ends()?;
    let size = (s.per_step / c.fit().curve.derivative(f64::midpoint(low, high))).abs();
    let severity = weigh(judged.settling?, c.big(size, high))?;
    let message = format!("repeats of a standard still moved one way, {} a step ({})", c.size(size), p_value(s.test.p));
    Some(finding("settling", severity, c.place(), message, "wait longer before a reading is taken as settled"))
}

fn hysteresis(c: &Context<'_>, h: &Hysteresis, judged: &Judging) -> Option<Finding> {
    let size = (h.largest / c.fit().curve.derivative(h.at)).abs();
    let severity = weigh(judged.hysteresis?, c.big(size, h.at))?;
    let message = format!("rising and falling runs differ by up to {} at {}", c.size(size), c.at(h.at));
    let hint = "say from which side it will be used, or count the difference";
    Some(finding("hysteresis", severity, c.place(), message, hint))
}

/// One-sided level of the test of neighbours.
const ALIKE: f64 = 0.01;

fn neighbours(c: &Context<'_>) -> Option<Finding> {
    let fit = c.fit();
    let order: Vec<f64> = c.seen.iter().map(|o| o.order).collect::<Option<_>>()?;
    let n = order.len() as f64;
    // The exact reference is dear with many readings; far from any doubt it is not needed.
    let likeness = likeness(c, &order)?;
    if likeness * libm::sqrt(n) < 1.5 {
        return None;
    }
    let found = durbin_watson(fit, &DurbinWatsonReference::new(fit, &order)?)?;
    (found.p_alike < ALIKE).then(|| {
        let r = likeness.min(0.99);
        let worth = significant((n * (1.0 - r) / (1.0 + r)).max(1.0), 2);
        let message = format!(
            "neighbouring readings copy each other (d = {}, {}): {} readings are worth about {worth}",
            significant(found.d, 2),
            p_value(found.p_alike),
            order.len()
        );
        let hint = "wait longer between readings, or apply the standards in random order";
        finding("neighbours-alike", Severity::Note, c.place(), message, hint)
    })
}

/// 1 − d/2: about the correlation of neighbours in run order.
fn likeness(c: &Context<'_>, order: &[f64]) -> Option<f64> {
    let fit = c.fit();
    let mut run: Vec<(f64, f64)> = order
        .iter()
        .zip(fit.residuals.iter().zip(&fit.variance_ratio))
        .map(|(o, (e, v))| (*o, e / libm::sqrt(*v)))
        .collect();
    run.sort_by(|a, b| a.0.total_cmp(&b.0));
    let squares: f64 = run.iter().map(|r| r.1 * r.1).sum();
    let steps: f64 = run.windows(2).map(|w| (w[1].1 - w[0].1) * (w[1].1 - w[0].1)).sum();
    (squares > 0.0).then(|| 1.0 - 0.5 * steps / squares)
}
