//! The logarithm: y = a + b ln x.

/// The printed formula.
pub(super) const FORMULA: &str = "y = a + b ln x";

/// x > 0 and finite.
pub(super) fn domain(x: f64) -> bool {
    x > 0.0 && x.is_finite()
}

pub(super) fn value([a, b]: [f64; 2], x: f64) -> f64 {
    if domain(x) { a + b * libm::log(x) } else { f64::NAN }
}

pub(super) fn derivative([_, b]: [f64; 2], x: f64) -> f64 {
    if domain(x) { b / x } else { f64::NAN }
}

pub(super) fn gradient(x: f64) -> [f64; 2] {
    let slope = if domain(x) { libm::log(x) } else { f64::NAN };
    [1.0, slope]
}

pub(super) fn slope_gradient(x: f64) -> [f64; 2] {
    [0.0, if domain(x) { 1.0 / x } else { f64::NAN }]
}

/// The one x with f(x) = y, if there is one: exp((y − a)/b).
pub(super) fn solve([a, b]: [f64; 2], y: f64) -> Option<f64> {
    let x = libm::exp((y - a) / b);
    domain(x).then_some(x)
}
