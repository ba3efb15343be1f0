//! Why a typed formula could not be read.

use super::formula_steps::{FUNCTION_NAMES, STACK_LIMIT};

/// The longest formula, in characters.
pub(super) const LENGTH_LIMIT: usize = 2000;

/// The most coefficients of one formula.
pub const COEFFICIENT_LIMIT: usize = 12;

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
    /// A name before a parenthesis that is no function.
    #[error("column {column}: “{name}” is no function; the functions are {FUNCTION_NAMES}, and a product needs its *")]
    NoFunction {
        /// Where.
        column: usize,
        /// What was typed.
        name: String,
    },
    /// A coefficient that differs from x, pi or a function in capitals only.
    #[error("column {column}: “{name}” would be a coefficient; write “{known}” or another name")]
    Capitals {
        /// Where.
        column: usize,
        /// What was typed.
        name: String,
        /// What it can be mistaken for.
        known: String,
    },
    /// One coefficient too many.
    #[error("column {column}: “{name}” is one coefficient too many; up to {COEFFICIENT_LIMIT} are accepted")]
    TooMany {
        /// Where.
        column: usize,
        /// What was typed.
        name: String,
    },
    /// Nothing to fit.
    #[error("column {column}: no coefficient to fit; name at least one, as in a + b*x")]
    NothingToFit {
        /// Where the formula ends.
        column: usize,
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
            | Self::NoFunction { column, .. }
            | Self::Capitals { column, .. }
            | Self::TooMany { column, .. }
            | Self::NothingToFit { column }
            | Self::TooLarge { column }
            | Self::TooDeep { column }
            | Self::TooLong { column } => *column,
        }
    }
}
