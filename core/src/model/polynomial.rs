//! Polynomials with their constant term, ascending powers.

use crate::numerics::roots::bracketed_root;

/// Horner's scheme.
pub(super) fn value(b: &[f64], x: f64) -> f64 {
    b.iter().rev().fold(0.0, |sum, c| sum * x + c)
}

/// Horner's scheme on b₁ + 2 b₂ x + 3 b₃ x² …
pub(super) fn derivative(b: &[f64], x: f64) -> f64 {
    value(&derived(b), x)
}

/// 1, x, x² …
pub(super) fn gradient(count: usize, x: f64) -> Vec<f64> {
    let power = |last: &f64| Some(last * x);
    std::iter::successors(Some(1.0), power).take(count).collect()
}

/// 0, 1, 2x, 3x² …
pub(super) fn slope_gradient(count: usize, x: f64) -> Vec<f64> {
    let mut out = vec![0.0; count];
    let mut power = 1.0;
    let mut n = 0.0;
    for cell in out.iter_mut().skip(1) {
        n += 1.0;
        *cell = n * power;
        power *= x;
    }
    out
}

/// Coefficients of the derivative.
fn derived(b: &[f64]) -> Vec<f64> {
    let mut n = 0.0;
    let times_power = |c: &f64| {
        n += 1.0;
        n * c
    };
    b.iter().skip(1).map(times_power).collect()
}

/// Where f′ changes sign in the open interval, ascending. Where it only touches zero nothing turns.
pub(super) fn turning_points(b: &[f64], lo: f64, hi: f64) -> Vec<f64> {
    let slope = derived(b);
    let mut cuts = vec![lo];
    cuts.extend(roots(&slope, lo, hi).into_iter().filter(|x| lo < *x && *x < hi));
    cuts.push(hi);
    let sign = |from: f64, to: f64| value(&slope, inside(from, to)).signum();
    let turns = |three: &&[f64]| sign(three[0], three[1]) * sign(three[1], three[2]) < 0.0;
    cuts.windows(3).filter(turns).map(|three| three[1]).collect()
}

/// A point between two ends of which either may be infinite.
pub(super) fn inside(lo: f64, hi: f64) -> f64 {
    match (lo.is_finite(), hi.is_finite()) {
        (true, true) => 0.5 * lo + 0.5 * hi,
        (true, false) => lo + lo.abs().max(1.0),
        (false, true) => hi - hi.abs().max(1.0),
        (false, false) => 0.0,
    }
}

/// Every x in [lo, hi] at which the polynomial takes the value y.
pub(super) fn solve(b: &[f64], y: f64, lo: f64, hi: f64) -> Vec<f64> {
    let mut shifted = b.to_vec();
    if let Some(first) = shifted.first_mut() {
        *first -= y;
    }
    roots(&shifted, lo, hi)
}

/// All real roots of b₀ + b₁x + … in [lo, hi], ascending; none for a constant.
///
/// The roots of the derivative cut the interval into pieces on which the polynomial is monotone, so each
/// piece holds at most one root and none can be missed (a root that only touches zero is found when the
/// value there is exactly zero).
pub(super) fn roots(b: &[f64], lo: f64, hi: f64) -> Vec<f64> {
    let Some(degree) = b.iter().rposition(|c| *c != 0.0) else {
        return Vec::new();
    };
    let b = &b[..=degree];
    let bound = root_bound(b);
    let (lo, hi) = (lo.max(-bound), hi.min(bound));
    if degree == 0 || lo.is_nan() || hi.is_nan() || lo > hi {
        return Vec::new();
    }
    if degree == 1 {
        let x = -b[0] / b[1];
        return if (lo..=hi).contains(&x) { vec![x] } else { Vec::new() };
    }
    let mut cuts = vec![lo];
    cuts.extend(roots(&derived(b), lo, hi));
    cuts.push(hi);
    let mut found: Vec<f64> = Vec::new();
    for pair in cuts.windows(2) {
        let root = bracketed_root(|x| value(b, x), pair[0], pair[1]).ok();
        found.extend(root.filter(|x| found.last() != Some(x)));
    }
    found
}

/// No root is further from zero than this (Fujiwara's bound, doubled for rounding).
fn root_bound(b: &[f64]) -> f64 {
    let Some((top, rest)) = b.split_last() else {
        return 0.0;
    };
    let mut order = 0.0;
    let mut bound: f64 = 0.0;
    for c in rest.iter().rev() {
        order += 1.0;
        bound = bound.max(libm::pow((c / top).abs(), 1.0 / order));
    }
    (4.0 * bound).min(f64::MAX)
}
