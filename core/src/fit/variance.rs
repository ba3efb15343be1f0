//! What the weights say about the variance of an observation, at the points and anywhere else.

use super::{Fit, FitError, Point, Scatter, Weights, repeats};
use crate::numerics::least_squares::{ScaledWeights, SolveError};

/// The relative variance v of one observation as a function of the place.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum VarianceModel {
    /// v = 1.
    Constant,
    /// v = x^power, never below the floor.
    Input {
        /// 1 or 2.
        power: i32,
        /// Smallest v of the fit.
        floor: f64,
    },
    /// v = |f̂(x)|^power, never below the floor.
    Output {
        /// Any power from 0 to 4.
        power: f64,
        /// v is divided by this, so that it is about 1.
        unit: f64,
        /// Smallest v of the fit.
        floor: f64,
    },
    /// Given at the levels, straight between them, held beyond: (x, v), ascending.
    Levels(Vec<(f64, f64)>),
}

/// Everything that estimation needs to know about the weights.
pub(super) struct Prepared {
    /// w in double-double.
    pub scaled: ScaledWeights,
    /// v = 1/w at every point.
    pub ratio: Vec<f64>,
    /// v elsewhere.
    pub model: VarianceModel,
    /// How σ is known.
    pub scatter: Scatter,
}

impl Prepared {
    /// Equal weights.
    pub(super) fn equal(n: usize) -> Self {
        let scaled = ScaledWeights::equal(n);
        Self { scaled, ratio: vec![1.0; n], model: VarianceModel::Constant, scatter: Scatter::Residuals }
    }

    /// v = size^power at every point, with the model that gives v elsewhere.
    pub(super) fn power(
        sizes: &[f64],
        power: i32,
        model: impl FnOnce(f64) -> VarianceModel,
        scatter: Scatter,
    ) -> Result<Self, FitError> {
        let scaled = ScaledWeights::inverse_power(sizes, power).map_err(|_: SolveError| FitError::OutOfRange)?;
        let ratio: Vec<f64> = sizes.iter().map(|s| if power == 2 { s * s } else { *s }).collect();
        let held = |v: &f64| v.is_finite() && *v >= f64::MIN_POSITIVE;
        if !ratio.iter().all(held) {
            return Err(FitError::OutOfRange);
        }
        let floor = ratio.iter().copied().fold(f64::INFINITY, f64::min);
        Ok(Self { scaled, model: model(floor), ratio, scatter })
    }
}

/// Weights that follow from the points, the repeats and the typed uncertainties alone.
pub(super) fn prepare(points: &[Point], weights: Weights, typed: Option<&[f64]>) -> Result<Prepared, FitError> {
    let scatter = Scatter::Residuals;
    match weights {
        // `Fitted` starts from equal weights; the estimator then follows the curve.
        Weights::Equal | Weights::Fitted => Ok(Prepared::equal(points.len())),
        Weights::InverseX | Weights::InverseX2 => {
            let power = if weights == Weights::InverseX { 1 } else { 2 };
            Prepared::power(&input_sizes(points)?, power, |floor| VarianceModel::Input { power, floor }, scatter)
        }
        Weights::InverseY | Weights::InverseY2 => {
            let power = if weights == Weights::InverseY { 1 } else { 2 };
            let sizes = points.iter().enumerate().map(|(i, p)| indication_size(i, p.y, power));
            let sizes = sizes.collect::<Result<Vec<_>, _>>()?;
            let model = |floor| VarianceModel::Output { power: f64::from(power), unit: 1.0, floor };
            Prepared::power(&sizes, power, model, scatter)
        }
        Weights::Replicates => repeats::chosen(points),
        Weights::ReplicatesConstant => repeats::constant(points),
        Weights::ReplicatesProportional => repeats::proportional(points),
        Weights::Raw => repeats::raw(points),
        Weights::Typed => typed_weights(points, typed),
    }
}

/// Absolute weights 1/u².
fn typed_weights(points: &[Point], typed: Option<&[f64]>) -> Result<Prepared, FitError> {
    let u = typed.filter(|u| u.len() == points.len()).ok_or(FitError::NoUncertainty)?;
    let usable = |u: f64| u.is_finite() && u > 0.0;
    if let Some(index) = u.iter().position(|u| !usable(*u)) {
        let reason = if u[index].is_nan() {
            "it has no uncertainty of its own".to_owned()
        } else {
            format!("its uncertainty is {}; a positive number would do", u[index])
        };
        return Err(FitError::BadWeight { index, reason });
    }
    let model = |_| VarianceModel::Levels(by_level(points, |members| mean_square(members, u)));
    Prepared::power(u, 2, model, Scatter::Known)
}

fn mean_square(members: &[usize], u: &[f64]) -> f64 {
    members.iter().map(|i| u[*i] * u[*i]).sum::<f64>() / members.len() as f64
}

/// (x, v) of every level, ascending.
pub(super) fn by_level(points: &[Point], v: impl Fn(&[usize]) -> f64) -> Vec<(f64, f64)> {
    super::levels::levels(points).iter().map(|level| (level.x, v(&level.members))).collect()
}

/// The standards as sizes, floored.
///
/// A standard of zero takes the place of the smallest positive standard, since no reading is without
/// scatter there. Without any positive standard there is nothing to take.
fn input_sizes(points: &[Point]) -> Result<Vec<f64>, FitError> {
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
pub(super) fn indication_size(index: usize, y: f64, power: i32) -> Result<f64, FitError> {
    let reason = if y == 0.0 {
        "the indication is zero"
    } else if y < 0.0 && power == 1 {
        "the indication is negative"
    } else {
        return Ok(y.abs());
    };
    Err(FitError::BadWeight { index, reason: reason.to_owned() })
}

impl Fit {
    /// Relative variance v(x) of one new observation at x: Var = σ²·v(x), σ as [`Fit::scatter_sd`].
    ///
    /// # Formula
    ///
    /// 1, x, x², f̂(x), f̂(x)², a fitted power of f̂, or given at the levels and straight between them, by
    /// the kind of weights, never below the smallest v of the fit. For a family fitted in the measurand
    /// (thermistors) times f̂′(x)², which brings it to the output unit.
    ///
    /// # Shapes and units
    ///
    /// Unit of the variance ratio. Not a number outside the domain of the curve where the weights follow
    /// the indication.
    #[must_use]
    pub fn variance_at(&self, x: f64) -> f64 {
        let own = match &self.variance_model {
            VarianceModel::Constant => 1.0,
            VarianceModel::Input { power, floor } => power_of(x.max(0.0), *power).max(*floor),
            VarianceModel::Output { power, unit, floor } => {
                let value = self.curve.value(x);
                // y has no variance y below zero, while y² has.
                let negative = value < 0.0 && self.weights == Weights::InverseY;
                let v = if negative { 0.0 } else { libm::pow(value.abs(), *power) / unit };
                if v.is_nan() { v } else { v.max(*floor) }
            }
            VarianceModel::Levels(levels) => between(levels, x),
        };
        if self.measurand_scatter() {
            let slope = self.curve.derivative(x);
            return own * slope * slope;
        }
        own
    }
}

fn power_of(x: f64, power: i32) -> f64 {
    if power == 2 { x * x } else { x }
}

/// Straight between the levels, held beyond them.
fn between(levels: &[(f64, f64)], x: f64) -> f64 {
    let above = levels.partition_point(|(level, _)| *level <= x);
    match (above.checked_sub(1).map(|i| levels[i]), levels.get(above)) {
        (Some((a, va)), Some(&(b, vb))) => va + (vb - va) * (x - a) / (b - a),
        (Some((_, v)), None) | (None, Some(&(_, v))) => v,
        (None, None) => f64::NAN,
    }
}
