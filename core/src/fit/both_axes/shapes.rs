//! Functions for the tests, each written once for every kind of number.

use super::Function;
use crate::numerics::Real;

/// A function by name.
#[derive(Debug, Clone, Copy)]
pub(super) enum Shape {
    /// b₀ x^b₁.
    Power,
    /// b₀ + b₁ exp(b₂x).
    Exponential,
    /// b₀ + b₁/(x + b₂).
    Hyperbola,
    /// (b₀ + b₁x)/(1 + b₂x).
    Rational,
    /// b₁ + (b₀ − b₁)/(1 + (x/exp b₂)^b₃).
    Logistic,
}

impl Shape {
    pub(super) fn named(name: &str) -> Self {
        match name {
            "power" => Self::Power,
            "exponential" => Self::Exponential,
            "hyperbola" => Self::Hyperbola,
            "rational" => Self::Rational,
            "logistic" => Self::Logistic,
            other => panic!("no shape {other}"),
        }
    }
}

impl Function for Shape {
    fn coefficient_count(&self) -> usize {
        match self {
            Self::Power => 2,
            Self::Exponential | Self::Hyperbola | Self::Rational => 3,
            Self::Logistic => 4,
        }
    }

    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        match self {
            Self::Power => b[0] * x.pow(b[1]),
            Self::Exponential => b[0] + b[1] * (b[2] * x).exp(),
            Self::Hyperbola => b[0] + b[1] / (x + b[2]),
            Self::Rational => (b[0] + b[1] * x) / (T::one() + b[2] * x),
            Self::Logistic => b[1] + (b[0] - b[1]) / (T::one() + (b[3] * (x.ln() - b[2])).exp()),
        }
    }
}

/// A diagonal covariance from standard uncertainties.
pub(super) fn diagonal(u: &[f64]) -> Vec<Vec<f64>> {
    let cell = |i: usize, j: usize| if i == j { u[i] * u[i] } else { 0.0 };
    (0..u.len()).map(|i| (0..u.len()).map(|j| cell(i, j)).collect()).collect()
}
