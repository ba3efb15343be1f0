//! How the size of the scatter is known: from the residuals, from repeats, or beforehand.

use super::Fit;
use crate::distributions::t_quantile;
use crate::numerics::scale::as_f64;

/// What stands behind the scatter σ of one observation where v = 1.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Scatter {
    /// σ² is estimated by s² = Σwe²/ν with ν = N − p: relative weights.
    Residuals,
    /// σ² comes from all repeats together, ν = Σ(n_i − 1): the residuals test the shape and set nothing.
    Repeats {
        /// Pooled variance where v = 1.
        variance: f64,
        /// Σ(n_i − 1).
        degrees_of_freedom: usize,
    },
    /// σ² comes from the level means alone: weights 1/s_i² make the repeats within each level say nothing.
    Means {
        /// Σn_i w_i(ȳ_i − f̂)²/(m − p).
        variance: f64,
        /// m − p.
        degrees_of_freedom: usize,
    },
    /// The variances v are the true ones, σ = 1: absolute weights 1/u².
    Known,
}

impl Scatter {
    /// The word for the kind of weights: relative, pooled, absolute.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Residuals | Self::Means { .. } => "relative",
            Self::Repeats { .. } => "pooled",
            Self::Known => "absolute",
        }
    }
}

impl Fit {
    /// σ: the SD of one observation where v = 1; `None` while it cannot be known (ν = 0, relative).
    ///
    /// # Formula
    ///
    /// s, the pooled SD of the repeats, or 1, by [`Scatter`].
    ///
    /// # Shapes and units
    ///
    /// Output unit divided by the root of the unit of v.
    #[must_use]
    pub fn scatter_sd(&self) -> Option<f64> {
        match self.scatter {
            Scatter::Residuals => self.residual_sd,
            Scatter::Repeats { variance, .. } | Scatter::Means { variance, .. } => Some(libm::sqrt(variance)),
            Scatter::Known => Some(1.0),
        }
    }

    /// Degrees of freedom of [`Fit::scatter_sd`]; infinite when it is known.
    #[must_use]
    pub fn scatter_freedom(&self) -> f64 {
        match self.scatter {
            Scatter::Residuals => as_f64(self.degrees_of_freedom),
            Scatter::Repeats { degrees_of_freedom, .. } | Scatter::Means { degrees_of_freedom, .. } => {
                as_f64(degrees_of_freedom)
            }
            Scatter::Known => f64::INFINITY,
        }
    }

    /// The two-sided coverage factor at a level: Student's t with [`Fit::scatter_freedom`], normal when known.
    #[must_use]
    pub fn coverage_factor(&self, level: f64) -> f64 {
        two_sided(level, self.scatter_freedom())
    }

    /// Whether the residuals are minimised in the measurand: v then carries f̂′² to the output unit.
    pub(super) fn measurand_scatter(&self) -> bool {
        self.family.fitted_in_measurand() && self.scatter != Scatter::Known && self.both_axes.is_none()
    }

    /// χ² = Σ w e² of absolute weights (in both axes: the least sum of the weighted squares in both) with its N − p degrees of freedom; `None` for other kinds.
    #[must_use]
    pub fn chi_square(&self) -> Option<(f64, usize)> {
        if let Some(both) = &self.both_axes {
            return Some((both.distance().chi_square, self.degrees_of_freedom));
        }
        (self.scatter == Scatter::Known).then_some((self.residual_ss, self.degrees_of_freedom))
    }
}

/// t_{(1+level)/2, ν}; the normal quantile for infinite ν.
#[must_use]
pub fn two_sided(level: f64, nu: f64) -> f64 {
    t_quantile(0.5 * (1.0 + level), nu)
}
