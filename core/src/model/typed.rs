//! A formula that a person types with named coefficients, and where the search for them starts.

use super::formula::FreeFormula;
use crate::quantity::Text;
use std::{fmt, str::FromStr};

/// An expression in x with named coefficients and their start values, as typed.
///
/// Written as `EXPRESSION` or `EXPRESSION|b1=500,b2=0.0001`.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct TypedFormula {
    expression: Text,
    start: Text,
    names: Vec<String>,
}

/// Why a typed formula cannot be used.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum TypedFormulaError {
    /// The expression cannot be read.
    #[error("formula: {0}")]
    Expression(#[from] super::FormulaError),
    /// A start value that cannot be read.
    #[error("start value {found:?} cannot be read; name=number is accepted, e.g. b1=500,b2=1e-4, for {names}")]
    Start {
        /// What was found.
        found: String,
        /// The names of the formula.
        names: String,
    },
}

impl TypedFormula {
    /// An expression with its start values (`b1=500,b2=1e-4`, or nothing: then every search starts at 1).
    ///
    /// # Errors
    ///
    /// The expression with the column of the mistake, or the start value that is wrong.
    pub fn new(expression: &str, start: &str) -> Result<Self, TypedFormulaError> {
        let formula: FreeFormula = expression.trim().parse()?;
        let names = formula.coefficient_names().to_vec();
        let typed = Self { expression: Text::from(expression.trim()), start: Text::from(start.trim()), names };
        typed.read_start()?;
        Ok(typed)
    }

    /// The expression as typed.
    #[must_use]
    pub fn expression(&self) -> &str {
        &self.expression
    }

    /// The coefficients in order of first appearance.
    #[must_use]
    pub fn coefficient_names(&self) -> &[String] {
        &self.names
    }

    /// Start values in the order of the coefficients; 1 where none is given.
    #[must_use]
    pub fn start(&self) -> Vec<f64> {
        self.read_start().unwrap_or_else(|_| vec![1.0; self.names.len()])
    }

    /// The expression ready to evaluate.
    ///
    /// # Errors
    ///
    /// None for a formula made by [`TypedFormula::new`].
    pub fn formula(&self) -> Result<FreeFormula, super::FormulaError> {
        self.expression.parse()
    }

    fn read_start(&self) -> Result<Vec<f64>, TypedFormulaError> {
        let mut values = vec![1.0; self.names.len()];
        for part in self.start.split(',').map(str::trim).filter(|part| !part.is_empty()) {
            let wrong = || TypedFormulaError::Start { found: part.to_owned(), names: self.names.join(", ") };
            let (name, number) = part.split_once('=').ok_or_else(wrong)?;
            let place = self.names.iter().position(|n| n == name.trim()).ok_or_else(wrong)?;
            let value: f64 = number.trim().parse().map_err(|_| wrong())?;
            values[place] = if value.is_finite() { value } else { return Err(wrong()) };
        }
        Ok(values)
    }
}

/// As typed, start values after a bar.
impl fmt::Display for TypedFormula {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.start.is_empty() {
            true => f.write_str(&self.expression),
            false => write!(f, "{}|{}", self.expression, self.start),
        }
    }
}

impl FromStr for TypedFormula {
    type Err = TypedFormulaError;
    fn from_str(text: &str) -> Result<Self, TypedFormulaError> {
        let (expression, start) = text.split_once('|').unwrap_or((text, ""));
        Self::new(expression, start)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn start_values_find_their_names() {
        let typed = TypedFormula::new("b1*(1-exp(-b2*x))", "b2=1e-4, b1 = 500").unwrap();
        assert_eq!(typed.coefficient_names(), ["b1", "b2"]);
        assert_eq!(typed.start(), [500.0, 1e-4]);
        assert_eq!(typed.to_string().parse(), Ok(typed));
        assert_eq!(TypedFormula::new("a + b*x", "b=2").unwrap().start(), [1.0, 2.0]);
    }

    #[test]
    fn wrong_ones_say_what_is_wrong() {
        let told = |expression: &str, start: &str| TypedFormula::new(expression, start).unwrap_err().to_string();
        assert!(told("b1*(x", "").contains("column"), "{}", told("b1*(x", ""));
        assert!(told("2*x", "").contains("no coefficient"));
        for start in ["b3=1", "b1", "b1=one", "b1=inf"] {
            assert!(told("b1*x", start).contains("b1"), "{start}");
        }
    }
}
