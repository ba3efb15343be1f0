//! A typed formula in x, without free coefficients: what an instrument declares about itself.

use super::dual::Dual;
use super::formula_parser::{STACK_LIMIT, parse};
use serde::{Deserialize, Serialize};
use std::fmt;
use std::str::FromStr;

/// Why a formula could not be read. Columns count characters from 1.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum FormulaError {
    /// Something else was expected here.
    #[error("column {column}: {found} is not expected here; {expected} would be")]
    Unexpected {
        /// Where.
        column: usize,
        /// What stands there, in words.
        found: String,
        /// What would be accepted.
        expected: &'static str,
    },
    /// A name that is neither x, pi nor a function.
    #[error("column {column}: “{name}” is not known; x, pi and the functions {FUNCTION_NAMES} are")]
    UnknownName {
        /// Where.
        column: usize,
        /// What was typed.
        name: String,
    },
    /// A number beyond the largest double.
    #[error("column {column}: this number is too large; up to 1.8e308 is accepted")]
    TooLarge {
        /// Where.
        column: usize,
    },
    /// Parentheses, powers or signs nested too deeply.
    #[error("column {column}: nested too deeply; up to {STACK_LIMIT} levels are accepted")]
    TooDeep {
        /// Where.
        column: usize,
    },
    /// Too much text.
    #[error("column {column}: too long; up to {LENGTH_LIMIT} characters are accepted")]
    TooLong {
        /// The first column too many.
        column: usize,
    },
}

impl FormulaError {
    /// The column at which reading stopped, from 1.
    #[must_use]
    pub const fn column(&self) -> usize {
        match self {
            Self::Unexpected { column, .. }
            | Self::UnknownName { column, .. }
            | Self::TooLarge { column }
            | Self::TooDeep { column }
            | Self::TooLong { column } => *column,
        }
    }
}

/// The longest formula, in characters.
pub(super) const LENGTH_LIMIT: usize = 2000;

/// The functions as they stand in messages.
const FUNCTION_NAMES: &str = "exp, ln, log10, sqrt, sin, cos, atan, abs";

/// A function of one argument.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Function {
    Exp,
    Ln,
    Log10,
    Sqrt,
    Sin,
    Cos,
    Atan,
    Abs,
}

impl Function {
    pub(super) fn named(name: &str) -> Option<Self> {
        Some(match name {
            "exp" => Self::Exp,
            "ln" => Self::Ln,
            "log10" => Self::Log10,
            "sqrt" => Self::Sqrt,
            "sin" => Self::Sin,
            "cos" => Self::Cos,
            "atan" => Self::Atan,
            "abs" => Self::Abs,
            _ => return None,
        })
    }

    fn apply(self, u: Dual) -> Dual {
        let v = u.value;
        match self {
            Self::Exp => u.chain(libm::exp(v), libm::exp(v)),
            Self::Ln => u.chain(libm::log(v), 1.0 / v),
            Self::Log10 => u.chain(libm::log10(v), std::f64::consts::LOG10_E / v),
            Self::Sqrt => u.chain(libm::sqrt(v), 0.5 / libm::sqrt(v)),
            Self::Sin => u.chain(libm::sin(v), libm::cos(v)),
            Self::Cos => u.chain(libm::cos(v), -libm::sin(v)),
            Self::Atan => u.chain(libm::atan(v), 1.0 / (1.0 + v * v)),
            // At the kink the mean of both sides.
            Self::Abs => u.chain(v.abs(), if v == 0.0 { 0.0 } else { v.signum() }),
        }
    }
}

/// One step of the formula in postfix order: a tree laid flat, so that neither evaluating nor dropping
/// it recurses.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Step {
    Number(f64),
    X,
    Add,
    Subtract,
    Multiply,
    Divide,
    Power,
    Negate,
    Call(Function),
}

/// A formula in `x` as typed, ready to evaluate.
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
    steps: Vec<Step>,
}

impl Formula {
    /// f(x); not a number where the formula has no finite value.
    #[must_use]
    pub fn value(&self, x: f64) -> f64 {
        finite_or_nan(self.evaluate(x).value)
    }

    /// f′(x); not a number where it does not exist.
    #[must_use]
    pub fn derivative(&self, x: f64) -> f64 {
        let result = self.evaluate(x);
        if result.value.is_finite() { finite_or_nan(result.slope) } else { f64::NAN }
    }

    /// The text as typed.
    #[must_use]
    pub fn source(&self) -> &str {
        &self.source
    }

    fn evaluate(&self, x: f64) -> Dual {
        let mut stack = [Dual::constant(f64::NAN); STACK_LIMIT];
        let mut top = 0;
        for step in &self.steps {
            match step {
                Step::Number(value) => {
                    stack[top] = Dual::constant(*value);
                    top += 1;
                }
                Step::X => {
                    stack[top] = Dual::variable(x);
                    top += 1;
                }
                Step::Negate => stack[top - 1] = stack[top - 1].negated(),
                Step::Call(function) => stack[top - 1] = function.apply(stack[top - 1]),
                Step::Add | Step::Subtract | Step::Multiply | Step::Divide | Step::Power => {
                    top -= 1;
                    stack[top - 1] = combine(*step, stack[top - 1], stack[top]);
                }
            }
        }
        stack[0]
    }
}

/// A step with two arguments.
fn combine(step: Step, left: Dual, right: Dual) -> Dual {
    match step {
        Step::Add => left.add(right),
        Step::Subtract => left.add(right.negated()),
        Step::Multiply => left.multiply(right),
        Step::Divide => left.divide(right),
        Step::Power => left.power(right),
        Step::Number(_) | Step::X | Step::Negate | Step::Call(_) => left,
    }
}

fn finite_or_nan(value: f64) -> f64 {
    if value.is_finite() { value } else { f64::NAN }
}

impl FromStr for Formula {
    type Err = FormulaError;

    fn from_str(source: &str) -> Result<Self, FormulaError> {
        Ok(Self { steps: parse(source)?, source: source.to_owned() })
    }
}

impl TryFrom<String> for Formula {
    type Error = FormulaError;

    fn try_from(source: String) -> Result<Self, FormulaError> {
        let steps = parse(&source)?;
        Ok(Self { source, steps })
    }
}

impl From<Formula> for String {
    fn from(formula: Formula) -> Self {
        formula.source
    }
}

/// As typed.
impl fmt::Display for Formula {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.source)
    }
}
