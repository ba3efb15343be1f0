//! Shapiro and Wilk's W with Royston's approximations.

use super::quantiles::{normal_lower, normal_quantile};
use crate::numerics::scale::as_f64;

/// The fewest values W is defined for.
pub const FEWEST: usize = 3;
/// The most values the approximation of its distribution was made for.
pub const MOST: usize = 5000;

/// W and its probability.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ShapiroWilk {
    /// The statistic, 0 < W ≤ 1; small speaks against a normal distribution.
    pub w: f64,
    /// P(W ≤ w) for a normal sample.
    pub p: f64,
}

/// Tests whether a sample can be normal.
///
/// # Formula
///
/// W = (Σaᵢy₍ᵢ₎)²/Σ(y − ȳ)², a by Royston's polynomials in n^−½ from the medians Φ⁻¹((i − ⅜)/(n + ¼));
/// p exact for n = 3, from normal approximations to −ln(γ − ln(1 − W)) up to n = 11 and to ln(1 − W) above.
///
/// # Shapes and units
///
/// 3 to 5000 values of one unit, in any order.
///
/// # Errors
///
/// `None` with fewer or more values, values that are not finite, or all values equal.
///
/// # Source
///
/// P. Royston, Appl. Statist. 44 (1995) 547, algorithm AS R94; S. S. Shapiro and M. B. Wilk, Biometrika 52
/// (1965) 591. From memory; checked against another implementation.
#[must_use]
pub fn shapiro_wilk(values: &[f64]) -> Option<ShapiroWilk> {
    let n = values.len();
    if !(FEWEST..=MOST).contains(&n) || values.iter().any(|v| !v.is_finite()) {
        return None;
    }
    let mut sorted = values.to_vec();
    sorted.sort_by(f64::total_cmp);
    // Halved before it is subtracted, so that the range of no two finite numbers overflows.
    let range = 0.5 * sorted[n - 1] - 0.5 * sorted[0];
    if range <= 0.0 {
        return None;
    }
    // About the middle value and in units of the range: neither an offset nor the unit costs digits.
    let middle = sorted[n / 2];
    let scaled: Vec<f64> = sorted.iter().map(|v| 0.5 * (0.5 * v - 0.5 * middle) / range).collect();
    let missing = one_minus_w(&scaled, &half_weights(n));
    Some(ShapiroWilk { w: 1.0 - missing, p: lower_tail(missing, n) })
}

/// The weights of the upper half, largest first.
fn half_weights(n: usize) -> Vec<f64> {
    const FIRST: [f64; 6] = [0.0, 0.221_157, -0.147_981, -2.071_19, 4.434_685, -2.706_056];
    const SECOND: [f64; 6] = [0.0, 0.042_981, -0.293_762, -1.752_461, 5.682_633, -3.582_633];
    if n == 3 {
        return vec![std::f64::consts::FRAC_1_SQRT_2];
    }
    let count = as_f64(n);
    let median = |i: usize| -normal_quantile((as_f64(i + 1) - 0.375) / (count + 0.25));
    let medians: Vec<f64> = (0..n / 2).map(median).collect();
    let square: f64 = 2.0 * medians.iter().map(|m| m * m).sum::<f64>();
    let length = libm::sqrt(square);
    let root = 1.0 / libm::sqrt(count);
    let first = polynomial(&FIRST, root) + medians[0] / length;
    let mut weights = vec![first];
    let (mut left, mut share) = (square - 2.0 * medians[0] * medians[0], 1.0 - 2.0 * first * first);
    if n > 5 {
        let second = polynomial(&SECOND, root) + medians[1] / length;
        weights.push(second);
        left -= 2.0 * medians[1] * medians[1];
        share -= 2.0 * second * second;
    }
    let scale = libm::sqrt(left / share);
    weights.extend(medians[weights.len()..].iter().map(|m| m / scale));
    weights
}

/// 1 − W as a product of a difference and a sum, so that W close to 1 keeps its digits.
fn one_minus_w(sorted: &[f64], half: &[f64]) -> f64 {
    let n = sorted.len();
    let weight = |i: usize| match (i < n / 2, n - 1 - i < n / 2) {
        (true, _) => -half[i],
        (_, true) => half[n - 1 - i],
        _ => 0.0,
    };
    let mean = sorted.iter().sum::<f64>() / as_f64(n);
    let (mut aa, mut yy, mut ay) = (0.0, 0.0, 0.0);
    for (i, y) in sorted.iter().enumerate() {
        let (a, y) = (weight(i), y - mean);
        aa += a * a;
        yy += y * y;
        ay += a * y;
    }
    let length = libm::sqrt(aa * yy);
    ((length - ay) * (length + ay) / (aa * yy)).clamp(0.0, 1.0)
}

/// P(W ≤ w) from 1 − w.
fn lower_tail(missing: f64, n: usize) -> f64 {
    const GAMMA: [f64; 2] = [-2.273, 0.459];
    const MEAN_SMALL: [f64; 4] = [0.544, -0.399_78, 0.025_054, -6.714e-4];
    const SPREAD_SMALL: [f64; 4] = [1.3822, -0.778_57, 0.062_767, -0.002_032_2];
    const MEAN_LARGE: [f64; 4] = [-1.5861, -0.310_82, -0.083_751, 0.003_891_5];
    const SPREAD_LARGE: [f64; 3] = [-0.4803, -0.082_676, 0.003_030_2];
    if n == 3 {
        // W runs from 3/4 to 1 there: p = (6/π)(asin √W − asin √¾).
        let angle = std::f64::consts::FRAC_PI_2 - libm::asin(libm::sqrt(missing));
        return (6.0 / std::f64::consts::PI * (angle - std::f64::consts::FRAC_PI_3)).clamp(0.0, 1.0);
    }
    let count = as_f64(n);
    let log_missing = libm::log(missing);
    let (y, mean, spread) = if n <= 11 {
        let gamma = polynomial(&GAMMA, count);
        if log_missing >= gamma {
            // Further from normal than the approximation reaches.
            return 1e-99;
        }
        let y = -libm::log(gamma - log_missing);
        (y, polynomial(&MEAN_SMALL, count), libm::exp(polynomial(&SPREAD_SMALL, count)))
    } else {
        let log_count = libm::log(count);
        (log_missing, polynomial(&MEAN_LARGE, log_count), libm::exp(polynomial(&SPREAD_LARGE, log_count)))
    };
    normal_lower((mean - y) / spread)
}

/// Σ cᵢxⁱ.
fn polynomial(coefficients: &[f64], x: f64) -> f64 {
    coefficients.iter().rev().fold(0.0, |sum, c| sum * x + c)
}
