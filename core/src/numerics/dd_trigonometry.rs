//! Sine, cosine and arc tangent in double-double.

use super::dd::Dd;
use super::dd_constants::{HALF_PI, INVERSE_FACTORIALS};

/// Beyond this magnitude multiples of π/2 are no longer whole doubles, and the rounded functions answer.
const LARGEST_ANGLE: f64 = 1e15;

impl Dd {
    /// π.
    pub const PI: Self = Self::new(std::f64::consts::PI, 1.224_646_799_147_353_2e-16);

    /// Sine and cosine of an angle in radians.
    ///
    /// # Formula
    ///
    /// x = k·π/2 + r with π/2 as a sum of four doubles, so that r keeps its relative accuracy next to a
    /// zero; Taylor series of both functions on |r| ≤ π/4; exchanged by the quadrant k mod 4.
    ///
    /// # Shapes and units
    ///
    /// Radians. Relative error about 1e-31 up to |x| = 1e15; beyond only that of a double. Not a number
    /// for infinite angles.
    ///
    /// # Source
    ///
    /// Cody and Waite reduction as in any text on elementary functions (Muller, Elementary Functions),
    /// from memory.
    #[must_use]
    pub fn sin_cos(self) -> (Self, Self) {
        let x = self.to_f64();
        if x.is_nan() || x.abs() > LARGEST_ANGLE {
            return (Self::from(libm::sin(x)), Self::from(libm::cos(x)));
        }
        let quarter_turns = libm::round(x * std::f64::consts::FRAC_2_PI);
        let rest = HALF_PI.iter().fold(self, |rest, part| rest - Self::from_product(quarter_turns, *part));
        let (sine, cosine) = (sine_series(rest), cosine_series(rest));
        #[expect(clippy::cast_possible_truncation, reason = "|quarter turns| < 1e15")]
        match (quarter_turns as i64).rem_euclid(4) {
            0 => (sine, cosine),
            1 => (cosine, -sine),
            2 => (-sine, -cosine),
            _ => (-cosine, sine),
        }
    }

    /// The arc tangent in radians, in [−π/2, π/2].
    ///
    /// # Formula
    ///
    /// atan x = a + δ with a the rounded arc tangent and tan δ = (x cos a − sin a)/(cos a + x sin a);
    /// δ is below 2⁻⁵², so that δ = tan δ to 2⁻¹⁵⁷.
    ///
    /// # Source
    ///
    /// Addition theorem: Abramowitz and Stegun, Handbook of Mathematical Functions, 4.4.34. From memory.
    #[must_use]
    pub fn atan(self) -> Self {
        let x = self.to_f64();
        // x³/3 is below the last bit.
        if x.is_nan() || x.abs() < 1e-17 {
            return self;
        }
        let start = Self::from(libm::atan(x));
        let (sine, cosine) = start.sin_cos();
        if x.abs() <= 1.0 {
            return start + (self * cosine - sine) / (cosine + self * sine);
        }
        // The same divided by x, which may be large.
        let inverse = if x.is_finite() { Self::ONE / self } else { Self::ZERO };
        start + (cosine - sine * inverse) / (cosine * inverse + sine)
    }
}

/// x − x³/3! + …, |x| ≤ π/4: the term after x²⁷ is below 1e-33 of the first.
fn sine_series(x: Dd) -> Dd {
    let square = x.square();
    let odd = (0..14).rev().map(|k| INVERSE_FACTORIALS[2 * k + 1]);
    odd.fold(Dd::ZERO, |sum, c| c - sum * square) * x
}

/// 1 − x²/2! + …, |x| ≤ π/4.
fn cosine_series(x: Dd) -> Dd {
    let square = x.square();
    let even = (0..14).rev().map(|k| INVERSE_FACTORIALS[2 * k]);
    even.fold(Dd::ZERO, |sum, c| c - sum * square)
}
