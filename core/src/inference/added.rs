//! One more term added to a fitted model: what it would explain.
//!
//! Works for every family alike: a new column is made orthogonal to the model in the fit's own
//! weights, and the residuals are projected on what remains.

use super::levels::{Level, levels};
use crate::fit::Fit;

/// A fit prepared for added terms: levels and weights.
pub struct Added<'a> {
    fit: &'a Fit,
    levels: Vec<Level>,
    /// w = 1/v of each observation.
    weight: Vec<f64>,
}

/// A column made orthogonal to the model, with what it explains of the residuals.
#[derive(Debug, Clone, PartialEq)]
pub struct Term {
    /// The part of the column that the model cannot follow, one entry an observation.
    pub column: Vec<f64>,
    /// Σw·column², the squared length of that part.
    pub length2: f64,
    /// Its least-squares coefficient.
    pub coefficient: f64,
    /// The residual sum of squares that it takes away.
    pub explained: f64,
}

impl<'a> Added<'a> {
    /// Prepares a fit.
    #[must_use]
    pub fn new(fit: &'a Fit) -> Self {
        Self { fit, levels: levels(&fit.points), weight: fit.variance_ratio.iter().map(|v| 1.0 / v).collect() }
    }

    /// The fit's levels, ascending.
    #[must_use]
    pub fn levels(&self) -> &[Level] {
        &self.levels
    }

    /// Adds a column after the terms in `before`.
    ///
    /// # Formula
    /// z⊥ = z − Hz, made orthogonal to `before` as well; coefficient = Σw·z⊥·e/Σw·z⊥²;
    /// explained = coefficient²·Σw·z⊥².
    ///
    /// # Shapes and units
    /// `z`: one entry an observation, any unit, about 1 in size. `None` when the model (with
    /// `before`) already follows the column.
    ///
    /// # Source
    /// Frisch–Waugh–Lovell theorem; common practice.
    #[must_use]
    pub fn term(&self, z: &[f64], before: &[&Term]) -> Option<Term> {
        let mut column = z.to_vec();
        let original = self.inner(z, z);
        // A second pass removes what rounding left of the first.
        for _ in 0..2 {
            self.remove_model(&mut column);
            for other in before {
                let share = self.inner(&column, &other.column) / other.length2;
                for (c, o) in column.iter_mut().zip(&other.column) {
                    *c -= share * o;
                }
            }
        }
        let length2 = self.inner(&column, &column);
        if length2.is_nan() || length2 <= 1e-16 * original {
            return None;
        }
        let coefficient = self.inner(&column, &self.fit.residuals) / length2;
        Some(Term { explained: coefficient * coefficient * length2, column, length2, coefficient })
    }

    /// Σw·e²: the residual sum of squares in the fit's weights.
    #[must_use]
    pub fn residual_ss(&self) -> f64 {
        self.inner(&self.fit.residuals, &self.fit.residuals)
    }

    /// The residual sum of squares that rounding of the readings alone can leave.
    #[must_use]
    pub fn floor(&self) -> f64 {
        let unit = |y: f64| 4.0 * f64::EPSILON * y.abs();
        let largest = self.fit.points.iter().fold(0.0, |m: f64, p| m.max(p.y.abs()));
        self.weight.iter().map(|w| w * unit(largest) * unit(largest)).sum()
    }

    /// The weighted inner product Σw·a·b.
    #[must_use]
    pub fn inner(&self, a: &[f64], b: &[f64]) -> f64 {
        self.weight.iter().zip(a.iter().zip(b)).map(|(w, (a, b))| w * a * b).sum()
    }

    /// z ← z − Hz, along the orthonormal columns of the whitened design.
    fn remove_model(&self, z: &mut [f64]) {
        let roots = || self.fit.variance_ratio.iter().map(|v| libm::sqrt(*v));
        for column in self.fit.orthonormal_columns() {
            let share: f64 = column.iter().zip(z.iter().zip(roots())).map(|(q, (z, r))| q * z / r).sum();
            for (z, (q, r)) in z.iter_mut().zip(column.iter().zip(roots())) {
                *z -= share * q * r;
            }
        }
    }
}

/// Σa·b.
pub(crate) fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}
