//! The line through zero: y = b₁ x.
//!
//! b₁ is the sensitivity, in output units per input unit. Any finite x.

use super::{guide::Guide, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["b1"];

/// The printed formula.
pub const FORMULA: &str = "y = b₁ x";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "Zero in gives exactly zero out because the physics or a tare makes it so, and a measured zero confirms \
           it. One factor is enough, and the low end is then better known than with a free line.",
    wrong: "Forced through zero without a reason, the line tilts to make up for an offset, and the low standards pay. \
            A constant term that is not significant is no proof that it is absent. R² is not comparable with that of \
            other lines.",
};

/// Unit of a coefficient.
#[must_use]
pub fn unit(_index: usize, y: &Unit, x: &Unit) -> String {
    y.per(x, 1)
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
/// y = b₁ x.
///
/// # Shapes and units
///
/// `b` = (b₁), output unit per input unit; x in the input unit.
///
/// # Errors
///
/// None; not a number where x is not finite.
///
/// # Source
///
/// Common practice.
pub fn value<T: Real>(b: &[T], x: T) -> T {
    if domain(x.to_f64()) { b[0] * x } else { nowhere(x) }
}

/// Start values from the data alone: the least-squares factor; `None` without a level other than zero.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    start::Levels::of(points, domain, 1)?.fit(&[&|x| x]).map(|(b, _)| b)
}

/// The x with f(x) = y; `None` for a flat line.
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let x = y / b[0];
    (b[0] != 0.0 && domain(x)).then_some(x)
}

/// Limits of y at the low and the high end of x: a line has none.
#[must_use]
pub fn asymptotes(_b: &[f64]) -> (Option<f64>, Option<f64>) {
    (None, None)
}
