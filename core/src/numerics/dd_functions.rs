//! Exponential and logarithm in double-double.

use super::dd::Dd;
use super::dd_constants::{INVERSE_FACTORIALS, INVERSE_ODD};

/// Halvings of the reduced argument of `exp`, undone by as many squarings.
const HALVINGS: i32 = 9;

impl Dd {
    /// e to this power; 0 below and infinity above the range of a double.
    ///
    /// # Formula
    ///
    /// x = k ln 2 + r; expm1(r/2⁹) by its Taylor series, then nine times e ← 2e + e², then times 2^k.
    ///
    /// # Shapes and units
    ///
    /// Relative error about 2⁻¹⁰² near zero, growing with |x| to about 1e-29 at |x| = 700.
    ///
    /// # Source
    ///
    /// Argument reduction as in any text on elementary functions (Muller, Elementary Functions), from memory.
    #[must_use]
    pub fn exp(self) -> Self {
        let x = self.to_f64();
        if x.is_nan() || x > 709.7 {
            return Self::from(x * f64::INFINITY);
        }
        if x < -745.0 {
            return Self::ZERO;
        }
        let halves = libm::round(x / std::f64::consts::LN_2);
        let reduced = (self - Self::LN_2 * halves).times_power_of_two(-HALVINGS);
        // |reduced| < 7e-4: nine terms leave less than 1e-35.
        let terms = INVERSE_FACTORIALS[1..=9].iter().rev();
        let mut series = terms.fold(Self::ZERO, |sum, c| (sum + *c) * reduced);
        for _ in 0..HALVINGS {
            series = series.times_power_of_two(1) + series.square();
        }
        #[expect(clippy::cast_possible_truncation, reason = "|halves| < 1100")]
        let exponent = halves as i32;
        (Self::ONE + series).times_power_of_two(exponent)
    }

    /// The natural logarithm: −∞ at zero, not a number below.
    ///
    /// # Formula
    ///
    /// x = m·2^e with m in [√½, √2); ln x = e ln 2 + 2 artanh((m − 1)/(m + 1)) by its series, so that the
    /// relative error stays small next to x = 1 too.
    ///
    /// # Source
    ///
    /// Abramowitz and Stegun, Handbook of Mathematical Functions, 4.1.27. From memory.
    #[must_use]
    pub fn ln(self) -> Self {
        let x = self.to_f64();
        if x <= 0.0 || !x.is_finite() {
            return Self::from(libm::log(x));
        }
        let (mantissa, mut exponent) = libm::frexp(x);
        if mantissa < std::f64::consts::FRAC_1_SQRT_2 {
            exponent -= 1;
        }
        let m = self.times_power_of_two(-exponent);
        let ratio = (m - Self::ONE) / (m + Self::ONE);
        let square = ratio.square();
        // |ratio| ≤ 0.1716, so the term after n = 43 is below 1e-36 of the first, and from n = 23 on the
        // terms are below 2⁻⁵³ of it: there plain doubles hold all that counts.
        let plain = square.to_f64();
        let tail = (23..=43).rev().step_by(2).fold(0.0, |sum, n| sum * plain + 1.0 / f64::from(n));
        let mut series = Self::from(tail);
        for inverse in INVERSE_ODD.iter().rev() {
            series = series * square + *inverse;
        }
        let artanh = series * ratio;
        Self::LN_2 * f64::from(exponent) + artanh.times_power_of_two(1)
    }
}
