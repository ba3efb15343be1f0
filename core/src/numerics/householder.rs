//! Linear least squares by Householder reflections, in double-double, for any regressors.

use super::dd::Dd;
use super::least_squares::{Basis, LeastSquares, Raw, ScaledWeights, SolveError, settle_residuals};
use super::scale::{Scaled, as_f64, exponent_of};

/// Part of a column that must be left beside the columns before it: half of the 106 bits.
const WHAT_MUST_REMAIN: f64 = 1.0 / 9_007_199_254_740_992.0;

/// Reflections stored column by column, and the triangle they leave.
struct Factor {
    /// p columns of length n; below and on the diagonal the reflection vectors, above it R.
    columns: Vec<Vec<Dd>>,
    /// Diagonal of R.
    diagonal: Vec<Dd>,
    /// 2/(vᵀv) of every reflection vector.
    scale: Vec<Dd>,
}

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
    let (n, p) = (y.len(), columns.len());
    let fits = columns.iter().all(|c| c.len() == n) && weights.values.len() == n;
    if p == 0 || n < p || !fits {
        return Err(SolveError::Singular);
    }
    let w = &weights.values;
    let roots: Vec<Dd> = w.iter().map(|w| w.sqrt()).collect();
    let y_scaled = Scaled::new(y);
    let exponents: Vec<i32> = columns.iter().map(|c| column_exponent(c)).collect();
    let scaled: Vec<Vec<Dd>> =
        columns.iter().zip(&exponents).map(|(c, e)| c.iter().map(|v| v.times_power_of_two(-e)).collect()).collect();
    let factor = factorise(&scaled, &roots)?;
    let right: Vec<Dd> = roots.iter().zip(&y_scaled.values).map(|(r, v)| *r * *v).collect();
    let coefficients = factor.back_substitute(&factor.transform(right));
    let mut residuals = residuals(&scaled, &y_scaled.values, &coefficients);
    let residual_ss = settle_residuals(&mut residuals, &y_scaled.values, w);
    let inverse = factor.inverse_of_normal();
    let condition = condition(&scaled, w, &inverse);
    Raw {
        coefficients,
        residuals,
        residual_ss,
        y_exponent: y_scaled.exponent,
        weight_exponent: weights.exponent,
        orthonormal: factor.orthonormal(),
        condition,
        basis: factor.basis(&exponents, weights.exponent),
        column_exponents: exponents,
        inverse,
    }
    .round()
}

/// Exponent of the largest magnitude of a column.
fn column_exponent(column: &[Dd]) -> i32 {
    exponent_of(column.iter().fold(0.0, |top: f64, v| top.max(v.to_f64().abs())))
}

/// Σ aᵢbᵢ over the rows from `start` on.
fn dot(a: &[Dd], b: &[Dd], start: usize) -> Dd {
    a[start..].iter().zip(&b[start..]).map(|(a, b)| *a * *b).sum()
}

fn factorise(columns: &[Vec<Dd>], roots: &[Dd]) -> Result<Factor, SolveError> {
    let mut work: Vec<Vec<Dd>> = columns.iter().map(|c| c.iter().zip(roots).map(|(v, r)| *v * *r).collect()).collect();
    let mut out = Factor {
        columns: Vec::with_capacity(work.len()),
        diagonal: Vec::with_capacity(work.len()),
        scale: Vec::with_capacity(work.len()),
    };
    for k in 0..work.len() {
        let mut v = std::mem::take(&mut work[k]);
        let whole = dot(&v, &v, 0).to_f64();
        let below = dot(&v, &v, k);
        let remains = below.to_f64() > whole * (WHAT_MUST_REMAIN * WHAT_MUST_REMAIN);
        if !remains {
            return Err(SolveError::Singular);
        }
        let norm = below.sqrt();
        // The sign that adds instead of cancelling.
        let diagonal = if v[k].to_f64() > 0.0 { -norm } else { norm };
        v[k] -= diagonal;
        let scale = Dd::from(2.0) / dot(&v, &v, k);
        for column in &mut work[k + 1..] {
            reflect(&v, scale, column, k);
        }
        out.columns.push(v);
        out.diagonal.push(diagonal);
        out.scale.push(scale);
    }
    Ok(out)
}

/// (I − scale·v vᵀ) applied to the rows from `k` on.
fn reflect(v: &[Dd], scale: Dd, target: &mut [Dd], k: usize) {
    let factor = scale * dot(v, target, k);
    for (cell, v) in target[k..].iter_mut().zip(&v[k..]) {
        *cell -= factor * *v;
    }
}

impl Factor {
    /// Qᵀ times a vector.
    fn transform(&self, mut vector: Vec<Dd>) -> Vec<Dd> {
        for (k, v) in self.columns.iter().enumerate() {
            reflect(v, self.scale[k], &mut vector, k);
        }
        vector
    }

    /// R b = the first p entries.
    fn back_substitute(&self, right: &[Dd]) -> Vec<Dd> {
        let p = self.columns.len();
        let mut b = vec![Dd::ZERO; p];
        for i in (0..p).rev() {
            let known: Dd = (i + 1..p).map(|j| self.columns[j][i] * b[j]).sum();
            b[i] = (right[i] - known) / self.diagonal[i];
        }
        b
    }

    /// R⁻¹R⁻ᵀ.
    fn inverse_of_normal(&self) -> Vec<Vec<Dd>> {
        let p = self.columns.len();
        let unit = |k: usize| {
            let mut e = vec![Dd::ZERO; p];
            e[k] = Dd::ONE;
            e
        };
        let inverse: Vec<Vec<Dd>> = (0..p).map(|k| self.back_substitute(&unit(k))).collect();
        let entry = |i: usize, j: usize| -> Dd { inverse.iter().map(|c| c[i] * c[j]).sum() };
        (0..p).map(|i| (0..p).map(|j| entry(i, j)).collect()).collect()
    }

    /// The first p columns of Q.
    fn orthonormal(&self) -> Vec<Vec<f64>> {
        let n = self.columns.first().map_or(0, Vec::len);
        let column = |k: usize| {
            let mut e = vec![Dd::ZERO; n];
            e[k] = Dd::ONE;
            for (i, v) in self.columns.iter().enumerate().rev() {
                reflect(v, self.scale[i], &mut e, i);
            }
            e.iter().map(|v| v.to_f64()).collect()
        };
        (0..self.columns.len()).map(column).collect()
    }

    /// R in the user's units.
    fn basis(&self, exponents: &[i32], weight_exponent: i32) -> Basis {
        let p = self.columns.len();
        let mut r = vec![vec![0.0; p]; p];
        for (i, row) in r.iter_mut().enumerate() {
            for (j, cell) in row.iter_mut().enumerate().skip(i) {
                let value = if i == j { self.diagonal[i] } else { self.columns[j][i] };
                *cell = libm::scalbn(value.to_f64(), exponents[j] + weight_exponent / 2);
            }
        }
        Basis::Triangular(r)
    }
}

/// y − X b.
fn residuals(columns: &[Vec<Dd>], y: &[f64], coefficients: &[Dd]) -> Vec<Dd> {
    let fitted = |i: usize| -> Dd { columns.iter().zip(coefficients).map(|(c, b)| c[i] * *b).sum() };
    y.iter().enumerate().map(|(i, v)| Dd::from(*v) - fitted(i)).collect()
}

/// ‖X‖_F·‖X⁺‖_F with the columns of √W·X brought to length one.
fn condition(columns: &[Vec<Dd>], w: &[Dd], inverse: &[Vec<Dd>]) -> f64 {
    let square = |c: &Vec<Dd>| -> f64 { c.iter().zip(w).map(|(v, w)| w.to_f64() * v.to_f64() * v.to_f64()).sum() };
    let scaled = columns.iter().enumerate();
    let sum: f64 = scaled.map(|(j, c)| square(c) * inverse[j][j].to_f64()).sum();
    libm::sqrt(as_f64(columns.len()) * sum)
}
