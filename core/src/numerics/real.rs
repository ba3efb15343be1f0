//! Numbers a calibration function can be evaluated in: doubles, double-doubles, dual numbers.
//!
//! A family writes its formula once, over [`Real`]; value, exact derivatives and the double-double
//! residuals of the fit all come from that one text.

use super::dd::Dd;
use std::fmt::Debug;
use std::ops::{Add, Div, Mul, Neg, Sub};

/// A real number with the functions that calibration formulas use.
///
/// # Shapes and units
///
/// Angles in radians. Outside a function's domain the result is not finite; nothing panics.
pub trait Real:
    Copy
    + Debug
    + PartialEq
    + Add<Output = Self>
    + Sub<Output = Self>
    + Mul<Output = Self>
    + Div<Output = Self>
    + Neg<Output = Self>
{
    /// The number that a double stands for, exactly.
    fn of(value: f64) -> Self;

    /// The number of this kind nearest to a double-double.
    fn of_dd(value: Dd) -> Self;

    /// Times 2^`exponent`, exact unless it leaves the range of a double.
    #[must_use]
    fn times_power_of_two(self, exponent: i32) -> Self;

    /// The nearest double (of the value part, for a dual number).
    fn to_f64(self) -> f64;

    /// Whether every part is finite.
    fn is_finite(self) -> bool;

    /// e to this power.
    #[must_use]
    fn exp(self) -> Self;

    /// The natural logarithm.
    #[must_use]
    fn ln(self) -> Self;

    /// The decimal logarithm.
    #[must_use]
    fn log10(self) -> Self;

    /// The square root.
    #[must_use]
    fn sqrt(self) -> Self;

    /// The sine.
    #[must_use]
    fn sin(self) -> Self;

    /// The cosine.
    #[must_use]
    fn cos(self) -> Self;

    /// The arc tangent.
    #[must_use]
    fn atan(self) -> Self;

    /// The magnitude; its slope at zero is the mean of both sides, zero.
    #[must_use]
    fn abs(self) -> Self;

    /// This number to a real power: for negative numbers only whole exponents have a value.
    #[must_use]
    fn pow(self, exponent: Self) -> Self;

    /// π with all the digits this kind of number has.
    #[must_use]
    fn pi() -> Self;

    /// Zero.
    #[must_use]
    fn zero() -> Self {
        Self::of(0.0)
    }

    /// One.
    #[must_use]
    fn one() -> Self {
        Self::of(1.0)
    }

    /// This number times itself.
    #[must_use]
    fn square(self) -> Self {
        self * self
    }

    /// This number to a whole power, by repeated squaring.
    #[must_use]
    fn powi(self, exponent: i32) -> Self {
        let (mut base, mut rest, mut out) = (self, exponent.unsigned_abs(), Self::one());
        while rest > 0 {
            if rest & 1 == 1 {
                out = out * base;
            }
            base = base * base;
            rest >>= 1;
        }
        if exponent < 0 { Self::one() / out } else { out }
    }
}

impl Real for f64 {
    fn of(value: f64) -> Self {
        value
    }
    fn of_dd(value: Dd) -> Self {
        value.to_f64()
    }
    fn times_power_of_two(self, exponent: i32) -> Self {
        libm::scalbn(self, exponent)
    }
    fn to_f64(self) -> f64 {
        self
    }
    fn is_finite(self) -> bool {
        Self::is_finite(self)
    }
    fn exp(self) -> Self {
        libm::exp(self)
    }
    fn ln(self) -> Self {
        libm::log(self)
    }
    fn log10(self) -> Self {
        libm::log10(self)
    }
    fn sqrt(self) -> Self {
        libm::sqrt(self)
    }
    fn sin(self) -> Self {
        libm::sin(self)
    }
    fn cos(self) -> Self {
        libm::cos(self)
    }
    fn atan(self) -> Self {
        libm::atan(self)
    }
    fn abs(self) -> Self {
        Self::abs(self)
    }
    fn pow(self, exponent: Self) -> Self {
        libm::pow(self, exponent)
    }
    fn pi() -> Self {
        std::f64::consts::PI
    }
}
