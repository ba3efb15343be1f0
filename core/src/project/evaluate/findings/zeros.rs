//! Findings on the zero readings.

use super::{Facts, finding};
use crate::{
    project::{
        evaluate::{
            finding::{Finding, Place, Severity},
            near_zero::{near, zero_disagreement},
        },
        plan::ZeroState,
    },
    quantity::format::{p_value, significant},
    zero::health::{Count, Health, health},
};

/// Seed of the reference orders of the lag-1 test: fixed, so that the same zeros give the same p.
const SEED: u64 = 1;

/// Count, clipping, drift and order of the zeros; whether the curve meets them.
pub(super) fn findings(facts: &Facts<'_>) -> Vec<Finding> {
    let asked = matches!(facts.project.plan.zero_state, ZeroState::Zero | ZeroState::LiveZero);
    if !asked || facts.data.applications == 0 {
        return Vec::new();
    }
    let mut found = Vec::new();
    match health(&facts.zeros.means, SEED) {
        None => found.push(finding(
            "zeros-too-few",
            Severity::Note,
            Place::Zeros,
            format!("{} zero readings: no band and no detection limit", facts.zeros.means.len()),
            "take zero readings between the standards, ten if the smallest signal matters",
        )),
        Some(health) => found.extend(of_health(facts, &health)),
    }
    found.extend(misses(facts));
    found
}

fn of_health(facts: &Facts<'_>, health: &Health) -> Vec<Finding> {
    let mut found = Vec::new();
    let n = facts.zeros.means.len();
    let (low, high) = facts.zeros.band.as_ref().map_or((1.0, 1.0), |b| b.sd_factors);
    let severity = match health.count {
        Count::None | Count::Look => Some(Severity::Look),
        Count::Note => Some(Severity::Note),
        Count::Enough => None,
    };
    found.extend(severity.map(|severity| {
        let message = format!(
            "with {n} zeros the limit could be {} to {} times what is shown",
            significant(low, 2),
            significant(high, 2)
        );
        finding("zeros-few", severity, Place::Zeros, message, "ten zeros narrow this to 0.7 to 1.8")
    }));
    if health.identical {
        let message = "all zeros read the same: the display hides the scatter".to_owned();
        found.push(finding(
            "zeros-identical",
            Severity::Look,
            Place::Zeros,
            message,
            "read with more digits if there are any",
        ));
    } else if health.share_at_minimum >= 0.3 && n >= 7 {
        let share = significant(100.0 * health.share_at_minimum, 2);
        let message = format!("{share} % of the zeros read the same lowest value: the instrument may hide negatives");
        found.push(finding(
            "zeros-clipped",
            Severity::Look,
            Place::Zeros,
            message,
            "switch clipping off, or offset the zero",
        ));
    }
    found.extend(order(health));
    found
}

fn order(health: &Health) -> Option<Finding> {
    let drift = health.drift.filter(|d| d.p < 0.01 && !health.too_few_to_see_drift);
    if let Some(drift) = drift {
        let message = format!("the zero moved while you worked ({})", p_value(drift.p));
        return Some(finding(
            "zeros-drift",
            Severity::Look,
            Place::Zeros,
            message,
            "let it warm up; spread zeros over the run",
        ));
    }
    let lag = health.lag1.filter(|l| l.p < 0.01 && !health.too_few_to_see_drift)?;
    let message = format!("neighbouring zeros copy each other (r = {}, {})", significant(lag.r, 2), p_value(lag.p));
    Some(finding("zeros-dependent", Severity::Look, Place::Zeros, message, "apply and remove a standard between zeros"))
}

/// The curve of the speaking column does not pass through the measured zero.
fn misses(facts: &Facts<'_>) -> Option<Finding> {
    let column = facts.speaking?;
    let e = column.outcome.as_ref().ok()?;
    let off = zero_disagreement(facts.project, e, facts.zeros).filter(|d| d.p < 0.01)?;
    let size = near(facts.project, off.input?, 2);
    let message = format!("{} misses the measured zero by {size} ({})", column.head, p_value(off.p));
    let hint = "look at the residuals near zero: another shape, or a zero that moved";
    Some(finding("misses-zero", Severity::Look, Place::Zeros, message, hint))
}
