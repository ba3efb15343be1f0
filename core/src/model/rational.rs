//! The rational function of first degree: y = (a + b x)/(1 + c x).
//!
//! a is the indication at x = 0 (output unit), b the slope there for c = 0 (output unit per input unit), c the bend
//! (per input unit): with c = 0 it is the line. The pole lies at x = −1/c, the level far away is b/c. Any finite x
//! but the pole. The same curves as [`super::hyperbola`], written so that nearly straight data do no harm.

use super::{guide::Guide, pole_scan, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["a", "b", "c"];

/// The printed formula.
pub const FORMULA: &str = "y = (a + b x)/(1 + c x)";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "A bridge or divider that is not quite straight, or a reading that saturates gently. With the same number \
           of coefficients as the quadratic it does not turn round, and its inverse is as simple as itself.",
    wrong: "Where 1 + c x is zero the curve breaks off to infinity: if that place comes near the range, the function \
            is useless there. A pole at x = 0 cannot be written in this form: take the hyperbola. It has no value \
            for readings at the level b/c.",
};

/// Unit of a coefficient.
#[must_use]
pub fn unit(index: usize, y: &Unit, x: &Unit) -> String {
    match index {
        0 => y.to_string(),
        1 => y.per(x, 1),
        _ => Unit::new("").per(x, 1),
    }
}

/// Whether the family has a value at x: anywhere finite, apart from the pole.
#[must_use]
pub fn domain(x: f64) -> bool {
    x.is_finite()
}

/// The indication at x.
///
/// # Formula
///
/// y = (a + b x)/(1 + c x).
///
/// # Shapes and units
///
/// `b` = (a, b, c): output unit, output per input unit, per input unit; x in the input unit.
///
/// # Errors
///
/// None; not a number at the pole and where x is not finite.
///
/// # Source
///
/// Common practice.
pub fn value<T: Real>(b: &[T], x: T) -> T {
    let below = T::one() + b[2] * x;
    if domain(x.to_f64()) && below.to_f64() != 0.0 { (b[0] + b[1] * x) / below } else { nowhere(x) }
}

/// Start values from the data alone, with the pole outside the levels; `None` with fewer than three levels.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let s = pole_scan::scan(&start::Levels::of(points, domain, 3)?)?;
    let shift = s.centre / s.half;
    let below = 1.0 + s.kappa * shift;
    let found = vec![(s.alpha - s.beta * shift) / below, s.beta / s.half / below, -s.kappa / s.half / below];
    found.iter().all(|b| b.is_finite()).then_some(found)
}

/// The one x with f(x) = y: (a − y)/(c y − b); `None` at the level b/c, and for a flat curve.
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let below = b[2] * y - b[1];
    let x = (b[0] - y) / below;
    let flat = b[0] * b[2] == b[1];
    (!flat && below != 0.0 && domain(x)).then_some(x)
}

/// Limits of y towards low and high x: b/c on both sides, none for a line.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    let level = if b[2] != 0.0 {
        Some(b[1] / b[2])
    } else if b[1] == 0.0 {
        Some(b[0])
    } else {
        None
    };
    (level, level)
}

/// Where the curve goes to infinity: x = −1/c; empty for a line and for a flat curve.
#[must_use]
pub fn poles(b: &[f64]) -> Vec<f64> {
    if b[2] == 0.0 || b[0] * b[2] == b[1] { Vec::new() } else { vec![-1.0 / b[2]] }
}
