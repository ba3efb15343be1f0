//! More terms than the data carry, and powers that are nearly the same.

use super::{
    context::{Context, expanded_by},
    finding,
};
use crate::{
    fit::Fit,
    inference::{
        departure::matters,
        shape::shape,
        top_term::{Excess, excess},
    },
    model::{Curve, Family},
    project::evaluate::{
        finding::{Finding, Severity},
        words::tolerance,
    },
    quantity::format::{p_value, significant},
};

/// Condition of the powers of x from which it is worth a word.
const ALIKE: f64 = 1e10;

/// Span over mean of x below which powers are nearly the same.
const NARROW: f64 = 0.2;

pub(super) fn findings(c: &Context<'_>) -> Vec<Finding> {
    too_many(c).into_iter().chain(powers(c)).collect()
}

/// Whether the terms of a bent polynomial leave no standard over to test it.
pub(super) fn too_many_for_levels(c: &Context<'_>) -> bool {
    matches!(excess(c.fit(), None), Some(Excess::Levels { .. }))
}

fn too_many(c: &Context<'_>) -> Option<Finding> {
    let Family::Polynomial(degree @ 2..) = c.fit().family else {
        return None;
    };
    // A polynomial of the wrong shape needs another function, which the shape says.
    if c.e.shape.rejected() {
        return None;
    }
    let lower = c.refit(&Family::Polynomial(degree - 1), c.fit().weights).ok();
    let why = excess(c.fit(), lower.as_ref())?;
    let simpler = simplest(c, degree)?;
    let (at, bend) = c.furthest(&simpler)?;
    let head = c.head();
    let moves =
        format!("against the {} it moves values by up to {} at {}", lowered(&simpler.family), c.size(bend), c.at(at));
    let plan = &c.project.plan;
    let u = expanded_by(&simpler, plan.level, at, plan.detection.k);
    let severity = if matters(bend, tolerance(plan, at), u) { Severity::Look } else { Severity::Note };
    let (severity, message) = match why {
        Excess::Levels { levels, coefficients } => {
            let none =
                format!("{head} has {coefficients} terms for {levels} standards, so none is left over to test it");
            (Severity::Look, format!("{none}; {moves}"))
        }
        Excess::TopTerm { p } => {
            (severity, format!("{head}: its last term follows the noise ({}); {moves}", p_value(p)))
        }
        Excess::LeftOut { with, without } => {
            let times = significant(with / without, 2);
            let worse = format!("a standard left out is met {times} times worse with it");
            (severity, format!("{head}: its last term follows the noise: {worse}; {moves}"))
        }
    };
    Some(finding("too-many-terms", severity, c.place(), message, "one term less does as well, or add standards"))
}

/// The polynomial of the lowest degree, below `degree`, whose shape the data do not refuse; else of one less.
fn simplest(c: &Context<'_>, degree: u8) -> Option<Fit> {
    let lower = |d: u8| c.refit(&Family::Polynomial(d), c.fit().weights).ok();
    (1..degree).filter_map(lower).find(|fit| !shape(fit).rejected()).or_else(|| lower(degree - 1))
}

fn lowered(family: &Family) -> String {
    family.plain_name().to_lowercase()
}

fn powers(c: &Context<'_>) -> Option<Finding> {
    let Family::Polynomial(degree) = c.fit().family else {
        return None;
    };
    let (low, high) = c.ends()?;
    let n = c.fit().points.len() as f64;
    let mean = c.fit().points.iter().map(|p| p.x).sum::<f64>() / n;
    let narrow = degree >= 3 && high - low < NARROW * mean.abs();
    let shifted = matches!(c.fit().curve, Curve::Centred(_));
    (shifted && (narrow || c.fit().condition() > ALIKE)).then(|| {
        let message = format!(
            "powers of {} to {} are nearly the same (condition {}): a shifted scale is used",
            super::super::words::plain(low),
            c.at(high),
            significant(c.fit().condition(), 2)
        );
        let hint = "hand the coefficients on with all digits shown, never fewer";
        finding("powers-alike", Severity::Note, c.place(), message, hint)
    })
}
