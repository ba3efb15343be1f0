//! Fits of functions that are not linear in their coefficients, in the same form as linear ones.

use super::dd::Dd;
use super::dual::Dual;
use super::householder::{condition, regular_factor, scale_column};
use super::least_squares::{LeastSquares, Raw, ScaledWeights, SolveError};
use super::levenberg::{Minimum, NotConverged, Problem, minimise};
use super::real::Real;

/// A function of x with coefficients, written once for every kind of number.
pub trait Function {
    /// Number of coefficients p.
    fn parameters(&self) -> usize;

    /// f(x; b), not finite outside the domain.
    fn value<T: Real>(&self, b: &[T], x: T) -> T;
}

/// A function of the observation, for several regressors or anything else that numbers do not name.
pub trait Model {
    /// Number of coefficients p.
    fn parameters(&self) -> usize;

    /// The model of observation `i`, counted from 0; not finite outside the domain.
    fn value<T: Real>(&self, b: &[T], i: usize) -> T;
}

/// Why a fit could not be made.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum NonlinearError {
    /// x, y and weights have different lengths.
    #[error("x, y and the weights have {x}, {y} and {weights} entries")]
    Lengths {
        /// Entries of x.
        x: usize,
        /// Entries of y.
        y: usize,
        /// Entries of the weights.
        weights: usize,
    },
    /// No minimum was found.
    #[error(transparent)]
    NotConverged(#[from] NotConverged),
    /// The coefficients cannot be told apart, or a figure does not fit into a double.
    #[error(transparent)]
    Solve(#[from] SolveError),
}

/// A fit and what it took.
#[derive(Debug, Clone, PartialEq)]
pub struct NonlinearSolution {
    /// All figures, as a linear fit with X = ∂f/∂b at the minimum has them.
    pub solved: LeastSquares,
    /// Iterations.
    pub iterations: usize,
    /// Evaluations of all residuals or of the whole Jacobian.
    pub evaluations: usize,
}

/// Weighted least squares for a function of x.
///
/// # Formula
///
/// Σ w (y − f(x; b))² → min; covariances s²(XᵀWX)⁻¹ with X = ∂f/∂b at the minimum. Exact derivatives.
///
/// # Shapes and units
///
/// `x`, `y` and `weights` of one length n ≥ p, finite; `start` with p entries. Coefficients in the units that
/// `f` gives them.
///
/// # Errors
///
/// [`NonlinearError`]; see [`minimise`].
///
/// # Source
///
/// As for [`minimise`]; linear approximation of the covariance: Seber and Wild, Nonlinear Regression
/// (1989), 2.1. From memory.
pub fn fit_nonlinear<F: Function>(
    f: &F,
    x: &[f64],
    y: &[f64],
    weights: &ScaledWeights,
    start: &[f64],
) -> Result<NonlinearSolution, NonlinearError> {
    if x.len() != y.len() {
        return Err(NonlinearError::Lengths { x: x.len(), y: y.len(), weights: weights.values.len() });
    }
    let y: Vec<Dd> = y.iter().map(|y| Dd::from(*y)).collect();
    fit_model(&OfX { f, x }, &y, weights, start)
}

/// As [`fit_nonlinear`] for a model of the observation, and y in double-double.
///
/// # Formula
///
/// As for [`fit_nonlinear`].
///
/// # Shapes and units
///
/// `y` and `weights` of length n, which is also the number of observations of the model.
///
/// # Errors
///
/// As for [`fit_nonlinear`].
///
/// # Source
///
/// As for [`fit_nonlinear`].
pub fn fit_model<M: Model>(
    model: &M,
    y: &[Dd],
    weights: &ScaledWeights,
    start: &[f64],
) -> Result<NonlinearSolution, NonlinearError> {
    if y.len() != weights.values.len() {
        return Err(NonlinearError::Lengths { x: y.len(), y: y.len(), weights: weights.values.len() });
    }
    let roots: Vec<Dd> = weights.values.iter().map(|w| w.sqrt()).collect();
    // Scaled, for the square of 1e-300 is zero.
    let (scaled, exponent) = scale_column(y);
    let ss: Dd = scaled.iter().zip(&weights.values).map(|(y, w)| *w * y.square()).sum();
    let size = libm::scalbn(ss.sqrt().to_f64(), exponent);
    let minimum = minimise(&Whitened { model, y, roots: &roots, size }, start)?;
    let solved = minimum.solved(&roots, weights.exponent)?;
    Ok(NonlinearSolution { solved, iterations: minimum.iterations, evaluations: minimum.evaluations })
}

/// A function of x at the abscissae.
struct OfX<'a, F> {
    f: &'a F,
    x: &'a [f64],
}

impl<F: Function> Model for OfX<'_, F> {
    fn parameters(&self) -> usize {
        self.f.parameters()
    }
    fn value<T: Real>(&self, b: &[T], i: usize) -> T {
        self.f.value(b, T::of(self.x[i]))
    }
}

/// Residuals times the roots of the weights.
struct Whitened<'a, M> {
    model: &'a M,
    y: &'a [Dd],
    roots: &'a [Dd],
    size: f64,
}

impl<M: Model> Problem for Whitened<'_, M> {
    fn parameters(&self) -> usize {
        self.model.parameters()
    }
    fn observations(&self) -> usize {
        self.y.len()
    }
    fn size(&self) -> f64 {
        self.size
    }
    fn residuals<T: Real>(&self, b: &[T]) -> Vec<T> {
        let residual = |(i, y): (usize, &Dd)| T::of_dd(self.roots[i]) * (T::of_dd(*y) - self.model.value(b, i));
        self.y.iter().enumerate().map(residual).collect()
    }
    fn jacobian<T: Real>(&self, b: &[T]) -> Vec<Vec<T>> {
        let mut along: Vec<Dual<T>> = b.iter().map(|b| Dual::constant(*b)).collect();
        let mut columns = Vec::with_capacity(b.len());
        for j in 0..b.len() {
            along[j].slope = T::one();
            let slope = |(i, root): (usize, &Dd)| -(T::of_dd(*root) * self.model.value(&along, i).slope);
            columns.push(self.roots.iter().enumerate().map(slope).collect());
            along[j].slope = T::zero();
        }
        columns
    }
}

impl Minimum {
    /// The figures of a linear fit with X = ∂(model)/∂b at the minimum, each rounded once.
    ///
    /// # Formula
    ///
    /// √W·X = QR; (XᵀWX)⁻¹ = R⁻¹R⁻ᵀ; s² = Σ r²/(n − p).
    ///
    /// # Shapes and units
    ///
    /// `roots`: the n roots of the weights by which the residuals of this minimum were multiplied; the
    /// weights themselves are their squares times 2^`weight_exponent`.
    ///
    /// # Errors
    ///
    /// [`SolveError::Singular`] when the columns depend on each other or the lengths differ,
    /// [`SolveError::OutOfRange`] when a figure does not fit into a double.
    ///
    /// # Source
    ///
    /// Golub and Van Loan, Matrix Computations, 5.3. From memory.
    pub fn solved(&self, roots: &[Dd], weight_exponent: i32) -> Result<LeastSquares, SolveError> {
        let n = self.residuals.len();
        if roots.len() != n || self.jacobian.iter().any(|c| c.len() != n) {
            return Err(SolveError::Singular);
        }
        let (residuals, y_exponent) = scale_column(&self.residuals);
        let negative = |c: &Vec<Dd>| c.iter().map(|v| -*v).collect::<Vec<Dd>>();
        let (columns, exponents): (Vec<_>, Vec<_>) = self.jacobian.iter().map(|c| scale_column(&negative(c))).unzip();
        let ones = vec![Dd::ONE; n];
        let factor = regular_factor(&columns, &ones)?;
        let inverse = factor.inverse_of_normal();
        let coefficients =
            self.parameters.iter().zip(&exponents).map(|(b, e)| b.times_power_of_two(e - y_exponent)).collect();
        Raw {
            coefficients,
            residual_ss: residuals.iter().map(|r| r.square()).sum(),
            residuals: residuals.iter().zip(roots).map(|(r, root)| *r / *root).collect(),
            y_exponent,
            weight_exponent,
            orthonormal: factor.orthonormal(),
            condition: condition(&columns, &ones, &inverse),
            basis: factor.basis(&exponents, weight_exponent),
            column_exponents: exponents,
            inverse,
        }
        .round()
    }
}
