//! Findings on the data as a whole.

use super::{Facts, finding};
use crate::{
    fit::{Weights, fit},
    inference::saturation::{Saturation, saturation},
    model::Family,
    project::evaluate::{
        finding::{Finding, Place, Severity},
        observe::Observation,
        words::plain,
    },
    quantity::format::{significant, with_unit},
};

/// Nothing to fit, set aside, questioned, standards without papers, readings beyond the planned interval.
pub(super) fn findings(facts: &Facts<'_>) -> Vec<Finding> {
    let mut found = Vec::new();
    found.extend(nothing(facts));
    found.extend(set_aside(facts));
    found.extend(questioned(facts));
    found.extend(standards_without_papers(facts));
    found.extend(outside_interval(facts));
    found.extend(looks(facts));
    found.extend(saturated(facts));
    found
}

fn nothing(facts: &Facts<'_>) -> Option<Finding> {
    (facts.data.applications == 0).then(|| {
        finding(
            "no-readings",
            Severity::Note,
            Place::Data,
            "there are no readings of standards yet".to_owned(),
            "type or paste them at the Bench: standard and reading",
        )
    })
}

fn set_aside(facts: &Facts<'_>) -> Option<Finding> {
    let n = facts.data.set_aside;
    let all = facts.data.readings + facts.data.zero_readings + n;
    let many = n > 1 || n * 10 > all;
    (n > 0).then(|| {
        finding(
            "set-aside",
            if many { Severity::Look } else { Severity::Note },
            Place::Data,
            format!("{n} of {all} readings set aside: the result depends on what was left out"),
            "each one is printed with its reason",
        )
    })
}

fn questioned(facts: &Facts<'_>) -> Option<Finding> {
    let n = facts.project.readings.iter().filter(|r| r.questioned).count();
    (n > 0).then(|| {
        let (were, they) = if n == 1 { ("reading was", "it") } else { ("readings were", "they") };
        finding(
            "questioned",
            Severity::Note,
            Place::Data,
            format!("{n} {were} questioned when {they} came in, and stood"),
            "they are marked in the table",
        )
    })
}

fn standards_without_papers(facts: &Facts<'_>) -> Option<Finding> {
    let all = &facts.project.standards;
    let bare = all.iter().filter(|s| s.papers.uncertainty.is_none()).count();
    (bare > 0 && facts.data.applications > 0).then(|| {
        finding(
            "standards-bare",
            Severity::Note,
            Place::Data,
            format!("{bare} of {} standards carry no uncertainty; they are treated as exact", all.len()),
            "enter U with k, limits or u from the certificate at the Bench",
        )
    })
}

fn outside_interval(facts: &Facts<'_>) -> Option<Finding> {
    let (low, high) = facts.project.plan.interval?;
    let unit = facts.project.plan.input.unit.as_str();
    let measured = facts.observations.iter().filter(|o| !o.is_zero()).map(|o| o.x);
    let (lowest, highest) = measured.fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), x| (a.min(x), b.max(x)));
    if lowest > highest {
        return None;
    }
    let span = high - low;
    let gap_low = lowest - low > 0.02 * span && !(low == 0.0 && facts.data.zeros > 0);
    let gap_high = high - highest > 0.02 * span;
    (gap_low || gap_high).then(|| {
        finding(
            "interval-not-covered",
            Severity::Look,
            Place::Plan,
            format!(
                "the plan says {} … {}, standards reach from {} to {}",
                plain(low),
                with_unit(&plain(high), unit),
                plain(lowest),
                with_unit(&plain(highest), unit)
            ),
            "outside the standards nothing was measured: results there are marked as extrapolated",
        )
    })
}

fn looks(facts: &Facts<'_>) -> Option<Finding> {
    let several = facts.observations.iter().filter(|o| o.readings.len() > 1).count();
    (several > 0).then(|| {
        finding(
            "looks-averaged",
            Severity::Note,
            Place::Data,
            format!("{several} applications were looked at more than once; the mean of the looks counts as one"),
            "ten looks at one placement are one placement",
        )
    })
}

/// Above this share of the first step's slope the top step bends but still answers.
const STILL_ANSWERS: f64 = 0.15;

/// The instrument has stopped listening at the top: judged on the line, when no function describes the data.
fn saturated(facts: &Facts<'_>) -> Option<Finding> {
    if facts.advice.column.is_some() {
        return None;
    }
    let points: Vec<_> = facts.observations.iter().filter(|o| !o.is_zero()).map(Observation::point).collect();
    let line = fit(&Family::Polynomial(1), &points, Weights::Equal).ok()?;
    let unit = facts.project.plan.input.unit.as_str();
    let message = saturation(&line, None).into_iter().find_map(|s| match s {
        Saturation::Flattens { first_slope, top_slope, .. } if (top_slope / first_slope) < STILL_ANSWERS => {
            Some(format!(
                "the top step rises only {} of the first one: it has stopped listening",
                with_unit(&significant(100.0 * top_slope / first_slope, 2), "%")
            ))
        }
        Saturation::SameMaximum { reading, standards } => Some(format!(
            "the largest reading {} occurs at {} and at {}: it has stopped listening",
            plain(reading),
            plain(standards.0),
            with_unit(&plain(standards.1), unit)
        )),
        _ => None,
    })?;
    Some(finding("saturation", Severity::Look, Place::Data, message, "cut the interval to where it still answers"))
}
