//! Odd data: declared functions, one standard, extreme sizes, readings that are no numbers.

use super::*;
use crate::convert::reference::fitted;
use crate::fit::{self, Point, Weights};
use crate::model::Family;
use crate::model::formula::Formula;

fn declared(text: &str, points: &[(f64, f64)]) -> Fit {
    let points: Vec<Point> = points.iter().map(|&(x, y)| Point { x, y }).collect();
    let formula: Formula = text.parse().unwrap();
    fit::declared(&formula, &points).unwrap()
}

/// A declared function has no uncertainty of its own: x₀ ± t_N·s/(√k·slope), s from the errors.
#[test]
fn a_declared_function_converts_with_the_scatter_of_its_errors() {
    let fit = declared("1 + 2*x", &[(1.0, 3.1), (2.0, 4.9), (3.0, 7.1), (4.0, 8.9)]);
    let result = Converter::new(&fit, 4, 0.95).unwrap().convert(6.0);
    assert!((result.value.unwrap() - 2.5).abs() < 1e-12);
    // s = 0.1 with four degrees of freedom, t_{0.975, 4} = 2.7764.
    assert!((result.high.unwrap() - 2.5 - 2.776_445 * 0.1 / 2.0 / 2.0).abs() < 1e-6);
    assert_eq!((result.flipped_value, result.degrees_of_freedom), (None, Some(4.0)));
}

#[test]
fn a_formula_is_followed_only_where_it_has_values() {
    let fit = declared("ln(x)", &[(1.0, 0.01), (2.0, 0.68), (4.0, 1.39)]);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    assert!((converter.convert(1.0).value.unwrap() - 1f64.exp()).abs() < 1e-12);
    let low = converter.convert(0.1);
    assert!(low.value.is_some() && low.low.is_none_or(|x| x > 0.0));
}

#[test]
fn one_standard_is_enough_for_a_declared_function() {
    let fit = declared("2*x", &[(5.0, 10.1), (5.0, 9.9)]);
    let result = Converter::new(&fit, 1, 0.95).unwrap().convert(12.0);
    assert!((result.value.unwrap() - 6.0).abs() < 1e-12);
}

#[test]
fn a_reading_that_is_no_number_has_no_value() {
    let points: Vec<Point> =
        (0..6).map(|i| Point { x: f64::from(i), y: 2.0 * f64::from(i) + 0.1 * f64::from(i % 2) }).collect();
    let fit = fitted(Family::Polynomial(1), &points);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    for reading in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        let result = converter.convert(reading);
        assert_eq!((result.value, result.pieces.len(), result.state), (None, 0, State::NoValue));
    }
    assert!(Converter::new(&fit, 0, 0.95).is_none());
}

/// Values of 10⁻¹⁵⁰ and 10¹⁵⁰ convert like values of 1.
#[test]
fn extreme_units_change_nothing_but_the_unit() {
    let at = |scale_x: f64, scale_y: f64| {
        let points: Vec<Point> = (1..7)
            .map(f64::from)
            .map(|i| Point { x: scale_x * i, y: scale_y * (2.0 * i + 0.1 * libm::sin(9.0 * i)) })
            .collect();
        let fit = fit::fit(&Family::Polynomial(1), &points, Weights::Equal).unwrap();
        let result = Converter::new(&fit, 1, 0.95).unwrap().convert(7.0 * scale_y);
        [result.value, result.low, result.high].map(|x| x.unwrap() / scale_x)
    };
    let plain = at(1.0, 1.0);
    for (x, y) in [(1e-150, 1.0), (1e150, 1.0), (1.0, 1e-120), (1.0, 1e120)] {
        for (a, b) in plain.into_iter().zip(at(x, y)) {
            assert!((a - b).abs() < 1e-10, "{x} {y}: {a} {b}");
        }
    }
}
