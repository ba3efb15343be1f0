//! Function families: one file each.
//!
//! A [`Family`] names a shape; a [`Curve`] is a family with its coefficients and answers value,
//! derivative and gradient at any point. Adding a family: one file here, one arm in each `match` of
//! this file and of `names.rs` (the compiler finds them all).

pub mod beta;
mod branches;
pub mod callendar_van_dusen;
mod centred;
pub mod exponential;
pub mod formula;
mod formula_error;
mod formula_parser;
mod formula_steps;
mod formula_tokens;
pub mod guide;
pub mod hyperbola;
pub mod line_zero;
mod log;
pub mod logistic4;
pub mod logistic5;
mod names;
mod pole_scan;
mod polynomial;
pub mod power;
mod precise;
pub mod rational;
mod shape;
mod start;
pub mod steinhart_hart;
pub mod temperature;
mod typed;

pub use branches::Branch;
pub use centred::Centred;
pub use formula::{Formula, FreeFormula};
pub use formula_error::{COEFFICIENT_LIMIT, FormulaError};
pub use names::{HIGHEST_DEGREE, NoSuchFamily};
pub use shape::{Shape, Units};
pub use typed::{TypedFormula, TypedFormulaError};

/// The shape of a calibration function, indication = f(value).
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Family {
    /// Given, not fitted: nominal, last year's, or what is in the device now. Holds a typed formula in `x`.
    Declared,
    /// A polynomial of the given degree with its constant term; 1 is the line, 2 the quadratic.
    Polynomial(u8),
    /// y = b1 x: a line forced through zero.
    LineThroughZero,
    /// y = b1 x, with b1 from the highest standard alone.
    OnePoint,
    /// y = a + b ln x.
    Log,
    /// y = a xᵇ.
    Power,
    /// y = c + a exp(b x).
    Exponential,
    /// y = c + a/(x + b).
    Hyperbola,
    /// y = (a + b x)/(1 + c x).
    Rational,
    /// y = d + (a − d)/(1 + (x/c)ᵇ).
    Logistic4,
    /// y = d + (a − d)/(1 + (x/c)ᵇ)ᵍ.
    Logistic5,
    /// 1/T = A + B ln R + C (ln R)³, fitted in T.
    SteinhartHart,
    /// R = R₀ exp[β(1/T − 1/T₀)], fitted in T.
    Beta,
    /// R = R₀[1 + A t + B t² + C (t − 100) t³ (t < 0)].
    CallendarVanDusen,
    /// A typed formula with named coefficients.
    Formula(TypedFormula),
}

impl Family {
    /// Whether the fit minimises errors of the measurand instead of the indication: thermistors.
    #[must_use]
    pub const fn fitted_in_measurand(&self) -> bool {
        matches!(self, Self::SteinhartHart | Self::Beta)
    }

    /// Whether the units of input and output matter to the formula: thermometers.
    #[must_use]
    pub const fn needs_units(&self) -> bool {
        matches!(self, Self::SteinhartHart | Self::Beta | Self::CallendarVanDusen)
    }

    /// Whether its search and its plots are even in ln x: the domain begins at zero.
    #[must_use]
    pub const fn logarithmic(&self) -> bool {
        matches!(self, Self::Log | Self::Power | Self::Logistic4 | Self::Logistic5)
    }

    /// Whether every function of the family passes through zero, so that R² is about zero.
    #[must_use]
    pub const fn through_zero(&self) -> bool {
        matches!(self, Self::LineThroughZero | Self::OnePoint)
    }

    /// A coefficient that is kept at a published value unless the data can tell it: (index, value).
    #[must_use]
    pub const fn fixed_coefficient(&self) -> Option<(usize, f64)> {
        match self {
            Self::CallendarVanDusen => Some((3, callendar_van_dusen::FIXED_C)),
            _ => None,
        }
    }

    /// Number of free coefficients p; for Callendar–Van Dusen those that warm levels alone can tell.
    #[must_use]
    pub fn coefficient_count(&self) -> usize {
        match self {
            Self::Declared => 0,
            Self::LineThroughZero | Self::OnePoint => 1,
            Self::Polynomial(degree) => usize::from(*degree) + 1,
            Self::Log | Self::Power | Self::Beta => 2,
            Self::Exponential | Self::Hyperbola | Self::Rational | Self::SteinhartHart | Self::CallendarVanDusen => 3,
            Self::Logistic4 => 4,
            Self::Logistic5 => 5,
            Self::Formula(typed) => typed.coefficient_names().len(),
        }
    }
}

/// A family with its coefficients: a function that can be evaluated.
#[derive(Debug, Clone, PartialEq)]
pub enum Curve {
    /// Power basis, ascending: b0 + b1 x + b2 x² …
    Polynomial(Vec<f64>),
    /// A polynomial evaluated about its centre, because its powers of x would cancel.
    Centred(Centred),
    /// a + b ln x, as `[a, b]`.
    Log([f64; 2]),
    /// Any other family.
    Shape(Shape),
    /// A typed formula without free coefficients.
    Formula(Formula),
}

impl Curve {
    /// The function of a family with these coefficients.
    #[must_use]
    pub fn new(family: &Family, units: Units, coefficients: Vec<f64>) -> Self {
        match (family, coefficients.as_slice()) {
            (Family::Polynomial(_), _) => Self::Polynomial(coefficients),
            (Family::Log, [a, b]) => Self::Log([*a, *b]),
            _ => Self::Shape(Shape::new(family.clone(), units, coefficients)),
        }
    }

    /// The same function with other coefficients; a polynomial takes them as plain powers of its variable.
    #[must_use]
    pub fn with_coefficients(&self, coefficients: Vec<f64>) -> Self {
        match (self, coefficients.as_slice()) {
            (Self::Log(_), [a, b]) => Self::Log([*a, *b]),
            (Self::Shape(shape), _) => Self::Shape(shape.with_coefficients(coefficients)),
            (Self::Formula(formula), _) => Self::Formula(formula.clone()),
            (Self::Polynomial(_) | Self::Centred(_) | Self::Log(_), _) => Self::Polynomial(coefficients),
        }
    }

    /// f(x) in the output unit; not a number outside the domain.
    #[must_use]
    pub fn value(&self, x: f64) -> f64 {
        if !x.is_finite() {
            return f64::NAN;
        }
        match self {
            Self::Polynomial(b) => polynomial::value(b, x),
            Self::Centred(c) => c.value(x),
            Self::Log(ab) => log::value(*ab, x),
            Self::Shape(shape) => shape.value(x),
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
            Self::Centred(c) => c.derivative(x),
            Self::Log(ab) => log::derivative(*ab, x),
            Self::Shape(shape) => shape.derivative(x),
            Self::Formula(formula) => formula.derivative(x),
        }
    }

    /// ∂f/∂β at `x`, one entry for each coefficient; empty for a formula.
    #[must_use]
    pub fn gradient(&self, x: f64) -> Vec<f64> {
        match self {
            Self::Polynomial(b) => polynomial::gradient(b.len(), x),
            Self::Centred(c) => polynomial::gradient(c.powers.len(), x),
            Self::Log(_) => log::gradient(x).to_vec(),
            Self::Shape(shape) => shape.gradient(x),
            Self::Formula(_) => Vec::new(),
        }
    }

    /// ∂f′/∂β at `x`: how the slope depends on each coefficient; empty for a formula.
    #[must_use]
    pub fn slope_gradient(&self, x: f64) -> Vec<f64> {
        match self {
            Self::Polynomial(b) => polynomial::slope_gradient(b.len(), x),
            Self::Centred(c) => polynomial::slope_gradient(c.powers.len(), x),
            Self::Log(_) => log::slope_gradient(x).to_vec(),
            Self::Shape(shape) => shape.slope_gradient(x),
            Self::Formula(_) => Vec::new(),
        }
    }

    /// Whether the function has a value at `x`.
    #[must_use]
    pub fn has_value_at(&self, x: f64) -> bool {
        match self {
            Self::Polynomial(_) | Self::Centred(_) => x.is_finite(),
            Self::Log(_) => log::domain(x),
            Self::Shape(_) | Self::Formula(_) => self.value(x).is_finite(),
        }
    }

    /// Coefficients in the order of [`Family::coefficient_names`]; empty for a formula.
    #[must_use]
    pub fn coefficients(&self) -> &[f64] {
        match self {
            Self::Polynomial(b) => b,
            Self::Centred(c) => &c.powers,
            Self::Log(ab) => ab,
            Self::Shape(shape) => shape.coefficients(),
            Self::Formula(_) => &[],
        }
    }
}

#[cfg(test)]
mod family_tests;
#[cfg(test)]
mod formula_free_tests;
#[cfg(test)]
mod formula_moved_tests;
#[cfg(test)]
mod formula_strd_tests;
#[cfg(test)]
mod formula_tests;
#[cfg(test)]
mod tests;
