//! Start values of curves with one pole: hyperbola and rational function are one family of curves.
//!
//! In u = (x − centre)/half, from −1 to 1, every such curve without a pole between the levels is
//! (α + β u)/(1 − κ u) with |κ| < 1: the pole lies at u = 1/κ, and κ = 0 is the line.

use super::start::{Axis, Levels, search};

/// A curve (α + β u)/(1 − κ u), u = (x − centre)/half.
pub(super) struct Scaled {
    /// α, output unit.
    pub(super) alpha: f64,
    /// β, output unit.
    pub(super) beta: f64,
    /// κ, without unit, strictly between −1 and 1.
    pub(super) kappa: f64,
    /// Middle of the range, input unit.
    pub(super) centre: f64,
    /// Half of the range, input unit.
    pub(super) half: f64,
}

/// κ = tanh of the place: at ±11 the pole lies 3·10⁻¹⁰ of the range outside it.
const REACH: f64 = 11.0;

/// The least-squares curve over all poles outside the levels; for three levels or more.
pub(super) fn scan(levels: &Levels) -> Option<Scaled> {
    let (centre, half) = levels.middle();
    let solved = |kappa: f64| {
        let place = |x: f64| (x - centre) / half;
        let below = |x: f64| 1.0 - kappa * place(x);
        levels.fit(&[&|x| 1.0 / below(x), &|x| place(x) / below(x)])
    };
    // An even count, so that no place is exactly the line.
    let axis = Axis { lo: -REACH, hi: REACH, count: 176 };
    let place = search(&[axis], |p| solved(libm::tanh(p[0])).map(|(_, left)| left))?[0];
    let kappa = libm::tanh(place);
    let (linear, _) = solved(kappa)?;
    Some(Scaled { alpha: linear[0], beta: linear[1], kappa, centre, half })
}
