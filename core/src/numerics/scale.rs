//! Scaling by powers of two: exact, and it keeps products of doubles inside their range.

use super::dd::Dd;

/// Numbers written as `values` · 2^`exponent` with the largest magnitude in [½, 1).
#[derive(Debug, Clone, PartialEq)]
pub struct Scaled {
    /// The scaled numbers.
    pub values: Vec<f64>,
    /// The common power of two.
    pub exponent: i32,
}

/// The e with |value| in [2^(e−1), 2^e); 0 for zero.
#[must_use]
pub fn exponent_of(value: f64) -> i32 {
    if value == 0.0 { 0 } else { libm::frexp(value).1 }
}

/// The exponent of the largest magnitude; 0 when all are zero or there are none.
#[must_use]
pub fn largest_exponent(values: &[f64]) -> i32 {
    exponent_of(values.iter().fold(0.0, |top: f64, v| top.max(v.abs())))
}

impl Scaled {
    /// Scales finite numbers. Those 2¹⁰⁷⁴ times smaller than the largest become zero.
    #[must_use]
    pub fn new(values: &[f64]) -> Self {
        let exponent = largest_exponent(values);
        let values = values.iter().map(|v| libm::scalbn(*v, -exponent)).collect();
        Self { values, exponent }
    }
}

/// Rounds `value` · 2^`exponent` to a double.
///
/// # Errors
///
/// `None` when the result is not finite, or not zero but too small to be held with all its digits.
#[must_use]
pub fn round_scaled(value: Dd, exponent: i32) -> Option<f64> {
    let high = value.to_f64();
    if !value.is_finite() {
        return None;
    }
    if high == 0.0 {
        return Some(0.0);
    }
    let rounded = libm::scalbn(high, exponent);
    (rounded.is_finite() && rounded.abs() >= f64::MIN_POSITIVE).then_some(rounded)
}

/// A count as a double.
#[expect(clippy::cast_precision_loss, reason = "counts of observations are far below 2⁵³")]
#[must_use]
pub fn as_f64(count: usize) -> f64 {
    count as f64
}
