//! The distinct standards of a fit, and what it would be without one of them.

use super::{Fit, Point};
use crate::numerics::scale::as_f64;

/// All observations of one standard value.
#[derive(Debug, Clone, PartialEq)]
pub struct Level {
    /// The value, input unit.
    pub x: f64,
    /// Positions in [`Fit::points`], ascending.
    pub members: Vec<usize>,
}

/// The distinct values of x, ascending, with their members.
pub(super) fn levels(points: &[Point]) -> Vec<Level> {
    let mut order: Vec<usize> = (0..points.len()).collect();
    // Adding zero turns −0 into 0.
    order.sort_by(|a, b| (points[*a].x + 0.0).total_cmp(&(points[*b].x + 0.0)));
    let mut out: Vec<Level> = Vec::new();
    for index in order {
        let x = points[index].x + 0.0;
        match out.last_mut() {
            #[expect(clippy::float_cmp, reason = "a level is one and the same number")]
            Some(level) if level.x == x => level.members.push(index),
            _ => out.push(Level { x, members: vec![index] }),
        }
    }
    out
}

impl Fit {
    /// The distinct standards, ascending.
    #[must_use]
    pub fn levels(&self) -> Vec<Level> {
        levels(&self.points)
    }

    /// Leverage of each level: the sum over its observations, in the order of [`Fit::levels`].
    #[must_use]
    pub fn level_leverage(&self) -> Vec<f64> {
        let sum = |level: &Level| level.members.iter().map(|i| self.leverage[*i]).sum();
        self.levels().iter().map(sum).collect()
    }

    /// Root mean square of the errors of prediction when each level in turn is left out and the family is
    /// fitted to the rest with the same weights; output unit.
    ///
    /// # Formula
    ///
    /// With L the sum of the influences of the level on f̂ at its own x, the fit without it is
    /// [f̂(x) − Σ ℓ_i y_i]/(1 − L) there, exactly; hence y_i − that = e_i + (Σ ℓ_j e_j)/(1 − L).
    ///
    /// # Errors
    ///
    /// `None` when a level cannot be left out (1 − L = 0): too few levels.
    ///
    /// # Source
    ///
    /// Deletion identity of linear least squares, Cook and Weisberg, Residuals and Influence in
    /// Regression (1982), appendix A.2. From memory.
    #[must_use]
    pub fn level_out_rmse(&self) -> Option<f64> {
        if self.points.is_empty() {
            return None;
        }
        let levels = self.levels();
        if self.basis.is_some() && levels.len() <= self.coefficients.len() {
            return None;
        }
        let mut sum = 0.0;
        for level in &levels {
            let influence = self.influence(level.x);
            let weight: f64 = level.members.iter().map(|i| influence[*i]).sum();
            let pull: f64 = level.members.iter().map(|i| influence[*i] * self.residuals[*i]).sum();
            for i in &level.members {
                let error = self.residuals[*i] + pull / (1.0 - weight);
                sum += error * error;
            }
        }
        let rmse = libm::sqrt(sum / as_f64(self.points.len()));
        rmse.is_finite().then_some(rmse)
    }
}
