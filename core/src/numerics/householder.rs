//! Linear least squares by Householder reflections, in double-double, for any regressors.

use super::dd::Dd;
use super::householder_factor::Factor;
use super::least_squares::{LeastSquares, Raw, ScaledWeights, SolveError, settle_residuals};
use super::scale::{as_f64, exponent_of};

/// Part of a column that must be left beside the columns before it: half of the 106 bits.
pub(super) const WHAT_MUST_REMAIN: f64 = 1.0 / 9_007_199_254_740_992.0;

/// Weighted least squares for columns of regressors, e.g. 1 and ln x.
///
/// # Formula
///
/// √W·X = QR by Householder reflections; R b = (Qᵀ√W y)₁…p; (XᵀWX)⁻¹ = R⁻¹R⁻ᵀ.
///
/// # Shapes and units
///
/// `columns`: p columns of length n ≥ p, finite; `y` and `weights` of length n, weights positive.
/// Regressors are double-double because ln x rounded to a double would already cost the last digits.
///
/// # Errors
///
/// [`SolveError::Singular`] when the columns depend on each other, [`SolveError::OutOfRange`] when a
/// result does not fit into a double.
///
/// # Source
///
/// Golub and Van Loan, Matrix Computations, 5.2 and 5.3. From memory.
pub fn fit_columns(columns: &[Vec<Dd>], y: &[f64], weights: &ScaledWeights) -> Result<LeastSquares, SolveError> {
    let y: Vec<Dd> = y.iter().map(|v| Dd::from(*v)).collect();
    fit_columns_exactly(columns, &y, weights)
}

/// As [`fit_columns`] for y that is itself double-double, e.g. the logarithm of a reading.
///
/// # Formula
///
/// As for [`fit_columns`].
///
/// # Shapes and units
///
/// As for [`fit_columns`].
///
/// # Errors
///
/// As for [`fit_columns`].
///
/// # Source
///
/// As for [`fit_columns`].
pub fn fit_columns_exactly(columns: &[Vec<Dd>], y: &[Dd], weights: &ScaledWeights) -> Result<LeastSquares, SolveError> {
    let (n, p) = (y.len(), columns.len());
    let fits = columns.iter().all(|c| c.len() == n) && weights.values.len() == n;
    if p == 0 || n < p || !fits {
        return Err(SolveError::Singular);
    }
    let w = &weights.values;
    let roots: Vec<Dd> = w.iter().map(|w| w.sqrt()).collect();
    let (y, y_exponent) = scale_column(y);
    let (scaled, exponents): (Vec<_>, Vec<_>) = columns.iter().map(|c| scale_column(c)).unzip();
    let factor = regular_factor(&scaled, &roots)?;
    let right: Vec<Dd> = roots.iter().zip(&y).map(|(r, v)| *r * *v).collect();
    let coefficients = factor.back_substitute(&factor.transform(right));
    let mut residuals = residuals(&scaled, &y, &coefficients);
    let residual_ss = settle_residuals(&mut residuals, &y, w);
    let inverse = factor.inverse_of_normal();
    Raw {
        coefficients,
        residuals,
        residual_ss,
        y_exponent,
        weight_exponent: weights.exponent,
        orthonormal: factor.orthonormal(),
        condition: condition(&scaled, w, &inverse),
        basis: factor.basis(&exponents, weights.exponent),
        column_exponents: exponents,
        inverse,
    }
    .round()
}

/// A column divided by the power of two that brings its largest magnitude into [½, 1), and that power.
pub(super) fn scale_column(column: &[Dd]) -> (Vec<Dd>, i32) {
    let exponent = exponent_of(column.iter().fold(0.0, |top: f64, v| top.max(v.to_f64().abs())));
    (column.iter().map(|v| v.times_power_of_two(-exponent)).collect(), exponent)
}

/// √W·X = QR for columns that can be told apart.
pub(super) fn regular_factor(columns: &[Vec<Dd>], roots: &[Dd]) -> Result<Factor<Dd>, SolveError> {
    let whitened = columns.iter().map(|c| c.iter().zip(roots).map(|(v, r)| *v * *r).collect()).collect();
    let factor = Factor::new(whitened);
    if factor.is_regular(WHAT_MUST_REMAIN) { Ok(factor) } else { Err(SolveError::Singular) }
}

/// y − X b.
fn residuals(columns: &[Vec<Dd>], y: &[Dd], coefficients: &[Dd]) -> Vec<Dd> {
    let fitted = |i: usize| -> Dd { columns.iter().zip(coefficients).map(|(c, b)| c[i] * *b).sum() };
    y.iter().enumerate().map(|(i, v)| *v - fitted(i)).collect()
}

/// ‖X‖_F·‖X⁺‖_F with the columns of √W·X brought to length one.
pub(super) fn condition(columns: &[Vec<Dd>], w: &[Dd], inverse: &[Vec<Dd>]) -> f64 {
    let square = |c: &Vec<Dd>| -> f64 { c.iter().zip(w).map(|(v, w)| w.to_f64() * v.to_f64() * v.to_f64()).sum() };
    let scaled = columns.iter().enumerate();
    let sum: f64 = scaled.map(|(j, c)| square(c) * inverse[j][j].to_f64()).sum();
    libm::sqrt(as_f64(columns.len()) * sum)
}
