//! Does the curve meet the measured zero?

use super::band::ZeroBand;
use crate::distributions::{t_quantile, t_upper};
use crate::fit::Fit;

/// What the zero readings are used for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum ZerosPart {
    /// They are fitted as applications at x = 0.
    Fitted,
    /// They only check the curve.
    CheckOnly,
}

/// Measured zero minus the curve at zero.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Disagreement {
    /// ȳ₀ − f̂(0), output unit.
    pub output: f64,
    /// Its standard uncertainty, output unit.
    pub uncertainty: f64,
    /// Degrees of freedom of the test.
    pub degrees_of_freedom: f64,
    /// Half-width of its interval at the zero band's level, output unit.
    pub half_width: f64,
    /// The difference as an input value by the slope at zero, input unit: positive *reads high*.
    pub input: Option<f64>,
    /// Half-width as an input value, input unit.
    pub input_half_width: Option<f64>,
    /// Two-sided p of the t test.
    pub p: f64,
}

/// Compares the measured zero with the curve; `None` when the curve has no value at zero, or nothing
/// tells the uncertainty.
///
/// # Formula
/// Zeros not fitted: u² = s₀²/n + Var f̂(0), Welch's ν. Zeros fitted: u² = s₋²·(v(0)/n − h(0)), h(0) =
/// Var f̂(0)/s² (the part of their mean that the fit does not follow), with s₋² the residual variance
/// once the zeros may lie anywhere, ν = N − p − 1: externally studentised. t = difference/u.
///
/// # Shapes and units
/// As named at the fields.
///
/// # Source
/// B. L. Welch (1947), Biometrika 34, 28–35; variance of a fitted level's mean residual: Cook &
/// Weisberg (1982), 2.1. Both from memory.
#[must_use]
pub fn disagreement(fit: &Fit, band: &ZeroBand, part: ZerosPart) -> Option<Disagreement> {
    let at_zero = fit.curve.value(0.0);
    let curve_variance = fit.mean_variance(0.0);
    if !at_zero.is_finite() || !curve_variance.is_finite() {
        return None;
    }
    let n = band.n as f64;
    let output = band.mean - at_zero;
    let (variance, nu) = match part {
        ZerosPart::CheckOnly => apart(fit, band, curve_variance),
        ZerosPart::Fitted => within(fit, n, output)?,
    };
    let uncertainty = libm::sqrt(variance);
    if uncertainty.is_nan() || uncertainty <= 0.0 || nu.is_nan() {
        return None;
    }
    let half_width = t_quantile(0.5 * (1.0 + band.level), nu) * uncertainty;
    let slope = fit.curve.derivative(0.0);
    let as_input = |value: f64| Some(value / slope).filter(|x| x.is_finite());
    Some(Disagreement {
        output,
        uncertainty,
        degrees_of_freedom: nu,
        half_width,
        input: as_input(output),
        input_half_width: as_input(half_width).map(f64::abs),
        p: 2.0 * t_upper((output / uncertainty).abs(), nu),
    })
}

/// (u², ν) when the fit does not know the zeros.
fn apart(fit: &Fit, band: &ZeroBand, curve_variance: f64) -> (f64, f64) {
    let own = band.sd * band.sd / band.n as f64;
    let total = own + curve_variance;
    let share = |part: f64, nu: f64| if part > 0.0 { part * part / nu } else { 0.0 };
    let shares = share(own, band.degrees_of_freedom) + share(curve_variance, fit.scatter_freedom());
    (total, total * total / shares)
}

/// (u², ν) when the n zeros are among the fitted points.
fn within(fit: &Fit, n: f64, difference: f64) -> Option<(f64, f64)> {
    let s2 = fit.residual_sd.map(|s| s * s).filter(|s2| *s2 > 0.0)?;
    let nu = fit.degrees_of_freedom.checked_sub(1).filter(|nu| *nu > 0)? as f64;
    // The share of s² that the mean residual of the zeros carries.
    let share = fit.variance_at(0.0) / n - fit.variance_factor(0.0);
    let rest = ((nu + 1.0) * s2 - difference * difference / share) / nu;
    Some((rest * share, nu))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    /// The p of a clean curve and clean zeros is at most 0.05 in 5 % of runs, fitted or not.
    #[test]
    fn a_clean_zero_disagrees_one_time_in_twenty() {
        const RUNS: usize = 1500;
        for (part, number) in [(ZerosPart::CheckOnly, 0), (ZerosPart::Fitted, 1)] {
            let mut stream = Stream::new(61, number);
            let hits = (0..RUNS)
                .filter(|_| {
                    let zeros: Vec<f64> = (0..6).map(|_| 1.0 + 0.3 * stream.normal()).collect();
                    let mut points = simulated(&mut stream, (7, 1), |x| 1.0 + 2.0 * x, |_| 0.3);
                    if part == ZerosPart::Fitted {
                        points.extend(zeros.iter().map(|&y| Point { x: 0.0, y }));
                    }
                    let fit = fitted(Family::Polynomial(1), &points);
                    let band = ZeroBand::new(&zeros, 0.95).unwrap();
                    disagreement(&fit, &band, part).unwrap().p <= 0.05
                })
                .count();
            // Welch's approximation is a little conservative or liberal: within a quarter.
            if part == ZerosPart::Fitted {
                assert_rate(hits, RUNS, 0.05);
            } else {
                assert!((55..=98).contains(&hits), "{hits}");
            }
        }
    }

    #[test]
    fn an_offset_is_found_with_its_direction() {
        let mut stream = Stream::new(62, 0);
        let fit = fitted(Family::Polynomial(1), &simulated(&mut stream, (7, 2), |x| 3.0 - 2.0 * x, |_| 0.05));
        let band = ZeroBand::new(&[4.02, 3.98, 4.01, 3.99], 0.95).unwrap();
        let found = disagreement(&fit, &band, ZerosPart::CheckOnly).unwrap();
        assert!(found.p < 1e-3 && (found.output - 1.0).abs() < 0.15);
        // The output falls: a higher signal reads low.
        assert!(found.input.unwrap() < 0.0 && found.input_half_width.unwrap() > 0.0);
    }

    #[test]
    fn no_value_at_zero_no_comparison() {
        let mut stream = Stream::new(63, 0);
        let fit = fitted(Family::Log, &simulated(&mut stream, (7, 1), libm::log, |_| 0.05));
        let band = ZeroBand::new(&[0.1, 0.2, 0.3], 0.95).unwrap();
        assert_eq!(disagreement(&fit, &band, ZerosPart::CheckOnly), None);
    }
}
