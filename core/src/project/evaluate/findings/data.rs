//! Findings on the data as a whole.

use super::{
    Facts,
    context::{expanded_by, furthest},
    finding, run, saturation,
};
use crate::{
    inference::departure::matters,
    project::evaluate::{
        column::evaluate as evaluate_column,
        finding::{Finding, Place, Severity},
        observe::observations,
        words::{plain, tolerance},
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
    found.extend(run::findings(facts));
    found.extend(saturation::findings(facts));
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

/// What left readings out, and how much depends on it.
fn set_aside(facts: &Facts<'_>) -> Option<Finding> {
    let n = facts.data.set_aside;
    let all = facts.data.readings + facts.data.zero_readings + n;
    if n == 0 {
        return None;
    }
    let many = n > 1 || n * 10 > all;
    let moved = moved_by_setting_aside(facts);
    let unit = facts.project.plan.input.unit.as_str();
    let message = match moved {
        Some((at, size, _)) => format!(
            "{n} of {all} readings set aside: with them values move by {} at {}",
            with_unit(&significant(size.abs(), 2), unit),
            with_unit(&plain(at), unit)
        ),
        None => format!("{n} of {all} readings set aside: the result depends on what was left out"),
    };
    let severity = if many && moved.is_none_or(|m| m.2) { Severity::Look } else { Severity::Note };
    Some(finding("set-aside", severity, Place::Data, message, "each one is printed with its reason"))
}

/// Where and how much the speaking column's values move when everything set aside counts again, and whether
/// that matters: (x, shift in the input unit, matters).
fn moved_by_setting_aside(facts: &Facts<'_>) -> Option<(f64, f64, bool)> {
    let column = facts.speaking?;
    let fit = &column.outcome.as_ref().ok()?.fit;
    let mut whole = facts.project.clone();
    for i in 0..whole.readings.len() {
        if whole.readings[i].set_aside.is_some() {
            whole.readings.get_mut(i)?.set_aside = None;
        }
    }
    let observations = observations(&whole, facts.data.stage);
    let with = evaluate_column(&whole, &observations, &column.spec, facts.zeros).outcome.ok()?.fit;
    let (at, moved) = furthest(fit, &with)?;
    let plan = &facts.project.plan;
    let u = expanded_by(fit, plan.level, at, plan.detection.k);
    Some((at, moved, matters(moved, tolerance(plan, at), u)))
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
