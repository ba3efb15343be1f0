//! Estimators: from observations to coefficients, covariance and what the fit leaves behind.
//!
//! [`fit`] estimates, [`declared`] only compares; both hand back a [`Fit`], whose methods answer what
//! inference asks: how certain the function is at a place, and what each observation did to it.

mod axes;
mod both;
pub mod both_axes;
mod criteria;
mod diagnostics;
mod estimate;
mod levels;
mod nonlinear;
mod places;
mod power;
mod repeats;
pub mod robust;
mod scatter;
mod standards;
mod variance;
pub mod weights;

pub use axes::both_axes as fit_both_axes;
pub use both::AxesSplit;
pub use estimate::{Request, declared, estimate, fit};
pub use levels::Level;
pub use repeats::FEW_REPEATS;
pub use scatter::{Scatter, two_sided};
pub use standards::{StandardsDoubt, Variances};

use crate::model::{Curve, Family, HIGHEST_DEGREE};
use crate::numerics::Basis;
use serde::{Deserialize, Serialize};
use variance::VarianceModel;

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
    /// Pooled from repeats: one SD or one relative SD for all levels, whichever is more likely.
    Replicates,
    /// Pooled from repeats: one SD for all levels.
    ReplicatesConstant,
    /// Pooled from repeats: one relative SD for all levels.
    ReplicatesProportional,
    /// Relative: 1/s_i² of each level by itself.
    Raw,
    /// Absolute: 1/u² of every reading.
    Typed,
    /// Relative: Var = s²·f̂(x)^θ with θ fitted.
    Fitted,
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
    /// A point lies outside the domain of the family, e.g. the logarithm of zero or less.
    #[error(
        "{what} {x} does not exist (observation {}): choose another family, or set this row \
         aside with a reason", .index + 1
    )]
    OutsideDomain {
        /// What does not exist there: "the logarithm of", "a value of this function at".
        what: &'static str,
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
    /// Weights `typed` without uncertainties of the readings.
    #[error("the readings carry no uncertainties of their own; a column u_reading would do")]
    NoUncertainty,
    /// Weights from repeats without repeats.
    #[error("no standard was applied more than once, so the repeats give no weights")]
    NoRepeats,
    /// All repeats agree to the last digit.
    #[error("all repeats are identical: the display is too coarse to give weights")]
    IdenticalRepeats,
    /// The iteration did not settle.
    #[error("the fit did not settle: {tried}")]
    NotConverged {
        /// What was tried: starts, iterations, evaluations, what was left.
        tried: String,
    },
    /// The data give no start values for this family.
    #[error("the readings give no start values for this function: {reason}")]
    NoStart {
        /// Why.
        reason: String,
    },
    /// The fit in both axes refuses these data.
    #[error("{reason}")]
    BothAxes {
        /// Why.
        reason: String,
    },
    /// The units of input and output do not suit the family.
    #[error("{reason}")]
    Units {
        /// What was found, and what would be accepted.
        reason: String,
    },
    /// The typed formula cannot be read.
    #[error("{reason}")]
    Formula {
        /// What is wrong, with the column.
        reason: String,
    },
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
    /// How σ, the scatter where v = 1, is known.
    pub scatter: Scatter,
    /// v anywhere else.
    variance_model: VarianceModel,
    /// θ of the weights `fitted`: Var = s²·f̂^θ.
    pub fitted_power: Option<f64>,
    /// Iterations and evaluations of a non-linear fit.
    pub effort: Option<(usize, usize)>,
    /// What a fit in both axes adds.
    pub both_axes: Option<Box<AxesSplit>>,
    /// The standards and their doubt, where it is to be carried along.
    standards: Option<StandardsDoubt>,
    /// The pure-error variance, where it may stand for the scatter beside the standards' doubt.
    repeats_alone: Option<standards::Size>,
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
#[cfg(test)]
mod wild_tests;
