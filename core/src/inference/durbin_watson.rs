//! Do neighbouring readings copy each other? Durbin and Watson's d in run order, with its exact p.

use super::added::dot;
use super::sphere::{MOST, whitened};
use crate::distributions::quadratic_form::ratio_moments;
use crate::distributions::{Tails, beta_lower, ratio_tails, residual_eigenvalues};
use crate::fit::Fit;

/// How p was obtained.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Method {
    /// Exact for the design (Imhof), up to 500 observations.
    Exact,
    /// A beta distribution on [0, 4] with the exact mean and variance of the design, above.
    Beta,
}

impl Method {
    /// The method's name for results.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Exact => "Durbin-Watson, run order, exact (Imhof)",
            Self::Beta => "Durbin-Watson, run order, beta approximation with exact mean and variance",
        }
    }
}

/// Durbin and Watson's statistic and what it says.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DurbinWatson {
    /// d, 0 to 4; about 2 without autocorrelation, below 2 when neighbours are alike.
    pub d: f64,
    /// Two-sided p = 2·min(P, 1 − P), P = P(D ≤ d).
    pub p: f64,
    /// One-sided p that neighbours are alike: P(D ≤ d).
    pub p_alike: f64,
    /// How both were obtained.
    pub method: Method,
}

/// The distribution of d for one design and one run order.
///
/// It depends on the standards, the weights' v, the family and the order, not on the readings (but for
/// weights that follow them): keep it while only readings change.
#[derive(Debug, Clone, PartialEq)]
pub struct DurbinWatsonReference {
    /// Positions of the observations in run order.
    order: Vec<usize>,
    shape: Distribution,
}

#[derive(Debug, Clone, PartialEq)]
enum Distribution {
    /// Eigenvalues in the residual space, ascending.
    Exact(Vec<f64>),
    /// Both parameters of the beta distribution of d/4.
    Beta(f64, f64),
}

impl DurbinWatsonReference {
    /// The reference of a fit's design.
    ///
    /// # Shapes and units
    /// `order`: one entry an observation, place in the run or time, any unit, all different. `None`
    /// without such an order (where two observations share a place, d would follow the sorting of the
    /// file), with ν < 2, and for designs in which d is the same whatever the readings.
    #[must_use]
    pub fn new(fit: &Fit, order: &[f64]) -> Option<Self> {
        let order = run_order(fit, order)?;
        if fit.degrees_of_freedom < 2 {
            return None;
        }
        let columns: Vec<Vec<f64>> =
            fit.orthonormal_columns().iter().map(|q| order.iter().map(|&i| q[i]).collect()).collect();
        let shape = if order.len() <= MOST { exact(order.len(), &columns)? } else { beta(order.len(), &columns)? };
        Some(Self { order, shape })
    }

    /// Both tails of D at `d`.
    #[must_use]
    pub fn tails(&self, d: f64) -> Tails {
        match &self.shape {
            Distribution::Exact(eigenvalues) => ratio_tails(eigenvalues, d),
            Distribution::Beta(a, b) => {
                Tails { lower: beta_lower(0.25 * d, *a, *b), upper: beta_lower(1.0 - 0.25 * d, *b, *a) }
            }
        }
    }

    const fn method(&self) -> Method {
        match self.shape {
            Distribution::Exact(_) => Method::Exact,
            Distribution::Beta(..) => Method::Beta,
        }
    }
}

/// Tests neighbours in run order for likeness.
///
/// # Formula
/// d = Σ(eᵢ₊₁ − eᵢ)²/Σeᵢ² over the whitened residuals e in run order; P = P(D ≤ d) for this design.
/// In order of x, d would be a test of the shape, which has its own; with repeats it would depend on how
/// the file was sorted.
///
/// # Shapes and units
/// Dimensionless. `None` without scatter beyond rounding, or with a reference of another size.
///
/// # Source
/// J. Durbin & G. S. Watson (1950), Biometrika 37, 409–428; (1971), Biometrika 58, 1–19; from memory.
#[must_use]
pub fn durbin_watson(fit: &Fit, reference: &DurbinWatsonReference) -> Option<DurbinWatson> {
    if reference.order.len() != fit.points.len() {
        return None;
    }
    let residuals = whitened(fit)?;
    let run: Vec<f64> = reference.order.iter().map(|&i| residuals[i]).collect();
    let d = run.windows(2).map(|w| (w[1] - w[0]) * (w[1] - w[0])).sum::<f64>() / dot(&run, &run);
    let tails = reference.tails(d);
    let p = (2.0 * tails.lower.min(tails.upper)).min(1.0);
    Some(DurbinWatson { d, p, p_alike: tails.lower, method: reference.method() })
}

/// Positions in run order, when every observation has its own place.
fn run_order(fit: &Fit, order: &[f64]) -> Option<Vec<usize>> {
    if order.len() != fit.points.len() || order.iter().any(|o| !o.is_finite()) {
        return None;
    }
    let mut places: Vec<usize> = (0..order.len()).collect();
    places.sort_by(|&a, &b| order[a].total_cmp(&order[b]));
    places.windows(2).all(|w| order[w[0]] < order[w[1]]).then_some(places)
}

/// A·v, A the tridiagonal matrix with vᵀAv = Σ(vᵢ₊₁ − vᵢ)².
fn differences(v: &[f64]) -> Vec<f64> {
    let mut out = vec![0.0; v.len()];
    for i in 1..v.len() {
        let step = v[i] - v[i - 1];
        out[i - 1] -= step;
        out[i] += step;
    }
    out
}

fn exact(n: usize, columns: &[Vec<f64>]) -> Option<Distribution> {
    // A has no negative eigenvalue; what rounding leaves below zero is zero.
    let eigenvalues: Vec<f64> = residual_eigenvalues(n, differences, columns).into_iter().map(|l| l.max(0.0)).collect();
    let (low, high) = (eigenvalues.first()?, eigenvalues.last()?);
    (high - low > 1e-10).then_some(Distribution::Exact(eigenvalues))
}

/// Beta parameters with the mean and variance of D/4.
fn beta(n: usize, columns: &[Vec<f64>]) -> Option<Distribution> {
    let images: Vec<Vec<f64>> = columns.iter().map(|q| differences(q)).collect();
    let mut trace = 2.0 * (n as f64 - 1.0);
    let mut trace2 = 6.0 * n as f64 - 8.0;
    for (q, image) in columns.iter().zip(&images) {
        trace -= dot(q, image);
        trace2 -= 2.0 * dot(image, image);
        trace2 += columns.iter().map(|other| dot(other, image) * dot(other, image)).sum::<f64>();
    }
    let (mean, variance) = ratio_moments(trace, trace2, n.checked_sub(columns.len())?);
    let (m, v) = (0.25 * mean, variance / 16.0);
    let size = m * (1.0 - m) / v - 1.0;
    (size > 0.0).then_some(Distribution::Beta(m * size, (1.0 - m) * size))
}

#[cfg(test)]
#[path = "durbin_watson_tests.rs"]
mod tests;
