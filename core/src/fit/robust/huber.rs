//! Huber's M-estimate with the scale found jointly.

use super::{Found, Method, RobustError, RobustFit, beside};
use crate::fit::nonlinear::again;
use crate::fit::{Fit, Point};
use crate::model::{Curve, Family};
use crate::numerics::Dd;
use crate::numerics::householder::fit_columns;
use crate::numerics::least_squares::{LeastSquares, ScaledWeights, SolveError};
use crate::numerics::orthogonal::fit_polynomial;
use crate::numerics::scale::as_f64;

/// Residuals beyond so many scales count less: 95 % efficiency for normal readings.
pub const HUBER_K: f64 = 1.345;

/// Rounds of reweighting before giving up; ten to sixty are usual.
const MOST_ROUNDS: usize = 4000;

/// Part of the scale by which no residual may move any more.
const SETTLED: f64 = 64.0 * f64::EPSILON;

/// Part of the largest reading below which a residual is rounding of the readings themselves.
const ROUNDING: f64 = 16.0 * f64::EPSILON;

/// Weight of what does not count, so small that nothing moves and yet its residual comes out: 2⁻¹⁰⁴.
const NEXT_TO_NOTHING: f64 = f64::EPSILON * f64::EPSILON;

/// Huber's M-estimate beside a least-squares fit of the same family with the same weights.
///
/// # Formula
///
/// With r = √w·e, β and s solve Σ ψ(r_i/s) √w_i ∂f(x_i)/∂β = 0 and Σ ψ²(r_i/s) = (N − p)·E ψ²(Z),
/// ψ(t) = max(−k, min(k, t)), k = 1.345 (Huber's proposal 2). The pair minimises one jointly convex
/// function, so there is one answer whatever the start; N − p in the scale is what makes up for the
/// leverages, without which the residuals of a short calibration are too small. Found by reweighting with
/// min(1, k s/|r|) from the least-squares fit, s solved exactly in every round, until no residual moves.
///
/// # Shapes and units
///
/// Results in the units and the order of `fit`.
///
/// # Errors
///
/// `NotFitted` for a declared function, `NothingLeft` with ν = 0, `NoScatter` when more than 60 % of the
/// observations agree exactly and the rest leaves no single curve, `Unsolvable`, `NotConverged`.
///
/// # Source
///
/// Huber, Robust Statistics (1981), 7.7 and 7.8, from memory; checked against statsmodels RLM with
/// HuberScale (tests/published/robust).
pub fn huber(fit: &Fit) -> Result<RobustFit, RobustError> {
    if fit.family == Family::Declared {
        return Err(RobustError::NotFitted);
    }
    if fit.family.fitted_in_measurand() || fit.both_axes.is_some() {
        return Err(RobustError::NotInIndications);
    }
    if fit.degrees_of_freedom == 0 {
        let (observations, coefficients) = (fit.points.len(), fit.coefficients.len());
        return Err(RobustError::NothingLeft { observations, coefficients });
    }
    let sorted = Sorted::new(fit)?;
    let start: Vec<f64> = sorted.order.iter().map(|i| fit.residuals[*i]).collect();
    let found = sorted.iterate(start, fit.degrees_of_freedom)?;
    Ok(beside(fit, sorted.restore(found)))
}

/// The observations in ascending order, so that the same readings give the same bits in any order.
struct Sorted<'a> {
    family: &'a Family,
    curve: &'a Curve,
    order: Vec<usize>,
    x: Vec<f64>,
    y: Vec<f64>,
    /// Roots of the weights 1/v of the least-squares fit.
    root: Vec<f64>,
    base: ScaledWeights,
}

impl<'a> Sorted<'a> {
    fn new(fit: &'a Fit) -> Result<Self, RobustError> {
        let key = |p: &Point| (p.x + 0.0, p.y + 0.0);
        let mut order: Vec<usize> = (0..fit.points.len()).collect();
        order.sort_by(|a, b| {
            let (a, b) = (key(&fit.points[*a]), key(&fit.points[*b]));
            a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1))
        });
        let v: Vec<f64> = order.iter().map(|i| fit.variance_ratio[*i]).collect();
        Ok(Self {
            family: &fit.family,
            curve: &fit.curve,
            x: order.iter().map(|i| fit.points[*i].x).collect(),
            y: order.iter().map(|i| fit.points[*i].y).collect(),
            root: v.iter().map(|v| 1.0 / libm::sqrt(*v)).collect(),
            base: ScaledWeights::inverse_power(&v, 1).map_err(|_: SolveError| RobustError::Unsolvable)?,
            order,
        })
    }

    /// Least squares with the given parts of the weights.
    fn solve(&self, keep: &[usize], parts: &[f64]) -> Result<LeastSquares, SolveError> {
        let x: Vec<f64> = keep.iter().map(|i| self.x[*i]).collect();
        let y: Vec<f64> = keep.iter().map(|i| self.y[*i]).collect();
        let values = keep.iter().map(|i| self.base.values[*i] * parts[*i]).collect();
        let weights = ScaledWeights { values, exponent: self.base.exponent };
        match self.family {
            Family::Declared => Err(SolveError::Singular),
            Family::Polynomial(degree) => fit_polynomial(&x, &y, &weights, usize::from(*degree)),
            Family::Log => {
                let logarithms = x.iter().map(|x| Dd::from(*x).ln()).collect();
                fit_columns(&[vec![Dd::ONE; x.len()], logarithms], &y, &weights)
            }
            Family::LineThroughZero | Family::OnePoint => {
                fit_columns(&[x.iter().map(|x| Dd::from(*x)).collect()], &y, &weights)
            }
            _ => match self.curve {
                Curve::Shape(shape) => again(shape, &x, &y, &weights),
                Curve::Polynomial(_) | Curve::Centred(_) | Curve::Log(_) | Curve::Formula(_) => {
                    Err(SolveError::Singular)
                }
            },
        }
    }

    fn iterate(&self, mut residuals: Vec<f64>, nu: usize) -> Result<Found, RobustError> {
        let everyone: Vec<usize> = (0..self.x.len()).collect();
        let target = as_f64(nu) * expected_square();
        let mut before = f64::INFINITY;
        for _ in 0..MOST_ROUNDS {
            let sizes = self.sizes(&residuals);
            let scale = joint_scale(&sizes, target);
            if scale <= self.rounding() {
                return self.exact(&sizes);
            }
            let parts: Vec<f64> = sizes.iter().map(|r| (HUBER_K * scale / r).min(1.0)).collect();
            let solved = self.solve(&everyone, &parts).map_err(|_: SolveError| RobustError::Unsolvable)?;
            let steps = solved.residuals.iter().zip(&residuals).zip(&self.root);
            let moved = steps.map(|((new, old), root)| (new - old).abs() * root).fold(0.0, f64::max);
            residuals = solved.residuals;
            if moved <= SETTLED * scale && (scale - before).abs() <= SETTLED * scale {
                return Ok(Found {
                    method: Method::Huber,
                    coefficients: solved.coefficients,
                    residuals,
                    weights: parts,
                    scale: Some(scale),
                });
            }
            before = scale;
        }
        Err(RobustError::NotConverged { iterations: MOST_ROUNDS })
    }

    /// |r| = √w·|e|.
    fn sizes(&self, residuals: &[f64]) -> Vec<f64> {
        residuals.iter().zip(&self.root).map(|(e, root)| e.abs() * root).collect()
    }

    /// What the rounding of the readings can make of a scaled residual.
    fn rounding(&self) -> f64 {
        ROUNDING * self.sizes(&self.y).into_iter().fold(0.0, f64::max)
    }

    /// The limit of a vanishing scale: most observations agree exactly, and only these count.
    fn exact(&self, sizes: &[f64]) -> Result<Found, RobustError> {
        let limit = 4.0 * self.rounding();
        let keep: Vec<usize> = (0..sizes.len()).filter(|i| sizes[*i] <= limit).collect();
        let none = |_: SolveError| RobustError::NoScatter { exact: keep.len(), observations: sizes.len() };
        self.solve(&keep, &vec![1.0; sizes.len()]).map_err(none)?;
        let part = |i: usize| if keep.contains(&i) { 1.0 } else { NEXT_TO_NOTHING };
        let parts: Vec<f64> = (0..sizes.len()).map(part).collect();
        let everyone: Vec<usize> = (0..sizes.len()).collect();
        let solved = self.solve(&everyone, &parts).map_err(|_: SolveError| RobustError::Unsolvable)?;
        Ok(Found {
            method: Method::Huber,
            coefficients: solved.coefficients,
            residuals: solved.residuals,
            weights: parts.into_iter().map(libm::floor).collect(),
            scale: Some(0.0),
        })
    }

    /// Back into the order of the fit.
    fn restore(&self, found: Found) -> Found {
        let back = |sorted: &[f64]| {
            let mut out = vec![0.0; sorted.len()];
            for (value, place) in sorted.iter().zip(&self.order) {
                out[*place] = *value;
            }
            out
        };
        Found { residuals: back(&found.residuals), weights: back(&found.weights), ..found }
    }
}

/// E ψ²(Z) for a standard normal Z.
fn expected_square() -> f64 {
    let k = HUBER_K;
    let tail = 0.5 * libm::erfc(k * std::f64::consts::FRAC_1_SQRT_2);
    let density = libm::exp(-0.5 * k * k) / libm::sqrt(std::f64::consts::TAU);
    (1.0 - 2.0 * tail - 2.0 * k * density) + 2.0 * k * k * tail
}

/// The s with Σ min(r²/s², k²) = `target`: with the j largest cut off, s² = Σ r²/(target − j·k²) over the
/// others. Zero when too few residuals differ from zero.
fn joint_scale(sizes: &[f64], target: f64) -> f64 {
    let mut ascending = sizes.to_vec();
    ascending.sort_by(f64::total_cmp);
    let top = ascending.last().copied().unwrap_or(0.0);
    if top == 0.0 {
        return 0.0;
    }
    let mut sums = Vec::with_capacity(ascending.len());
    let mut sum = 0.0;
    for r in &ascending {
        sum += (r / top) * (r / top);
        sums.push(sum);
    }
    for cut in 0..ascending.len() {
        let left = target - as_f64(cut) * HUBER_K * HUBER_K;
        if left <= 0.0 {
            return 0.0;
        }
        let last = ascending.len() - 1 - cut;
        let scale = top * libm::sqrt(sums[last] / left);
        if ascending[last] <= HUBER_K * scale {
            return scale;
        }
    }
    0.0
}
