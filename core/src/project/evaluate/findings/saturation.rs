//! The instrument has stopped listening at the top.

use super::{Facts, context::expanded_by, finding};
use crate::{
    fit::{Fit, Weights, fit},
    inference::{
        departure::matters,
        saturation::{Saturation, saturation},
    },
    model::Family,
    project::evaluate::{
        finding::{Finding, Place, Severity},
        observe::Observation,
        words::{plain, tolerance},
    },
    quantity::format::{significant, with_unit},
};

/// Above this share of the first step's slope the top step bends but still answers: a matter of shape.
const STILL_ANSWERS: f64 = 0.15;

/// Judged on the straight line. A top step that is only flatter is a matter of shape as long as some function
/// describes it; the same largest reading at two standards is no function's fault.
pub(super) fn findings(facts: &Facts<'_>) -> Option<Finding> {
    let points: Vec<_> = facts.observations.iter().filter(|o| !o.is_zero()).map(Observation::point).collect();
    let line = fit(&Family::Polynomial(1), &points, Weights::Equal).ok()?;
    let signs = saturation(&line, facts.project.plan.full_scale);
    let full = signs.iter().find_map(|s| at_full_scale(facts, s));
    let same = signs.iter().find_map(|s| same_maximum(facts, &line, s));
    let flat = || signs.iter().find_map(flat).filter(|_| facts.advice.column.is_none());
    let (severity, message) = full.or(same).or_else(flat)?;
    Some(finding("saturation", severity, Place::Data, message, "cut the interval to where it still answers"))
}

/// A reading at the end of what can be shown says only that the value is at least so large.
fn at_full_scale(facts: &Facts<'_>, sign: &Saturation) -> Option<(Severity, String)> {
    let Saturation::AtFullScale { reading, full_scale, .. } = sign else {
        return None;
    };
    let share = with_unit(&significant(100.0 * reading / full_scale, 3), "%");
    let full = with_unit(&plain(*full_scale), facts.project.plan.output.unit.as_str());
    Some((
        Severity::Stop,
        format!("the reading {} is {share} of the full scale {full}: it cannot show more", plain(*reading)),
    ))
}

fn same_maximum(facts: &Facts<'_>, line: &Fit, sign: &Saturation) -> Option<(Severity, String)> {
    let Saturation::SameMaximum { reading, standards: (low, high) } = sign else {
        return None;
    };
    let plan = &facts.project.plan;
    let message = format!(
        "the largest reading {} occurs at {} and at {}: it has stopped listening",
        plain(*reading),
        plain(*low),
        with_unit(&plain(*high), plan.input.unit.as_str())
    );
    // The step between the two standards is lost; on a straight line U of one reading says what a step is worth.
    let own = facts.speaking.and_then(|c| c.outcome.as_ref().ok()).map_or(line, |e| &e.fit);
    let u = expanded_by(own, plan.level, *low, plan.detection.k);
    let big = matters(high - low, tolerance(plan, *low), u);
    Some((if big { Severity::Look } else { Severity::Note }, message))
}

fn flat(sign: &Saturation) -> Option<(Severity, String)> {
    let Saturation::Flattens { first_slope, top_slope, .. } = sign else {
        return None;
    };
    let share = top_slope / first_slope;
    let percent = with_unit(&significant(100.0 * share, 2), "%");
    (share < STILL_ANSWERS).then(|| {
        (Severity::Look, format!("the top step rises only {percent} of the first one: it has stopped listening"))
    })
}
