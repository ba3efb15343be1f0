//! Means and sums of squares in double-double: a small scatter on top of large numbers keeps its digits.

use super::dd::Dd;
use super::scale::{Scaled, as_f64, exponent_of};

/// What values are and how they lie about their mean, carried in double-double.
#[derive(Debug, Clone, PartialEq)]
pub struct Deviations {
    /// Mean of the scaled values.
    mean: Dd,
    /// Scaled value minus mean, in the order handed in.
    from_mean: Vec<Dd>,
    /// Power of two taken out of the values.
    exponent: i32,
}

impl Deviations {
    /// Mean of the values and the difference of each; `None` without values or with one that is not finite.
    ///
    /// # Formula
    ///
    /// z̄ = Σz/n and z − z̄ in double-double, the values first divided by a power of two.
    ///
    /// # Shapes and units
    ///
    /// Any unit. The doubles handed in are taken as exact: of 1000000.2 they hold ten digits of the 0.2.
    ///
    /// # Errors
    ///
    /// `None` as above.
    ///
    /// # Source
    ///
    /// Two-pass formula, e.g. Chan, Golub and LeVeque, Amer. Statist. 37 (1983) 242; from memory.
    #[must_use]
    pub fn new(values: &[f64]) -> Option<Self> {
        if values.is_empty() || values.iter().any(|v| !v.is_finite()) {
            return None;
        }
        let scaled = Scaled::new(values);
        let sum: Dd = scaled.values.iter().map(|v| Dd::from(*v)).sum();
        let first = scaled.values[0];
        // Rounding must not give equal values a scatter.
        let equal = scaled.values.iter().all(|v| v.total_cmp(&first).is_eq());
        let mean = if equal { Dd::from(first) } else { sum / Dd::from(as_f64(values.len())) };
        let from_mean = scaled.values.iter().map(|v| Dd::from(*v) - mean).collect();
        Some(Self { mean, from_mean, exponent: scaled.exponent })
    }

    /// The mean, in the unit of the values.
    #[must_use]
    pub fn mean(&self) -> f64 {
        libm::scalbn(self.mean.to_f64(), self.exponent)
    }

    /// SD with n − 1, in the unit of the values; `None` for a single value.
    #[must_use]
    pub fn sd(&self) -> Option<f64> {
        let n = self.from_mean.len();
        let variance = self.squares() / Dd::from(as_f64(n.saturating_sub(1)));
        (n > 1).then(|| libm::scalbn(variance.sqrt().to_f64(), self.exponent))
    }

    /// First autocorrelation Σ(z_i − z̄)(z_{i+1} − z̄)/Σ(z_i − z̄)²; `None` when all values are equal.
    #[must_use]
    pub fn lag1(&self) -> Option<f64> {
        let products: Dd = self.from_mean.windows(2).map(|pair| pair[0] * pair[1]).sum();
        let squares = self.squares();
        (squares.to_f64() > 0.0).then(|| (products / squares).to_f64())
    }

    /// Σ(z − z̄)² divided by 4^[`Deviations::exponent`].
    #[must_use]
    pub fn squares(&self) -> Dd {
        self.from_mean.iter().map(|d| d.square()).sum()
    }

    /// The mean divided by 2^[`Deviations::exponent`].
    #[must_use]
    pub const fn scaled_mean(&self) -> Dd {
        self.mean
    }

    /// The power of two that the values were divided by.
    #[must_use]
    pub const fn exponent(&self) -> i32 {
        self.exponent
    }
}

/// R² = 1 − Σe²/v / Σ(y − c)²/v with c the weighted mean of y, or zero; `None` when the y are all c.
///
/// # Formula
///
/// Weights 1/v; all sums in double-double, from the residuals as doubles.
///
/// # Shapes and units
///
/// `y`, `residuals` and `variance_ratio` (positive) of one length; dimensionless. For R² near zero the
/// rounding of the residuals leaves about 10⁻¹⁶, absolute.
///
/// # Errors
///
/// `None` as above.
///
/// # Source
///
/// Draper and Smith, Applied Regression Analysis, 3rd ed., 1.3; about zero for models without a constant:
/// as the NIST/ITL Statistical Reference Datasets do. From memory.
#[must_use]
pub fn determination(y: &[f64], residuals: &[f64], variance_ratio: &[f64], about_mean: bool) -> Option<f64> {
    let scaled = Scaled::new(y);
    let smallest = variance_ratio.iter().copied().fold(f64::INFINITY, f64::min);
    let exponent = exponent_of(smallest);
    let weights: Vec<Dd> = variance_ratio.iter().map(|v| Dd::ONE / Dd::from(libm::scalbn(*v, -exponent))).collect();
    let weighted = |values: &[f64]| -> Dd { values.iter().zip(&weights).map(|(y, w)| *w * *y).sum() };
    let all: Dd = weights.iter().copied().sum();
    let centre = if about_mean { weighted(&scaled.values) / all } else { Dd::ZERO };
    let squares = |values: &[f64], centre: Dd| -> Dd {
        values.iter().zip(&weights).map(|(y, w)| *w * (Dd::from(*y) - centre).square()).sum()
    };
    let total = squares(&scaled.values, centre);
    let left: Vec<f64> = residuals.iter().map(|e| libm::scalbn(*e, -scaled.exponent)).collect();
    let unexplained = squares(&left, Dd::ZERO) / total;
    (total.to_f64() > 0.0).then(|| (Dd::ONE - unexplained).to_f64())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_value_has_a_mean_and_no_scatter() {
        let one = Deviations::new(&[3.0]).unwrap();
        assert_eq!((one.mean(), one.sd(), one.lag1()), (3.0, None, None));
        assert_eq!(Deviations::new(&[]), None);
        assert_eq!(Deviations::new(&[1.0, f64::NAN]), None);
    }

    #[test]
    fn large_small_and_offset_values() {
        for scale in [1.0, 1e-300, 1e300, 1e-5] {
            let values = [1.0, 2.0, 4.0].map(|v| v * scale);
            let found = Deviations::new(&values).unwrap();
            assert!((found.mean() / scale - 7.0 / 3.0).abs() < 1e-15);
            assert!((found.sd().unwrap() / scale - libm::sqrt(7.0 / 3.0)).abs() < 1e-15);
        }
        let top = Deviations::new(&[f64::MAX; 3]).unwrap();
        assert_eq!((top.mean(), top.sd(), top.lag1()), (f64::MAX, Some(0.0), None));
        for n in 1..50 {
            assert_eq!(Deviations::new(&vec![0.7; n]).unwrap().squares(), Dd::ZERO);
        }
        let far = Deviations::new(&[1e15 + 1.0, 1e15 + 2.0, 1e15 + 3.0]).unwrap();
        assert_eq!((far.mean(), far.sd()), (1e15 + 2.0, Some(1.0)));
    }

    /// By hand: y = 1, 2, 4 with residuals ½, −1, ½: Σe² = 1.5, Σ(y − ȳ)² = 14/3, Σy² = 21.
    #[test]
    fn about_the_mean_and_about_zero() {
        let (y, e, v) = ([1.0, 2.0, 4.0], [0.5, -1.0, 0.5], [1.0; 3]);
        let found = |about_mean| determination(&y, &e, &v, about_mean).unwrap();
        assert!((found(true) - (1.0 - 1.5 * 3.0 / 14.0)).abs() < 1e-15);
        assert!((found(false) - (1.0 - 1.5 / 21.0)).abs() < 1e-15);
        assert_eq!(determination(&[2.0; 3], &[0.0; 3], &v, true), None);
        assert_eq!(determination(&[0.0; 3], &[0.0; 3], &v, false), None);
    }
}
