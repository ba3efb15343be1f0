//! First-order dual numbers over any [`Real`]: a value carried together with one derivative.
//!
//! Over a dual number itself they give mixed second derivatives, over double-double exact Jacobians.

use super::dd::Dd;
use super::real::Real;
use std::ops::{Add, Div, Mul, Neg, Sub};

/// A value and its derivative along one direction; every operation applies the chain rule exactly.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Dual<T> {
    /// The value.
    pub value: T,
    /// Its derivative.
    pub slope: T,
}

impl<T: Real> Dual<T> {
    /// A constant.
    pub fn constant(value: T) -> Self {
        Self { value, slope: T::zero() }
    }

    /// The variable itself.
    pub fn variable(value: T) -> Self {
        Self { value, slope: T::one() }
    }

    /// Whether nothing varies: constants stay constants even where a derivative is infinite.
    fn is_constant(self) -> bool {
        self.slope == T::zero()
    }

    /// g(u) with its derivative g′(u) given.
    fn chain(self, value: T, derivative: impl FnOnce() -> T) -> Self {
        let slope = if self.is_constant() { T::zero() } else { derivative() * self.slope };
        Self { value, slope }
    }
}

impl<T: Real> Add for Dual<T> {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self { value: self.value + other.value, slope: self.slope + other.slope }
    }
}

impl<T: Real> Sub for Dual<T> {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self { value: self.value - other.value, slope: self.slope - other.slope }
    }
}

impl<T: Real> Mul for Dual<T> {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        Self { value: self.value * other.value, slope: self.slope * other.value + self.value * other.slope }
    }
}

impl<T: Real> Div for Dual<T> {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        let value = self.value / other.value;
        Self { value, slope: (self.slope - value * other.slope) / other.value }
    }
}

impl<T: Real> Neg for Dual<T> {
    type Output = Self;
    fn neg(self) -> Self {
        Self { value: -self.value, slope: -self.slope }
    }
}

impl<T: Real> Real for Dual<T> {
    fn of(value: f64) -> Self {
        Self::constant(T::of(value))
    }
    fn of_dd(value: Dd) -> Self {
        Self::constant(T::of_dd(value))
    }
    fn times_power_of_two(self, exponent: i32) -> Self {
        Self { value: self.value.times_power_of_two(exponent), slope: self.slope.times_power_of_two(exponent) }
    }
    fn to_f64(self) -> f64 {
        self.value.to_f64()
    }
    fn is_finite(self) -> bool {
        self.value.is_finite() && self.slope.is_finite()
    }
    fn exp(self) -> Self {
        let value = self.value.exp();
        self.chain(value, || value)
    }
    fn ln(self) -> Self {
        self.chain(self.value.ln(), || T::one() / self.value)
    }
    fn log10(self) -> Self {
        self.chain(self.value.log10(), || T::one() / (self.value * T::of(10.0).ln()))
    }
    fn sqrt(self) -> Self {
        let value = self.value.sqrt();
        self.chain(value, || T::of(0.5) / value)
    }
    fn sin(self) -> Self {
        self.chain(self.value.sin(), || self.value.cos())
    }
    fn cos(self) -> Self {
        self.chain(self.value.cos(), || -self.value.sin())
    }
    fn atan(self) -> Self {
        self.chain(self.value.atan(), || T::one() / (T::one() + self.value.square()))
    }
    fn abs(self) -> Self {
        let sign = self.value.to_f64();
        self.chain(self.value.abs(), || T::of(if sign == 0.0 { 0.0 } else { sign.signum() }))
    }

    /// The terms v uᵛ⁻¹ u′ and uᵛ ln u · v′ are left out where u′ or v′ is zero, so that x² has its slope
    /// at negative x, where ln x does not exist.
    fn pow(self, exponent: Self) -> Self {
        let (u, v) = (self.value, exponent.value);
        let value = u.pow(v);
        let mut slope = T::zero();
        if !self.is_constant() && v.to_f64() != 0.0 {
            slope = slope + v * u.pow(v - T::one()) * self.slope;
        }
        let stays_zero = u.to_f64() == 0.0 && v.to_f64() > 0.0;
        if !exponent.is_constant() && !stays_zero {
            slope = slope + value * u.ln() * exponent.slope;
        }
        Self { value, slope }
    }
    fn pi() -> Self {
        Self::constant(T::pi())
    }
}
