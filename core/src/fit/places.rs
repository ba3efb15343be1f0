//! What the fit says at any place x: variance of the function, influence of each observation.

use super::Fit;
use crate::numerics::Basis;

impl Fit {
    /// z(x): the place in the orthonormal basis, so that Var f̂(x) = s²·Σ z². Empty for declared.
    fn place(&self, x: f64) -> Vec<f64> {
        match &self.basis {
            None => Vec::new(),
            Some(basis @ Basis::Orthogonal { .. }) => basis.at(x),
            Some(basis @ Basis::Triangular(_)) => {
                let mut place = basis.at_regressors(&self.curve.gradient(x));
                // For a family fitted in the measurand ∂f/∂β = −f′·∂T/∂β; its size, |f′|, is meant.
                if self.family.fitted_in_measurand() && self.both_axes.is_none() && self.curve.derivative(x) > 0.0 {
                    place.iter_mut().for_each(|z| *z = -*z);
                }
                place
            }
        }
    }

    /// Var f̂(x)/s²: g(x)ᵀ(XᵀWX)⁻¹g(x) as a sum of squares, free of cancellation.
    ///
    /// # Shapes and units
    ///
    /// Unit of the weights to the power −1; 0 for declared; not a number outside the domain.
    #[must_use]
    pub fn variance_factor(&self, x: f64) -> f64 {
        self.place(x).iter().map(|z| z * z).sum()
    }

    /// Var f̂(x) = σ²·g(x)ᵀ(XᵀWX)⁻¹g(x), output unit squared.
    ///
    /// # Errors
    ///
    /// Not a number while σ is not known (relative weights with ν = 0) and outside the domain; 0 for declared.
    #[must_use]
    pub fn mean_variance(&self, x: f64) -> f64 {
        if self.basis.is_none() {
            return 0.0;
        }
        self.scatter_sd().map_or(f64::NAN, |s| s * s * self.variance_factor(x))
    }

    /// Var f̂′(x)/s²: as [`Fit::variance_factor`], for the slope.
    #[must_use]
    pub fn slope_variance_factor(&self, x: f64) -> f64 {
        let place = match &self.basis {
            None => Vec::new(),
            Some(basis @ Basis::Orthogonal { .. }) => basis.slope_at(x),
            Some(basis @ Basis::Triangular(_)) => basis.at_regressors(&self.curve.slope_gradient(x)),
        };
        place.iter().map(|z| z * z).sum()
    }

    /// Var f̂′(x), (output unit per input unit) squared; not a number with ν = 0, 0 for declared.
    #[must_use]
    pub fn slope_variance(&self, x: f64) -> f64 {
        if self.basis.is_none() {
            return 0.0;
        }
        self.scatter_sd().map_or(f64::NAN, |s| s * s * self.slope_variance_factor(x))
    }

    /// ℓ(x): the weight of each observation in f̂(x) = Σ ℓ_i(x) y_i, in the order of the points.
    ///
    /// # Formula
    ///
    /// ℓ(x)ᵀ = g(x)ᵀ(XᵀWX)⁻¹XᵀW = z(x)ᵀ Qᵀ √W.
    ///
    /// # Shapes and units
    ///
    /// N numbers without unit; all 0 for declared.
    #[must_use]
    pub fn influence(&self, x: f64) -> Vec<f64> {
        let place = self.place(x);
        let weight = |i: usize| -> f64 {
            let along: f64 = place.iter().zip(&self.orthonormal).map(|(z, q)| z * q[i]).sum();
            along / libm::sqrt(self.variance_ratio[i])
        };
        (0..self.points.len()).map(weight).collect()
    }

    /// p orthonormal columns of length N that span the columns of √W·X (none for declared): what is left
    /// of a vector after taking its part along each is its residual, whitened.
    #[must_use]
    pub fn orthonormal_columns(&self) -> &[Vec<f64>] {
        &self.orthonormal
    }
}
