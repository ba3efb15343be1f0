//! The flipped fit: the value regressed on the reading, shown beside the inverted curve.

use crate::fit::{self, Fit, Point, Weights};
use crate::model::{Curve, Family};

/// x = g(y), fitted with the scatter put on x.
#[derive(Debug, Clone, PartialEq)]
pub struct Flipped {
    curve: Curve,
    /// The fit was made in ln x.
    logarithmic: bool,
}

impl Flipped {
    /// Fits the values on the readings with the same number of coefficients; `None` for a declared
    /// function, or when that fit does not exist.
    ///
    /// # Formula
    /// Polynomials: x = c₀ + c₁y + …, same degree. Logarithmic family: ln x = c₀ + c₁y. Weights keep
    /// their meaning: 1/x of the forward fit is 1/(value) here.
    ///
    /// # Shapes and units
    /// Input unit out of output unit.
    ///
    /// # Source
    /// R. G. Krutchkoff (1967), Technometrics 9, 425–439 (inverse calibration); from memory.
    #[must_use]
    pub fn new(forward: &Fit) -> Option<Self> {
        let (family, logarithmic) = match &forward.family {
            Family::Declared => return None,
            Family::Polynomial(degree) => (Family::Polynomial(*degree), false),
            Family::Log => (Family::Polynomial(1), true),
            // Families bent in their coefficients have no flipped twin; thermistors are fitted flipped already.
            Family::Power
            | Family::Exponential
            | Family::Hyperbola
            | Family::Rational
            | Family::Logistic4
            | Family::Logistic5
            | Family::SteinhartHart
            | Family::Beta
            | Family::CallendarVanDusen
            | Family::Formula(_) => return None,
            Family::LineThroughZero | Family::OnePoint => (Family::LineThroughZero, false),
        };
        let points: Vec<Point> = forward
            .points
            .iter()
            .map(|p| Point { x: p.y, y: if logarithmic { libm::log(p.x) } else { p.x } })
            .collect();
        let weights = match (logarithmic, forward.weights) {
            (true, _) | (_, Weights::Equal) => Weights::Equal,
            (_, Weights::InverseX) => Weights::InverseY,
            (_, Weights::InverseX2) => Weights::InverseY2,
            (_, Weights::InverseY) => Weights::InverseX,
            (_, Weights::InverseY2) => Weights::InverseX2,
            // Weights that come from the scatter of the readings have no counterpart on the other axis.
            _ => Weights::Equal,
        };
        let fitted = fit::fit(&family, &points, weights).ok()?;
        Some(Self { curve: fitted.curve, logarithmic })
    }

    /// The value that belongs to a reading, input unit.
    #[must_use]
    pub fn value(&self, reading: f64) -> Option<f64> {
        let x = self.curve.value(reading);
        let x = if self.logarithmic { libm::exp(x) } else { x };
        x.is_finite().then_some(x)
    }
}
