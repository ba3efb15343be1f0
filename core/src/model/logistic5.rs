//! The five-coefficient logistic: y = d + (a − d)/(1 + (x/c)ᵇ)ᵍ.
//!
//! As [`super::logistic4`], with an exponent g > 0 (no unit) that lets the two bends differ; g = 1 is the logistic
//! with four. c is then no longer the half-way x: that is c (2^(1/g) − 1)^(1/b). For x ≥ 0; y(0) = a exactly.
//! The fit is made in (a, ln b, ln c, d, ln g).

use super::{
    guide::Guide,
    logistic4,
    precise::{exp_m1, ln_1p, nowhere},
    start::{self, Axis, Levels},
};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["a", "b", "c", "d", "g"];

/// The printed formula.
pub const FORMULA: &str = "y = d + (a − d)/(1 + (x/c)ᵇ)ᵍ";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "An S-shaped response whose two bends are clearly not alike, with standards on both flat parts and several \
           on each bend. Try the four-coefficient logistic first.",
    wrong: "Few data sets can tell the fifth coefficient: if the interval of g contains 1, the simpler logistic says \
            as much. Steepness, place and g trade against each other, so single coefficients wander although the \
            curve does not. The flat parts fix x as badly as before.",
};

/// Unit of a coefficient: output, none, input, output, none.
#[must_use]
pub fn unit(index: usize, y: &Unit, x: &Unit) -> String {
    if index < 4 { logistic4::unit(index, y, x) } else { String::new() }
}

/// Whether the family has a value at x: x ≥ 0 and finite.
#[must_use]
pub fn domain(x: f64) -> bool {
    logistic4::domain(x)
}

/// The indication at x.
///
/// # Formula
///
/// y = d + (a − d)/(1 + w)ᵍ with w = (x/c)ᵇ; below c as a + (d − a)(1 − exp(−g ln(1 + w))) without cancellation,
/// above it as d + (a − d)(v/(1 + v))ᵍ with v = (c/x)ᵇ.
///
/// # Shapes and units
///
/// `b` = (a, b, c, d, g): output unit, none, input unit, output unit, none; x ≥ 0 in the input unit. At x = 0 the
/// slopes by b, c, d and g are 0, that by x is 0 for b > 1, g (d − a)/c for b = 1 and infinite for b < 1.
///
/// # Errors
///
/// None; not a number outside the domain and unless b, c and g > 0.
///
/// # Source
///
/// Common practice (the generalised logistic of Richards, 1959, in ln x; from memory).
pub fn value<T: Real>(b: &[T], x: T) -> T {
    let [a, power, c, d, g] = [b[0], b[1], b[2], b[3], b[4]];
    let positive = [power, c, g].iter().all(|v| v.to_f64() > 0.0);
    if !(domain(x.to_f64()) && positive) {
        return nowhere(x);
    }
    if x.to_f64() > c.to_f64() {
        let v = (c / x).pow(power);
        return d + (a - d) * (v / (T::one() + v)).pow(g);
    }
    let w = (x / c).pow(power);
    // An infinite slope of w at zero would meet a factor of zero in the logarithm.
    let share = if x.to_f64() == 0.0 && power.to_f64() < 1.0 { g * w } else { -exp_m1(-(g * ln_1p(w))) };
    a + (d - a) * share
}

/// (a, ln b, ln c, d, ln g) from (a, b, c, d, g).
pub fn to_internal<T: Real>(b: &[T]) -> Vec<T> {
    let mut p = logistic4::to_internal(&b[..4]);
    p.push(b[4].ln());
    p
}

/// (a, b, c, d, g) from (a, ln b, ln c, d, ln g).
pub fn from_internal<T: Real>(p: &[T]) -> Vec<T> {
    let mut b = logistic4::from_internal(&p[..4]);
    b.push(p[4].exp());
    b
}

/// Start values from the data alone, `None` with fewer than five levels: steepness, half-way place and g searched
/// (the half-way place moves little with g, while c does), both levels by least squares.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = Levels::of(points, domain, 5)?;
    let logs = levels.moved(libm::log);
    let solved = |place: &[f64]| {
        let (steep, g) = (libm::exp(place[0]), libm::exp(place[2]));
        let ln_c = place[1] - half_way(g) / steep;
        // ln(1 + w) without overflow of w.
        let ln_1p = |z: f64| if z > 0.0 { z + libm::log1p(libm::exp(-z)) } else { libm::log1p(libm::exp(z)) };
        logs.fit(&[&|_| 1.0, &|log| -libm::expm1(-g * ln_1p(steep * (log - ln_c)))])
    };
    let [steep, place] = logistic4::axes(&levels, [16, 21])?;
    let bend = Axis { lo: libm::log(0.05), hi: libm::log(20.0), count: 9 };
    let place = start::search(&[steep, place, bend], |p| solved(p).map(|(_, left)| left))?;
    let (linear, _) = solved(&place)?;
    let (steep, g) = (libm::exp(place[0]), libm::exp(place[2]));
    let c = libm::exp(place[1] - half_way(g) / steep);
    let found = vec![linear[0], steep, c, linear[0] + linear[1], g];
    found.iter().all(|b| b.is_finite()).then_some(found)
}

/// ln(2^(1/g) − 1): ln w at the half-way response.
fn half_way(g: f64) -> f64 {
    libm::log(libm::expm1(std::f64::consts::LN_2 / g))
}

/// The one x ≥ 0 with f(x) = y: c (((a − d)/(y − d))^(1/g) − 1)^(1/b) without cancellation near a; `None` for a
/// reading not between a (reached at 0) and d (never reached).
#[must_use]
pub fn solve(b: &[f64], y: f64) -> Option<f64> {
    let odds = (b[0] - y) / (y - b[3]);
    let w = libm::expm1(libm::log1p(odds) / b[4]);
    let x = b[2] * libm::pow(w, 1.0 / b[1]);
    (odds >= 0.0 && b[0] != b[3] && domain(x)).then_some(x)
}

/// Limits of y at x = 0 and towards large x: a and d.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    (Some(b[0]), Some(b[3]))
}
