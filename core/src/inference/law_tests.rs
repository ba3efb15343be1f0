//! Laws of inversion, and wild data through everything that is made from a fit.

use super::bands::Bands;
use super::lack_of_fit::lack_of_fit;
use super::shape::shape;
use crate::convert::Converter;
use crate::fit::{Fit, Point, Weights, fit};
use crate::model::Family;
use crate::numerics::streams::Stream;

/// A true function.
type Truth = fn(f64) -> f64;

/// Σ|β_j g_j(x)|/|f′(x)|: by how much one unit of the last place in every term of f moves the inverse.
fn inverse_condition(fit: &Fit, x: f64) -> f64 {
    let terms: f64 = fit.curve.gradient(x).iter().zip(&fit.coefficients).map(|(g, b)| (g * b).abs()).sum();
    terms / fit.curve.derivative(x).abs()
}

/// Reading the value of the function gives the place back, to four units of the last place of the place and
/// of what the terms of the function lose.
#[test]
fn inverting_the_function_returns_the_value() {
    let truths: [(Family, Truth); 4] = [
        (Family::Polynomial(1), |x| 5.0 - 0.3 * x),
        (Family::Polynomial(2), |x| 1.0 + 2.0 * x + 0.03 * x * x),
        (Family::LineThroughZero, |x| 0.7 * x),
        (Family::Log, |x| 1.0 + 2.0 * libm::log(x)),
    ];
    let mut stream = Stream::new(61, 0);
    for (family, truth) in truths {
        for _ in 0..50 {
            let unit = f64::powi(10.0, i32::try_from(stream.below(13)).unwrap() - 6);
            let point = |i: u32| {
                let x = f64::from(i);
                Point { x: x * unit, y: truth(x) + 0.05 * stream.normal() }
            };
            let points: Vec<Point> = (1..=10).map(point).collect();
            let fit = fit(&family, &points, Weights::Equal).unwrap();
            let converter = Converter::new(&fit, 1, 0.95).unwrap();
            for _ in 0..20 {
                let x = unit * (1.0 + 9.0 * stream.uniform());
                let back = converter.convert(fit.curve.value(x)).value.unwrap();
                let allowed = 4.0 * f64::EPSILON * (x + inverse_condition(&fit, x));
                assert!((back - x).abs() <= allowed, "{family}: {back:e} for {x:e}, {allowed:e}");
            }
        }
    }
}

/// Small sets of round and of awkward numbers: bands, tests of shape and conversion never panic, and an
/// interval that has a value inside its piece holds it.
#[test]
fn nothing_made_from_a_fit_panics() {
    const AWKWARD: [f64; 8] = [0.0, -0.0, 1e150, -1e150, 1e-150, 1e9, -3.0, f64::NAN];
    let families = [0, 1, 2, 3, 5].map(Family::Polynomial);
    let families = [families.as_slice(), &[Family::LineThroughZero, Family::OnePoint, Family::Log]].concat();
    let weights = [Weights::Equal, Weights::InverseX, Weights::InverseY2, Weights::ReplicatesConstant];
    let mut converted = 0;
    for case in 0..4_000 {
        let mut stream = Stream::new(62, case);
        let awkward = stream.below(3) == 0;
        let number = |stream: &mut Stream| match stream.below(4) {
            0 if awkward => AWKWARD[usize::try_from(stream.below(7)).unwrap()],
            _ => stream.below(7) as f64 + 1e-3 * stream.below(2) as f64,
        };
        let count = stream.below(13);
        let points: Vec<Point> = (0..count).map(|_| Point { x: number(&mut stream), y: number(&mut stream) }).collect();
        let family = &families[usize::try_from(stream.below(families.len() as u64)).unwrap()];
        let weights = weights[usize::try_from(stream.below(4)).unwrap()];
        let Ok(fit) = fit(family, &points, weights) else { continue };
        let _ = (lack_of_fit(&fit), shape(&fit));
        let bands = Bands::new(&fit, 0.95, 1);
        let Some(converter) = Converter::new(&fit, 1, 0.95) else { continue };
        for reading in AWKWARD.into_iter().chain([number(&mut stream), number(&mut stream)]) {
            let _ = bands.as_ref().and_then(|bands| bands.at(reading));
            let result = converter.convert(reading);
            converted += u32::from(result.value.is_some());
            if let (Some(value), Some(low), Some(high)) = (result.value, result.low, result.high) {
                assert!(low <= value && value <= high, "{case}: {result:?}");
            }
        }
    }
    assert!(converted > 2_000, "{converted}");
}
