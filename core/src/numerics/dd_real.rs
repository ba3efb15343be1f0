//! Double-double numbers as [`Real`]: what formulas are evaluated in for residuals and final figures.

use super::dd::Dd;
use super::real::Real;

impl Real for Dd {
    fn of(value: f64) -> Self {
        Self::from(value)
    }
    fn of_dd(value: Self) -> Self {
        value
    }
    fn times_power_of_two(self, exponent: i32) -> Self {
        self.times_power_of_two(exponent)
    }
    fn to_f64(self) -> f64 {
        self.to_f64()
    }
    fn is_finite(self) -> bool {
        self.is_finite()
    }
    fn exp(self) -> Self {
        self.exp()
    }
    fn ln(self) -> Self {
        self.ln()
    }
    fn log10(self) -> Self {
        self.ln() / Self::LN_10
    }
    fn sqrt(self) -> Self {
        self.sqrt()
    }
    fn sin(self) -> Self {
        self.sin_cos().0
    }
    fn cos(self) -> Self {
        self.sin_cos().1
    }
    fn atan(self) -> Self {
        self.atan()
    }
    fn abs(self) -> Self {
        self.abs()
    }
    fn pow(self, exponent: Self) -> Self {
        self.pow(exponent)
    }
    fn pi() -> Self {
        Self::PI
    }
}
