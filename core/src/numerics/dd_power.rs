//! Real powers in double-double.

use super::dd::Dd;

/// Whole exponents up to this are taken by repeated squaring; each squaring doubles the relative error.
const LARGEST_BY_SQUARING: f64 = 1024.0;

impl Dd {
    /// This number to a real power.
    ///
    /// # Formula
    ///
    /// Repeated squaring for whole exponents up to 1024, so that x² is x·x; otherwise exp(v ln u), with
    /// the sign of u for odd whole v. u⁰ = 1 for every u; 0ᵛ is 0 for v > 0 and infinite for v < 0.
    ///
    /// # Shapes and units
    ///
    /// Relative error about 1e-31 times |v| (squaring) or 1 + |v ln u|. Not a number for negative u and
    /// an exponent that is not whole.
    ///
    /// # Source
    ///
    /// Common practice; special values as for `pow` in IEEE 754-2019, 9.2.1, from memory.
    #[must_use]
    pub fn pow(self, exponent: Self) -> Self {
        let (u, v) = (self.to_f64(), exponent.to_f64());
        let whole = exponent.low() == 0.0 && libm::trunc(v) == v;
        if v == 0.0 {
            return Self::ONE;
        }
        if u == 0.0 || !u.is_finite() || !v.is_finite() {
            return Self::from(libm::pow(u, v));
        }
        if whole && v.abs() <= LARGEST_BY_SQUARING {
            #[expect(clippy::cast_possible_truncation, reason = "a whole number up to 1024")]
            return self.whole_power(v as i32);
        }
        if u > 0.0 {
            return (exponent * self.ln()).exp();
        }
        if !whole {
            return Self::from(f64::NAN);
        }
        let magnitude = (exponent * (-self).ln()).exp();
        // From 2⁵³ on every double is even.
        let odd = libm::fmod(v, 2.0) != 0.0;
        if odd { -magnitude } else { magnitude }
    }

    /// uⁿ by repeated squaring; the inverse of u⁻ⁿ for negative n.
    fn whole_power(self, exponent: i32) -> Self {
        let (mut base, mut rest, mut out) = (self, exponent.unsigned_abs(), Self::ONE);
        loop {
            if rest & 1 == 1 {
                out *= base;
            }
            rest >>= 1;
            if rest == 0 {
                break;
            }
            base = base.square();
        }
        if exponent < 0 { Self::ONE / out } else { out }
    }
}
