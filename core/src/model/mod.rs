//! Function families: one file each.
//!
//! A [`Family`] names a shape; a [`Curve`] is a family with its coefficients and answers value,
//! derivative and gradient at any point. Adding a family: one file here, one arm in each `match` of
//! this file and of `names.rs` (the compiler finds them all).

mod branches;
mod dual;
pub mod formula;
mod formula_parser;
mod formula_tokens;
mod log;
mod names;
mod polynomial;

pub use branches::Branch;
pub use formula::{Formula, FormulaError};
pub use names::{HIGHEST_DEGREE, NoSuchFamily};

use serde::{Deserialize, Serialize};

/// The shape of a calibration function, indication = f(value).
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum Family {
    /// Given, not fitted: nominal, last year's, or what is in the device now. Holds a typed formula in `x`.
    Declared,
    /// A polynomial of the given degree with its constant term; 1 is the line, 2 the quadratic.
    Polynomial(u8),
    /// y = a + b ln x.
    Log,
}

impl Family {
    /// Number of free coefficients p.
    #[must_use]
    pub fn coefficient_count(&self) -> usize {
        match self {
            Self::Declared => 0,
            Self::Polynomial(degree) => usize::from(*degree) + 1,
            Self::Log => 2,
        }
    }
}

/// A family with its coefficients: a function that can be evaluated.
#[derive(Debug, Clone, PartialEq)]
pub enum Curve {
    /// Power basis, ascending: b0 + b1 x + b2 x² …
    Polynomial(Vec<f64>),
    /// a + b ln x, as `[a, b]`.
    Log([f64; 2]),
    /// A typed formula without free coefficients.
    Formula(Formula),
}

impl Curve {
    /// f(x) in the output unit; not a number outside the domain.
    #[must_use]
    pub fn value(&self, x: f64) -> f64 {
        if !x.is_finite() {
            return f64::NAN;
        }
        match self {
            Self::Polynomial(b) => polynomial::value(b, x),
            Self::Log(ab) => log::value(*ab, x),
            Self::Formula(formula) => formula.value(x),
        }
    }

    /// f′(x), output unit per input unit; not a number outside the domain or where it does not exist.
    #[must_use]
    pub fn derivative(&self, x: f64) -> f64 {
        if !x.is_finite() {
            return f64::NAN;
        }
        match self {
            Self::Polynomial(b) => polynomial::derivative(b, x),
            Self::Log(ab) => log::derivative(*ab, x),
            Self::Formula(formula) => formula.derivative(x),
        }
    }

    /// ∂f/∂β at `x`, one entry for each coefficient; empty for a formula.
    #[must_use]
    pub fn gradient(&self, x: f64) -> Vec<f64> {
        match self {
            Self::Polynomial(b) => polynomial::gradient(b.len(), x),
            Self::Log(_) => log::gradient(x).to_vec(),
            Self::Formula(_) => Vec::new(),
        }
    }

    /// ∂f′/∂β at `x`: how the slope depends on each coefficient; empty for a formula.
    #[must_use]
    pub fn slope_gradient(&self, x: f64) -> Vec<f64> {
        match self {
            Self::Polynomial(b) => polynomial::slope_gradient(b.len(), x),
            Self::Log(_) => log::slope_gradient(x).to_vec(),
            Self::Formula(_) => Vec::new(),
        }
    }

    /// Whether the function has a value at `x`.
    #[must_use]
    pub fn has_value_at(&self, x: f64) -> bool {
        match self {
            Self::Polynomial(_) => x.is_finite(),
            Self::Log(_) => log::domain(x),
            Self::Formula(formula) => formula.value(x).is_finite(),
        }
    }

    /// Coefficients in the order of [`Family::coefficient_names`]; empty for a formula.
    #[must_use]
    pub fn coefficients(&self) -> &[f64] {
        match self {
            Self::Polynomial(b) => b,
            Self::Log(ab) => ab,
            Self::Formula(_) => &[],
        }
    }
}

#[cfg(test)]
mod formula_tests;
#[cfg(test)]
mod tests;
