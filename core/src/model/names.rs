//! Names of families and coefficients as people type and read them.

use super::{
    Family, TypedFormula, beta, callendar_van_dusen, exponential, guide::Guide, hyperbola, line_zero, log, logistic4,
    logistic5, power, rational, steinhart_hart,
};
use crate::quantity::{Unit, unit::superscript};
use std::{fmt, str::FromStr};

/// Names of polynomials below the general `polynomial:N`, from degree 1.
const DEGREES: [(&str, &str); 5] =
    [("line", "Line"), ("quadratic", "Quadratic"), ("cubic", "Cubic"), ("quartic", "Quartic"), ("quintic", "Quintic")];

/// Highest degree of a polynomial.
pub const HIGHEST_DEGREE: u8 = 10;

/// Families with a name of their own: as typed, and as shown.
const NAMED: [(Family, &str, &str); 13] = [
    (Family::Declared, "declared", "Declared"),
    (Family::LineThroughZero, "line-zero", "Line through zero"),
    (Family::OnePoint, "one-point", "One point"),
    (Family::Log, "log", "Logarithm"),
    (Family::Power, "power", "Power law"),
    (Family::Exponential, "exponential", "Exponential"),
    (Family::Hyperbola, "hyperbola", "Hyperbola"),
    (Family::Rational, "rational", "Rational function"),
    (Family::Logistic4, "logistic4", "Logistic, 4 coefficients"),
    (Family::Logistic5, "logistic5", "Logistic, 5 coefficients"),
    (Family::SteinhartHart, "steinhart-hart", "Steinhart–Hart"),
    (Family::Beta, "beta", "Beta equation"),
    (Family::CallendarVanDusen, "callendar-van-dusen", "Callendar–Van Dusen"),
];

/// A text that names no family.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum NoSuchFamily {
    /// Not a name.
    #[error(
        "{found:?} names no function; accepted: line, line-zero, one-point, quadratic, cubic, quartic, quintic, \
         polynomial:N with N from 1 to 10, log, power, exponential, hyperbola, rational, logistic4, logistic5, \
         steinhart-hart, beta, callendar-van-dusen, formula:EXPRESSION, declared"
    )]
    Name {
        /// What was found.
        found: String,
    },
    /// A typed formula that cannot be read.
    #[error("{reason}")]
    Formula {
        /// What is wrong, with the column.
        reason: String,
    },
}

impl fmt::Display for Family {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Polynomial(d) => match name_of(*d) {
                Some((typed, _)) => f.write_str(typed),
                None => write!(f, "polynomial:{d}"),
            },
            Self::Formula(typed) => write!(f, "formula:{typed}"),
            named => f.write_str(named.own_name().0),
        }
    }
}

impl FromStr for Family {
    type Err = NoSuchFamily;
    fn from_str(text: &str) -> Result<Self, NoSuchFamily> {
        if let Some(typed) = text.strip_prefix("formula:") {
            let typed = typed.parse::<TypedFormula>();
            return typed.map(Self::Formula).map_err(|e| NoSuchFamily::Formula { reason: e.to_string() });
        }
        if let Some((family, ..)) = NAMED.iter().find(|(_, typed, _)| *typed == text) {
            return Ok(family.clone());
        }
        if let Some(degree) = (1..).zip(DEGREES).find(|(_, (typed, _))| *typed == text).map(|(d, _)| d) {
            return Ok(Self::Polynomial(degree));
        }
        let wrong = || NoSuchFamily::Name { found: text.to_owned() };
        let degree = text.strip_prefix("polynomial:").and_then(|n| n.parse::<u8>().ok()).ok_or_else(wrong)?;
        if (1..=HIGHEST_DEGREE).contains(&degree) { Ok(Self::Polynomial(degree)) } else { Err(wrong()) }
    }
}

fn name_of(degree: u8) -> Option<(&'static str, &'static str)> {
    DEGREES.get(usize::from(degree).checked_sub(1)?).copied()
}

impl Family {
    /// Every family that needs no expression, polynomials up to degree 5.
    #[must_use]
    pub fn all() -> Vec<Self> {
        let polynomials = (1..=5).map(Self::Polynomial);
        polynomials.chain(NAMED.iter().map(|(family, ..)| family.clone())).collect()
    }

    /// Typed and shown name of a family that has its own.
    fn own_name(&self) -> (&'static str, &'static str) {
        NAMED.iter().find(|(family, ..)| family == self).map_or(("", ""), |(_, typed, shown)| (typed, shown))
    }

    /// The name on screens and reports.
    #[must_use]
    pub fn plain_name(&self) -> String {
        match self {
            Self::Polynomial(d) => {
                name_of(*d).map_or_else(|| format!("Polynomial of degree {d}"), |(_, shown)| shown.to_owned())
            }
            Self::Formula(typed) => format!("y = {}", typed.expression()),
            named => named.own_name().1.to_owned(),
        }
    }

    /// The printed formula, `y = b₀ + b₁ x + b₂ x²`.
    #[must_use]
    pub fn printed_formula(&self) -> String {
        let text = match self {
            Self::Declared => "y = f(x), as declared",
            Self::Log => log::FORMULA,
            Self::LineThroughZero | Self::OnePoint => line_zero::FORMULA,
            Self::Power => power::FORMULA,
            Self::Exponential => exponential::FORMULA,
            Self::Hyperbola => hyperbola::FORMULA,
            Self::Rational => rational::FORMULA,
            Self::Logistic4 => logistic4::FORMULA,
            Self::Logistic5 => logistic5::FORMULA,
            Self::SteinhartHart => steinhart_hart::FORMULA,
            Self::Beta => beta::FORMULA,
            Self::CallendarVanDusen => callendar_van_dusen::FORMULA,
            Self::Formula(typed) => return format!("y = {}", typed.expression()),
            Self::Polynomial(d) => {
                let term = |i: u8| match i {
                    0 => "b₀".to_owned(),
                    1 => "b₁ x".to_owned(),
                    _ => format!("b{} x{}", subscript(i), superscript(u32::from(i))),
                };
                return format!("y = {}", (0..=*d).map(term).collect::<Vec<_>>().join(" + "));
            }
        };
        text.to_owned()
    }

    /// The units inside a formula that are not those of input and output, as they stand behind it in print.
    #[must_use]
    pub const fn own_units(&self) -> &'static str {
        match self {
            Self::SteinhartHart => " (T in K, R in Ω)",
            Self::Beta => " (T in K, R and R₀ in Ω)",
            Self::CallendarVanDusen => " (t in °C, R and R₀ in the output unit)",
            _ => "",
        }
    }

    /// When to use it, and what goes wrong.
    #[must_use]
    pub fn guide(&self) -> Guide {
        match self {
            Self::Declared => super::guide::DECLARED,
            Self::Polynomial(1) => super::guide::LINE,
            Self::Polynomial(_) => super::guide::POLYNOMIAL,
            Self::Log => super::guide::LOG,
            Self::LineThroughZero => line_zero::GUIDE,
            Self::OnePoint => super::guide::ONE_POINT,
            Self::Power => power::GUIDE,
            Self::Exponential => exponential::GUIDE,
            Self::Hyperbola => hyperbola::GUIDE,
            Self::Rational => rational::GUIDE,
            Self::Logistic4 => logistic4::GUIDE,
            Self::Logistic5 => logistic5::GUIDE,
            Self::SteinhartHart => steinhart_hart::GUIDE,
            Self::Beta => beta::GUIDE,
            Self::CallendarVanDusen => callendar_van_dusen::GUIDE,
            Self::Formula(_) => super::guide::FORMULA,
        }
    }

    /// Names of the coefficients as typed: `b0`, `b1` … for powers, else the letters of the formula.
    #[must_use]
    pub fn coefficient_names(&self) -> Vec<String> {
        let letters = match self {
            Self::Declared => return Vec::new(),
            Self::Polynomial(d) => return (0..=*d).map(|i| format!("b{i}")).collect(),
            Self::Formula(typed) => return typed.coefficient_names().to_vec(),
            Self::Log => &["a", "b"],
            Self::LineThroughZero | Self::OnePoint => line_zero::NAMES,
            Self::Power => power::NAMES,
            Self::Exponential => exponential::NAMES,
            Self::Hyperbola => hyperbola::NAMES,
            Self::Rational => rational::NAMES,
            Self::Logistic4 => logistic4::NAMES,
            Self::Logistic5 => logistic5::NAMES,
            Self::SteinhartHart => steinhart_hart::NAMES,
            Self::Beta => beta::NAMES,
            Self::CallendarVanDusen => callendar_van_dusen::NAMES,
        };
        letters.iter().map(|letter| (*letter).to_owned()).collect()
    }

    /// A coefficient's name as printed: `b₀`.
    #[must_use]
    pub fn printed_coefficient(&self, index: usize) -> String {
        match self {
            Self::Polynomial(_) => format!("b{}", subscript(u8::try_from(index).unwrap_or(0))),
            Self::LineThroughZero | Self::OnePoint => "b₁".to_owned(),
            _ => self.coefficient_names().get(index).cloned().unwrap_or_default(),
        }
    }

    /// Unit of a coefficient, given those of output and input; empty where it cannot be told.
    #[must_use]
    pub fn coefficient_unit(&self, index: usize, output: &Unit, input: &Unit) -> String {
        match self {
            Self::Polynomial(_) => output.per(input, u32::try_from(index).unwrap_or(0)),
            Self::LineThroughZero | Self::OnePoint => output.per(input, 1),
            // ln x is taken of the number in the input unit.
            Self::Declared | Self::Log => output.to_string(),
            Self::Power => power::unit(index, output, input),
            Self::Exponential => exponential::unit(index, output, input),
            Self::Hyperbola => hyperbola::unit(index, output, input),
            Self::Rational => rational::unit(index, output, input),
            Self::Logistic4 => logistic4::unit(index, output, input),
            Self::Logistic5 => logistic5::unit(index, output, input),
            Self::SteinhartHart => steinhart_hart::unit(index, output, input),
            Self::Beta => beta::unit(index, output, input),
            Self::CallendarVanDusen => callendar_van_dusen::unit(index, output, input),
            Self::Formula(_) => String::new(),
        }
    }

    /// Whether functions of this family have a value at x, whatever their coefficients. A declared or typed
    /// formula may have gaps of its own: ask [`super::Curve::has_value_at`] for those.
    #[must_use]
    pub fn has_value_at(&self, x: f64) -> bool {
        match self {
            Self::Log => log::domain(x),
            Self::Power => power::domain(x),
            Self::Exponential => exponential::domain(x),
            Self::Hyperbola => hyperbola::domain(x),
            Self::Rational => rational::domain(x),
            Self::Logistic4 => logistic4::domain(x),
            Self::Logistic5 => logistic5::domain(x),
            _ => x.is_finite(),
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
        let typed = Family::Formula(TypedFormula::new("b1*(1-exp(-b2*x))", "b1=500,b2=0.0001").unwrap());
        let all = (1..=10).map(Family::Polynomial).chain(Family::all()).chain([typed]);
        for family in all {
            assert_eq!(family.to_string().parse(), Ok(family));
        }
        for wrong in ["", "Line", "polynomial:0", "polynomial:11", "polynomial:x", "straight", "formula:2+"] {
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

    #[test]
    fn every_family_has_letters_a_formula_and_a_guide() {
        for family in Family::all().into_iter().filter(|f| *f != Family::Declared) {
            // Callendar–Van Dusen has a fourth letter for levels in the cold.
            let letters = family.coefficient_names().len();
            assert!(letters >= family.coefficient_count() && letters <= family.coefficient_count() + 1, "{family}");
            assert!(family.printed_formula().contains('='), "{family}");
            assert!(family.guide().when.len() > 20 && family.guide().wrong.len() > 20, "{family}");
        }
    }
}
