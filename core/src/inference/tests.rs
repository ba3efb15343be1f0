//! Departures, bands and outliers against closed forms and laws.

use super::bands::Bands;
use super::departure::{Departure, Pattern, departure, matters};
use super::outlier::outlier;
use super::shape::shape;
use crate::convert::reference::{assert_rate, fitted, pontius, simulated};
use crate::fit::{Fit, Point};
use crate::model::Family;
use crate::numerics::streams::Stream;

fn departed(fit: &Fit) -> Departure {
    departure(fit, &shape(fit))
}

fn drawn(f: impl Fn(f64) -> f64) -> Vec<Point> {
    simulated(&mut Stream::new(111, 0), (9, 3), f, |_| 0.01)
}

#[test]
fn patterns_have_their_names() {
    let line = |f: &dyn Fn(f64) -> f64| departed(&fitted(Family::Polynomial(1), &drawn(f))).pattern;
    let t = |x: f64| (x - 5.0) / 4.0;
    assert_eq!(line(&|x| x), Pattern::None);
    assert_eq!(line(&|x| x - t(x).powi(2)), Pattern::BowUp);
    assert_eq!(line(&|x| -x + t(x).powi(2)), Pattern::BowDown);
    assert_eq!(line(&|x| x + t(x).powi(3)), Pattern::S);
    let odd = [0.0, 0.3, -0.2, 0.4, -0.4, 0.1, 0.3, -0.3, 0.1];
    assert_eq!(line(&|x| x + odd[x as usize - 1]), Pattern::Irregular);
    let quadratic = fitted(Family::Polynomial(2), &drawn(|x| x + t(x).powi(3)));
    assert_eq!(departed(&quadratic).pattern, Pattern::S);
}

/// A level whose mean lies 0.2 above a rising line reads high; above a falling line it reads low.
#[test]
fn reads_high_means_the_value_comes_out_too_large() {
    for slope in [2.0, -2.0] {
        let mut points = drawn(|x| 1.0 + slope * x);
        for point in points.iter_mut().filter(|p| p.x == 4.0) {
            point.y += 0.2;
        }
        let found = departed(&fitted(Family::Polynomial(1), &points));
        let worst = found.levels[found.worst_read_back.unwrap()];
        assert_eq!(worst.x, 4.0);
        assert_eq!(worst.read_back_error.unwrap() > 0.0, slope > 0.0);
        assert!((worst.read_back_error.unwrap() - 0.2 / slope).abs() < 0.02);
        assert!((worst.read_back_error.unwrap() - worst.input.unwrap()).abs() < 1e-9);
        assert_eq!(found.largest, found.worst_read_back);
    }
}

/// NIST/ITL StRD Pontius, line: the bend left over equals the quadratic's departure from its own
/// best line over the range: for equally spaced x, |b₂|·(span²/6 at the ends, nearly).
#[test]
fn the_leftover_bend_of_the_load_cell() {
    let points = pontius();
    let found = departed(&fitted(Family::Polynomial(1), &points));
    assert_eq!(found.pattern, Pattern::BowUp);
    // x² minus its best line on 20 equal steps d: largest at the ends, d²·(19·18/6) = 57 d².
    let bend = 3.160_818_713_450_29e-15 * 57.0 * 150_000.0_f64.powi(2);
    let leftover = found.leftover_bend.unwrap();
    assert!((leftover.output / bend - 1.0).abs() < 1e-6, "{} {bend}", leftover.output);
    assert!((leftover.input.unwrap() * 7.221_025_814_5e-7 / bend - 1.0).abs() < 1e-6);
}

/// Refitting without each level gives the same errors as the shortcut by level leverage.
#[test]
fn left_out_errors_are_those_of_refits() {
    let points = simulated(&mut Stream::new(112, 0), (6, 2), |x| 3.0 * x, |_| 0.5);
    let fit = fitted(Family::Polynomial(1), &points);
    let mut ss = 0.0;
    for level in 1..=6 {
        let (out, rest): (Vec<Point>, Vec<Point>) = points.iter().copied().partition(|p| p.x == f64::from(level));
        let without = fitted(Family::Polynomial(1), &rest);
        ss += out.iter().map(|p| (p.y - without.curve.value(p.x)).powi(2)).sum::<f64>();
    }
    let found = departed(&fit).left_out.unwrap();
    assert!((found.output / (ss / 12.0).sqrt() - 1.0).abs() < 1e-9);
    assert!((found.input.unwrap() * fit.coefficients[1].abs() / found.output - 1.0).abs() < 1e-12);
    let three = fitted(Family::Polynomial(2), &points[..6]);
    assert_eq!(departed(&three).left_out, None);
}

#[test]
fn a_tiny_effect_does_not_matter() {
    assert!(matters(0.1, Some(1.0), None) && !matters(0.01, Some(1.0), Some(1e-9)));
    assert!(matters(-0.3, None, Some(1.0)) && !matters(0.1, None, Some(1.0)));
    assert!(matters(1e-9, None, None));
}

/// Line: Var f̂ = s²(1/N + (x − x̄)²/S), and the three half-widths from it. F_{0.95; 2, 5} = 5.786,
/// t_{0.975, 5} = 2.571: any table.
#[test]
fn bands_of_a_line() {
    let points = simulated(&mut Stream::new(113, 0), (7, 1), |x| x, |_| 1.0);
    let fit = fitted(Family::Polynomial(1), &points);
    let at = Bands::new(&fit, 0.95, 4).unwrap().at(6.0).unwrap();
    let s = fit.residual_sd.unwrap();
    let share: f64 = 1.0 / 7.0 + 4.0 / 28.0;
    assert!((at.mean / s / share.sqrt() - 2.5706).abs() < 1e-4);
    assert!((at.prediction / s / (0.25 + share).sqrt() - 2.5706).abs() < 1e-4);
    assert!((at.simultaneous / s / share.sqrt() - (2.0 * 5.7861_f64).sqrt()).abs() < 1e-4);
    assert!((at.value - fit.curve.value(6.0)).abs() < 1e-15);
}

#[test]
fn no_residual_sd_no_bands() {
    let points = drawn(|x| x);
    let two = [points[0], points[26]];
    assert!(Bands::new(&fitted(Family::Polynomial(1), &two), 0.95, 1).is_none());
    let fit = fitted(Family::Polynomial(1), &points);
    assert!(Bands::new(&fit, 0.95, 0).is_none() && Bands::new(&fit, 1.0, 1).is_none());
}

/// Every band holds what its name says 95 times in 100: the curve at one x, a new mean, the whole curve.
#[test]
fn bands_hold_what_their_names_say() {
    const RUNS: usize = 1500;
    let mut stream = Stream::new(114, 0);
    let mut hits = [0_usize; 3];
    for _ in 0..RUNS {
        let points = simulated(&mut stream, (6, 1), |x| 1.0 + 2.0 * x, |_| 0.5);
        let fit = fitted(Family::Polynomial(1), &points);
        let bands = Bands::new(&fit, 0.95, 2).unwrap();
        let error = |x: f64| {
            let at = bands.at(x).unwrap();
            (at, (1.0 + 2.0 * x - at.value).abs())
        };
        let (at, miss) = error(2.2);
        hits[0] += usize::from(miss <= at.mean);
        let new = 1.0 + 2.0 * 2.2 + 0.5 / 2.0_f64.sqrt() * stream.normal();
        hits[1] += usize::from((new - at.value).abs() <= at.prediction);
        let everywhere = (-200..=200).map(|i| error(3.5 + f64::from(i))).all(|(at, miss)| miss <= at.simultaneous);
        hits[2] += usize::from(everywhere);
    }
    for count in hits {
        assert_rate(count, RUNS, 0.95);
    }
}

#[test]
fn a_slip_is_the_outlier() {
    let mut points = drawn(|x| 2.0 * x);
    points[10].y += 0.2;
    let found = outlier(&fitted(Family::Polynomial(1), &points)).unwrap();
    assert!(found.beyond && found.index == 10 && found.studentised > found.limit && found.residual > 0.1);
}

/// t(1 − 0.025/n; ν − 1): a clean set is suspected 5 times in 100.
#[test]
fn clean_data_have_an_outlier_one_time_in_twenty() {
    const RUNS: usize = 2000;
    let mut stream = Stream::new(115, 0);
    let hits = (0..RUNS)
        .filter(|_| {
            let points = simulated(&mut stream, (7, 1), |x| x, |_| 1.0);
            outlier(&fitted(Family::Polynomial(1), &points)).unwrap().beyond
        })
        .count();
    assert_rate(hits, RUNS, 0.05);
}
