//! The hyperbola with both asymptotes free: y = c + a/(x + b).
//!
//! c is the level that y approaches far away (output unit), −b the place of the pole (input unit), a the strength
//! (output unit times input unit). Of the ways to write a curve with three coefficients this one is chosen because
//! each is something that can be seen: level, pole, strength; because b = 0 is the plain y = c + a/x; and because a
//! and c are linear once b is known. The same curves are written by [`super::rational`] as (a + b x)/(1 + c x),
//! which contains the straight line but not a pole at zero; here it is the other way round.

use super::{guide::Guide, pole_scan, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["c", "a", "b"];

/// The printed formula.
pub const FORMULA: &str = "y = c + a/(x + b)";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "The reading goes with one over the distance, the resistance or the concentration and levels off far away: \
           infrared distance sensors, dividers, some capacitive gauges.",
    wrong: "At x = −b the curve breaks off to infinity; that place must lie well outside the range. \
            When the data are nearly straight, all three coefficients grow without bound: take the rational function \
            or the line. Near the level c a reading says little about x.",
};

/// Poles farther away than this many half ranges are brought to it: the curve is a line by then.
const FARTHEST: f64 = 1e8;

/// Unit of a coefficient: output, output times input, input.
#[must_use]
pub fn unit(index: usize, y: &Unit, x: &Unit) -> String {
    match index {
        0 => y.to_string(),
        1 if x.as_str().contains([' ', '/']) => format!("{y} ({x})").trim().to_owned(),
        1 => format!("{y} {x}").trim().to_owned(),
        _ => x.to_string(),
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
/// y = c + a/(x + b).
///
/// # Shapes and units
///
/// `b` = (c, a, b): output unit, output times input unit, input unit; x in the input unit.
///
/// # Errors
///
/// None; not a number at the pole and where x is not finite.
///
/// # Source
///
/// Common practice.
pub fn value<T: Real>(b: &[T], x: T) -> T {
    let below = x + b[2];
    if domain(x.to_f64()) && below.to_f64() != 0.0 { b[0] + b[1] / below } else { nowhere(x) }
}

/// Start values from the data alone, with the pole outside the levels; `None` with fewer than three levels.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let s = pole_scan::scan(&start::Levels::of(points, domain, 3)?)?;
    let kappa = if s.kappa.abs() < 1.0 / FARTHEST { libm::copysign(1.0 / FARTHEST, s.kappa) } else { s.kappa };
    let level = -s.beta / kappa;
    let found = vec![level, (level - s.alpha) * (s.half / kappa), -(s.centre + s.half / kappa)];
    found.iter().all(|b| b.is_finite()).then_some(found)
}

/// The one x with f(x) = y: a/(y − c) − b; `None` for y = c, and for a flat curve.
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let x = b[1] / (y - b[0]) - b[2];
    (b[1] != 0.0 && y != b[0] && domain(x)).then_some(x)
}

/// Limits of y towards low and high x: c on both sides.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    (Some(b[0]), Some(b[0]))
}

/// Where the curve goes to infinity: x = −b; empty for a flat curve.
#[must_use]
pub fn poles(b: &[f64]) -> Vec<f64> {
    if b[1] == 0.0 { Vec::new() } else { vec![-b[2]] }
}
