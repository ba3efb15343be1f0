//! How often a true value would be missed when the cursor decides. Knows no window.

use super::{near_facts::NearFacts, ticks::Range};
use assize_core::{
    project::{
        Project,
        evaluate::{Evaluation, FitEvaluation, NearZeroOutcome, near_zero::near},
    },
    quantity::format::significant,
    zero::{asked::Side, detection::Detection},
};

/// The probability of missing a true value (or change) x in one column when the cursor decides.
pub(super) fn miss(evaluation: &Evaluation, e: &FitEvaluation, x: f64, threshold: f64) -> Option<f64> {
    match &e.near_zero {
        NearZeroOutcome::Absent(_) => None,
        NearZeroOutcome::Change(change) => Some(change.miss_probability(x, threshold)),
        NearZeroOutcome::Limits(_) => {
            let all = evaluation.zeros.detections(&e.fit).ok()?;
            Some(side_of(&all, x)?.miss_probability(x, threshold))
        }
    }
}

fn side_of<'a, 'f>(all: &'a [Detection<'f>], x: f64) -> Option<&'a Detection<'f>> {
    let side = if x < 0.0 { Side::Below } else { Side::Above };
    all.iter().find(|d| d.side == side).or(all.first())
}

/// How a true value x spreads along the signal: heights at equal steps over `window`, largest 1, with
/// the share of each step that the threshold misses. Its area below the threshold is P_miss.
pub(super) fn spread(
    evaluation: &Evaluation,
    e: &FitEvaluation,
    x: f64,
    (window, steps): (Range, usize),
) -> Vec<(f64, f64)> {
    let at = |i: usize| window.0 + (window.1 - window.0) * i as f64 / steps.max(1) as f64;
    let all = evaluation.zeros.detections(&e.fit).ok();
    let below = |y: f64| match (&e.near_zero, &all) {
        (NearZeroOutcome::Change(change), _) => change.miss_probability(x, y),
        (_, Some(all)) => side_of(all, x).map_or(0.0, |d| d.miss_probability(x, y)),
        _ => 0.0,
    };
    let heights: Vec<f64> = (0..=steps).map(|i| below(at(i))).collect();
    let density: Vec<(f64, f64)> =
        heights.windows(2).enumerate().map(|(i, w)| (0.5 * (at(i) + at(i + 1)), (w[1] - w[0]).abs())).collect();
    let most = density.iter().map(|d| d.1).fold(0.0, f64::max);
    if most > 0.0 { density.into_iter().map(|(y, d)| (y, d / most)).collect() } else { Vec::new() }
}

/// `a true value of 8.0 N would be missed 1 time in 4`.
pub(super) fn miss_words(project: &Project, facts: &NearFacts, x: f64, probability: f64) -> String {
    let what = if facts.around.is_some() { "change" } else { "true value" };
    format!("a {what} of {} would be missed {}", near(project, x, 2), times(probability))
}

/// `1 time in 4`, `9 times in 10`, `never`.
pub(super) fn times(p: f64) -> String {
    match p {
        p if !p.is_finite() => "an unknown number of times".to_owned(),
        p if p < 1e-6 => "practically never".to_owned(),
        p if p > 1.0 - 1e-6 => "practically always".to_owned(),
        p if p <= 0.4 => {
            format!("1 time in {}", significant(1.0 / p, if p > 0.1 { 2 } else { 1 }).trim_end_matches(".0"))
        }
        p if p < 0.6 => format!("{} times in 10", significant(10.0 * p, 1)),
        p => format!(
            "all but 1 time in {}",
            significant(1.0 / (1.0 - p), if p < 0.9 { 2 } else { 1 }).trim_end_matches(".0")
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn misses_are_said_in_times() {
        assert_eq!(times(0.05), "1 time in 20");
        assert_eq!(times(0.25), "1 time in 4");
        assert_eq!(times(0.5), "5 times in 10");
        assert_eq!(times(0.9), "all but 1 time in 10");
        assert_eq!(times(0.0), "practically never");
        assert_eq!(times(f64::NAN), "an unknown number of times");
    }
}
