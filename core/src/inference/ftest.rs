//! A variance-ratio test with the numbers that a sentence about it needs.

use crate::distributions::f_upper;

/// One F test: the statistic, its degrees of freedom and its upper-tail probability.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FTest {
    /// The statistic, a ratio of mean squares; dimensionless.
    pub f: f64,
    /// Degrees of freedom of the numerator.
    pub df1: usize,
    /// Degrees of freedom of the denominator.
    pub df2: usize,
    /// P(F ≥ f) when the model is right; one-sided by nature.
    pub p: f64,
}

impl FTest {
    /// Compares a sum of squares explained with one left over.
    ///
    /// # Formula
    /// F = (explained/df1)/(left/df2), p = P(F(df1, df2) ≥ F).
    /// Sums below `floor` (what rounding alone leaves) count as `floor`, so that data which lie
    /// exactly on a curve give a finite statistic, and exactly fitted data give F = 0.
    ///
    /// # Shapes and units
    /// Sums of squares in one common unit. `None` without degrees of freedom on either side.
    ///
    /// # Source
    /// Draper & Smith, Applied Regression Analysis, 3rd ed., 6.1 (extra sum of squares); from memory.
    #[must_use]
    pub fn new(explained: f64, df1: usize, left: f64, df2: usize, floor: f64) -> Option<Self> {
        if df1 == 0 || df2 == 0 || !explained.is_finite() || !left.is_finite() {
            return None;
        }
        let f = if explained <= floor {
            0.0
        } else {
            (explained / df1 as f64) / (left.max(floor).max(f64::MIN_POSITIVE) / df2 as f64)
        };
        let f = f.min(f64::MAX);
        let p = if f == 0.0 { 1.0 } else { f_upper(f, df1 as f64, df2 as f64) };
        Some(Self { f, df1, df2, p })
    }
}

/// The combined p of several tests that may depend on each other.
///
/// # Formula
/// Simes: with p₍₁₎ ≤ … ≤ p₍ₙ₎, p_S = minⱼ n·p₍ⱼ₎/j.
///
/// # Shapes and units
/// Any number of p-values; `None` when there is none.
///
/// # Source
/// R. J. Simes (1986), Biometrika 73, 751–754; from memory.
#[must_use]
pub fn simes(p: &[f64]) -> Option<f64> {
    let mut sorted = p.to_vec();
    sorted.sort_by(f64::total_cmp);
    let n = sorted.len() as f64;
    (1..).zip(&sorted).map(|(rank, p)| p * n / f64::from(rank)).reduce(f64::min)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn simes_takes_the_smallest_scaled_p() {
        assert_eq!(simes(&[0.5, 0.01, 0.02]), Some(0.03_f64.min(0.02 * 3.0 / 2.0)));
        assert_eq!(simes(&[0.2]), Some(0.2));
        assert_eq!(simes(&[]), None);
    }

    #[test]
    fn nothing_to_explain_is_no_evidence() {
        let test = FTest::new(1e-40, 1, 1e-40, 3, 1e-30).unwrap();
        assert_eq!((test.f, test.p), (0.0, 1.0));
    }

    #[test]
    fn an_exact_bend_stays_finite() {
        let test = FTest::new(1.0, 1, 0.0, 3, 1e-30).unwrap();
        assert!(test.f.is_finite() && test.p < 1e-12);
    }

    #[test]
    fn no_degrees_of_freedom_no_test() {
        assert_eq!(FTest::new(1.0, 1, 1.0, 0, 0.0), None);
        assert_eq!(FTest::new(1.0, 0, 1.0, 2, 0.0), None);
    }
}
