//! What every least-squares scheme hands back: each figure rounded once from double-double.

use super::dd::Dd;
use super::scale::{as_f64, exponent_of, round_scaled};

/// Why a system could not be solved.
#[derive(Debug, Clone, Copy, PartialEq, Eq, thiserror::Error)]
pub enum SolveError {
    /// The columns cannot be told apart, not even in double-double.
    #[error("the columns of the design depend on each other")]
    Singular,
    /// A result is too large or too small for a double.
    #[error("a result is too large or too small for a double")]
    OutOfRange,
}

/// Weights as `values` · 2^`exponent`, the exponent even so that its root is a power of two as well.
#[derive(Debug, Clone, PartialEq)]
pub struct ScaledWeights {
    /// The scaled weights, positive.
    pub values: Vec<Dd>,
    /// The common power of two.
    pub exponent: i32,
}

impl ScaledWeights {
    /// n weights of one.
    #[must_use]
    pub fn equal(n: usize) -> Self {
        Self { values: vec![Dd::ONE; n], exponent: 0 }
    }

    /// 1/`value`^`power` of positive finite numbers, for power 1 or 2.
    ///
    /// # Errors
    ///
    /// [`SolveError::OutOfRange`] when the weights span more than 2⁴⁰⁰: the small ones would not count.
    pub fn inverse_power(values: &[f64], power: i32) -> Result<Self, SolveError> {
        let smallest = values.iter().fold(f64::INFINITY, |low, v| low.min(*v));
        let exponent = exponent_of(smallest) / 2 * 2;
        let scaled = |v: &f64| Dd::from(libm::scalbn(*v, -exponent));
        let span = values.iter().fold(0.0, |top: f64, v| top.max(scaled(v).to_f64()));
        if exponent_of(span) * power > 400 {
            return Err(SolveError::OutOfRange);
        }
        let weight = |v: Dd| Dd::ONE / if power == 2 { v.square() } else { v };
        Ok(Self { values: values.iter().map(|v| weight(scaled(v))).collect(), exponent: -exponent * power })
    }
}

/// A solved weighted linear least-squares problem, n observations and p coefficients.
#[derive(Debug, Clone, PartialEq)]
pub struct LeastSquares {
    /// The p coefficients, in the units of the data handed in.
    pub coefficients: Vec<f64>,
    /// Their standard uncertainties s·√diag(XᵀWX)⁻¹; empty when n = p.
    pub uncertainties: Vec<f64>,
    /// (XᵀWX)⁻¹, p×p.
    pub unit_covariance: Vec<Vec<f64>>,
    /// s²(XᵀWX)⁻¹, p×p; empty when n = p.
    pub covariance: Vec<Vec<f64>>,
    /// y − ŷ, unweighted.
    pub residuals: Vec<f64>,
    /// Σ w (y − ŷ)².
    pub residual_ss: f64,
    /// √(Σ w (y − ŷ)²/(n − p)); `None` when n = p.
    pub residual_sd: Option<f64>,
    /// p orthonormal columns of length n that span the columns of √W·X.
    pub orthonormal: Vec<Vec<f64>>,
    /// Condition of √W·X with its columns brought to length one (Frobenius); 1 at best, times p.
    pub condition: f64,
    /// How to reach the orthonormal columns at any other place.
    pub basis: Basis,
}

/// The orthonormal basis as functions of x (or of the regressors), in plain doubles.
///
/// With z(x) from [`Basis::at`] the variance of the fitted value is s²·Σ z²: a sum of squares, which
/// cannot cancel as gᵀ·Cov·g in the powers of x does.
#[derive(Debug, Clone, PartialEq)]
pub enum Basis {
    /// Orthogonal polynomials of t = x·2^−exponent − centre.
    Orthogonal {
        /// Centre, in scaled units.
        centre: f64,
        /// Power of two that x is divided by.
        exponent: i32,
        /// Recurrence coefficients α₀ … α_{p−2}.
        alpha: Vec<f64>,
        /// Recurrence coefficients β₁ … β_{p−2} (β₀ = 0 is kept for the index).
        beta: Vec<f64>,
        /// 1/√γ of every polynomial.
        inverse_norm: Vec<f64>,
    },
    /// The upper triangle R of √W·X = QR, row by row, for regressors g(x): z = R⁻ᵀ g.
    Triangular(Vec<Vec<f64>>),
}

impl Basis {
    /// z(x) for an orthogonal basis; for a triangular one give the regressors to [`Basis::at_regressors`].
    #[must_use]
    pub fn at(&self, x: f64) -> Vec<f64> {
        self.orthogonal_at(x).into_iter().map(|(z, _)| z).collect()
    }

    /// dz/dx for an orthogonal basis.
    #[must_use]
    pub fn slope_at(&self, x: f64) -> Vec<f64> {
        self.orthogonal_at(x).into_iter().map(|(_, d)| d).collect()
    }

    /// z from regressors g (or dz/dx from dg/dx, the map being linear), by forward substitution.
    #[must_use]
    pub fn at_regressors(&self, regressors: &[f64]) -> Vec<f64> {
        let Self::Triangular(r) = self else {
            return Vec::new();
        };
        let mut z: Vec<f64> = Vec::with_capacity(r.len());
        for (k, g) in regressors.iter().enumerate() {
            let known: f64 = z.iter().enumerate().map(|(i, z_i)| r[i][k] * z_i).sum();
            z.push((g - known) / r[k][k]);
        }
        z
    }

    /// Value and derivative of every normed polynomial.
    fn orthogonal_at(&self, x: f64) -> Vec<(f64, f64)> {
        let Self::Orthogonal { centre, exponent, alpha, beta, inverse_norm } = self else {
            return Vec::new();
        };
        let t = libm::scalbn(x, -exponent) - centre;
        let (mut before, mut now) = ((0.0, 0.0), (1.0, 0.0));
        let mut out = Vec::with_capacity(inverse_norm.len());
        for (k, norm) in inverse_norm.iter().enumerate() {
            out.push((now.0 * norm, libm::scalbn(now.1 * norm, -exponent)));
            if k < alpha.len() {
                let next =
                    ((t - alpha[k]) * now.0 - beta[k] * before.0, now.0 + (t - alpha[k]) * now.1 - beta[k] * before.1);
                (before, now) = (now, next);
            }
        }
        out
    }
}

/// A solution still in double-double and in scaled units; [`Raw::round`] ends it.
pub(super) struct Raw {
    /// Coefficients; user's unit = · 2^(y_exponent − column_exponent).
    pub coefficients: Vec<Dd>,
    /// (XᵀWX)⁻¹ in scaled units.
    pub inverse: Vec<Vec<Dd>>,
    /// Residuals; user's unit = · 2^y_exponent.
    pub residuals: Vec<Dd>,
    /// Σ w e² in scaled units.
    pub residual_ss: Dd,
    /// Power of two of each column: user's column = scaled · 2^e.
    pub column_exponents: Vec<i32>,
    /// Power of two of y.
    pub y_exponent: i32,
    /// Power of two of the weights (even): user's weight = scaled · 2^e.
    pub weight_exponent: i32,
    /// Orthonormal columns.
    pub orthonormal: Vec<Vec<f64>>,
    /// Condition.
    pub condition: f64,
    /// Basis in user's units.
    pub basis: Basis,
}

impl Raw {
    /// Back to the user's units, each figure rounded once.
    pub(super) fn round(self) -> Result<LeastSquares, SolveError> {
        let n = self.residuals.len();
        let p = self.coefficients.len();
        let fit = |value, exponent| round_scaled(value, exponent).ok_or(SolveError::OutOfRange);
        let (y_exp, w_exp) = (self.y_exponent, self.weight_exponent);
        let coefficients = (0..p)
            .map(|j| fit(self.coefficients[j], y_exp - self.column_exponents[j]))
            .collect::<Result<Vec<_>, _>>()?;
        let residual_ss = fit(self.residual_ss, 2 * y_exp + w_exp)?;
        let variance = (n > p).then(|| self.residual_ss / Dd::from(as_f64(n - p)));
        let residual_sd = variance.map(|v| fit(v.sqrt(), y_exp + w_exp / 2)).transpose()?;
        let unit_covariance = self.matrix(Dd::ONE, -w_exp)?;
        let (mut covariance, mut uncertainties) = (Vec::new(), Vec::new());
        if let Some(v) = variance {
            covariance = self.matrix(v, 2 * y_exp)?;
            uncertainties = (0..p)
                .map(|j| {
                    let sd = (v * self.inverse[j][j]).sqrt();
                    fit(sd, y_exp - self.column_exponents[j])
                })
                .collect::<Result<Vec<_>, _>>()?;
        }
        let residuals = self.residuals.iter().map(|e| libm::scalbn(e.to_f64(), y_exp)).collect();
        Ok(LeastSquares {
            coefficients,
            uncertainties,
            unit_covariance,
            covariance,
            residuals,
            residual_ss,
            residual_sd,
            orthonormal: self.orthonormal,
            condition: self.condition,
            basis: self.basis,
        })
    }

    /// `factor`·(XᵀWX)⁻¹ in the user's units, apart from the given common power of two.
    fn matrix(&self, factor: Dd, exponent: i32) -> Result<Vec<Vec<f64>>, SolveError> {
        let p = self.inverse.len();
        let mut out = vec![vec![0.0; p]; p];
        for (i, row) in out.iter_mut().enumerate() {
            for (j, cell) in row.iter_mut().enumerate() {
                let columns = self.column_exponents[i] + self.column_exponents[j];
                *cell = round_scaled(factor * self.inverse[i][j], exponent - columns).ok_or(SolveError::OutOfRange)?;
            }
        }
        Ok(out)
    }
}

/// Residuals below this part of ‖√W y‖ are rounding of the double-double arithmetic: the fit is exact.
pub(super) const EXACT: f64 = 1e-26;

/// Sets the residuals of an exact fit to zero and returns Σ w e².
pub(super) fn settle_residuals(residuals: &mut [Dd], y: &[Dd], weights: &[Dd]) -> Dd {
    let weighted = |e: Dd, w: Dd| w * e.square();
    let residual_ss: Dd = residuals.iter().zip(weights).map(|(e, w)| weighted(*e, *w)).sum();
    let total: Dd = y.iter().zip(weights).map(|(v, w)| weighted(*v, *w)).sum();
    if residual_ss.to_f64() > total.to_f64() * (EXACT * EXACT) {
        return residual_ss;
    }
    residuals.fill(Dd::ZERO);
    Dd::ZERO
}
