//! How much the scatter differs from level to level, and whether the weights follow from it.

use super::{
    context::{Context, expanded_by, weigh},
    family::{Judging, Tests, funnel},
    finding,
};
use crate::{
    distributions::chi2_quantile,
    fit::{FEW_REPEATS, Weights},
    inference::{departure::matters, spread::Spread},
    project::evaluate::{
        finding::{Finding, Severity},
        words::tolerance,
    },
    quantity::format::{p_value, significant},
};

pub(super) fn findings(c: &Context<'_>, tests: &Tests, judged: &Judging) -> Vec<Finding> {
    let mut found = Vec::new();
    found.extend(tests.spread.as_ref().and_then(|s| spread(c, s, judged)));
    found.extend(unproven(c));
    found.extend(raw(c));
    found.extend(at_zero(c));
    found.extend(unequal_means(c, tests));
    found
}

/// Fitted SDs at the two ends differ by at least this factor before the scatter is worth a look.
const RATIO: f64 = 2.0;

fn spread(c: &Context<'_>, s: &Spread, judged: &Judging) -> Option<Finding> {
    let (word, ratio) = if s.end_ratio >= 1.0 { ("grows", s.end_ratio) } else { ("shrinks", 1.0 / s.end_ratio) };
    let severity = weigh(judged.spread?, ratio >= RATIO)?;
    let times = significant(ratio, 2);
    let message = format!("scatter {word} with the signal, about {times} times over the range ({})", p_value(s.p));
    let hint = "weights such as 1/x or 1/x² give each level its due say";
    Some(finding("spread", severity, c.place(), message, hint))
}

/// A growing scatter with p up to this is a sign, if no proof.
const SIGN: f64 = 0.2;

/// Weights by a power of the level, chosen although nothing shows that the scatter grows.
fn unproven(c: &Context<'_>) -> Option<Finding> {
    let weights = c.fit().weights;
    let by_power = matches!(weights, Weights::InverseX | Weights::InverseX2 | Weights::InverseY | Weights::InverseY2);
    let repeated = c.fit().levels().len() < c.fit().points.len();
    if !by_power || repeated || !c.is_chosen() {
        return None;
    }
    let even = c.refit(&c.fit().family, Weights::Equal).ok()?;
    let shown = funnel(&even);
    if shown.is_some_and(|s| s.p <= SIGN && s.end_ratio > 1.0) {
        return None;
    }
    let plan = &c.project.plan;
    let (low, high) = c.ends()?;
    let claims = |x: f64| Some((x, c.expanded(x, 1)?, expanded_by(&even, plan.level, x, 1)?));
    let all = [low, high].into_iter().filter_map(claims);
    let (at, own, fair) = all.max_by(|a, b| (a.1 - a.2).abs().total_cmp(&(b.1 - b.2).abs()))?;
    let severity = if matters(own - fair, tolerance(plan, at), Some(fair)) { Severity::Look } else { Severity::Note };
    let sign = match shown {
        Some(s) => format!("the readings show no growing scatter ({})", p_value(s.p)),
        None => "so few readings show nothing of the scatter".to_owned(),
    };
    let message = format!(
        "{} was chosen, but {sign}; per-cent errors nearly always favour it. It claims ±{} at {}, even scatter ±{}",
        weights.plain_name(),
        c.size(own),
        c.at(at),
        c.size(fair)
    );
    let hint = "apply each standard several times and let the repeats give the weights";
    Some(finding("weights-unproven", severity, c.place(), message, hint))
}

/// 1/s² of each level from few repeats.
fn raw(c: &Context<'_>) -> Option<Finding> {
    if c.fit().weights != Weights::Raw {
        return None;
    }
    let fewest = c.fit().levels().iter().map(|l| l.members.len()).min()?;
    if !(2..FEW_REPEATS).contains(&fewest) {
        return None;
    }
    let nu = (fewest - 1) as f64;
    let factor = libm::sqrt(nu / chi2_quantile(0.025, nu));
    let message = format!(
        "with {fewest} repeats the scatter of a level can be off by a factor of {}, and its weight by {}",
        significant(factor, 2),
        significant(factor * factor, 2)
    );
    let hint = "choose weights from all repeats together: they share one scatter";
    Some(finding("weights-raw", Severity::Look, c.place(), message, hint))
}

/// 1/x where x is 0: the weight is held at that of the smallest standard above.
fn at_zero(c: &Context<'_>) -> Option<Finding> {
    let fit = c.fit();
    if !matches!(fit.weights, Weights::InverseX | Weights::InverseX2) {
        return None;
    }
    let zeros = fit.points.iter().filter(|p| p.x == 0.0).count();
    let above = fit.points.iter().map(|p| p.x).filter(|x| *x > 0.0).fold(f64::INFINITY, f64::min);
    if zeros == 0 || above.is_infinite() {
        return None;
    }
    let rest: Vec<_> = fit.points.iter().filter(|p| p.x != 0.0).copied().collect();
    let moved = c.fitted_as(&fit.family, &rest, fit.weights, &[]).ok().and_then(|without| c.furthest(&without));
    let (word, severity) = match moved {
        Some((at, moved)) => {
            (format!("; without them values move by {} at {}", c.size(moved), c.at(at)), c.look_or_note(moved, at))
        }
        None => (String::new(), Severity::Look),
    };
    let name = fit.weights.plain_name();
    let (are, they) =
        if zeros == 1 { ("reading there weighs", "it was") } else { ("readings there weigh", "they were") };
    let message = format!("{name} has no value at 0: the {zeros} {are} as if {they} taken at {}{word}", c.at(above));
    let hint = "weights from repeats have a value at 0; or let the zeros only check the curve";
    Some(finding("weight-at-zero", severity, c.place(), message, hint))
}

/// Means of few and of many looks, fitted as if they were equally good.
fn unequal_means(c: &Context<'_>, tests: &Tests) -> Option<Finding> {
    let fit = c.fit();
    // Where applications differ by more than their looks, the number of looks hardly matters.
    if fit.weights != Weights::Equal || tests.applications?.test.p <= 0.05 {
        return None;
    }
    let looks: Vec<usize> = c.seen.iter().map(|o| o.readings.len()).collect();
    let (few, many) = (*looks.iter().min()?, *looks.iter().max()?);
    if few == 0 || many <= 2 * few {
        return None;
    }
    let u: Vec<f64> = looks.iter().map(|n| 1.0 / libm::sqrt(*n as f64)).collect();
    let due = c.fitted_as(&fit.family, &fit.points, Weights::Typed, &u).ok()?;
    let (at, moved) = c.furthest(&due)?;
    let message = format!(
        "means of {few} and of {many} looks were given the same say; counted by their looks, values move by {} at {}",
        c.size(moved),
        c.at(at)
    );
    let hint = "look equally often each time, or give each mean its uncertainty and weigh by 1/u²";
    Some(finding("unequal-means", c.look_or_note(moved, at), c.place(), message, hint))
}
