//! Fits that a single wild reading cannot move: a cross-check beside least squares, never in its place.
//!
//! They have no covariance here on purpose. Where they part from the least-squares curve by more than the
//! scatter explains, a reading wants an explanation; the curve of the certificate stays least squares.

mod huber;
mod theil_sen;

pub use huber::{HUBER_K, huber};
pub use theil_sen::{THEIL_SEN_UP_TO, theil_sen};

use super::Fit;

/// How a robust curve was found.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Method {
    /// Huber's M-estimate with its scale found jointly.
    Huber,
    /// The median of the slopes between all pairs of different levels.
    TheilSen,
}

/// Why there is no robust fit to compare with.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum RobustError {
    /// The family is declared, not fitted.
    #[error("a declared function is given, not fitted: there is nothing to cross-check")]
    NotFitted,
    /// The least-squares fit minimised something else than errors of the indications.
    #[error("the cross-check is made for fits that minimise errors of the readings alone")]
    NotInIndications,
    /// Theil–Sen asked for something else than a line.
    #[error("the median of slopes exists for a straight line only")]
    NotALine,
    /// As many coefficients as observations.
    #[error("{observations} observations for {coefficients} coefficients: every curve goes through all of them")]
    NothingLeft {
        /// Observations.
        observations: usize,
        /// Coefficients.
        coefficients: usize,
    },
    /// Too many pairs.
    #[error("the median of slopes is taken up to {limit} observations; there are {observations}")]
    TooMany {
        /// Observations.
        observations: usize,
        /// Most that are taken.
        limit: usize,
    },
    /// So many observations lie exactly on curves that no scatter is left to judge the others by.
    #[error("{exact} of {observations} observations agree exactly: no scatter is left to judge the others by")]
    NoScatter {
        /// Observations without a residual.
        exact: usize,
        /// Observations.
        observations: usize,
    },
    /// The weighted fits of the iteration could not be solved.
    #[error("the reweighted fit cannot be solved: the numbers are too large, too small or too close together")]
    Unsolvable,
    /// The iteration did not settle.
    #[error("the reweighted fits did not settle in {iterations} rounds")]
    NotConverged {
        /// Rounds made.
        iterations: usize,
    },
}

/// Where a robust curve is farthest from the least-squares curve, among the levels.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LargestDifference {
    /// The standard, input unit.
    pub x: f64,
    /// Robust minus least squares there, output unit, with its sign.
    pub difference: f64,
}

/// A robust curve beside a least-squares fit of N observations, m levels and p coefficients.
#[derive(Debug, Clone, PartialEq)]
pub struct RobustFit {
    /// The method.
    pub method: Method,
    /// The p coefficients in the order and units of the least-squares fit.
    pub coefficients: Vec<f64>,
    /// The m levels, ascending, input unit.
    pub levels: Vec<f64>,
    /// The robust curve at the levels, output unit.
    pub fitted: Vec<f64>,
    /// y − robust curve for each of the N observations in the order of [`Fit::points`], output unit.
    pub residuals: Vec<f64>,
    /// What each of the N observations counted, 0 to 1, beside its weight in the least-squares fit; 1 for
    /// all with Theil–Sen, which takes medians instead.
    pub weights: Vec<f64>,
    /// Robust SD of an observation with v = 1, as s in the least-squares fit: output unit / √(unit of v).
    /// `None` with Theil–Sen; 0 when the observations that count agree exactly.
    pub scale: Option<f64>,
    /// The largest difference from the least-squares curve at a level.
    pub largest_difference: LargestDifference,
}

impl RobustFit {
    /// Positions in [`Fit::points`] of the observations that count less than fully.
    #[must_use]
    pub fn reduced(&self) -> Vec<usize> {
        (0..self.weights.len()).filter(|i| self.weights[*i] < 1.0).collect()
    }
}

/// What a method leaves, before it is laid beside the least-squares fit.
struct Found {
    method: Method,
    coefficients: Vec<f64>,
    residuals: Vec<f64>,
    weights: Vec<f64>,
    scale: Option<f64>,
}

/// Lays a robust curve beside the least-squares fit.
///
/// At a level both curves miss the same observation, so their difference there is the difference of the
/// two residuals: nothing cancels.
fn beside(fit: &Fit, found: Found) -> RobustFit {
    let mut out = RobustFit {
        method: found.method,
        coefficients: found.coefficients,
        levels: Vec::new(),
        fitted: Vec::new(),
        residuals: found.residuals,
        weights: found.weights,
        scale: found.scale,
        largest_difference: LargestDifference { x: f64::NAN, difference: 0.0 },
    };
    for level in fit.levels() {
        let Some(member) = level.members.first().copied() else { continue };
        let difference = fit.residuals[member] - out.residuals[member];
        out.levels.push(level.x);
        out.fitted.push(fit.points[member].y - out.residuals[member]);
        let largest = &mut out.largest_difference;
        if largest.x.is_nan() || difference.abs() > largest.difference.abs() {
            *largest = LargestDifference { x: level.x, difference };
        }
    }
    out
}

#[cfg(test)]
mod tests;
