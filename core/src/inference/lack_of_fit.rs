//! Lack of fit against pure error: do repeats agree better than the curve agrees with them?

use super::ftest::FTest;
use super::levels::levels;
use crate::fit::Fit;

/// The scatter of repeats around their own means.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PureError {
    /// Σw(y − ȳ_level)², in the fit's weights.
    pub sum_of_squares: f64,
    /// N − m.
    pub degrees_of_freedom: usize,
    /// √(SS/(N − m)): SD of one application where v = 1, output unit.
    pub sd: f64,
}

/// Pure error of a fit's observations; `None` without repeats.
///
/// # Formula
/// s_pe² = Σᵢ Σⱼ wᵢ(yᵢⱼ − ȳᵢ)²/(N − m), wᵢ = 1/v(xᵢ), one weight within a level.
///
/// # Shapes and units
/// Output unit; weighted: the SD where v = 1.
///
/// # Source
/// ISO 11095:1996, 5.3 (lack of fit and pure error); from memory.
#[must_use]
pub fn pure_error(fit: &Fit) -> Option<PureError> {
    let levels = levels(&fit.points);
    let degrees_of_freedom = fit.points.len() - levels.len();
    if degrees_of_freedom == 0 {
        return None;
    }
    let sum_of_squares = levels
        .iter()
        .map(|level| {
            let inside: f64 = level.members.iter().map(|&i| (fit.points[i].y - level.mean).powi(2)).sum();
            inside / fit.variance_at(level.x)
        })
        .sum::<f64>();
    Some(PureError { sum_of_squares, degrees_of_freedom, sd: libm::sqrt(sum_of_squares / degrees_of_freedom as f64) })
}

/// The lack-of-fit F test; `None` when m ≤ p or without repeats.
///
/// # Formula
/// F = [Σ nᵢwᵢ(ȳᵢ − f̂(xᵢ))²/(m − p)]/s_pe² with (m − p, N − m) degrees of freedom.
///
/// # Shapes and units
/// Dimensionless; p is the upper tail.
///
/// # Source
/// ISO 11095:1996, 5.3; NIST/SEMATECH e-Handbook 4.4.4.6. Both from memory.
#[must_use]
pub fn lack_of_fit(fit: &Fit) -> Option<FTest> {
    let levels = levels(&fit.points);
    let df1 = levels.len().checked_sub(fit.coefficients.len())?;
    let pure = pure_error(fit)?;
    let misfit: f64 = levels
        .iter()
        .map(|level| {
            let gap = level.mean - fit.curve.value(level.x);
            level.count() as f64 * gap * gap / fit.variance_at(level.x)
        })
        .sum();
    let floor = super::added::Added::new(fit).floor();
    FTest::new(misfit, df1, pure.sum_of_squares, pure.degrees_of_freedom, floor)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, pontius};
    use crate::model::Family;

    #[test]
    fn no_repeats_no_test() {
        let half = &pontius()[..20];
        let fit = fitted(Family::Polynomial(1), half);
        assert!(pure_error(&fit).is_none() && lack_of_fit(&fit).is_none());
    }

    #[test]
    fn as_many_levels_as_coefficients_leave_no_test() {
        let points: Vec<_> = pontius().into_iter().filter(|p| p.x <= 300_000.0).collect();
        let fit = fitted(Family::Polynomial(1), &points);
        assert!(pure_error(&fit).is_some());
        assert_eq!(lack_of_fit(&fit), None);
    }

    /// With v the same everywhere the split of the residual sum of squares is exact.
    #[test]
    fn misfit_and_pure_error_add_up() {
        let fit = fitted(Family::Polynomial(2), &pontius());
        let pure = pure_error(&fit).unwrap();
        let test = lack_of_fit(&fit).unwrap();
        let misfit = test.f * 17.0 * pure.sum_of_squares / 20.0;
        assert!(((misfit + pure.sum_of_squares) / fit.residual_ss - 1.0).abs() < 1e-9);
    }
}
