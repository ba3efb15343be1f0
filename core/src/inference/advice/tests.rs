//! Advice on published, clean, bent and scarce data.

use super::*;
use crate::convert::reference::{assert_rate, pontius, simulated};
use crate::fit::{Point, Weights};
use crate::numerics::streams::Stream;

fn usual() -> Rules {
    Rules { allowed: vec![Family::Polynomial(1), Family::Polynomial(2), Family::Log], ..Rules::default() }
}

fn advised(points: &[Point], rules: &Rules) -> Outcome {
    advise(points, Weights::Equal, rules).outcome
}

/// Load cell, NIST/ITL StRD Pontius: quadratic, as NIST/SEMATECH e-Handbook 4.6.1 concludes.
#[test]
fn the_load_cell_is_advised_a_quadratic_because_the_line_is_refused() {
    let advice = advise(&pontius(), Weights::Equal, &usual());
    assert_eq!(advice.outcome, Outcome::Advised(Family::Polynomial(2)));
    let Because::ShapeRejected { family, test, numbers, .. } = &advice.because[0] else {
        panic!("{:?}", advice.because[0]);
    };
    assert_eq!(*family, Family::Polynomial(1));
    assert_eq!(*test, ShapeTest::NextTerm);
    assert!(numbers.p < 1e-15);
}

#[test]
fn the_plan_bounds_the_advice_and_hears_what_would_do() {
    let rules = Rules { allowed: vec![Family::Polynomial(1)], ..Rules::default() };
    let advice = advise(&pontius(), Weights::Equal, &rules);
    assert_eq!(advice.outcome, Outcome::NoneGoodEnough);
    let would =
        advice.because.iter().any(|b| matches!(b, Because::WouldDo { family: Family::Polynomial(2), p } if *p > 0.05));
    assert!(would, "{:?}", advice.because);
}

/// Clean straight data, 5 × 3: the line is advised in 95 % of runs (0.957 by own simulation).
#[test]
fn clean_lines_get_the_line() {
    const RUNS: usize = 800;
    let mut stream = Stream::new(21, 0);
    let count = (0..RUNS)
        .filter(|_| {
            let points = simulated(&mut stream, (5, 3), |x| 4.0 + 2.0 * x, |_| 1.0);
            advised(&points, &usual()) == Outcome::Advised(Family::Polynomial(1))
        })
        .count();
    assert_rate(count, RUNS, 0.957);
}

#[test]
fn a_failed_line_lets_the_logarithm_in() {
    let mut stream = Stream::new(22, 0);
    let points = simulated(&mut stream, (9, 2), |x| 1.0 + 2.0 * libm::log(x), |_| 0.02);
    assert_eq!(advised(&points, &usual()), Outcome::Advised(Family::Log));
}

#[test]
fn the_logarithm_of_zero_is_a_reason_and_no_obstacle() {
    let mut points = pontius();
    points.push(Point { x: 0.0, y: 0.0007 });
    let advice = advise(&points, Weights::Equal, &usual());
    assert_eq!(advice.outcome, Outcome::Advised(Family::Polynomial(2)));
    assert!(advice.because.iter().any(|b| matches!(b, Because::NotFitted { family: Family::Log, .. })));
}

#[test]
fn too_few_points_are_said_and_not_advised() {
    let of =
        |xs: &[f64]| -> Vec<Point> { xs.iter().map(|&x| Point { x, y: 2.0 * x + 0.01 * (x * 3.0).cos() }).collect() };
    for xs in [&[1.0, 2.0, 3.0, 4.0][..], &[1.0, 2.0, 3.0], &[1.0, 2.0]] {
        let outcome = advised(&of(xs), &usual());
        assert!(matches!(outcome, Outcome::TooFewToTell(Family::Polynomial(1), _)), "{outcome:?}");
    }
    let none = Rules { allowed: Vec::new(), ..Rules::default() };
    assert_eq!(advised(&pontius(), &none), Outcome::NothingToJudge);
}
