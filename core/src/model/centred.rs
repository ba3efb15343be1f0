//! A polynomial in t = (x − centre)/scale: the same function where powers of x would cancel.

use super::polynomial;

/// A polynomial about its centre, with its coefficients in powers of x beside it.
#[derive(Debug, Clone, PartialEq)]
pub struct Centred {
    /// Coefficients of 1, x, x² …, for print and export.
    pub powers: Vec<f64>,
    /// Centre, input unit.
    pub centre: f64,
    /// Scale, input unit.
    pub scale: f64,
    /// Coefficients of 1, t, t² …, output unit.
    pub coefficients: Vec<f64>,
}

impl Centred {
    fn t(&self, x: f64) -> f64 {
        (x - self.centre) / self.scale
    }

    fn x(&self, t: f64) -> f64 {
        self.centre + self.scale * t
    }

    pub(super) fn value(&self, x: f64) -> f64 {
        polynomial::value(&self.coefficients, self.t(x))
    }

    pub(super) fn derivative(&self, x: f64) -> f64 {
        polynomial::derivative(&self.coefficients, self.t(x)) / self.scale
    }

    pub(super) fn turning_points(&self, lo: f64, hi: f64) -> Vec<f64> {
        let found = polynomial::turning_points(&self.coefficients, self.t(lo), self.t(hi));
        found.into_iter().map(|t| self.x(t)).collect()
    }

    /// Every x in [lo, hi] with f(x) = y.
    pub(super) fn solve(&self, y: f64, lo: f64, hi: f64) -> Vec<f64> {
        let found = polynomial::solve(&self.coefficients, y, self.t(lo), self.t(hi));
        found.into_iter().map(|t| self.x(t)).collect()
    }
}
