//! What a fit in both axes adds to a fit: how its covariance divides by cause.

use super::both_axes::DistanceFit;
use crate::model::Shape;

/// A fit in both axes with the function it belongs to.
#[derive(Debug, Clone, PartialEq)]
pub struct AxesSplit {
    shape: Shape,
    distance: DistanceFit,
}

impl AxesSplit {
    pub(super) fn new(shape: Shape, distance: DistanceFit) -> Self {
        Self { shape, distance }
    }

    /// (V_s, V_x): the variance of f̂(x) that the scatter of the readings and that the standards cause, output
    /// unit squared.
    #[must_use]
    pub fn split(&self, x: f64) -> (f64, f64) {
        self.distance.variance_at(&self.shape, x)
    }

    /// χ², true places of the standards, residuals in both axes.
    #[must_use]
    pub const fn distance(&self) -> &DistanceFit {
        &self.distance
    }
}
