//! Typed formulas in x: declared ones without free coefficients, and fitted ones with named coefficients.

use super::formula_error::FormulaError;
use super::formula_parser::{Names, Parsed, parse};
use super::formula_steps::evaluate;
use crate::numerics::{Dual, Function, Real};
use serde::{Deserialize, Serialize};
use std::fmt;
use std::str::FromStr;

/// A formula in `x` as typed, ready to evaluate: what an instrument declares about itself.
///
/// # Formula
///
/// `+ − * / ^`, parentheses, exp ln log10 sqrt sin cos atan abs, pi, numbers with exponents.
/// −x² is −(x²), 2^3^2 is 2^(3^2). Derivatives are exact (first-order dual numbers).
///
/// # Shapes and units
///
/// x in the input unit, the value in the output unit; angles in radians. Stored as its source text.
///
/// # Example
///
/// ```
/// use assize_core::model::Formula;
/// let nominal: Formula = "4 + 1.6*x".parse()?;
/// assert_eq!(nominal.value(10.0), 20.0);
/// assert_eq!(nominal.derivative(3.0), 1.6);
/// # Ok::<(), assize_core::model::FormulaError>(())
/// ```
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(try_from = "String", into = "String")]
pub struct Formula {
    source: String,
    parsed: Parsed,
}

impl Formula {
    /// f(x); not a number where the formula has no finite value.
    #[must_use]
    pub fn value(&self, x: f64) -> f64 {
        finite_or_nan(evaluate(&self.parsed.steps, &[], x))
    }

    /// f′(x); not a number where it does not exist.
    #[must_use]
    pub fn derivative(&self, x: f64) -> f64 {
        let result = evaluate(&self.parsed.steps, &[], Dual::variable(x));
        if result.value.is_finite() { finite_or_nan(result.slope) } else { f64::NAN }
    }

    /// f(x) in any kind of number; not finite outside the domain.
    #[must_use]
    pub fn value_at<T: Real>(&self, x: T) -> T {
        evaluate(&self.parsed.steps, &[], x)
    }

    /// The text as typed.
    #[must_use]
    pub fn source(&self) -> &str {
        &self.source
    }
}

fn finite_or_nan(value: f64) -> f64 {
    if value.is_finite() { value } else { f64::NAN }
}

/// A formula in `x` with coefficients to be fitted: every name that is neither x, pi nor a function.
///
/// # Formula
///
/// As for [`Formula`]. Coefficients are numbered in the order in which they first appear.
///
/// # Shapes and units
///
/// x in the input unit, the value in the output unit; a coefficient has whatever unit makes that so.
/// One to twelve coefficients. Stored as its source text.
///
/// # Example
///
/// ```
/// use assize_core::model::FreeFormula;
/// let decay: FreeFormula = "top * exp(-x/tau)".parse()?;
/// assert_eq!(decay.coefficient_names(), ["top", "tau"]);
/// assert_eq!(decay.value(&[3.0, 2.0], 0.0), 3.0);
/// # Ok::<(), assize_core::model::FormulaError>(())
/// ```
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(try_from = "String", into = "String")]
pub struct FreeFormula {
    source: String,
    parsed: Parsed,
}

impl FreeFormula {
    /// The coefficients as typed, in the order in which they first appear.
    #[must_use]
    pub fn coefficient_names(&self) -> &[String] {
        &self.parsed.names
    }

    /// f(x) with the coefficients `b` in the order of [`FreeFormula::coefficient_names`]; not a number for
    /// coefficients that are missing, not finite outside the domain.
    #[must_use]
    pub fn value<T: Real>(&self, b: &[T], x: T) -> T {
        evaluate(&self.parsed.steps, b, x)
    }

    /// The text as typed.
    #[must_use]
    pub fn source(&self) -> &str {
        &self.source
    }
}

/// Reading, storing and showing are alike for both kinds.
macro_rules! text_of_formula {
    ($kind:ident, $names:expr) => {
        impl TryFrom<String> for $kind {
            type Error = FormulaError;
            fn try_from(source: String) -> Result<Self, FormulaError> {
                let parsed = parse(&source, $names)?;
                Ok(Self { source, parsed })
            }
        }

        impl FromStr for $kind {
            type Err = FormulaError;
            fn from_str(source: &str) -> Result<Self, FormulaError> {
                Self::try_from(source.to_owned())
            }
        }

        impl From<$kind> for String {
            fn from(formula: $kind) -> Self {
                formula.source
            }
        }

        /// As typed.
        impl fmt::Display for $kind {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                f.write_str(&self.source)
            }
        }
    };
}

text_of_formula!(Formula, Names::Known);
text_of_formula!(FreeFormula, Names::Free);

impl Function for FreeFormula {
    fn parameters(&self) -> usize {
        self.parsed.names.len()
    }
    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        evaluate(&self.parsed.steps, b, x)
    }
}
