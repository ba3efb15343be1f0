//! The exponential with offset: y = c + a exp(b x).
//!
//! c is the level that y approaches on one side, a the distance from it at x = 0 (both in the output unit),
//! b the rate, per input unit, of either sign. Any finite x.

use super::{guide::Guide, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["c", "a", "b"];

/// The printed formula.
pub const FORMULA: &str = "y = c + a exp(b x)";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "The reading grows by the same percentage for each step of the standard, or dies away towards a level: \
           detectors that saturate slowly, photodiodes and filters, decay and settling.",
    wrong: "When the data are nearly straight, offset and amplitude grow without bound against each other: take the \
            line or the quadratic. Close to the level that it approaches, a small noise means a large change of x, \
            and beyond that level a reading has no value at all.",
};

/// Largest |b| times half the range of x that a start looks at.
const STEEPEST: f64 = 60.0;

/// Unit of a coefficient.
#[must_use]
pub fn unit(index: usize, y: &Unit, x: &Unit) -> String {
    if index < 2 { y.to_string() } else { Unit::new("").per(x, 1) }
}

/// Whether the family has a value at x: anywhere finite.
#[must_use]
pub fn domain(x: f64) -> bool {
    x.is_finite()
}

/// The indication at x.
///
/// # Formula
///
/// y = c + a exp(b x).
///
/// # Shapes and units
///
/// `b` = (c, a, b): output unit, output unit, per input unit; x in the input unit.
///
/// # Errors
///
/// None; not a number where x is not finite, infinite where the exponential is too large for a double.
///
/// # Source
///
/// Common practice.
pub fn value<T: Real>(b: &[T], x: T) -> T {
    if domain(x.to_f64()) { b[0] + b[1] * (b[2] * x).exp() } else { nowhere(x) }
}

/// Start values from the data alone, `None` with fewer than three levels.
///
/// The rate is searched over both signs and over all sizes that a range can show; c and a follow by least squares
/// on 1 and (exp(s u) − 1)/s, u from −1 to 1, columns that stay apart for nearly straight data.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = start::Levels::of(points, domain, 3)?;
    let (centre, half) = levels.middle();
    let rate = |place: f64| STEEPEST * libm::sinh(place) / libm::sinh(start::SPREAD);
    let solved = |s: f64| levels.fit(&[&|_| 1.0, &|x| libm::expm1(s * ((x - centre) / half)) / s]);
    let place = start::search(&[start::signed_axis()], |p| solved(rate(p[0])).map(|(_, left)| left))?[0];
    let s = rate(place);
    let (linear, _) = solved(s)?;
    let amplitude = linear[1] / s;
    let at_zero = amplitude * libm::exp(-s * (centre / half));
    let found = vec![linear[0] - amplitude, at_zero, s / half];
    // An amplitude at x = 0 that is no double leaves nothing to start from.
    ((at_zero.is_normal() || amplitude == 0.0) && found.iter().all(|b| b.is_finite())).then_some(found)
}

/// The one x with f(x) = y: ln((y − c)/a)/b; `None` for a reading at or beyond the level c.
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let ratio = (y - b[0]) / b[1];
    let x = libm::log(ratio) / b[2];
    (b[2] != 0.0 && ratio > 0.0 && domain(x)).then_some(x)
}

/// Limits of y towards low and high x: c on the side to which the exponential dies away.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    let level = Some(b[0]);
    if b[1] == 0.0 {
        return (level, level);
    }
    match b[2].partial_cmp(&0.0) {
        Some(std::cmp::Ordering::Greater) => (level, None),
        Some(std::cmp::Ordering::Less) => (None, level),
        Some(std::cmp::Ordering::Equal) => (Some(b[0] + b[1]), Some(b[0] + b[1])),
        None => (None, None),
    }
}
