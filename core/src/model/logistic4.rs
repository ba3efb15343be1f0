//! The four-coefficient logistic: y = d + (a − d)/(1 + (x/c)ᵇ).
//!
//! a is the response at x = 0 and d the response towards large x (output unit; named by where they are, not by which
//! is higher), c > 0 the x of the half-way response (input unit), b > 0 the steepness (no unit). b > 0 makes the
//! answer single: exchanging a with d and turning the sign of b gives the same curve. For x ≥ 0; y(0) = a exactly.
//! The fit is made in (a, ln b, ln c, d), so that b and c stay positive.

use super::{
    guide::Guide,
    precise::nowhere,
    start::{self, Axis, Levels},
};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["a", "b", "c", "d"];

/// The printed formula.
pub const FORMULA: &str = "y = d + (a − d)/(1 + (x/c)ᵇ)";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "An S-shaped response against the logarithm of the standard, flat at both ends: immunoassays, binding \
           and inhibition curves, some optical sensors. Have standards on both flat parts, or the levels a and d are \
           guesses.",
    wrong: "On the flat parts a reading fixes x badly: the interval becomes lopsided or has one end only, and a \
            reading beyond a level has no value. Without standards near a level the fit trades it against the \
            steepness.",
};

/// Unit of a coefficient: output, none, input, output.
#[must_use]
pub fn unit(index: usize, y: &Unit, x: &Unit) -> String {
    match index {
        0 | 3 => y.to_string(),
        2 => x.to_string(),
        _ => String::new(),
    }
}

/// Whether the family has a value at x: x ≥ 0 and finite.
#[must_use]
pub fn domain(x: f64) -> bool {
    x >= 0.0 && x.is_finite()
}

/// The indication at x.
///
/// # Formula
///
/// y = d + (a − d)/(1 + (x/c)ᵇ), below c as a + (d − a) w/(1 + w) with w = (x/c)ᵇ, above it as
/// d + (a − d) v/(1 + v) with v = (c/x)ᵇ: nothing overflows and both levels are met exactly.
///
/// # Shapes and units
///
/// `b` = (a, b, c, d): output unit, none, input unit, output unit; x ≥ 0 in the input unit. At x = 0 the slopes by
/// b, c and d are 0, that by x is 0 for b > 1, (d − a)/c for b = 1 and infinite for b < 1.
///
/// # Errors
///
/// None; not a number outside the domain and unless b > 0 and c > 0.
///
/// # Source
///
/// Common practice (dose–response work since Rodbard and Hutt, 1974; from memory).
pub fn value<T: Real>(b: &[T], x: T) -> T {
    let [a, power, c, d] = [b[0], b[1], b[2], b[3]];
    if !(domain(x.to_f64()) && power.to_f64() > 0.0 && c.to_f64() > 0.0) {
        return nowhere(x);
    }
    if x.to_f64() > c.to_f64() {
        let v = (c / x).pow(power);
        return d + (a - d) * (v / (T::one() + v));
    }
    let w = (x / c).pow(power);
    // An infinite slope of w at zero would meet a factor of zero in the quotient.
    let share = if x.to_f64() == 0.0 && power.to_f64() < 1.0 { w } else { w / (T::one() + w) };
    a + (d - a) * share
}

/// (a, ln b, ln c, d) from (a, b, c, d).
pub fn to_internal<T: Real>(b: &[T]) -> Vec<T> {
    vec![b[0], b[1].ln(), b[2].ln(), b[3]]
}

/// (a, b, c, d) from (a, ln b, ln c, d).
pub fn from_internal<T: Real>(p: &[T]) -> Vec<T> {
    vec![p[0], p[1].exp(), p[2].exp(), p[3]]
}

/// Search ranges of ln b and of ln of the half-way x: half a range beyond both ends, from nearly a logarithm to a
/// step between two neighbouring levels. `None` with fewer than two positive levels.
pub(super) fn axes(levels: &Levels, counts: [u32; 2]) -> Option<[Axis; 2]> {
    let smallest = levels.x.iter().find(|x| **x > 0.0)?;
    let (lo, hi) = (libm::log(*smallest), libm::log(levels.ends().1));
    let span = hi - lo;
    if span <= 0.0 {
        return None;
    }
    let (low, high) = (libm::log((1.0 / span).min(0.3)), libm::log((60.0 / span).max(8.0)));
    let place = Axis { lo: lo - 0.5 * span, hi: hi + 0.5 * span, count: counts[1] };
    Some([Axis { lo: low, hi: high, count: counts[0] }, place])
}

/// Start values from the data alone, `None` with fewer than four levels: steepness and half-way place searched,
/// both levels by least squares.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = Levels::of(points, domain, 4)?;
    let logs = levels.moved(libm::log);
    // Share of the way from a to d at each level.
    let solved = |p: &[f64]| logs.fit(&[&|_| 1.0, &|log| 1.0 / (1.0 + libm::exp(-libm::exp(p[0]) * (log - p[1])))]);
    let place = start::search(&axes(&levels, [28, 41])?, |p| solved(p).map(|(_, left)| left))?;
    let (linear, _) = solved(&place)?;
    Some(vec![linear[0], libm::exp(place[0]), libm::exp(place[1]), linear[0] + linear[1]])
}

/// The one x ≥ 0 with f(x) = y: c ((a − y)/(y − d))^(1/b); `None` for a reading not between a (reached at 0) and d
/// (never reached).
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let odds = (b[0] - y) / (y - b[3]);
    let x = b[2] * libm::pow(odds, 1.0 / b[1]);
    (odds >= 0.0 && b[0] != b[3] && domain(x)).then_some(x)
}

/// Limits of y at x = 0 and towards large x: a and d.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    (Some(b[0]), Some(b[3]))
}
