//! What the weights say about the variance of an observation, at the points and anywhere else.

use super::{Fit, FitError, Point, Weights};
use crate::numerics::least_squares::{ScaledWeights, SolveError};

impl Weights {
    /// The power of x or y the variance is proportional to: 0, 1 or 2.
    const fn power(self) -> i32 {
        match self {
            Self::Equal => 0,
            Self::InverseX | Self::InverseY => 1,
            Self::InverseX2 | Self::InverseY2 => 2,
        }
    }

    /// Whether the variance follows the indication instead of the standard.
    const fn follow_indication(self) -> bool {
        matches!(self, Self::InverseY | Self::InverseY2)
    }

    /// Relative variance for a size (a standard or an indication): 1, size or size².
    fn relative_variance(self, size: f64) -> f64 {
        match self.power() {
            0 => 1.0,
            1 => size,
            _ => size * size,
        }
    }
}

/// The size whose first or second power is the variance, for every point: x or y, floored.
///
/// A standard of zero takes the place of the smallest positive standard, since no reading is without
/// scatter there. Without any positive standard there is nothing to take.
fn sizes(points: &[Point], weights: Weights) -> Result<Vec<f64>, FitError> {
    if weights.follow_indication() {
        return points.iter().enumerate().map(|(i, p)| indication_size(i, p.y, weights)).collect();
    }
    let positive = points.iter().map(|p| p.x).filter(|x| *x > 0.0);
    let floor = positive.fold(f64::INFINITY, f64::min);
    let bad = |index: usize, reason: &str| FitError::BadWeight { index, reason: reason.to_owned() };
    let size = |(index, point): (usize, &Point)| {
        if point.x < 0.0 {
            Err(bad(index, "the standard is negative"))
        } else if floor.is_infinite() {
            Err(bad(index, "no standard is above zero"))
        } else {
            Ok(point.x.max(floor))
        }
    };
    points.iter().enumerate().map(size).collect()
}

/// The size of one indication; y² exists for negative y too.
fn indication_size(index: usize, y: f64, weights: Weights) -> Result<f64, FitError> {
    let reason = if y == 0.0 {
        "the indication is zero"
    } else if y < 0.0 && weights == Weights::InverseY {
        "the indication is negative"
    } else {
        return Ok(y.abs());
    };
    Err(FitError::BadWeight { index, reason: reason.to_owned() })
}

/// The weights in double-double, and the relative variances v as plain doubles.
pub(super) fn prepare(points: &[Point], weights: Weights) -> Result<(ScaledWeights, Vec<f64>), FitError> {
    if weights == Weights::Equal {
        return Ok((ScaledWeights::equal(points.len()), vec![1.0; points.len()]));
    }
    let sizes = sizes(points, weights)?;
    let scaled = ScaledWeights::inverse_power(&sizes, weights.power()).map_err(|_: SolveError| FitError::OutOfRange)?;
    let variances: Vec<f64> = sizes.iter().map(|s| weights.relative_variance(*s)).collect();
    let held = |v: &f64| v.is_finite() && *v >= f64::MIN_POSITIVE;
    if variances.iter().all(held) { Ok((scaled, variances)) } else { Err(FitError::OutOfRange) }
}

impl Fit {
    /// Relative variance v(x) of one new observation at x: Var = s²·v(x).
    ///
    /// # Formula
    ///
    /// 1, x, x², f̂(x) or f̂(x)² by the kind of weights, never below the smallest v of the fit.
    ///
    /// # Shapes and units
    ///
    /// Unit of the variance ratio: 1, input or output unit, or its square. Not a number outside the domain
    /// of the curve where the weights follow the indication.
    #[must_use]
    pub fn variance_at(&self, x: f64) -> f64 {
        if self.weights == Weights::Equal {
            return 1.0;
        }
        let size = match self.weights {
            Weights::InverseY => self.curve.value(x),
            Weights::InverseY2 => self.curve.value(x).abs(),
            Weights::Equal | Weights::InverseX | Weights::InverseX2 => x.max(0.0),
        };
        if size.is_nan() {
            return f64::NAN;
        }
        let floor = self.variance_ratio.iter().copied().fold(f64::INFINITY, f64::min);
        self.weights.relative_variance(size.max(0.0)).max(floor)
    }
}
