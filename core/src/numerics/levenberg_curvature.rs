//! Second derivatives at a place: whether it is a minimum, and the Newton step to it.

use super::dual::Dual;
use super::levenberg::Problem;
use super::levenberg_place::Place;
use super::real::Real;
use nalgebra::{DMatrix, DVector};

/// The Hessian of half the sum of squares along orthonormal directions of the tangent space.
pub(super) struct Curvature {
    matrix: DMatrix<f64>,
}

impl Curvature {
    /// K = I + R⁻ᵀ(Σ rᵢ ∇²rᵢ)R⁻¹ at a place with a regular R; `None` where it is not finite.
    ///
    /// # Formula
    ///
    /// ∇²(½Σr²) = JᵀJ + Σ rᵢ∇²rᵢ = Rᵀ K R. The second derivatives are exact: the Jacobian evaluated over
    /// dual numbers, once for each parameter. Plain doubles do, for K only has to tell signs and to
    /// converge a step.
    ///
    /// # Source
    ///
    /// Bates and Watts, Nonlinear Regression Analysis and Its Applications (1988), 7.1: effective
    /// residual curvature. From memory.
    pub(super) fn at<P: Problem, T: Real>(problem: &P, place: &Place<T>) -> Option<Self> {
        let p = place.b.len();
        let rounded: Vec<f64> = place.b.iter().map(|b| b.to_f64()).collect();
        let residuals: Vec<f64> = place.residuals.iter().map(|r| r.to_f64()).collect();
        let mut second = DMatrix::zeros(p, p);
        for k in 0..p {
            let mut b: Vec<Dual<f64>> = rounded.iter().map(|b| Dual::constant(*b)).collect();
            // Along the scaled parameter, so that tiny and huge ones stay in range.
            b[k].slope = libm::scalbn(1.0, -place.exponents[k]);
            for (j, column) in problem.jacobian(&b).iter().enumerate() {
                let sum: f64 = column.iter().zip(&residuals).map(|(cell, r)| cell.slope * r).sum();
                second[(j, k)] = libm::scalbn(sum, -place.exponents[j] - place.data_exponent);
            }
        }
        let columns: Vec<f64> = place.factor.inverse_triangle().iter().flatten().map(|v| v.to_f64()).collect();
        let inverse = DMatrix::from_vec(p, p, columns);
        let matrix = DMatrix::identity(p, p) + inverse.transpose() * second * inverse;
        let matrix = (&matrix + matrix.transpose()) * 0.5;
        matrix.iter().all(|v| v.is_finite()).then_some(Self { matrix })
    }

    /// The least eigenvalue: 1 in a linear problem, negative along a way that leads further down.
    pub(super) fn least(&self) -> f64 {
        self.matrix.symmetric_eigenvalues().min()
    }

    /// The Newton step in scaled units, K z = Q₁ᵀr and R s = z; `None` where K is not positive definite.
    pub(super) fn step<T: Real>(&self, place: &Place<T>) -> Option<Vec<T>> {
        let right: Vec<f64> = place.projected.iter().map(|c| c.to_f64()).collect();
        let z = self.matrix.clone().cholesky()?.solve(&DVector::from_vec(right));
        let z: Vec<T> = z.iter().map(|z| T::of(*z)).collect();
        let step = place.factor.back_substitute(&z);
        step.iter().all(|s| s.is_finite()).then_some(step)
    }
}
