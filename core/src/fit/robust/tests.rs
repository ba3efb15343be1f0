//! Robust fits against statsmodels and scipy, and where they end.

use super::*;
use crate::fit::{Point, Weights, declared, fit};
use crate::model::{Family, Formula};
use crate::numerics::streams::Stream;
use serde_json::Value;

/// statsmodels RLM and scipy.stats.theilslopes (tests/published/robust/SOURCE.md).
const VALUES: &str = include_str!("../../../../tests/published/robust/values.json");

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

fn points(x: &[f64], y: &[f64]) -> Vec<Point> {
    x.iter().zip(y).map(|(x, y)| Point { x: *x, y: *y }).collect()
}

fn case(case: &Value) -> Fit {
    let family = match case["family"].as_str().unwrap() {
        "log" => Family::Log,
        degree => Family::Polynomial(degree.parse().unwrap()),
    };
    let points = points(&numbers(&case["x"]), &numbers(&case["y"]));
    fit(&family, &points, case["weights"].as_str().unwrap().parse().unwrap()).unwrap()
}

/// Largest difference of two lists in parts of the largest entry.
fn apart(found: &[f64], expected: &[f64]) -> f64 {
    assert_eq!(found.len(), expected.len());
    let top = expected.iter().fold(0.0_f64, |top, v| top.max(v.abs()));
    found.iter().zip(expected).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max) / top
}

#[test]
fn huber_agrees_with_statsmodels() {
    let cases: Value = serde_json::from_str(VALUES).unwrap();
    let cases = cases.as_array().unwrap();
    assert_eq!(cases.len(), 27);
    let mut worst = [0.0_f64; 3];
    for value in cases {
        let fit = case(value);
        let (found, expected) = (huber(&fit).unwrap(), &value["huber"]);
        let scale = expected["scale"].as_f64().unwrap();
        let curve: Vec<f64> = fit.points.iter().zip(&found.residuals).map(|(p, e)| p.y - e).collect();
        let misses = curve.iter().zip(numbers(&expected["fitted"])).map(|(a, b)| (a - b).abs() / scale);
        worst[0] = worst[0].max(misses.fold(0.0, f64::max));
        worst[1] = worst[1].max((found.scale.unwrap() / scale - 1.0).abs());
        worst[2] = worst[2].max(apart(&found.weights, &numbers(&expected["weights"])));
        for (j, b) in numbers(&expected["coefficients"]).iter().enumerate() {
            let off = (found.coefficients[j] / b - 1.0).abs();
            assert!(off < 1e-8, "{}: coefficient {j} off by {off:e}", value["name"]);
        }
    }
    println!("curve {:.1e} scales, scale {:.1e}, weights {:.1e}", worst[0], worst[1], worst[2]);
    assert!(worst[0] < 1e-10 && worst[1] < 1e-10 && worst[2] < 1e-10, "{worst:?}");
}

#[test]
fn theil_sen_agrees_with_scipy() {
    let cases: Value = serde_json::from_str(VALUES).unwrap();
    let lines: Vec<&Value> = cases.as_array().unwrap().iter().filter(|c| c["theil_sen"].is_object()).collect();
    assert!(lines.len() >= 7, "{}", lines.len());
    for value in lines {
        let found = theil_sen(&case(value)).unwrap();
        let expected = &value["theil_sen"];
        let (a, b) = (expected["intercept"].as_f64().unwrap(), expected["slope"].as_f64().unwrap());
        assert!((found.coefficients[1] / b - 1.0).abs() < 1e-14, "{}", value["name"]);
        assert!((found.coefficients[0] - a).abs() <= 1e-13 * a.abs().max(1.0), "{}", value["name"]);
    }
}

/// The two equations that define the estimate, on readings of which a fifth are wild.
#[test]
fn huber_solves_both_of_its_equations() {
    let mut stream = Stream::new(31, 0);
    for round in 0..40 {
        let x: Vec<f64> = (0..15).map(|i| 1.0 + 3.0 * f64::from(i)).collect();
        let noise = |i: usize, s: &mut Stream| if i % 5 == round % 5 { 4.0 * s.normal() } else { 0.1 * s.normal() };
        let y: Vec<f64> = (0..15).map(|i| 2.0 - 0.3 * x[i] + noise(i, &mut stream)).collect();
        let fit = fit(&Family::Polynomial(1), &points(&x, &y), Weights::InverseX).unwrap();
        let found = huber(&fit).unwrap();
        let scale = found.scale.unwrap();
        let psi = |i: usize| (found.residuals[i] / libm::sqrt(x[i]) / scale).clamp(-HUBER_K, HUBER_K);
        let sums = (0..15).map(|i| {
            let root = 1.0 / libm::sqrt(x[i]);
            (psi(i) * root, psi(i) * root * x[i], psi(i) * psi(i))
        });
        let sums = sums.fold((0.0, 0.0, 0.0), |t, v| (t.0 + v.0, t.1 + v.1, t.2 + v.2));
        // E ψ²(Z) at 1.345 by the integral, mpmath 1.4.1, 30 digits.
        let target = 13.0 * 0.710_164_548_269_049;
        assert!(sums.0.abs() < 1e-12 && sums.1.abs() < 1e-11, "{round}: {sums:?}");
        assert!((sums.2 - target).abs() < 1e-11, "{round}: {} and {target}", sums.2);
    }
}

#[test]
fn readings_without_surprises_leave_least_squares_alone() {
    let y = [1.01, 2.99, 5.02, 6.98, 9.01, 10.99];
    let fit = fit(&Family::Polynomial(1), &points(&[0.0, 1.0, 2.0, 3.0, 4.0, 5.0], &y), Weights::Equal).unwrap();
    let found = huber(&fit).unwrap();
    assert!(found.reduced().is_empty(), "{:?}", found.weights);
    assert!(found.largest_difference.difference.abs() < 1e-14);
    assert_eq!(found.levels.len(), 6);
}

/// One reading 5 too high at the end: least squares follows, the robust lines hardly do.
#[test]
fn a_wild_reading_is_named_and_its_pull_is_sized() {
    let x: Vec<f64> = (0..11).map(f64::from).collect();
    let mut y: Vec<f64> = x.iter().map(|x| 1.0 + 2.0 * x + 0.02 * libm::sin(7.0 * x)).collect();
    y[10] += 5.0;
    let fit = fit(&Family::Polynomial(1), &points(&x, &y), Weights::Equal).unwrap();
    for found in [huber(&fit).unwrap(), theil_sen(&fit).unwrap()] {
        let truth = found.levels.iter().map(|x| 1.0 + 2.0 * x);
        let off = found.fitted.iter().zip(truth).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max);
        assert!(off < 0.05, "{:?} is off by {off}", found.method);
        let pull = 5.0 * fit.leverage[10];
        assert_eq!(found.largest_difference.x, 10.0);
        assert!((found.largest_difference.difference + pull).abs() < 0.06, "{:?}", found.largest_difference);
    }
    assert!(huber(&fit).unwrap().reduced().contains(&10));
}

#[test]
fn the_order_of_the_readings_changes_no_bit() {
    let x = [1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 6.0, 1.0];
    let y = [2.1, 3.9, 6.2, 9.9, 10.1, 12.0, 11.9, 2.0];
    let forward = fit(&Family::Polynomial(1), &points(&x, &y), Weights::Equal).unwrap();
    let (mut back_x, mut back_y) = (x, y);
    back_x.reverse();
    back_y.reverse();
    let backward = fit(&Family::Polynomial(1), &points(&back_x, &back_y), Weights::Equal).unwrap();
    let (a, b) = (huber(&forward).unwrap(), huber(&backward).unwrap());
    assert_eq!((a.coefficients, a.scale), (b.coefficients, b.scale));
    let (a, b) = (theil_sen(&forward).unwrap(), theil_sen(&backward).unwrap());
    assert_eq!(a.coefficients, b.coefficients);
}

/// A display with coarse steps: nine readings agree exactly, one does not.
#[test]
fn readings_that_agree_exactly_carry_the_curve() {
    let x: Vec<f64> = (0..10).map(f64::from).collect();
    let mut y: Vec<f64> = x.iter().map(|x| 3.0 + 2.0 * x).collect();
    y[4] += 1.0;
    let wild = fit(&Family::Polynomial(1), &points(&x, &y), Weights::Equal).unwrap();
    let found = huber(&wild).unwrap();
    assert_eq!((found.coefficients.as_slice(), found.scale), ([3.0, 2.0].as_slice(), Some(0.0)));
    assert_eq!(found.reduced(), [4]);
    assert!((found.residuals[4] - 1.0).abs() < 1e-14);
    y[4] -= 1.0;
    let clean = fit(&Family::Polynomial(1), &points(&x, &y), Weights::Equal).unwrap();
    assert!(huber(&clean).unwrap().reduced().is_empty());
}

#[test]
fn what_cannot_be_cross_checked_says_why() {
    let two = fit(&Family::Polynomial(1), &points(&[0.0, 1.0], &[0.0, 1.0]), Weights::Equal).unwrap();
    assert_eq!(huber(&two).unwrap_err(), RobustError::NothingLeft { observations: 2, coefficients: 2 });
    let bent = fit(&Family::Polynomial(2), &points(&[0.0, 1.0, 2.0, 3.0], &[0.0, 1.0, 5.0, 9.5]), Weights::Equal);
    assert_eq!(theil_sen(&bent.unwrap()).unwrap_err(), RobustError::NotALine);
    let formula: Formula = "2*x".parse().unwrap();
    let given = declared(&formula, &points(&[0.0, 1.0], &[0.0, 2.1])).unwrap();
    assert_eq!(huber(&given).unwrap_err(), RobustError::NotFitted);
    let many: Vec<f64> = (0..2001).map(f64::from).collect();
    let line = fit(&Family::Polynomial(1), &points(&many, &many), Weights::Equal).unwrap();
    assert_eq!(theil_sen(&line).unwrap_err(), RobustError::TooMany { observations: 2001, limit: 2000 });
}
