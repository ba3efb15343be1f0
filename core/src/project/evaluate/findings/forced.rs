//! A zero that was forced on the data, and a factor from one standard.

use super::{
    context::{Context, expanded_by, weigh},
    family::{Judging, Tests},
    finding,
};
use crate::{
    fit::Fit,
    inference::{departure::matters, forced_zero::ForcedZero, levels::levels, shape::shape},
    model::Family,
    project::evaluate::{
        finding::{Finding, Severity},
        words::tolerance,
    },
    quantity::format::{p_value, significant},
};

pub(super) fn findings(c: &Context<'_>, tests: &Tests, judged: &Judging) -> Vec<Finding> {
    let mut found = Vec::new();
    if c.fit().family == Family::OnePoint {
        found.extend(one_point(c, tests));
    }
    found.extend(refused(c, tests, judged));
    if c.fit().family == Family::LineThroughZero && tests.zero.is_none() && c.fit().degrees_of_freedom > 0 {
        found.push(untold(c));
    }
    found
}

/// Whether a refused zero is all that is wrong: the free line has no fault of shape left.
pub(super) fn explains(c: &Context<'_>, tests: &Tests, judged: &Judging) -> bool {
    let refused = judged.zero.is_some_and(|j| j.rejected);
    c.fit().family == Family::LineThroughZero
        && refused
        && tests.zero.as_ref().is_some_and(|(free, _)| !shape(free).rejected())
}

/// The free line misses zero.
fn refused(c: &Context<'_>, tests: &Tests, judged: &Judging) -> Option<Finding> {
    let (free, zero) = tests.zero.as_ref()?;
    let lowest = lowest(c)?;
    let effect = (zero.constant / zero.slope).abs();
    let u = expanded_by(free, c.project.plan.level, lowest, c.project.plan.detection.k);
    let big = matters(effect, tolerance(&c.project.plan, lowest), u);
    let severity = match weigh(judged.zero?, big)? {
        Severity::Look if u.is_some_and(|u| effect > u) => Severity::Stop,
        other => other,
    };
    let message = format!(
        "{} is forced through zero; left free, a line misses it by {} ({}), {}",
        c.head(),
        c.size(effect),
        p_value(zero.p),
        share(c, lowest, zero)
    );
    let hint = "choose the line with its constant, and measure the zero itself";
    Some(finding("forced-zero", severity, c.place(), message, hint))
}

/// What the miss means at the lowest standard.
fn share(c: &Context<'_>, lowest: f64, zero: &ForcedZero) -> String {
    let percent = significant(100.0 * (zero.constant / (zero.slope * lowest)).abs(), 2);
    format!("{percent} % of the lowest standard, {}", c.at(lowest))
}

/// The lowest standard above or below zero that was applied, by its distance from zero.
fn lowest(c: &Context<'_>) -> Option<f64> {
    let standards = c.observations.iter().filter(|o| !o.is_zero() && o.x != 0.0).map(|o| o.x);
    standards.min_by(|a, b| a.abs().total_cmp(&b.abs()))
}

/// Nothing can refuse this zero.
fn untold(c: &Context<'_>) -> Finding {
    let n = c.fit().levels().len();
    let message = format!(
        "{}: too few points to tell whether zero belongs on the line ({n} different {})",
        c.head(),
        if n == 1 { "standard" } else { "standards" }
    );
    finding("forced-zero-untold", Severity::Note, c.place(), message, "apply a third standard, or measure the zero")
}

/// The whole range rests on one standard; what the others would have given.
fn one_point(c: &Context<'_>, tests: &Tests) -> Option<Finding> {
    let factor = *c.fit().coefficients.first()?;
    let top = c.fit().points.first()?.x;
    let others: Vec<(f64, f64)> = levels(&c.observations.iter().map(|o| o.point()).collect::<Vec<_>>())
        .into_iter()
        .filter(|l| l.x != 0.0 && l.x.total_cmp(&top).is_ne())
        .map(|l| (l.x, l.mean))
        .collect();
    let free: Option<&Fit> = tests.zero.as_ref().map(|(free, _)| free);
    let off = |(x, y): &(f64, f64)| {
        let u = free.and_then(|free| expanded_by(free, c.project.plan.level, *x, c.project.plan.detection.k));
        matters(y / factor - x, tolerance(&c.project.plan, *x), u)
    };
    let says = |x: f64, factor: f64| format!("{} at {}", significant(factor, 4), c.at(x));
    let mut message = format!("{}: the factor rests on one standard, {}", c.head(), says(top, factor));
    let severity = if others.is_empty() {
        message.push_str("; nothing else was applied that could contradict it");
        Severity::Look
    } else {
        let list: Vec<String> = others.iter().map(|(x, y)| says(*x, y / x)).collect();
        message.push_str(&format!("; the others give {}", list.join(", ")));
        if others.iter().any(off) { Severity::Look } else { Severity::Note }
    };
    Some(finding("one-point", severity, c.place(), message, "fit all standards together, or add some"))
}
