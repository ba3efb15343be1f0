//! A family written once over any kind of number, with its coefficients: value and exact derivatives.

use super::temperature::{TemperatureUnit, resistance_factor};
use super::{
    Family, FreeFormula, beta, callendar_van_dusen, exponential, hyperbola, line_zero, logistic4, logistic5, power,
    rational, steinhart_hart,
};
use crate::numerics::{Dual, Real};
use crate::quantity::Unit;

/// What thermometer families need to know about the units of input and output.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Units {
    /// The unit of the temperature, the input; `None` when the input unit is none.
    pub temperature: Option<TemperatureUnit>,
    /// Ohm in one output unit; `None` when the output unit is no resistance.
    pub ohm: Option<f64>,
}

impl Units {
    /// As the texts of the units say.
    #[must_use]
    pub fn of(input: &Unit, output: &Unit) -> Self {
        Self { temperature: TemperatureUnit::parse(input.as_str()), ohm: resistance_factor(output.as_str()) }
    }
}

/// Kelvin and ohm.
impl Default for Units {
    fn default() -> Self {
        Self { temperature: Some(TemperatureUnit::Kelvin), ohm: Some(1.0) }
    }
}

/// A family with its coefficients.
#[derive(Debug, Clone, PartialEq)]
pub struct Shape {
    family: Family,
    units: Units,
    /// The expression of a typed formula, read once.
    formula: Option<FreeFormula>,
    coefficients: Vec<f64>,
}

impl Shape {
    /// A family with coefficients in printed order (none yet, to search them).
    #[must_use]
    pub fn new(family: Family, units: Units, coefficients: Vec<f64>) -> Self {
        let formula = match &family {
            Family::Formula(typed) => typed.formula().ok(),
            _ => None,
        };
        Self { family, units, formula, coefficients }
    }

    /// The same shape with other coefficients.
    #[must_use]
    pub fn with_coefficients(&self, coefficients: Vec<f64>) -> Self {
        Self { coefficients, ..self.clone() }
    }

    /// The coefficients in printed order.
    #[must_use]
    pub fn coefficients(&self) -> &[f64] {
        &self.coefficients
    }

    /// The family.
    #[must_use]
    pub const fn family(&self) -> &Family {
        &self.family
    }

    /// f(x).
    pub(super) fn value(&self, x: f64) -> f64 {
        finite(self.indication(&self.coefficients, x))
    }

    /// f′(x) by dual numbers.
    pub(super) fn derivative(&self, x: f64) -> f64 {
        let b: Vec<Dual<f64>> = self.coefficients.iter().map(|b| Dual::constant(*b)).collect();
        finite(self.indication(&b, Dual::variable(x)).slope)
    }

    /// ∂f/∂β, one pass a coefficient.
    pub(super) fn gradient(&self, x: f64) -> Vec<f64> {
        self.along_each(|b| self.indication(&b, Dual::constant(x)).slope)
    }

    /// ∂f′/∂β: dual numbers of dual numbers.
    pub(super) fn slope_gradient(&self, x: f64) -> Vec<f64> {
        self.along_each(|b| {
            let b: Vec<Dual<Dual<f64>>> = b.into_iter().map(Dual::constant).collect();
            self.indication(&b, Dual::variable(Dual::constant(x))).slope.slope
        })
    }

    /// One answer a coefficient, that coefficient being the variable.
    fn along_each(&self, f: impl Fn(Vec<Dual<f64>>) -> f64) -> Vec<f64> {
        let seeded = |j: usize| -> Vec<Dual<f64>> {
            let seed = |(i, b): (usize, &f64)| if i == j { Dual::variable(*b) } else { Dual::constant(*b) };
            self.coefficients.iter().enumerate().map(seed).collect()
        };
        (0..self.coefficients.len()).map(|j| finite(f(seeded(j)))).collect()
    }

    /// The indication in any kind of number; not a number outside the domain.
    ///
    /// # Shapes and units
    ///
    /// x in the input unit, the result in the output unit.
    pub fn indication<T: Real>(&self, b: &[T], x: T) -> T {
        match &self.family {
            Family::LineThroughZero | Family::OnePoint => line_zero::value(b, x),
            Family::Power => power::value(b, x),
            Family::Exponential => exponential::value(b, x),
            Family::Hyperbola => hyperbola::value(b, x),
            Family::Rational => rational::value(b, x),
            Family::Logistic4 => logistic4::value(b, x),
            Family::Logistic5 => logistic5::value(b, x),
            Family::CallendarVanDusen => match self.units.temperature {
                Some(unit) => callendar_van_dusen::value(b, unit.to_celsius(x)),
                None => T::of(f64::NAN),
            },
            Family::SteinhartHart => self.resistance(x, |kelvin| steinhart_hart::resistance(b, kelvin)),
            Family::Beta => self.resistance(x, |kelvin| beta::resistance(b, kelvin)),
            Family::Formula(_) => self.formula.as_ref().map_or(T::of(f64::NAN), |formula| formula.value(b, x)),
            Family::Polynomial(_) => b.iter().rev().fold(T::zero(), |sum, c| sum * x + *c),
            Family::Log if x.to_f64() > 0.0 => b[0] + b[1] * x.ln(),
            Family::Log | Family::Declared => T::of(f64::NAN),
        }
    }

    /// A resistance in the output unit, from a temperature in the input unit.
    fn resistance<T: Real>(&self, x: T, ohms: impl FnOnce(T) -> T) -> T {
        match self.units {
            Units { temperature: Some(unit), ohm: Some(factor) } => ohms(unit.to_kelvin(x)) / T::of(factor),
            _ => T::of(f64::NAN),
        }
    }

    /// The measurand of a thermistor family from its indication: the function whose errors are minimised.
    ///
    /// # Shapes and units
    ///
    /// y in the output unit, the result in the input unit.
    pub fn measurand<T: Real>(&self, b: &[T], y: T) -> T {
        let Units { temperature: Some(unit), ohm: Some(factor) } = self.units else {
            return T::of(f64::NAN);
        };
        let r = y * T::of(factor);
        match &self.family {
            Family::SteinhartHart => unit.from_kelvin(steinhart_hart::temperature(b, r)),
            Family::Beta => unit.from_kelvin(beta::temperature(b, r)),
            _ => T::of(f64::NAN),
        }
    }

    /// Start values from points (input unit, output unit), in printed coefficients.
    #[must_use]
    pub fn self_start(&self, points: &[(f64, f64)]) -> Option<Vec<f64>> {
        let unit = self.units.temperature;
        match &self.family {
            Family::LineThroughZero | Family::OnePoint => line_zero::self_start(points),
            Family::Power => power::self_start(points),
            Family::Exponential => exponential::self_start(points),
            Family::Hyperbola => hyperbola::self_start(points),
            Family::Rational => rational::self_start(points),
            Family::Logistic4 => logistic4::self_start(points),
            Family::Logistic5 => logistic5::self_start(points),
            Family::CallendarVanDusen => {
                let unit = unit?;
                let celsius: Vec<_> = points.iter().map(|(x, y)| (unit.to_celsius(*x), *y)).collect();
                callendar_van_dusen::self_start(&celsius)
            }
            Family::SteinhartHart | Family::Beta => {
                let (unit, factor) = (unit?, self.units.ohm?);
                let turned: Vec<_> = points.iter().map(|(x, y)| (y * factor, unit.to_kelvin(*x))).collect();
                if self.family == Family::Beta {
                    beta::self_start(&turned)
                } else {
                    steinhart_hart::self_start(&turned)
                }
            }
            Family::Formula(typed) => Some(typed.start()),
            Family::Polynomial(_) | Family::Log | Family::Declared => None,
        }
    }

    /// The coefficients that the search moves, from the printed ones: logarithms of those that must stay positive.
    pub fn to_internal<T: Real>(&self, b: &[T]) -> Vec<T> {
        match &self.family {
            Family::Logistic4 => logistic4::to_internal(b),
            Family::Logistic5 => logistic5::to_internal(b),
            Family::Beta => beta::to_internal(b),
            _ => b.to_vec(),
        }
    }

    /// The printed coefficients, from those that the search moves.
    pub fn from_internal<T: Real>(&self, p: &[T]) -> Vec<T> {
        match &self.family {
            Family::Logistic4 => logistic4::from_internal(p),
            Family::Logistic5 => logistic5::from_internal(p),
            Family::Beta => beta::from_internal(p),
            _ => p.to_vec(),
        }
    }

    /// The inverse where it is known in closed form: the x with f(x) = y, if there is one.
    pub(super) fn solve(&self, y: f64) -> Option<f64> {
        let b = &self.coefficients;
        match &self.family {
            Family::LineThroughZero | Family::OnePoint => line_zero::solve(b, y),
            Family::Power => power::solve(b, y),
            Family::Exponential => exponential::solve(b, y),
            Family::Hyperbola => hyperbola::solve(b, y),
            Family::Rational => rational::solve(b, y),
            Family::Logistic4 => logistic4::solve(b, y),
            Family::Logistic5 => logistic5::solve(b, y),
            Family::CallendarVanDusen => {
                let unit = self.units.temperature?;
                callendar_van_dusen::solve(b, y).map(|t| unit.from_celsius(t))
            }
            Family::SteinhartHart | Family::Beta => Some(self.measurand(b, y)).filter(|x| x.is_finite()),
            Family::Formula(_) | Family::Polynomial(_) | Family::Log | Family::Declared => None,
        }
    }

    /// Where the function has a pole, ascending, input unit.
    #[must_use]
    pub fn poles(&self) -> Vec<f64> {
        match &self.family {
            Family::Hyperbola => hyperbola::poles(&self.coefficients),
            Family::Rational => rational::poles(&self.coefficients),
            _ => Vec::new(),
        }
    }
}

fn finite(value: f64) -> f64 {
    if value.is_finite() { value } else { f64::NAN }
}
