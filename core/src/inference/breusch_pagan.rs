//! Does the size of the residuals follow the fitted value? Breusch and Pagan's test in Koenker's form.
//!
//! What general libraries report. The spread test with its exact reference decides about weights; this
//! one stands beside it.

use super::ftest::FTest;
use super::sphere::whitened;
use crate::distributions::{chi2_upper, f_upper};
use crate::fit::Fit;

/// The method's name for results.
pub const METHOD: &str = "Breusch-Pagan, Koenker's n R2 of squared residuals on [1, fitted value], chi-square(1)";

/// Koenker's test in both of its forms.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BreuschPagan {
    /// LM = n·R², dimensionless.
    pub lm: f64,
    /// P(χ²₁ ≥ LM); one-sided by nature.
    pub p: f64,
    /// The F form with (1, n − 2) degrees of freedom, closer to its level from 11 points on.
    pub f: FTest,
    /// Whether squared residuals grow with the fitted value (false: they fall).
    pub grows: bool,
}

/// Regresses the squared residuals of a fit on its fitted values.
///
/// # Formula
/// R² of e² on [1, f̂], e whitened; LM = n·R²; F = R²/((1 − R²)/(n − 2)). One regressor besides the
/// constant, whatever the family; libraries that pass all columns of the design have more.
///
/// # Shapes and units
/// Dimensionless. `None` with n < 4, without scatter beyond rounding, when all fitted values are equal, or
/// all squared residuals are.
///
/// # Source
/// T. S. Breusch & A. R. Pagan (1979), Econometrica 47, 1287–1294; R. Koenker (1981), J. Econometrics 17,
/// 107–112; from memory. The p of the first without the second's change is never reached in small sets.
#[must_use]
pub fn breusch_pagan(fit: &Fit) -> Option<BreuschPagan> {
    let n = fit.points.len();
    if n < 4 {
        return None;
    }
    let squares: Vec<f64> = scaled(whitened(fit)?).iter().map(|e| e * e).collect();
    let squares = centred(squares);
    let fitted = centred(scaled(fit.points.iter().map(|p| fit.curve.value(p.x)).collect()));
    let product = |a: &[f64], b: &[f64]| a.iter().zip(b).map(|(a, b)| a * b).sum::<f64>();
    let (ss, sf, ff) = (product(&squares, &squares), product(&squares, &fitted), product(&fitted, &fitted));
    // Both are about 1 in size: anything smaller than this is rounding.
    let least = n as f64 * 1e-26;
    if ss <= least || ff <= least {
        return None;
    }
    let r2 = (sf * sf / (ss * ff)).min(1.0);
    let (lm, df2) = (n as f64 * r2, n - 2);
    let f = (r2 / ((1.0 - r2).max(f64::EPSILON) / df2 as f64)).min(f64::MAX);
    let f = FTest { f, df1: 1, df2, p: f_upper(f, 1.0, df2 as f64) };
    Some(BreuschPagan { lm, p: chi2_upper(lm, 1.0), f, grows: sf > 0.0 })
}

/// Brought to a largest size of 1.
fn scaled(mut values: Vec<f64>) -> Vec<f64> {
    let largest = values.iter().fold(0.0, |top: f64, v| top.max(v.abs()));
    if largest > 0.0 {
        values.iter_mut().for_each(|v| *v /= largest);
    }
    values
}

/// Minus the mean.
fn centred(mut values: Vec<f64>) -> Vec<f64> {
    let mean = super::levels::mean_of(values.iter().copied());
    values.iter_mut().for_each(|v| *v -= mean);
    values
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    /// 100 000 runs of another program: LM and F form at 5 in 100, LM form at 1 in 100. χ²₁ is not exact: the LM form rejects too
    /// often for few points, and a quadratic through six points almost never.
    #[test]
    fn sizes_are_those_expected() {
        const RUNS: usize = 10_000;
        let cases = [
            ((6, 1), 1, 0.0656, 0.0595, 0.0),
            ((6, 1), 2, 0.0, 0.0, 0.0),
            ((7, 1), 1, 0.0707, 0.0619, 0.0),
            ((11, 1), 1, 0.0562, 0.0501, 0.0033),
            ((5, 3), 1, 0.0546, 0.0496, 0.0047),
            ((11, 3), 1, 0.0506, 0.0486, 0.0069),
        ];
        for (number, (design, degree, lm, f, lm_one)) in (0..).zip(cases) {
            let mut stream = Stream::new(79, number);
            let mut hits = [0; 3];
            for _ in 0..RUNS {
                let fit = fitted(Family::Polynomial(degree), &simulated(&mut stream, design, |x| x, |_| 1.0));
                let found = breusch_pagan(&fit).unwrap();
                hits[0] += usize::from(found.p <= 0.05);
                hits[1] += usize::from(found.f.p <= 0.05);
                hits[2] += usize::from(found.p <= 0.01);
            }
            println!("{design:?} degree {degree}: {:?}", hits.map(|h| h as f64 / RUNS as f64));
            for (count, expected) in hits.into_iter().zip([lm, f, lm_one]) {
                if expected > 0.0 {
                    assert_rate(count, RUNS, expected);
                } else {
                    assert!(count <= 5, "{count}");
                }
            }
        }
    }

    #[test]
    fn a_funnel_grows_and_a_falling_curve_turns_it() {
        for slope in [2.0, -2.0] {
            let points = simulated(&mut Stream::new(75, 0), (11, 5), |x| slope * x, |x| 0.05 * x);
            let found = breusch_pagan(&fitted(Family::Polynomial(1), &points)).unwrap();
            assert!(found.p < 0.01 && found.f.p < 0.01);
            assert_eq!(found.grows, slope > 0.0);
        }
    }

    #[test]
    fn nothing_to_regress() {
        let points = |ys: &[f64]| -> Vec<crate::fit::Point> {
            ys.iter().enumerate().map(|(i, &y)| crate::fit::Point { x: i as f64, y }).collect()
        };
        assert_eq!(breusch_pagan(&fitted(Family::Polynomial(1), &points(&[1.0, 2.0, 3.0, 4.0, 5.0]))), None);
        assert_eq!(breusch_pagan(&fitted(Family::Polynomial(1), &points(&[1.0, 2.5, 3.0]))), None);
    }
}
