//! Weights from repeats: one model of the scatter for all levels, estimated from all of them together.

use super::levels::{Level, levels};
use super::variance::{Prepared, VarianceModel, by_level};
use super::{FitError, Point, Scatter};
use crate::numerics::least_squares::LeastSquares;
use crate::numerics::scale::as_f64;

/// Below this many repeats a level's own SD is too uncertain for a weight without a caution.
pub const FEW_REPEATS: usize = 20;

/// The repeats of a data set.
struct Repeats {
    levels: Vec<Level>,
    /// Mean indication of each level.
    means: Vec<f64>,
    /// Σ(n_i − 1).
    freedom: usize,
}

impl Repeats {
    fn new(points: &[Point]) -> Result<Self, FitError> {
        let levels = levels(points);
        let freedom = points.len() - levels.len();
        if freedom == 0 {
            return Err(FitError::NoRepeats);
        }
        let mean =
            |level: &Level| level.members.iter().map(|i| points[*i].y).sum::<f64>() / as_f64(level.members.len());
        let means = levels.iter().map(mean).collect();
        Ok(Self { levels, means, freedom })
    }

    /// Σ over all levels of Σ(y − ȳ)²/size², ν.
    fn pooled(&self, points: &[Point], size: impl Fn(usize) -> f64) -> f64 {
        let inside = |(k, level): (usize, &Level)| -> f64 {
            let square = |i: &usize| {
                let e = (points[*i].y - self.means[k]) / size(k);
                e * e
            };
            level.members.iter().map(square).sum()
        };
        self.levels.iter().enumerate().map(inside).sum::<f64>() / as_f64(self.freedom)
    }

    fn scatter(&self, variance: f64) -> Result<Scatter, FitError> {
        if !variance.is_finite() {
            return Err(FitError::OutOfRange);
        }
        if variance == 0.0 {
            return Err(FitError::IdenticalRepeats);
        }
        Ok(Scatter::Repeats { variance, degrees_of_freedom: self.freedom })
    }
}

/// One SD for all levels: s_pe² = ΣΣ(y_ij − ȳ_i)²/Σ(n_i − 1).
pub(super) fn constant(points: &[Point]) -> Result<Prepared, FitError> {
    let repeats = Repeats::new(points)?;
    let scatter = repeats.scatter(repeats.pooled(points, |_| 1.0))?;
    Ok(Prepared { scatter, ..Prepared::equal(points.len()) })
}

/// One relative SD for all levels: weights 1/ȳ_i².
pub(super) fn proportional(points: &[Point]) -> Result<Prepared, FitError> {
    let repeats = Repeats::new(points)?;
    let mut sizes = vec![0.0; points.len()];
    for (level, mean) in repeats.levels.iter().zip(&repeats.means) {
        for index in &level.members {
            sizes[*index] = super::variance::indication_size(*index, *mean, 2)?;
        }
    }
    let scatter = repeats.scatter(repeats.pooled(points, |k| repeats.means[k].abs()))?;
    Prepared::power(&sizes, 2, |floor| VarianceModel::Output { power: 2.0, unit: 1.0, floor }, scatter)
}

/// Whichever of the two the repeats make more likely.
///
/// # Formula
///
/// Normal likelihood of the deviations from the level means: Σν_i ln v_i + ν ln σ̂², the smaller one.
pub(super) fn chosen(points: &[Point]) -> Result<Prepared, FitError> {
    let one_sd = constant(points)?;
    let Ok(one_relative_sd) = proportional(points) else {
        return Ok(one_sd);
    };
    let repeats = Repeats::new(points)?;
    let nu = as_f64(repeats.freedom);
    let deviance = |variance: f64, log_sizes: f64| 2.0 * log_sizes + nu * libm::log(variance);
    let log_sizes = |size: &dyn Fn(usize) -> f64| -> f64 {
        let each = |(k, level): (usize, &Level)| as_f64(level.members.len() - 1) * libm::log(size(k));
        repeats.levels.iter().enumerate().map(each).sum()
    };
    let constant = deviance(repeats.pooled(points, |_| 1.0), 0.0);
    let size = |k: usize| repeats.means[k].abs();
    let proportional = deviance(repeats.pooled(points, size), log_sizes(&size));
    Ok(if proportional < constant { one_relative_sd } else { one_sd })
}

/// 1/s_i² of each level by itself: only under its own name, since few repeats make it wild.
pub(super) fn raw(points: &[Point]) -> Result<Prepared, FitError> {
    let repeats = Repeats::new(points)?;
    let mut sizes = vec![0.0; points.len()];
    for (level, mean) in repeats.levels.iter().zip(&repeats.means) {
        let first = level.members[0];
        if level.members.len() < 2 {
            let reason = "its level has no repeats".to_owned();
            return Err(FitError::BadWeight { index: first, reason });
        }
        let squares: f64 = level.members.iter().map(|i| (points[*i].y - mean) * (points[*i].y - mean)).sum();
        if squares == 0.0 {
            let reason = "the repeats of its level are identical, which means a coarse display, not perfection; \
                          weights from all repeats together would do"
                .to_owned();
            return Err(FitError::BadWeight { index: first, reason });
        }
        let sd = libm::sqrt(squares / as_f64(level.members.len() - 1));
        for index in &level.members {
            sizes[*index] = sd;
        }
    }
    let model = |_| VarianceModel::Levels(by_level(points, |members| sizes[members[0]] * sizes[members[0]]));
    Prepared::power(&sizes, 2, model, Scatter::Residuals)
}

/// σ² of a fit with weights 1/s_i²: the repeats add Σ(n_i − 1) to Σwe² whatever they are, so only the level means
/// can tell. Without levels to spare nothing can.
pub(super) fn of_means(solved: &LeastSquares, n: usize, m: usize) -> Scatter {
    let p = solved.coefficients.len();
    if m <= p {
        return Scatter::Residuals;
    }
    let of_means = (solved.residual_ss - as_f64(n - m)).max(0.0);
    Scatter::Means { variance: of_means / as_f64(m - p), degrees_of_freedom: m - p }
}
