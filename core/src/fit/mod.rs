//! Estimators: from observations to coefficients, covariance and what the fit leaves behind.
//!
//! [`fit`] estimates, [`declared`] only compares; both hand back a [`Fit`], whose methods answer what
//! inference asks: how certain the function is at a place, and what each observation did to it.

mod criteria;
mod diagnostics;
mod estimate;
mod levels;
mod places;
mod variance;
pub mod weights;

pub use estimate::{declared, fit};
pub use levels::Level;

use crate::model::{Curve, Family, HIGHEST_DEGREE};
use crate::numerics::Basis;
use serde::{Deserialize, Serialize};

/// What the weights mean. Degrees of freedom, residual SD and covariance depend on it, so it is a type.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum Weights {
    /// Every observation has the same variance s².
    Equal,
    /// Relative: Var(one observation at x) = s²·x.
    InverseX,
    /// Relative: Var(one observation at x) = s²·x².
    InverseX2,
    /// Relative: Var = s²·y.
    InverseY,
    /// Relative: Var = s²·y².
    InverseY2,
}

/// One observation: the mean of the looks of one application.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Certified value of the standard, input unit.
    pub x: f64,
    /// Mean indication of one application, output unit.
    pub y: f64,
}

/// Why a family could not be fitted. Indices are positions in the points handed in, from 0; messages
/// count observations from 1.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum FitError {
    /// Fewer observations or distinct levels than coefficients.
    #[error("{needed} different standards are needed for {coefficients} coefficients; there are {found}")]
    TooFew {
        /// Distinct levels needed.
        needed: usize,
        /// Coefficients.
        coefficients: usize,
        /// Distinct levels found.
        found: usize,
    },
    /// A point lies outside the domain of the family: the logarithm of zero or less.
    #[error(
        "the logarithm of {x} does not exist (observation {}): choose another family, or set this row \
         aside with a reason", .index + 1
    )]
    OutsideDomain {
        /// Position in the points handed in.
        index: usize,
        /// Its standard, input unit.
        x: f64,
    },
    /// The declared formula has no value at a standard.
    #[error("the declared formula has no value at {x} (observation {})", .index + 1)]
    Undefined {
        /// Position in the points handed in.
        index: usize,
        /// Its standard, input unit.
        x: f64,
    },
    /// A value that is not finite.
    #[error("observation {} is not a finite number", .index + 1)]
    NotFinite {
        /// Position in the points handed in.
        index: usize,
    },
    /// A result over- or underflows.
    #[error("the numbers are too large or too small to fit; use another unit")]
    OutOfRange,
    /// The standards differ too little, compared with their spread, for so many coefficients.
    #[error("the standards lie too close together to tell {coefficients} coefficients apart")]
    TooClose {
        /// Coefficients.
        coefficients: usize,
    },
    /// A polynomial beyond what is offered.
    #[error("degree {degree} is too high; up to {HIGHEST_DEGREE} is fitted")]
    DegreeTooHigh {
        /// The degree asked for.
        degree: u8,
    },
    /// The declared family has nothing to fit.
    #[error("a declared function is given by its formula, not fitted")]
    NotFitted,
    /// Weights not usable, e.g. 1/x with a negative x.
    #[error("weights do not exist at observation {}: {reason}", .index + 1)]
    BadWeight {
        /// Position in the points handed in.
        index: usize,
        /// Why.
        reason: String,
    },
}

/// A fitted (or declared) function with everything inference needs.
///
/// Made by [`fit`] and [`declared`]; the private part is the orthonormal basis of the fit, from which
/// variances and influences at any place come without cancellation.
#[derive(Debug, Clone, PartialEq)]
pub struct Fit {
    /// The family.
    pub family: Family,
    /// The weights.
    pub weights: Weights,
    /// The function.
    pub curve: Curve,
    /// The points it was fitted to, in the order handed in.
    pub points: Vec<Point>,
    /// The p coefficients rounded once; empty for declared. Units: [`Family::coefficient_unit`].
    pub coefficients: Vec<f64>,
    /// s²(XᵀWX)⁻¹, p rows of p; empty for declared and with ν = 0, where s is not known.
    pub covariance: Vec<Vec<f64>>,
    /// ν = N − p.
    pub degrees_of_freedom: usize,
    /// Σ w e², weighted; output unit² / unit of v.
    pub residual_ss: f64,
    /// s = √(Σ w e²/ν); `None` with ν = 0.
    pub residual_sd: Option<f64>,
    /// e = y − ŷ, unweighted, output unit; for declared the errors of the instrument.
    pub residuals: Vec<f64>,
    /// Leverage of each √w-scaled row, 0 to 1 (0 for declared).
    pub leverage: Vec<f64>,
    /// Relative variance v of each observation (weights w = 1/v): Var(y_i) = s²·v_i.
    pub variance_ratio: Vec<f64>,
    /// Standard uncertainties of the coefficients.
    uncertainties: Vec<f64>,
    /// p orthonormal columns of length N spanning √W·X.
    orthonormal: Vec<Vec<f64>>,
    /// The same basis as functions of x; `None` for declared.
    basis: Option<Basis>,
    /// Condition of the scaled design; 1 for declared.
    condition: f64,
}

#[cfg(test)]
mod edge_tests;
#[cfg(test)]
mod law_tests;
#[cfg(test)]
mod reference_fits;
#[cfg(test)]
mod tests;
