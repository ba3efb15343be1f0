//! What happened in the order of the work: drift over the run, settling within a standard.

use super::added::Added;
use super::ftest::FTest;
use crate::fit::Fit;

/// What run order shows.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Drift {
    /// Tested.
    Tested(DriftTest),
    /// The order says the same as the standards' values, so drift would look like gain.
    Confounded,
    /// No order was recorded.
    NoOrder,
    /// No degrees of freedom are left for one more term.
    TooFew,
}

/// A drift with its size.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DriftTest {
    /// Partial F of the order, (1, ν − 1).
    pub test: FTest,
    /// Change per unit of order (per application, or per unit of time handed in), output unit.
    pub per_step: f64,
    /// Change from the first to the last application, output unit.
    pub over_run: f64,
    /// The same as an input value by the mean slope of the curve, input unit.
    pub over_run_input: f64,
}

/// Tests whether the readings moved while the work went on.
///
/// # Formula
/// Partial F of the run order added to the model: F = explained/(rest/(ν − 1)).
/// Residuals regressed on order instead would lose the part of the order that the model follows.
///
/// # Shapes and units
/// `order`: one entry an observation, place in the run or time, any unit; `None` when not recorded.
///
/// # Source
/// Extra sum of squares: Draper & Smith, Applied Regression Analysis, 3rd ed., 6.1; from memory.
#[must_use]
pub fn drift(fit: &Fit, order: Option<&[f64]>) -> Drift {
    let Some(order) = order.filter(|o| usable(o, fit)) else {
        return Drift::NoOrder;
    };
    if fit.degrees_of_freedom < 2 {
        return Drift::TooFew;
    }
    if follows_level(fit, order) {
        return Drift::Confounded;
    }
    let low = order.iter().copied().fold(f64::INFINITY, f64::min);
    let high = order.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let scaled: Vec<f64> = order.iter().map(|o| (o - low) / (high - low) - 0.5).collect();
    let added = Added::new(fit);
    let Some(term) = added.term(&scaled, &[]) else {
        return Drift::Confounded;
    };
    let left = (added.residual_ss() - term.explained).max(0.0);
    match FTest::new(term.explained, 1, left, fit.degrees_of_freedom - 1, added.floor()) {
        None => Drift::TooFew,
        Some(test) => Drift::Tested(DriftTest {
            test,
            per_step: term.coefficient / (high - low),
            over_run: term.coefficient,
            over_run_input: term.coefficient / mean_slope(fit),
        }),
    }
}

/// One place for every observation, all of them known.
fn usable(order: &[f64], fit: &Fit) -> bool {
    order.len() == fit.points.len() && order.iter().all(|o| o.is_finite())
}

/// |rank correlation(order, level)| = 1: one rises (or falls) strictly whenever the other rises.
/// Repeats of a level in a row still tell drift from gain.
fn follows_level(fit: &Fit, order: &[f64]) -> bool {
    let mut pairs: Vec<(f64, f64)> = order.iter().copied().zip(fit.points.iter().map(|p| p.x)).collect();
    pairs.sort_by(|a, b| a.0.total_cmp(&b.0));
    let ascending = pairs.windows(2).all(|w| w[1].1 > w[0].1);
    let descending = pairs.windows(2).all(|w| w[1].1 < w[0].1);
    ascending || descending
}

/// (f̂(x_max) − f̂(x_min))/(x_max − x_min): output unit per input unit.
pub(crate) fn mean_slope(fit: &Fit) -> f64 {
    let low = fit.points.iter().map(|p| p.x).fold(f64::INFINITY, f64::min);
    let high = fit.points.iter().map(|p| p.x).fold(f64::NEG_INFINITY, f64::max);
    (fit.curve.value(high) - fit.curve.value(low)) / (high - low)
}

/// Settling with its size.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Settling {
    /// F(1, N − m − 1) of one common slope within the levels.
    pub test: FTest,
    /// Change per unit of order within a level, output unit.
    pub per_step: f64,
}

/// Tests whether the readings of a standard still moved in one direction.
///
/// # Formula
/// One slope common to all levels: b = Σ(o − ō_i)(y − ȳ_i)w/Σ(o − ō_i)²w, F with (1, N − m − 1).
///
/// # Shapes and units
/// `order`: one entry an observation. `None` without order, without repeats, or with N − m < 2.
///
/// # Source
/// Analysis of covariance, common practice.
#[must_use]
pub fn settling(fit: &Fit, order: Option<&[f64]>) -> Option<Settling> {
    let order = order.filter(|o| usable(o, fit))?;
    let added = Added::new(fit);
    let levels = added.levels();
    let df2 = (fit.points.len() - levels.len()).checked_sub(1)?;
    let (mut soo, mut soy, mut syy) = (0.0, 0.0, 0.0);
    for level in levels {
        let centre = super::levels::mean_of(level.members.iter().map(|&i| order[i]));
        let weight = 1.0 / fit.variance_at(level.x);
        for &i in &level.members {
            let (o, y) = (order[i] - centre, fit.points[i].y - level.mean);
            soo += weight * o * o;
            soy += weight * o * y;
            syy += weight * y * y;
        }
    }
    if soo <= 0.0 {
        return None;
    }
    let explained = soy * soy / soo;
    let test = FTest::new(explained, 1, (syy - explained).max(0.0), df2, added.floor())?;
    Some(Settling { test, per_step: soy / soo })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    fn counted(n: usize) -> Vec<f64> {
        (0..n).map(|i| i as f64).collect()
    }

    /// Levels in cycles 1…5, 1…5, 1…5, drifting by `per_step`.
    fn cycles(stream: &mut Stream, per_step: f64) -> Vec<Point> {
        (0..15)
            .map(|i| {
                let x = f64::from(i % 5 + 1);
                let y = 3.0 - 2.0 * x + per_step * f64::from(i) + 0.1 * stream.normal();
                Point { x, y }
            })
            .collect()
    }

    #[test]
    fn a_drift_is_found_with_its_size() {
        let points = cycles(&mut Stream::new(81, 0), 0.05);
        let fit = fitted(Family::Polynomial(1), &points);
        let Drift::Tested(found) = drift(&fit, Some(&counted(15))) else {
            panic!("an order in cycles can be tested");
        };
        assert!(found.test.p < 1e-4);
        assert_eq!((found.test.df1, found.test.df2), (1, 12));
        assert!((found.per_step - 0.05).abs() < 0.02);
        assert!((found.over_run / (14.0 * found.per_step) - 1.0).abs() < 1e-12);
        // The output falls with the value: a rising signal reads low.
        assert!((found.over_run_input * -2.0 / found.over_run - 1.0).abs() < 0.1);
    }

    /// Partial F, 5 % in cycles and level by level; own simulation of both gives 0.048 and 0.053.
    #[test]
    fn clean_runs_drift_one_time_in_twenty() {
        const RUNS: usize = 1500;
        for cycled in [true, false] {
            let mut stream = Stream::new(82, u64::from(cycled));
            let hits = (0..RUNS)
                .filter(|_| {
                    let points =
                        if cycled { cycles(&mut stream, 0.0) } else { simulated(&mut stream, (5, 3), |x| x, |_| 1.0) };
                    let fit = fitted(Family::Polynomial(1), &points);
                    matches!(drift(&fit, Some(&counted(15))), Drift::Tested(t) if t.test.p <= 0.05)
                })
                .count();
            assert_rate(hits, RUNS, 0.05);
        }
    }

    #[test]
    fn order_equal_to_level_cannot_tell_drift_from_gain() {
        let points = simulated(&mut Stream::new(83, 0), (6, 1), |x| x, |_| 0.1);
        let fit = fitted(Family::Polynomial(1), &points);
        assert_eq!(drift(&fit, Some(&counted(6))), Drift::Confounded);
        let backwards: Vec<f64> = counted(6).iter().map(|o| -o).collect();
        assert_eq!(drift(&fit, Some(&backwards)), Drift::Confounded);
        assert_eq!(drift(&fit, None), Drift::NoOrder);
        assert_eq!(drift(&fit, Some(&[1.0])), Drift::NoOrder);
        assert_eq!(drift(&fit, Some(&[f64::NAN; 6])), Drift::NoOrder);
        let two = fitted(Family::Polynomial(1), &points[..2]);
        assert_eq!(drift(&two, Some(&counted(2))), Drift::TooFew);
    }

    #[test]
    fn settling_is_seen_within_the_levels() {
        let mut points = simulated(&mut Stream::new(84, 0), (5, 3), |x| 2.0 * x, |_| 0.02);
        for (i, point) in points.iter_mut().enumerate() {
            point.y += 0.1 * (i % 3) as f64;
        }
        let fit = fitted(Family::Polynomial(1), &points);
        let found = settling(&fit, Some(&counted(15))).unwrap();
        assert_eq!((found.test.df1, found.test.df2), (1, 9));
        assert!(found.test.p < 1e-4 && (found.per_step - 0.1).abs() < 0.02);
        assert_eq!(settling(&fit, None), None);
        let single = fitted(Family::Polynomial(1), &[points[0], points[3], points[6]]);
        assert_eq!(settling(&single, Some(&counted(3))), None);
    }
}
