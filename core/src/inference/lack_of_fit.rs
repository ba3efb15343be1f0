//! Lack of fit against pure error: do repeats agree better than the curve agrees with them?

use super::ftest::FTest;
use super::levels::{Level, levels};
use crate::fit::Fit;
use crate::numerics::Dd;
use crate::numerics::scale::{as_f64, exponent_of};
use crate::numerics::sums::Deviations;

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
    let y = |i: usize| fit.points[i].y;
    let sum_of_squares = weighted(fit, &levels, y, |_, inside| inside.squares());
    Some(PureError { sum_of_squares, degrees_of_freedom, sd: libm::sqrt(sum_of_squares / as_f64(degrees_of_freedom)) })
}

/// Σ over the levels of (a square of each level's values)/v, in double-double.
fn weighted(
    fit: &Fit,
    levels: &[Level],
    value: impl Fn(usize) -> f64,
    square: impl Fn(&Level, &Deviations) -> Dd,
) -> f64 {
    let inside = |level: &Level| -> Option<Deviations> {
        Deviations::new(&level.members.iter().map(|&i| value(i)).collect::<Vec<f64>>())
    };
    let Some(found) = levels.iter().map(inside).collect::<Option<Vec<Deviations>>>() else {
        return f64::NAN;
    };
    // Common powers of two, so that very large and small units stay inside the range.
    let exponent = found.iter().map(Deviations::exponent).max().unwrap_or(0);
    let v: Vec<f64> = levels.iter().map(|level| fit.variance_at(level.x)).collect();
    let unit = exponent_of(v.iter().copied().fold(f64::INFINITY, f64::min));
    let term = |((level, inside), v): ((&Level, &Deviations), &f64)| {
        let scaled = square(level, inside).times_power_of_two(2 * (inside.exponent() - exponent));
        scaled / Dd::from(libm::scalbn(*v, -unit))
    };
    let sum: Dd = levels.iter().zip(&found).zip(&v).map(term).sum();
    libm::scalbn(sum.to_f64(), 2 * exponent - unit)
}

/// The lack-of-fit F test; `None` when m ≤ p or without repeats.
///
/// # Formula
/// F = [Σ nᵢwᵢ(ȳᵢ − f̂(xᵢ))²/(m − p)]/s_pe² with (m − p, N − m) degrees of freedom. For a constant this is
/// the F of a one-way analysis of variance.
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
    // The mean residual of a level is ȳ − f̂ without the rounding of either.
    let gap = |level: &Level, inside: &Deviations| inside.scaled_mean().square() * as_f64(level.count());
    let misfit = weighted(fit, &levels, |i| fit.residuals[i], gap);
    let floor = super::added::Added::new(fit).floor();
    FTest::new(misfit, df1, pure.sum_of_squares, pure.degrees_of_freedom, floor)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, pontius};
    use crate::fit::Point;
    use crate::model::Family;
    use serde_json::Value;

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

    macro_rules! strd {
        ($name:literal) => {
            include_str!(concat!("../../../tests/published/strd/", $name, ".json"))
        };
    }

    /// NIST/ITL StRD, one-way analysis of variance (tests/published/strd/SOURCE.md): F between the groups is
    /// the lack-of-fit F of a constant. Held to four units of the last place of an exact calculation from
    /// the same doubles, and to as many certified digits as those doubles can give.
    #[test]
    fn the_analysis_of_variance_of_groups() {
        let exact: Value = serde_json::from_str(strd!("means")).unwrap();
        for text in [strd!("AtmWtAg"), strd!("SiRstv"), strd!("SmLs01"), strd!("SmLs04"), strd!("SmLs07")] {
            let set: Value = serde_json::from_str(text).unwrap();
            let exact = exact.as_array().unwrap().iter().find(|row| row["name"] == set["name"]).unwrap();
            let numbers =
                |key: &str| -> Vec<f64> { set[key].as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect() };
            let points: Vec<Point> = numbers("x").into_iter().zip(numbers("y")).map(|(x, y)| Point { x, y }).collect();
            let fit = fitted(Family::Polynomial(0), &points);
            let (pure, test) = (pure_error(&fit).unwrap(), lack_of_fit(&fit).unwrap());
            let certified = |name: &str| {
                let rows = set["certified"].as_array().unwrap();
                rows.iter().find(|row| row["name"] == name).unwrap()["estimate"].as_f64().unwrap()
            };
            let freedom = (test.df1 as f64, test.df2 as f64, pure.degrees_of_freedom as f64);
            assert_eq!(freedom, (certified("between_df"), certified("within_df"), certified("within_df")));
            for (found, key, certified) in [
                (test.f, "f", certified("f")),
                (pure.sum_of_squares, "within_ss", certified("within_ss")),
                (pure.sd, "residual_sd", set["residual_sd"].as_f64().unwrap()),
            ] {
                let exact = exact[key].as_f64().unwrap();
                let error = ((found - exact) / exact).abs();
                assert!(error <= 4.0 * f64::EPSILON, "{} {key}: {found:e} for {exact:e}", set["name"]);
                let digits = |value: f64| (-libm::log10(((value - certified) / certified).abs())).min(15.0);
                assert!(digits(found) >= digits(exact).min(14.5) - 0.1, "{} {key}", set["name"]);
            }
        }
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
