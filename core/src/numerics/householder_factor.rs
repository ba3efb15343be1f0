//! QR by Householder reflections, over any kind of number.

use super::dd::Dd;
use super::least_squares::Basis;
use super::real::Real;

/// Reflections stored column by column, and the triangle they leave.
pub(super) struct Factor<T> {
    /// p columns of length n; from the diagonal down the reflection vectors, above it R.
    columns: Vec<Vec<T>>,
    /// Diagonal of R.
    diagonal: Vec<T>,
    /// 2/(vᵀv) of every reflection vector; 0 where nothing is left to reflect.
    scale: Vec<T>,
    /// Part of each column's length that is left beside the columns before it, from 0 to 1.
    pub(super) remains: Vec<f64>,
}

/// Σ aᵢbᵢ over the rows from `start` on.
pub(super) fn dot<T: Real>(a: &[T], b: &[T], start: usize) -> T {
    a[start..].iter().zip(&b[start..]).fold(T::zero(), |sum, (a, b)| sum + *a * *b)
}

/// (I − scale·v vᵀ) applied to the rows from `k` on.
fn reflect<T: Real>(v: &[T], scale: T, target: &mut [T], k: usize) {
    let factor = scale * dot(v, target, k);
    for (cell, v) in target[k..].iter_mut().zip(&v[k..]) {
        *cell = *cell - factor * *v;
    }
}

impl<T: Real> Factor<T> {
    /// Factorises p columns of length n ≥ p; dependent columns leave zeros on the diagonal.
    pub(super) fn new(mut work: Vec<Vec<T>>) -> Self {
        let p = work.len();
        let mut out = Self {
            columns: Vec::with_capacity(p),
            diagonal: Vec::with_capacity(p),
            scale: Vec::with_capacity(p),
            remains: Vec::with_capacity(p),
        };
        for k in 0..p {
            let mut v = std::mem::take(&mut work[k]);
            let whole = dot(&v, &v, 0).to_f64();
            let below = dot(&v, &v, k);
            out.remains.push(if whole > 0.0 { libm::sqrt(below.to_f64() / whole) } else { 0.0 });
            let norm = below.sqrt();
            // The sign that adds instead of cancelling.
            let diagonal = if v[k].to_f64() > 0.0 { -norm } else { norm };
            v[k] = v[k] - diagonal;
            let square = dot(&v, &v, k);
            let scale = if square.to_f64() > 0.0 { T::of(2.0) / square } else { T::zero() };
            for column in &mut work[k + 1..] {
                reflect(&v, scale, column, k);
            }
            out.columns.push(v);
            out.diagonal.push(diagonal);
            out.scale.push(scale);
        }
        out
    }

    /// Whether every column keeps more than this part of itself beside those before it.
    pub(super) fn is_regular(&self, least: f64) -> bool {
        self.remains.iter().all(|part| *part > least)
    }

    /// Entry of R, i ≤ j.
    pub(super) fn r(&self, i: usize, j: usize) -> T {
        if i == j { self.diagonal[i] } else { self.columns[j][i] }
    }

    /// Qᵀ times a vector.
    pub(super) fn transform(&self, mut vector: Vec<T>) -> Vec<T> {
        for (k, v) in self.columns.iter().enumerate() {
            reflect(v, self.scale[k], &mut vector, k);
        }
        vector
    }

    /// b from R b = the first p entries.
    pub(super) fn back_substitute(&self, right: &[T]) -> Vec<T> {
        let p = self.columns.len();
        let mut b = vec![T::zero(); p];
        for i in (0..p).rev() {
            let known = (i + 1..p).fold(T::zero(), |sum, j| sum + self.columns[j][i] * b[j]);
            b[i] = (right[i] - known) / self.diagonal[i];
        }
        b
    }

    /// z from Rᵀ z = `right`.
    pub(super) fn forward_substitute(&self, right: &[T]) -> Vec<T> {
        let mut z: Vec<T> = Vec::with_capacity(right.len());
        for (k, g) in right.iter().enumerate().take(self.columns.len()) {
            let known = z.iter().enumerate().fold(T::zero(), |sum, (i, z)| sum + self.columns[k][i] * *z);
            z.push((*g - known) / self.diagonal[k]);
        }
        z
    }

    /// R b.
    pub(super) fn triangle_times(&self, b: &[T]) -> Vec<T> {
        let p = self.columns.len();
        (0..p).map(|i| (i..p).fold(T::zero(), |sum, j| sum + self.r(i, j) * b[j])).collect()
    }

    /// The columns of R⁻¹.
    pub(super) fn inverse_triangle(&self) -> Vec<Vec<T>> {
        let p = self.columns.len();
        let unit = |k: usize| {
            let mut e = vec![T::zero(); p];
            e[k] = T::one();
            e
        };
        (0..p).map(|k| self.back_substitute(&unit(k))).collect()
    }

    /// R⁻¹R⁻ᵀ.
    pub(super) fn inverse_of_normal(&self) -> Vec<Vec<T>> {
        let p = self.columns.len();
        let inverse = self.inverse_triangle();
        let entry = |i: usize, j: usize| inverse.iter().fold(T::zero(), |sum, c| sum + c[i] * c[j]);
        (0..p).map(|i| (0..p).map(|j| entry(i, j)).collect()).collect()
    }
}

impl Factor<Dd> {
    /// The first p columns of Q.
    pub(super) fn orthonormal(&self) -> Vec<Vec<f64>> {
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

    /// R in the user's units: column j times 2^`exponents[j]`, all times the root of 2^`weight_exponent`.
    pub(super) fn basis(&self, exponents: &[i32], weight_exponent: i32) -> Basis {
        let p = self.columns.len();
        let mut r = vec![vec![0.0; p]; p];
        for (i, row) in r.iter_mut().enumerate() {
            for (j, cell) in row.iter_mut().enumerate().skip(i) {
                *cell = libm::scalbn(self.r(i, j).to_f64(), exponents[j] + weight_exponent / 2);
            }
        }
        Basis::Triangular(r)
    }
}
