//! The sign pattern of the residuals along x: drawn and described, not counted as a warning.

use super::levels::levels;
use crate::fit::Fit;

/// The method's name for results.
pub const METHOD: &str = "sign runs in order of x (level means), exact, one-sided for few runs";

/// Signs of the residuals along x.
#[derive(Debug, Clone, PartialEq)]
pub struct Runs {
    /// Sign at each level, ascending in x: 1 above the curve, −1 below, 0 on it.
    pub signs: Vec<i8>,
    /// Levels above the curve.
    pub above: usize,
    /// Levels below the curve.
    pub below: usize,
    /// Stretches of equal sign, zeros left out.
    pub runs: usize,
    /// P(as few runs or fewer), given how many are above and below.
    pub p: f64,
}

/// Counts the sign runs of a fit.
///
/// # Formula
/// Signs of the mean residual of each level in order of x (the residual itself without repeats), zeros
/// dropped; P(R ≤ r) with each arrangement of the signs equally likely:
/// P(R = 2k) = 2·C(a−1, k−1)·C(b−1, k−1)/C(a+b, a) and
/// P(R = 2k+1) = [C(a−1, k)·C(b−1, k−1) + C(a−1, k−1)·C(b−1, k)]/C(a+b, a).
/// Residuals are not quite exchangeable: the test is conservative (line through 7 points: never below 5 %).
///
/// # Shapes and units
/// Dimensionless. `None` when every level lies on the curve.
///
/// # Source
/// A. Wald & J. Wolfowitz (1940), Ann. Math. Statist. 11, 147–162; from memory.
#[must_use]
pub fn runs(fit: &Fit) -> Option<Runs> {
    let signs: Vec<i8> = levels(&fit.points)
        .iter()
        .map(|level| {
            let value = fit.curve.value(level.x);
            let rounding = 4.0 * f64::EPSILON * level.mean.abs().max(value.abs());
            sign(level.mean - value, rounding)
        })
        .collect();
    let told: Vec<i8> = signs.iter().copied().filter(|s| *s != 0).collect();
    if told.is_empty() {
        return None;
    }
    let above = told.iter().filter(|s| **s > 0).count();
    let below = told.len() - above;
    let runs = 1 + told.windows(2).filter(|w| w[0] != w[1]).count();
    Some(Runs { above, below, runs, p: few_runs(above, below, runs), signs })
}

fn sign(residual: f64, rounding: f64) -> i8 {
    if residual > rounding {
        1
    } else if residual < -rounding {
        -1
    } else {
        0
    }
}

/// P(R ≤ r) for `a` signs of one kind and `b` of the other in random order.
fn few_runs(a: usize, b: usize, runs: usize) -> f64 {
    if a == 0 || b == 0 {
        return 1.0;
    }
    let factorials = log_factorials(a + b);
    // Half of ln C(a+b, a) is taken off each factor, so that no binomial overflows.
    let share = 0.5 * (factorials[a + b] - factorials[a] - factorials[b]);
    let scaled = |n: usize, k: usize| {
        if k > n { 0.0 } else { libm::exp(factorials[n] - factorials[k] - factorials[n - k] - share) }
    };
    let exactly = |r: usize| {
        let k = r / 2;
        if r.is_multiple_of(2) {
            2.0 * scaled(a - 1, k - 1) * scaled(b - 1, k - 1)
        } else {
            scaled(a - 1, k) * scaled(b - 1, k - 1) + scaled(a - 1, k - 1) * scaled(b - 1, k)
        }
    };
    (2..=runs).map(exactly).sum::<f64>().min(1.0)
}

/// ln 0! … ln n!.
fn log_factorials(n: usize) -> Vec<f64> {
    let mut sum = 0.0;
    let mut out = vec![0.0];
    for k in 1..=n {
        sum += libm::log(k as f64);
        out.push(sum);
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, simulated};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    /// Every arrangement counted one by one.
    #[test]
    fn probabilities_are_those_of_counting() {
        for (a, b) in [(1, 1), (1, 4), (3, 3), (5, 2), (6, 5)] {
            let n: usize = a + b;
            let mut counts = vec![0_u32; n + 2];
            for bits in (0_u32..1 << n).filter(|bits| bits.count_ones() as usize == a) {
                let changes = (1..n).filter(|i| (bits >> i) & 1 != (bits >> (i - 1)) & 1).count();
                counts[changes + 1] += 1;
            }
            let total: u32 = counts.iter().sum();
            for r in 2..=n {
                let expected = f64::from(counts[..=r].iter().sum::<u32>()) / f64::from(total);
                assert!((few_runs(a, b, r) - expected).abs() < 1e-13, "{a} {b} {r}");
            }
        }
        assert_eq!((few_runs(0, 5, 1), few_runs(5, 0, 1)), (1.0, 1.0));
    }

    #[test]
    fn hundreds_of_signs_do_not_overflow() {
        let p = few_runs(2000, 2000, 2001);
        assert!((p - 0.5).abs() < 0.02, "{p}");
        assert!(few_runs(2000, 2000, 1800) < 1e-9);
    }

    #[test]
    fn an_arch_has_three_runs_whatever_the_sorting() {
        let mut points: Vec<Point> =
            (0..12).map(|i| Point { x: f64::from(i % 6), y: f64::from(i % 6).powi(2) }).collect();
        points.swap(2, 9);
        points.reverse();
        let found = runs(&fitted(Family::Polynomial(1), &points)).unwrap();
        assert_eq!(found.signs, [1, -1, -1, -1, -1, 1]);
        assert_eq!((found.above, found.below, found.runs), (2, 4, 3));
        // C(1,1)·C(3,0) + C(1,0)·C(3,1) = 4 arrangements with three runs, 2 with two, of 15.
        assert!((found.p - 6.0 / 15.0).abs() < 1e-14);
    }

    #[test]
    fn a_point_on_the_curve_has_no_sign() {
        let on = [(1.0, 1.0), (2.0, 2.0), (3.0, 3.0)].map(|(x, y)| Point { x, y });
        assert_eq!(runs(&fitted(Family::Polynomial(1), &on)), None);
        let symmetric = [(1.0, 0.0), (2.0, 1.0), (3.0, 0.0), (4.0, -1.0), (5.0, 0.0)].map(|(x, y)| Point { x, y });
        let found = runs(&fitted(Family::Polynomial(2), &symmetric)).unwrap();
        assert_eq!(found.signs.len(), 5);
        assert_eq!(found.above + found.below, found.signs.iter().filter(|s| **s != 0).count());
    }

    /// Own simulation with another program at 5 in 100: n = 6, 7 0.000, 11 0.015, 33 single 0.027 to 0.037.
    #[test]
    fn the_test_is_conservative() {
        const RUNS: usize = 4000;
        for (number, (n, low, high)) in
            (0..).zip([(6, 0.0, 0.0), (7, 0.0, 0.001), (11, 0.009, 0.021), (33, 0.02, 0.044)])
        {
            let mut stream = Stream::new(73, number);
            let mut clean = || fitted(Family::Polynomial(1), &simulated(&mut stream, (n, 1), |x| x, |_| 1.0));
            let hits = (0..RUNS).filter(|_| runs(&clean()).unwrap().p <= 0.05).count();
            let size = hits as f64 / RUNS as f64;
            println!("{n}: {size}");
            assert!((low..=high).contains(&size), "{n}: {size}");
        }
    }
}
