//! Is one value of a sample unlike the others? For zeros and for repeats of one level.

use super::levels::{levels, mean_of};
use crate::distributions::{t_quantile, t_upper};
use crate::fit::Point;

/// The method's name for results.
pub const METHOD: &str = "Grubbs, two-sided, p by Student's t with Bonferroni over the values";

/// Repeats of a level needed before one of them is judged.
pub const FEWEST_REPEATS: usize = 4;

/// The value furthest from the mean of its sample.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Grubbs {
    /// Its position in the sample.
    pub index: usize,
    /// G = |value − mean|/s, dimensionless.
    pub g: f64,
    /// The G that 5 in 100 clean samples of this size exceed.
    pub limit: f64,
    /// Two-sided p, at most 1: never too small.
    pub p: f64,
    /// Whether p is exact; otherwise an upper bound (two values could be that far off at once, G² ≤ (n−1)/2).
    pub exact: bool,
}

/// Tests the most extreme value of a normal sample, on either side.
///
/// # Formula
/// G = max|x − x̄|/s; t² = n(n−2)G²/((n−1)² − nG²); p = 2n·P(t_{n−2} ≥ t).
///
/// # Shapes and units
/// At least 3 values of one unit. `None` with fewer, with values that are not finite, or all equal.
///
/// # Source
/// F. E. Grubbs (1950), Ann. Math. Statist. 21, 27–58; Grubbs & Beck (1972), Technometrics 14, 847–854; from
/// memory.
#[must_use]
pub fn grubbs(values: &[f64]) -> Option<Grubbs> {
    let n = values.len();
    if n < 3 || values.iter().any(|v| !v.is_finite()) {
        return None;
    }
    let mean = mean_of(values.iter().copied());
    let largest = values.iter().fold(0.0, |top: f64, v| top.max((v - mean).abs()));
    // Equal values differ from their mean by rounding only.
    let rounding = values.iter().fold(0.0, |top: f64, v| top.max(v.abs())) * 4.0 * f64::EPSILON;
    if largest.is_nan() || largest <= rounding {
        return None;
    }
    let sum: f64 = values.iter().map(|v| ((v - mean) / largest).powi(2)).sum();
    let g = libm::sqrt((n as f64 - 1.0) / sum);
    let (index, _) = values.iter().enumerate().max_by(|a, b| (a.1 - mean).abs().total_cmp(&(b.1 - mean).abs()))?;
    let exact = g * g > 0.5 * (n as f64 - 1.0);
    Some(Grubbs { index, g, limit: grubbs_limit(n, 0.05), p: grubbs_p(g, n), exact })
}

/// Repeats of one level with their most extreme application.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LevelGrubbs {
    /// The standard, input unit.
    pub x: f64,
    /// The test; its index is a position in the fit's points.
    pub grubbs: Grubbs,
}

/// Grubbs' test within every level of at least four applications.
///
/// # Shapes and units
/// Ascending in x. Each p stands for its own level: with several levels judge them together.
#[must_use]
pub fn grubbs_within_levels(points: &[Point]) -> Vec<LevelGrubbs> {
    let judged = levels(points).into_iter().filter(|level| level.count() >= FEWEST_REPEATS);
    judged
        .filter_map(|level| {
            let values: Vec<f64> = level.members.iter().map(|&i| points[i].y).collect();
            let found = grubbs(&values)?;
            Some(LevelGrubbs { x: level.x, grubbs: Grubbs { index: level.members[found.index], ..found } })
        })
        .collect()
}

/// Two-sided p of G in a sample of n ≥ 3, by Bonferroni; not a number below.
#[must_use]
pub fn grubbs_p(g: f64, n: usize) -> f64 {
    if n < 3 || g.is_nan() {
        return f64::NAN;
    }
    let n = n as f64;
    // At the largest possible G the difference is rounding; no sample is impossible.
    let rest = ((n - 1.0) * (n - 1.0) - n * g * g).max(n * n * f64::EPSILON);
    let t = g * libm::sqrt(n * (n - 2.0) / rest);
    (2.0 * n * t_upper(t, n - 2.0)).min(1.0)
}

/// The G that is exceeded with probability `alpha` at most, on either side.
///
/// # Formula
/// G = (n−1)/√n·√(t²/(n − 2 + t²)), t = t_{1−α/(2n); n−2}. A test of one side takes 2α.
///
/// # Shapes and units
/// n ≥ 3, 0 < `alpha` < 1; not a number otherwise.
#[must_use]
pub fn grubbs_limit(n: usize, alpha: f64) -> f64 {
    if n < 3 {
        return f64::NAN;
    }
    let count = n as f64;
    let t = t_quantile(1.0 - alpha / (2.0 * count), count - 2.0);
    (count - 1.0) / libm::sqrt(count) * libm::sqrt(t * t / (count - 2.0 + t * t))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::assert_rate;
    use crate::numerics::streams::Stream;
    use serde_json::Value;

    /// Two-sided 5 % and 1 % points, tests/published/grubbs/SOURCE.md.
    #[test]
    fn published_critical_values() {
        let table: Value =
            serde_json::from_str(include_str!("../../../tests/published/grubbs/critical-values.json")).unwrap();
        for row in table["rows"].as_array().unwrap() {
            let n = row[0].as_u64().unwrap() as usize;
            for (place, alpha) in [(1, 0.05), (2, 0.01)] {
                let printed: f64 = row[place].as_str().unwrap().parse().unwrap();
                let found = grubbs_limit(n, alpha);
                assert!((found - printed).abs() <= 0.0011, "{row}: {found}");
                assert!((grubbs_p(found, n) / alpha - 1.0).abs() < 1e-9, "{row}: {}", grubbs_p(found, n));
            }
        }
    }

    /// Eight isotope readings with one far off, tests/published/grubbs/SOURCE.md.
    #[test]
    fn published_example() {
        let table: Value = serde_json::from_str(include_str!("../../../tests/published/grubbs/example.json")).unwrap();
        let values: Vec<f64> = table["values"].as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect();
        let found = grubbs(&values).unwrap();
        assert_eq!(found.index, 7);
        assert!((found.g - 2.4688).abs() < 5e-5 && found.g > found.limit && found.exact);
        assert!((grubbs_limit(8, 0.10) - 2.032).abs() < 5e-4);
    }

    /// The bound is exact at the limits for few values and never lets more than α through.
    #[test]
    fn clean_samples_are_suspected_five_times_in_a_hundred() {
        const RUNS: usize = 10_000;
        for n in [3, 4, 7, 20] {
            let mut stream = Stream::new(78, n);
            let mut hits = [0, 0];
            for _ in 0..RUNS {
                let sample: Vec<f64> = (0..n).map(|_| 1e6 + stream.normal()).collect();
                let p = grubbs(&sample).unwrap().p;
                hits[0] += usize::from(p <= 0.05);
                hits[1] += usize::from(p <= 0.01);
            }
            println!("n = {n}: {:?}", hits.map(|h| h as f64 / RUNS as f64));
            assert_rate(hits[0], RUNS, 0.05);
            assert_rate(hits[1], RUNS, 0.01);
        }
    }

    #[test]
    fn only_levels_with_four_repeats_are_judged() {
        let ys = [(2.0, 1.0), (1.0, 1.0), (1.0, 1.1), (1.0, 9.0), (1.0, 0.9), (2.0, 5.0), (1.0, 1.05)];
        let points = ys.map(|(x, y)| Point { x, y });
        let found = grubbs_within_levels(&points);
        assert_eq!(found.len(), 1);
        assert_eq!((found[0].x, found[0].grubbs.index), (1.0, 3));
        assert!(found[0].grubbs.p < 0.01);
    }

    #[test]
    fn edges() {
        assert_eq!(grubbs(&[1.0, 2.0]), None);
        assert_eq!(grubbs(&[0.1; 9]), None);
        assert_eq!(grubbs(&[1.0, f64::NAN, 2.0]), None);
        // As far off as three values can be.
        let found = grubbs(&[1.0, 1.0, 2.0]).unwrap();
        assert!(found.p < 1e-6 && found.exact && (found.g - 2.0 / 3.0_f64.sqrt()).abs() < 1e-12);
        let even = grubbs(&[1.0, 2.0, 1.0, 2.0, 1.0, 2.0]).unwrap();
        assert!(even.p == 1.0 && !even.exact);
        assert!(grubbs(&[1e308, -1e308, 1e308]).is_none_or(|g| g.g.is_finite()));
        assert!(grubbs_p(1.0, 2).is_nan() && grubbs_limit(2, 0.05).is_nan());
    }
}
