//! Names of families and coefficients as people type and read them.

use super::Family;
use crate::quantity::{Unit, unit::superscript};
use std::{fmt, str::FromStr};

/// Names of polynomials below the general `polynomial:N`, from degree 1.
const DEGREES: [(&str, &str); 5] =
    [("line", "Line"), ("quadratic", "Quadratic"), ("cubic", "Cubic"), ("quartic", "Quartic"), ("quintic", "Quintic")];

/// Highest degree of a polynomial.
pub const HIGHEST_DEGREE: u8 = 10;

/// A text that names no family.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error(
    "{found:?} names no function; accepted: line, quadratic, cubic, quartic, quintic, polynomial:N with N from 1 to 10, log, declared"
)]
pub struct NoSuchFamily {
    /// What was found.
    pub found: String,
}

impl fmt::Display for Family {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Declared => f.write_str("declared"),
            Self::Log => f.write_str("log"),
            Self::Polynomial(d) => match name_of(*d) {
                Some((typed, _)) => f.write_str(typed),
                None => write!(f, "polynomial:{d}"),
            },
        }
    }
}

impl FromStr for Family {
    type Err = NoSuchFamily;
    fn from_str(text: &str) -> Result<Self, NoSuchFamily> {
        let wrong = || NoSuchFamily { found: text.to_owned() };
        match text {
            "declared" => return Ok(Self::Declared),
            "log" => return Ok(Self::Log),
            _ => {}
        }
        if let Some(degree) = (1..).zip(DEGREES).find(|(_, (typed, _))| *typed == text).map(|(d, _)| d) {
            return Ok(Self::Polynomial(degree));
        }
        let degree = text.strip_prefix("polynomial:").and_then(|n| n.parse::<u8>().ok()).ok_or_else(wrong)?;
        if (1..=HIGHEST_DEGREE).contains(&degree) { Ok(Self::Polynomial(degree)) } else { Err(wrong()) }
    }
}

fn name_of(degree: u8) -> Option<(&'static str, &'static str)> {
    DEGREES.get(usize::from(degree).checked_sub(1)?).copied()
}

impl Family {
    /// The name on screens and reports.
    #[must_use]
    pub fn plain_name(&self) -> String {
        match self {
            Self::Declared => "Declared".to_owned(),
            Self::Log => "Logarithm".to_owned(),
            Self::Polynomial(d) => {
                name_of(*d).map_or_else(|| format!("Polynomial of degree {d}"), |(_, shown)| shown.to_owned())
            }
        }
    }

    /// The printed formula, `y = b₀ + b₁ x + b₂ x²`.
    #[must_use]
    pub fn printed_formula(&self) -> String {
        match self {
            Self::Declared => "y = f(x), as declared".to_owned(),
            Self::Log => "y = a + b ln x".to_owned(),
            Self::Polynomial(d) => {
                let term = |i: u8| match i {
                    0 => "b₀".to_owned(),
                    1 => "b₁ x".to_owned(),
                    _ => format!("b{} x{}", subscript(i), superscript(u32::from(i))),
                };
                format!("y = {}", (0..=*d).map(term).collect::<Vec<_>>().join(" + "))
            }
        }
    }

    /// Names of the coefficients, ascending: `b0`, `b1` …; `a`, `b`.
    #[must_use]
    pub fn coefficient_names(&self) -> Vec<String> {
        match self {
            Self::Declared => Vec::new(),
            Self::Log => vec!["a".to_owned(), "b".to_owned()],
            Self::Polynomial(d) => (0..=*d).map(|i| format!("b{i}")).collect(),
        }
    }

    /// A coefficient's name as printed: `b₀`.
    #[must_use]
    pub fn printed_coefficient(&self, index: usize) -> String {
        match self {
            Self::Polynomial(_) => format!("b{}", subscript(u8::try_from(index).unwrap_or(0))),
            Self::Declared | Self::Log => self.coefficient_names().get(index).cloned().unwrap_or_default(),
        }
    }

    /// Unit of a coefficient, given those of output and input.
    #[must_use]
    pub fn coefficient_unit(&self, index: usize, output: &Unit, input: &Unit) -> String {
        match self {
            Self::Polynomial(_) => output.per(input, u32::try_from(index).unwrap_or(0)),
            // ln x is taken of the number in the input unit.
            Self::Declared | Self::Log => output.to_string(),
        }
    }

    /// Whether functions of this family have a value at x. A declared formula may have gaps of its own:
    /// ask [`super::Curve::has_value_at`] for those.
    #[must_use]
    pub fn has_value_at(&self, x: f64) -> bool {
        match self {
            Self::Log => super::log::domain(x),
            Self::Declared | Self::Polynomial(_) => x.is_finite(),
        }
    }
}

fn subscript(n: u8) -> String {
    const FIGURES: [char; 10] = ['₀', '₁', '₂', '₃', '₄', '₅', '₆', '₇', '₈', '₉'];
    n.to_string().bytes().map(|c| FIGURES[usize::from(c - b'0')]).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_lead_back_to_their_family() {
        let all = (1..=10).map(Family::Polynomial).chain([Family::Log, Family::Declared]);
        for family in all {
            assert_eq!(family.to_string().parse(), Ok(family));
        }
        for wrong in ["", "Line", "polynomial:0", "polynomial:11", "polynomial:x", "straight"] {
            assert!(wrong.parse::<Family>().is_err(), "{wrong}");
        }
    }

    #[test]
    fn printed_forms() {
        assert_eq!(Family::Polynomial(2).printed_formula(), "y = b₀ + b₁ x + b₂ x²");
        assert_eq!(Family::Polynomial(2).printed_coefficient(1), "b₁");
        let (y, x) = (Unit::new("mV/V"), Unit::new("kN"));
        assert_eq!(Family::Polynomial(2).coefficient_unit(2, &y, &x), "mV/V kN⁻²");
        assert_eq!(Family::Log.coefficient_unit(1, &y, &x), "mV/V");
    }
}
