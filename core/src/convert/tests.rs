//! Conversion against published figures, closed forms, laws and simulation.

use super::*;
use crate::convert::reference::{assert_rate, fitted, pontius, simulated};
use crate::fit::{self, Point, Weights};
use crate::model::Family;
use crate::numerics::streams::Stream;

fn line_data(slope: f64, scatter: f64) -> Vec<Point> {
    let wobble = [0.3, -1.1, 0.9, 0.4, -0.8, 0.7, -0.4];
    (1..=7)
        .map(|i| Point { x: f64::from(i), y: 3.0 + slope * f64::from(i) + scatter * wobble[i as usize - 1] })
        .collect()
}

/// NIST/SEMATECH e-Handbook 4.6.1.10: load 1705106 at a deflection of 1.239722 (seen in print); the
/// limits by inverting the 95 % prediction band were recomputed in full precision.
#[test]
fn the_load_cell_example() {
    let fit = fitted(Family::Polynomial(2), &pontius());
    let result = Converter::new(&fit, 1, 0.95).unwrap().convert(1.239_722);
    assert!((result.value.unwrap() - 1_705_105.568_851_7).abs() < 2e-4);
    assert!((result.low.unwrap() - 1_704_513.372_937_5).abs() < 2e-2, "{:?}", result.low);
    assert!((result.high.unwrap() - 1_705_697.763_616_5).abs() < 2e-2, "{:?}", result.high);
    assert_eq!(result.state, State::InRange);
    assert_eq!((result.pieces.len(), result.degrees_of_freedom), (1, Some(37.0)));
    let half = result.coverage_factor.unwrap() * result.standard_uncertainty.unwrap();
    assert!((half / 592.2 - 1.0).abs() < 1e-3);
}

/// The roots of (b² − q²s²/S)d² − 2b(y₀ − ȳ)d + (y₀ − ȳ)² − q²s²(1/k + 1/N) = 0, d = x − x̄.
fn fieller(points: &[Point], y0: f64, k: f64, q: f64) -> (f64, [f64; 2]) {
    let n = points.len() as f64;
    let (mx, my) = (points.iter().map(|p| p.x).sum::<f64>() / n, points.iter().map(|p| p.y).sum::<f64>() / n);
    let sxx: f64 = points.iter().map(|p| (p.x - mx).powi(2)).sum();
    let b = points.iter().map(|p| (p.x - mx) * (p.y - my)).sum::<f64>() / sxx;
    let ss: f64 = points.iter().map(|p| (p.y - my - b * (p.x - mx)).powi(2)).sum();
    let v = q * q * ss / (n - 2.0);
    let (a, h, c) = (b * b - v / sxx, b * (y0 - my), (y0 - my).powi(2) - v * (1.0 / k + 1.0 / n));
    let root = (h * h - a * c).sqrt();
    let mut ends = [mx + (h - root) / a, mx + (h + root) / a];
    ends.sort_by(f64::total_cmp);
    (a, ends)
}

#[test]
fn a_line_gives_fiellers_interval() {
    for (slope, scatter, y0, k) in [(2.0, 0.1, 9.0, 1), (-2.0, 0.4, -4.0, 3), (2.0, 1.0, 40.0, 2), (0.9, 1.0, 3.0, 1)] {
        let points = line_data(slope, scatter);
        let fit = fitted(Family::Polynomial(1), &points);
        let result = Converter::new(&fit, k, 0.95).unwrap().convert(y0);
        let (a, [low, high]) = fieller(&points, y0, k as f64, result.coverage_factor.unwrap());
        assert!(a > 0.0);
        assert!((result.low.unwrap() - low).abs() < 1e-11 * high.abs().max(1.0), "{result:?} {low}");
        assert!((result.high.unwrap() - high).abs() < 1e-11 * high.abs().max(1.0), "{result:?} {high}");
        assert_eq!((result.low_state, result.high_state), (EndState::Finite, EndState::Finite));
    }
}

/// A slope that is not told from zero: Fieller's set is everything, or everything but an interval.
#[test]
fn a_weak_slope_gives_unbounded_ends() {
    let points = line_data(0.05, 1.0);
    let fit = fitted(Family::Polynomial(1), &points);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let middle = converter.convert(3.2);
    assert_eq!(middle.state, State::Unbounded);
    assert_eq!((middle.low, middle.high, middle.standard_uncertainty), (None, None, None));
    assert_eq!((middle.low_state, middle.high_state), (EndState::Unbounded, EndState::Unbounded));

    let far = converter.convert(9.0);
    let (a, [low, high]) = fieller(&points, 9.0, 1.0, far.coverage_factor.unwrap());
    assert!(a < 0.0);
    assert_eq!((far.state, far.pieces.len()), (State::TwoPieces, 2));
    assert_eq!((far.pieces[0].low, far.pieces[1].high), (None, None));
    assert!((far.pieces[0].high.unwrap() / low - 1.0).abs() < 1e-10);
    assert!((far.pieces[1].low.unwrap() / high - 1.0).abs() < 1e-10);
    assert!(far.pieces.iter().any(|piece| piece.contains(far.value.unwrap())));
}

#[test]
fn inverting_what_the_curve_gives_returns_the_value() {
    let mut stream = Stream::new(31, 0);
    type Shape = (Family, fn(f64) -> f64);
    let shapes: [Shape; 4] = [
        (Family::Polynomial(1), |x| 5.0 - 0.7 * x),
        (Family::Polynomial(2), |x| 1.0 + 2.0 * x - 0.05 * x * x),
        (Family::Polynomial(3), |x| 2.0 * x + 0.01 * x * x * x),
        (Family::Log, |x| 4.0 - 1.5 * libm::log(x)),
    ];
    for (family, f) in shapes {
        let fit = fitted(family, &simulated(&mut stream, (8, 2), f, |_| 0.01));
        let converter = Converter::new(&fit, 1, 0.95).unwrap();
        for step in 0..=70 {
            let x = 1.0 + 0.1 * f64::from(step);
            let result = converter.convert(fit.curve.value(x));
            assert!((result.value.unwrap() - x).abs() < 1e-12 * x.max(1.0), "{x} {result:?}");
            assert!(result.low.unwrap() < x && x < result.high.unwrap());
            assert_eq!(result.state, State::InRange);
        }
    }
}

#[test]
fn shifting_and_scaling_do_the_same_to_the_result() {
    let points = line_data(2.0, 0.3);
    let moved: Vec<Point> = points.iter().map(|p| Point { x: 4.0 * p.x - 10.0, y: -3.0 * p.y + 7.0 }).collect();
    for degree in [1, 2] {
        let (a, b) = (fitted(Family::Polynomial(degree), &points), fitted(Family::Polynomial(degree), &moved));
        let first = Converter::new(&a, 2, 0.9).unwrap().convert(9.5);
        let second = Converter::new(&b, 2, 0.9).unwrap().convert(-3.0 * 9.5 + 7.0);
        let pairs = [(first.value, second.value), (first.low, second.low), (first.high, second.high)];
        for (x, z) in pairs {
            assert!((4.0 * x.unwrap() - 10.0 - z.unwrap()).abs() < 1e-10);
        }
        let ratio = second.standard_uncertainty.unwrap() / first.standard_uncertainty.unwrap();
        assert!((ratio - 4.0).abs() < 1e-10);
    }
}

#[test]
fn every_place_has_its_state() {
    let points: Vec<Point> = line_data(2.0, 0.01).into_iter().map(|p| Point { x: p.x + 1.0, ..p }).collect();
    let fit = fitted(Family::Polynomial(1), &points);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let at = |x: f64| converter.convert(fit.curve.value(x)).state;
    assert_eq!(at(1.0), State::BetweenZeroAndLowest);
    assert_eq!(at(1.995), State::InRange);
    assert_eq!(at(5.0), State::InRange);
    assert_eq!(at(8.005), State::InRange);
    assert_eq!(at(9.0), State::Extrapolated);
    assert_eq!(at(-1.0), State::Extrapolated);
}

/// y = 4x − 0.2x² turns at x = 10, y = 20; standards 1…7 lie on one branch.
#[test]
fn beyond_the_turning_point_there_is_no_value_but_still_an_interval() {
    let wobble = line_data(0.0, 0.05);
    let points: Vec<Point> =
        wobble.iter().map(|p| Point { x: p.x, y: p.y - 3.0 + 4.0 * p.x - 0.2 * p.x * p.x }).collect();
    let fit = fitted(Family::Polynomial(2), &points);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let inside = converter.convert(12.0);
    assert_eq!((inside.state, inside.candidates.len(), inside.pieces.len()), (State::InRange, 1, 1));
    let near = converter.convert(20.2);
    assert_eq!((near.state, near.value), (State::NoValue, None));
    assert!(near.low.unwrap() < 10.0 && near.low.unwrap() > 7.0, "{near:?}");
    let beyond = converter.convert(60.0);
    assert_eq!((beyond.state, beyond.pieces.len()), (State::NoValue, 0));
    assert_eq!((beyond.low_state, beyond.high_state), (EndState::None, EndState::None));
}

#[test]
fn a_curve_that_turns_among_the_standards_gives_two_values() {
    let wobble = line_data(0.0, 0.01);
    let points: Vec<Point> = wobble.iter().map(|p| Point { x: p.x, y: p.y + (p.x - 4.0).powi(2) }).collect();
    let fit = fitted(Family::Polynomial(2), &points);
    let result = Converter::new(&fit, 1, 0.95).unwrap().convert(fit.curve.value(2.0));
    assert_eq!((result.state, result.value), (State::TwoValues, None));
    assert_eq!((result.candidates.len(), result.pieces.len()), (2, 2));
    assert!((result.candidates[0] - 2.0).abs() < 1e-12);
}

#[test]
fn nothing_left_over_gives_a_value_without_an_interval() {
    let fit = fitted(Family::Polynomial(1), &line_data(2.0, 0.1)[..2]);
    let result = Converter::new(&fit, 1, 0.95).unwrap().convert(6.0);
    assert!(result.value.is_some() && result.standard_uncertainty.is_none());
    assert_eq!((result.low_state, result.state), (EndState::None, State::InRange));
}

#[test]
fn exact_data_give_an_interval_without_width() {
    let fit = fitted(Family::Polynomial(1), &line_data(2.0, 0.0));
    let result = Converter::new(&fit, 1, 0.95).unwrap().convert(9.0);
    assert!((result.value.unwrap() - 3.0).abs() < 1e-14);
    assert!((result.high.unwrap() - result.low.unwrap()).abs() < 1e-12);
}

#[test]
fn the_logarithm_stays_above_zero() {
    let mut stream = Stream::new(33, 0);
    let fit = fitted(Family::Log, &simulated(&mut stream, (6, 1), |x| 1.0 + 0.3 * libm::log(x), |_| 0.1));
    let result = Converter::new(&fit, 1, 0.95).unwrap().convert(0.2);
    assert!(result.value.unwrap() > 0.0);
    assert!(result.low.is_none_or(|low| low > 0.0));
}

/// The flipped line has slope S_xy/S_yy: both pass through the means.
#[test]
fn the_flipped_line_meets_the_inverted_one_at_the_means() {
    let points = line_data(2.0, 1.0);
    let fit = fitted(Family::Polynomial(1), &points);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let mean = points.iter().map(|p| p.y).sum::<f64>() / 7.0;
    let at_mean = converter.convert(mean);
    assert!((at_mean.flipped_value.unwrap() - 4.0).abs() < 1e-12);
    assert!((at_mean.value.unwrap() - 4.0).abs() < 1e-12);
    let above = converter.convert(mean + 4.0);
    assert!(above.flipped_value.unwrap() < above.value.unwrap());
    let worst = flipped_difference(converter.fit).unwrap();
    assert!(worst.relative > 0.0 && (worst.at == 1.0 || worst.at == 7.0 || worst.at.abs() < 8.0));
}

/// Share of intervals that hold x₀.
fn covered(runs: usize, x0: f64, k: usize, weights: Weights, draw: impl Fn(&mut Stream) -> (Vec<Point>, f64)) -> usize {
    let mut stream = Stream::new(41, k as u64);
    (0..runs)
        .filter(|_| {
            let (points, y0) = draw(&mut stream);
            let fit = fit::fit(&Family::Polynomial(1), &points, weights).unwrap();
            let result = Converter::new(&fit, k, 0.95).unwrap().convert(y0);
            result.pieces.iter().any(|piece| piece.contains(x0))
        })
        .count()
}

#[test]
fn intervals_hold_the_true_value_95_times_in_100() {
    const RUNS: usize = 1500;
    for k in [1, 3] {
        let hits = covered(RUNS, 2.7, k, Weights::Equal, |stream| {
            let points = simulated(stream, (6, 1), |x| 1.0 + 2.0 * x, |_| 0.5);
            let y0 = 1.0 + 2.0 * 2.7 + 0.5 / (k as f64).sqrt() * stream.normal();
            (points, y0)
        });
        assert_rate(hits, RUNS, 0.95);
    }
}

/// SD proportional to x and weights 1/x²: the variance of the new reading must be the one at x.
#[test]
fn weighted_intervals_hold_the_true_value_95_times_in_100() {
    const RUNS: usize = 1500;
    for x0 in [1.5, 10.5] {
        let hits = covered(RUNS, x0, 1, Weights::InverseX2, |stream| {
            let points = simulated(stream, (11, 1), |x| 1.0 + 2.0 * x, |x| 0.03 * x);
            (points, 1.0 + 2.0 * x0 + 0.03 * x0 * stream.normal())
        });
        assert_rate(hits, RUNS, 0.95);
    }
}

/// Pooled SD of standards and unknown, t with ν + k − 1: exact when both scatter alike.
#[test]
fn pooled_repeats_hold_the_true_value_95_times_in_100() {
    const RUNS: usize = 1500;
    let mut stream = Stream::new(43, 0);
    let hits = (0..RUNS)
        .filter(|_| {
            let fit = fitted(Family::Polynomial(1), &simulated(&mut stream, (6, 1), |x| 2.0 * x, |_| 0.5));
            let own: Vec<f64> = (0..3).map(|_| 2.0 * 3.3 + 0.5 * stream.normal()).collect();
            let mean = own.iter().sum::<f64>() / 3.0;
            let sd = (own.iter().map(|y| (y - mean).powi(2)).sum::<f64>() / 2.0).sqrt();
            let result = Converter::new(&fit, 3, 0.95).unwrap().convert_repeats(mean, Repeats { sd });
            assert_eq!(result.degrees_of_freedom, Some(6.0));
            result.pieces.iter().any(|piece| piece.contains(3.3))
        })
        .count();
    assert_rate(hits, RUNS, 0.95);
}

#[test]
fn an_unknown_that_scatters_more_is_said_and_judged_by_itself_from_four_on() {
    let fit = fitted(Family::Polynomial(1), &line_data(2.0, 0.1));
    let few = Converter::new(&fit, 3, 0.95).unwrap();
    let result = few.convert_repeats(9.0, Repeats { sd: 5.0 });
    assert_eq!((result.scatters_more, result.degrees_of_freedom), (Some(true), Some(7.0)));
    let many = Converter::new(&fit, 5, 0.95).unwrap();
    let result = many.convert_repeats(9.0, Repeats { sd: 5.0 });
    assert_eq!(result.scatters_more, Some(true));
    assert!((result.degrees_of_freedom.unwrap() - 4.0).abs() < 0.1);
    assert_eq!(many.convert_repeats(9.0, Repeats { sd: 0.05 }).scatters_more, Some(false));
}
