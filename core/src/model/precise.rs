//! Pieces of formulas that keep their digits where the plain text would lose them.

use crate::numerics::Real;

/// Below this, logarithm and exponential near their trivial point are summed as series.
const SMALL: f64 = 0.125;

/// What a function answers where it has no value: no number in any part, slopes included.
pub(super) fn nowhere<T: Real>(x: T) -> T {
    x * T::of(f64::NAN)
}

/// ln(1 + w) for w ≥ 0, to full relative accuracy in values and slopes.
///
/// Near zero by ln(1 + w) = 2 artanh(w/(2 + w)), whose 14 terms reach past double-double.
pub(super) fn ln_1p<T: Real>(w: T) -> T {
    if w.to_f64().abs() >= SMALL {
        return (T::one() + w).ln();
    }
    let s = w / (T::of(2.0) + w);
    let square = s.square();
    let mut sum = T::zero();
    for k in (0..14).rev() {
        sum = sum * square + T::one() / T::of(f64::from(2 * k + 1));
    }
    T::of(2.0) * s * sum
}

/// exp(z) − 1 to full relative accuracy in values and slopes; 22 terms near zero.
pub(super) fn exp_m1<T: Real>(z: T) -> T {
    if z.to_f64().abs() >= SMALL {
        return z.exp() - T::one();
    }
    let mut sum = T::one();
    for k in (2..=22).rev() {
        sum = T::one() + z * sum / T::of(f64::from(k));
    }
    z * sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::numerics::Dual;

    #[test]
    fn near_zero_and_across_the_seam() {
        for k in -400..40 {
            let w = libm::pow(1.1, f64::from(k));
            let (log, exp) = (ln_1p(Dual::variable(w)), exp_m1(Dual::variable(-w)));
            let near =
                |found: f64, right: f64| assert!((found - right).abs() <= 8e-16 * right.abs(), "{found} {right}");
            near(log.value, libm::log1p(w));
            near(log.slope, 1.0 / (1.0 + w));
            near(exp.value, libm::expm1(-w));
            near(exp.slope, libm::exp(-w));
        }
        assert_eq!((ln_1p(0.0), exp_m1(0.0)), (0.0, 0.0));
        assert!(nowhere(Dual::constant(2.0)).slope.is_nan() && nowhere(2.0).is_nan());
    }
}
