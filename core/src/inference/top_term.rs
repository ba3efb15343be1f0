//! Does the highest term of a polynomial earn its place?

use crate::distributions::t_upper;
use crate::fit::Fit;
use crate::model::Family;

/// Why a polynomial has more terms than its data carry.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Excess {
    /// Fewer than p + 2 different standards: nothing is left to test the shape with.
    Levels {
        /// Different standards.
        levels: usize,
        /// Coefficients.
        coefficients: usize,
    },
    /// The highest coefficient could as well be 0.
    TopTerm {
        /// Two-sided p of its t test.
        p: f64,
    },
    /// Standards that were left out are met worse than with one term less.
    LeftOut {
        /// Leave-one-level-out RMS with the term, output unit.
        with: f64,
        /// Without it, output unit.
        without: f64,
    },
}

/// The two-sided p that the highest coefficient of a polynomial is 0; `None` for other families, for
/// less than a quadratic, and while the scatter is not known.
///
/// # Formula
/// t = b_d/u(b_d) against Student with the freedom of the scatter. The highest coefficient is the same
/// on every shifted scale.
///
/// # Shapes and units
/// Dimensionless.
///
/// # Source
/// Draper & Smith, Applied Regression Analysis, 3rd ed., 12.1; from memory.
#[must_use]
pub fn top_term(fit: &Fit) -> Option<f64> {
    if !matches!(fit.family, Family::Polynomial(2..)) {
        return None;
    }
    let (b, u) = (fit.coefficients.last()?, fit.standard_uncertainties()?.last()?);
    if *b == 0.0 {
        return Some(1.0);
    }
    Some(2.0 * t_upper(b.abs() / u.max(f64::MIN_POSITIVE), fit.scatter_freedom()))
}

/// Why a polynomial of at least the second degree has too many terms; `None` when it has not.
///
/// # Formula
/// m < p + 2; or p of the top term > 0.05; or the leave-one-level-out RMS exceeds that of `lower`.
/// AICc adds nothing: with N ≥ 4(p + 2) a term with p ≤ 0.05 always lowers it.
///
/// # Shapes and units
/// `lower`: the same data and weights, one degree less.
///
/// # Source
/// Definitions of this program; cross-validation after M. Stone (1974), J. R. Statist. Soc. B 36,
/// 111–147; from memory.
#[must_use]
pub fn excess(fit: &Fit, lower: Option<&Fit>) -> Option<Excess> {
    if !matches!(fit.family, Family::Polynomial(2..)) || fit.degrees_of_freedom == 0 {
        return None;
    }
    let (levels, coefficients) = (fit.levels().len(), fit.coefficients.len());
    if levels < coefficients + 2 {
        return Some(Excess::Levels { levels, coefficients });
    }
    if let Some(p) = top_term(fit).filter(|p| *p > 0.05) {
        return Some(Excess::TopTerm { p });
    }
    let (with, without) = (fit.level_out_rmse()?, lower?.level_out_rmse()?);
    (with > without).then_some(Excess::LeftOut { with, without })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, pontius, simulated};
    use crate::numerics::streams::Stream;

    fn poly(d: u8) -> Family {
        Family::Polynomial(d)
    }

    /// B2 of NIST/ITL StRD Pontius with its certified SD: t = 64.95.
    #[test]
    fn the_load_cell_needs_its_bend_and_no_more() {
        let fits = [1, 2, 3].map(|d| fitted(poly(d), &pontius()));
        assert!(top_term(&fits[1]).unwrap() < 1e-30);
        assert_eq!(excess(&fits[1], Some(&fits[0])), None);
        assert!(matches!(excess(&fits[2], Some(&fits[1])), Some(Excess::TopTerm { .. })));
        assert_eq!((top_term(&fits[0]), excess(&fits[0], None)), (None, None));
    }

    #[test]
    fn a_bend_in_a_clean_line_is_one_too_many() {
        let mut stream = Stream::new(14, 0);
        let mut caught = || {
            let points = simulated(&mut stream, (6, 1), |x| 2.0 * x, |_| 0.1);
            excess(&fitted(poly(2), &points), Some(&fitted(poly(1), &points))).is_some()
        };
        let count = (0..1000).filter(|_| caught()).count();
        assert!(count >= 940, "{count}");
    }

    /// Own simulation with another program: 0.005 at a bend of 4 SD on 6 × 1.
    #[test]
    fn a_needed_bend_stays() {
        let mut stream = Stream::new(15, 0);
        let mut refused = || {
            // t² departs from its best line over six even places by 4 SD.
            let bend = |x: f64| 4.0 * ((x - 3.5) / 2.5).powi(2) / 0.533;
            let points = simulated(&mut stream, (6, 1), |x| 9.0 * x + bend(x), |_| 1.0);
            excess(&fitted(poly(2), &points), Some(&fitted(poly(1), &points))).is_some()
        };
        let count = (0..1000).filter(|_| refused()).count();
        assert!(count <= 60, "{count}");
    }

    #[test]
    fn five_standards_do_not_carry_a_cubic() {
        let points = simulated(&mut Stream::new(16, 0), (5, 2), |x| x * x * x, |_| 0.1);
        let found = excess(&fitted(poly(3), &points), None);
        assert_eq!(found, Some(Excess::Levels { levels: 5, coefficients: 4 }));
    }
}
