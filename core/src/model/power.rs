//! The power law: y = a xᵇ.
//!
//! a is the indication at x = 1 (output unit; xᵇ is taken of the number in the input unit), b has no unit
//! and either sign. For x > 0 only: with the sign of b free, x = 0 has no value that holds for all of them.

use super::{guide::Guide, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["a", "b"];

/// The printed formula.
pub const FORMULA: &str = "y = a xᵇ";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "Doubling the standard multiplies the reading by the same factor everywhere: flow over weirs and through \
           orifices, photoresistors, many gas sensors. On paper with two logarithmic scales the points lie on a \
           straight line.",
    wrong: "An offset of the instrument bends it at the low end, and there is no constant term to take that up. \
            A standard of zero cannot be used. Fitted here in the reading's own unit, the high points weigh most; a \
            fit of logarithms would give other numbers.",
};

/// Largest change of ln y across half the range that a start looks at: e⁶⁰ is more than any instrument spans.
const STEEPEST: f64 = 60.0;

/// Unit of a coefficient; the exponent has none.
#[must_use]
pub fn unit(index: usize, y: &Unit, _x: &Unit) -> String {
    if index == 0 { y.to_string() } else { String::new() }
}

/// Whether the family has a value at x: x > 0 and finite.
#[must_use]
pub fn domain(x: f64) -> bool {
    x > 0.0 && x.is_finite()
}

/// The indication at x.
///
/// # Formula
///
/// y = a xᵇ.
///
/// # Shapes and units
///
/// `b` = (a, b): output unit, none; x > 0 in the input unit.
///
/// # Errors
///
/// None; not a number outside the domain.
///
/// # Source
///
/// Common practice.
pub fn value<T: Real>(b: &[T], x: T) -> T {
    if domain(x.to_f64()) { b[0] * x.pow(b[1]) } else { nowhere(x) }
}

/// Start values from the data alone, `None` with fewer than two levels or a level outside the domain.
///
/// The exponent is searched over all that change y by up to e⁶⁰ within half the range of ln x, and a follows by
/// least squares, in the output unit: noise around zero and negative readings do no harm.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = start::Levels::of(points, domain, 2)?.moved(libm::log);
    let (centre, half) = levels.middle();
    let rate = |place: f64| STEEPEST * libm::sinh(place) / libm::sinh(start::SPREAD);
    let solved = |place: f64| levels.fit(&[&|log| libm::exp(rate(place) * ((log - centre) / half))]);
    let place = start::search(&[start::signed_axis()], |p| solved(p[0]).map(|(_, left)| left))?[0];
    let (b, exponent) = (solved(place)?.0[0], rate(place) / half);
    let a = b * libm::exp(-exponent * centre);
    // An amplitude at x = 1 that is no double leaves nothing to start from.
    ((a.is_normal() || b == 0.0) && exponent.is_finite()).then(|| vec![a, exponent])
}

/// The one x > 0 with f(x) = y: (y/a)^(1/b); `None` for readings of the other sign than a.
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let x = libm::pow(y / b[0], 1.0 / b[1]);
    (b[1] != 0.0 && y / b[0] > 0.0 && domain(x)).then_some(x)
}

/// Limits of y towards x = 0 and towards large x: zero on the side to which xᵇ dies away.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    match b[1].partial_cmp(&0.0) {
        Some(std::cmp::Ordering::Greater) => (Some(0.0), None),
        Some(std::cmp::Ordering::Less) => (None, Some(0.0)),
        Some(std::cmp::Ordering::Equal) => (Some(b[0]), Some(b[0])),
        None => (None, None),
    }
}
