//! Laws, edges and limits.

use super::shapes::{Shape, diagonal};
use super::*;
use crate::model::Family;
use crate::numerics::least_squares::ScaledWeights;
use crate::numerics::orthogonal::fit_polynomial;
use crate::numerics::semidefinite::SemidefiniteError;
use crate::numerics::streams::Stream;

const X: [f64; 7] = [0.5, 1.0, 2.0, 4.0, 7.0, 8.0, 10.0];
const OF: [usize; 7] = [0, 1, 2, 3, 4, 5, 6];
const U: [f64; 7] = [0.03, 0.02, 0.05, 0.04, 0.02, 0.06, 0.03];

fn curved(x: f64) -> f64 {
    1.0 + 2.0 * x - 0.05 * x * x
}

fn readings() -> Vec<f64> {
    let off = [0.02, -0.01, 0.04, -0.05, 0.01, 0.05, -0.02];
    X.iter().zip(off).map(|(x, e)| curved(*x) + e).collect()
}

fn fitted<F: Function>(shape: &F, covariance: &[Vec<f64>], y: &[f64], start: &[f64]) -> DistanceFit {
    let data = BothAxes { x: &X, x_covariance: covariance, y, y_uncertainty: &U, standard_of: &OF };
    distance_fit(shape, &data, start).unwrap()
}

fn close(a: f64, b: f64, relative: f64) -> bool {
    (a - b).abs() <= relative * b.abs()
}

/// Without uncertain standards only weighted least squares is left, to the last bits.
#[test]
fn exact_standards_give_weighted_least_squares() {
    let y = readings();
    for degree in 1..=4 {
        let ordinary = fit_polynomial(&X, &y, &ScaledWeights::inverse_power(&U, 2).unwrap(), degree).unwrap();
        let fit = fitted(&Family::Polynomial(degree as u8), &diagonal(&[0.0; 7]), &y, &vec![0.0; degree + 1]);
        for j in 0..=degree {
            assert!(close(fit.coefficients[j], ordinary.coefficients[j], 4e-16), "degree {degree}: {j}");
            for k in 0..=degree {
                assert!(close(fit.covariance[j][k], ordinary.unit_covariance[j][k], 1e-15), "degree {degree}");
            }
        }
        assert!(close(fit.chi_square, ordinary.residual_ss, 1e-14));
        assert!(fit.from_standards.iter().flatten().all(|v| *v == 0.0));
        assert_eq!(fit.latent, X);
    }
}

/// Both parts add up to the covariance, and gᵀCov g to the variance.
#[test]
fn the_two_causes_add_up() {
    let mut covariance = diagonal(&[0.02, 0.0, 0.05, 0.04, 0.03, 0.06, 0.03]);
    for (i, row) in covariance.iter_mut().enumerate() {
        row.iter_mut().enumerate().for_each(|(j, v)| *v += 1e-4 * X[i] * X[j]);
    }
    let fit = fitted(&Family::Polynomial(2), &covariance, &readings(), &[1.0, 2.0, -0.05]);
    for (j, row) in fit.covariance.iter().enumerate() {
        for (k, whole) in row.iter().enumerate() {
            assert!(close(fit.from_readings[j][k] + fit.from_standards[j][k], *whole, 1e-13));
        }
    }
    for x in [-1.0, 0.0, 3.3, 10.0, 25.0] {
        let g = [1.0, x, x * x];
        let form = |m: &[Vec<f64>]| -> f64 { (0..9).map(|i| g[i / 3] * m[i / 3][i % 3] * g[i % 3]).sum() };
        let (v_s, v_x) = fit.variance_at(&Family::Polynomial(2), x);
        assert!(close(v_s, form(&fit.from_readings), 1e-11) && close(v_x, form(&fit.from_standards), 1e-11), "{x}");
    }
}

/// A shift shared by all standards moves every converted value by itself; a shared scale scales it: v_std
/// is (b·e)² and (b·x·ε)². The shape and the other part stay as without it.
#[test]
fn a_shared_error_goes_straight_through() {
    let y: Vec<f64> = readings().iter().zip(X).map(|(y, x)| y + 0.05 * x * x).collect();
    let exact = fitted(&Family::Polynomial(1), &diagonal(&[0.0; 7]), &y, &[1.0, 2.0]);
    let shift: Vec<Vec<f64>> = vec![vec![0.09; 7]; 7];
    let scale: Vec<Vec<f64>> = X.iter().map(|a| X.iter().map(|b| 1e-4 * a * b).collect()).collect();
    for (covariance, scales) in [(shift, false), (scale, true)] {
        let fit = fitted(&Family::Polynomial(1), &covariance, &y, &[1.0, 2.0]);
        let b = fit.coefficients[1];
        assert!(close(fit.coefficients[0], exact.coefficients[0], 1e-13) && close(b, exact.coefficients[1], 1e-13));
        assert!(close(fit.chi_square, exact.chi_square, 1e-12));
        for x in [0.7, 5.0, 12.0] {
            let (v_s, v_x) = fit.variance_at(&Family::Polynomial(1), x);
            let size = if scales { 0.01 * x } else { 0.3 };
            assert!(close(libm::sqrt(v_x), b * size, 1e-11), "{x}: {v_x}");
            assert!(close(v_s, exact.variance_at(&Family::Polynomial(1), x).0, 1e-11), "{x}: {v_s}");
        }
    }
}

/// Several readings of one standard share its error: they are their weighted mean, and the scatter about
/// it only adds to χ².
#[test]
fn readings_of_one_standard_share_its_error() {
    let (y, covariance) = (readings(), diagonal(&[0.05; 7]));
    let twice: Vec<f64> = y.iter().flat_map(|y| [y - 0.06, y + 0.03]).collect();
    let of: Vec<usize> = (0..14).map(|i| i / 2).collect();
    // Weights 1 and 2 put the mean at y; 1/(1 + 2) is its variance.
    let u: Vec<f64> = U.iter().flat_map(|u| [u * libm::sqrt(3.0), u * libm::sqrt(1.5)]).collect();
    let data = BothAxes { x: &X, x_covariance: &covariance, y: &twice, y_uncertainty: &u, standard_of: &of };
    let shape = Family::Polynomial(2);
    let many = distance_fit(&shape, &data, &[1.0, 2.0, -0.05]).unwrap();
    let one = fitted(&shape, &covariance, &y, &[1.0, 2.0, -0.05]);
    for j in 0..3 {
        assert!(close(many.coefficients[j], one.coefficients[j], 1e-12));
        assert!(close(many.covariance[j][j], one.covariance[j][j], 1e-12));
    }
    let within: f64 = U.iter().map(|u| (0.0036 / 3.0 + 0.0009 / 1.5) / (u * u)).sum();
    assert!(close(many.chi_square, one.chi_square + within, 1e-12));
    assert_eq!((many.degrees_of_freedom, one.degrees_of_freedom), (11, 4));
    let (a, b) = (many.influence_at(&shape, 3.0).unwrap(), one.influence_at(&shape, 3.0).unwrap());
    for i in 0..7 {
        assert!(close(a.readings[2 * i] + a.readings[2 * i + 1], b.readings[i], 1e-10));
        assert!(close(2.0 * a.readings[2 * i], a.readings[2 * i + 1], 1e-12));
    }
}

/// On data without residuals the first-order influences are the derivatives: refit with one datum moved.
#[test]
fn influences_are_derivatives() {
    let y: Vec<f64> = X.iter().map(|x| curved(*x)).collect();
    let covariance = diagonal(&[0.05, 0.0, 0.03, 0.06, 0.02, 0.04, 0.05]);
    let (shape, start, at, step) = (Family::Polynomial(2), [1.0, 2.0, -0.05], 6.0, 1e-6);
    let influence = fitted(&shape, &covariance, &y, &start).influence_at(&shape, at).unwrap();
    let curve = |x: &[f64], y: &[f64]| {
        let data = BothAxes { x, x_covariance: &covariance, y, y_uncertainty: &U, standard_of: &OF };
        let fit = distance_fit(&shape, &data, &start).unwrap();
        Function::value(&shape, &fit.coefficients, at)
    };
    for i in 0..7 {
        let moved = |list: &[f64], by: f64| {
            let mut list = list.to_vec();
            list[i] += by;
            list
        };
        let by_y = (curve(&X, &moved(&y, step)) - curve(&X, &moved(&y, -step))) / (2.0 * step);
        let by_x = (curve(&moved(&X, step), &y) - curve(&moved(&X, -step), &y)) / (2.0 * step);
        assert!((influence.readings[i] - by_y).abs() < 1e-8, "reading {i}");
        // Standard 1 is exact: what it would do is not counted.
        assert!(i == 1 || (influence.standards[i] - by_x).abs() < 1e-7, "standard {i}: {by_x}");
    }
    assert_eq!(influence.standards[1], 0.0);
}

/// The logarithm at a standard whose uncertainty reaches beyond zero, and a root at an exact zero.
#[test]
fn a_step_out_of_the_domain_is_taken_back() {
    let x = [0.02, 0.1, 1.0, 5.0, 20.0, 60.0];
    let y = [-9.0, -2.1, 0.1, 1.4, 3.2, 4.0];
    let covariance = diagonal(&[0.05, 0.05, 0.1, 0.1, 0.5, 0.5]);
    let of = [0, 1, 2, 3, 4, 5];
    let data = BothAxes { x: &x, x_covariance: &covariance, y: &y, y_uncertainty: &[0.1; 6], standard_of: &of };
    let fit = distance_fit(&Family::Log, &data, &[0.0, 1.0]).unwrap();
    assert!(fit.latent.iter().all(|xi| *xi > 0.0), "{:?}", fit.latent);
    assert!(fit.chi_square.is_finite());
    let exact_zero = BothAxes {
        x: &[0.0, 1.0, 4.0, 9.0],
        x_covariance: &diagonal(&[0.0, 0.01, 0.01, 0.01]),
        y: &[0.01, 1.02, 2.01, 2.98],
        y_uncertainty: &[0.02; 4],
        standard_of: &[0, 1, 2, 3],
    };
    let power = distance_fit(&Shape::Power, &exact_zero, &[1.0, 0.5]).unwrap();
    assert!((power.coefficients[1] - 0.5).abs() < 0.02, "{:?}", power.coefficients);
}

/// A logistic curve is level near zero; a standard with a large uncertainty there is pulled to zero itself.
#[test]
fn a_standard_pulled_over_the_edge_is_named() {
    let x = [1.0, 2.5, 6.2, 15.5, 39.0, 96.0, 240.0, 600.0];
    let b = [0.03, 2.0, 4.0, 1.4];
    let mut y: Vec<f64> = x.iter().map(|x| Shape::Logistic.value(&b, *x)).collect();
    y[0] -= 0.05;
    let covariance = diagonal(&[3.0, 0.1, 0.1, 0.5, 1.0, 2.0, 5.0, 10.0]);
    let of: Vec<usize> = (0..8).collect();
    let data = BothAxes { x: &x, x_covariance: &covariance, y: &y, y_uncertainty: &[0.01; 8], standard_of: &of };
    let error = distance_fit(&Shape::Logistic, &data, &b).unwrap_err();
    assert_eq!(error, DistanceError::Edge { standard: 0, x: 1.0 });
}

#[test]
fn with_as_many_standards_as_coefficients_the_curve_goes_through() {
    let (x, y, of) = ([1.0, 2.0, 4.0], [3.0, 5.0, 4.0], [0, 1, 2]);
    let covariance = diagonal(&[0.1; 3]);
    let data = BothAxes { x: &x, x_covariance: &covariance, y: &y, y_uncertainty: &[0.1; 3], standard_of: &of };
    let fit = distance_fit(&Family::Polynomial(2), &data, &[0.0, 1.0, 0.0]).unwrap();
    assert!(fit.chi_square < 1e-24 && fit.chi_square_p.is_none() && fit.degrees_of_freedom == 0);
    assert!(fit.latent.iter().zip(x).all(|(a, b)| (a - b).abs() < 1e-12));
}

/// Two hundred standards that share half of their error, three readings of each.
#[test]
fn two_hundred_standards_that_share_their_error() {
    let mut stream = Stream::new(5, 0);
    let x: Vec<f64> = (0..200).map(|i| 1.0 + 0.5 * f64::from(i)).collect();
    let entry = |i: usize, j: usize| 1e-4 + if i == j { 1e-4 } else { 0.0 };
    let covariance: Vec<Vec<f64>> = (0..200).map(|i| (0..200).map(|j| entry(i, j)).collect()).collect();
    let of: Vec<usize> = (0..600).map(|i| i / 3).collect();
    let common = 0.01 * stream.normal();
    let latent: Vec<f64> = x.iter().map(|x| x + common + 0.01 * stream.normal()).collect();
    let y: Vec<f64> = of.iter().map(|i| curved(latent[*i]) + 0.02 * stream.normal()).collect();
    let data = BothAxes { x: &x, x_covariance: &covariance, y: &y, y_uncertainty: &vec![0.02; 600], standard_of: &of };
    let fit = distance_fit(&Family::Polynomial(2), &data, &[1.0, 2.0, -0.05]).unwrap();
    let p = fit.chi_square_p.unwrap();
    assert!(p > 0.001 && p < 0.999 && fit.degrees_of_freedom == 597, "{p}");
    assert!(fit.steps <= 12, "{}", fit.steps);
}

#[test]
fn what_is_wrong_is_named() {
    let (y, covariance) = (readings(), diagonal(&[0.05; 7]));
    let good = BothAxes { x: &X, x_covariance: &covariance, y: &y, y_uncertainty: &U, standard_of: &OF };
    let line = Family::Polynomial(1);
    let error = |data: &BothAxes<'_>| distance_fit(&line, data, &[1.0, 2.0]).unwrap_err();
    assert!(distance_fit(&line, &good, &[1.0, 2.0]).is_ok());
    for (index, bad) in [(3, 0.0), (5, -0.1), (2, f64::NAN), (0, f64::INFINITY)] {
        let mut u = U;
        u[index] = bad;
        let found = error(&BothAxes { y_uncertainty: &u, ..good });
        assert!(matches!(found, DistanceError::BadUncertainty { index: i, .. } if i == index), "{found}");
    }
    let mut lopsided = covariance.clone();
    lopsided[4][2] = 0.001;
    let found = error(&BothAxes { x_covariance: &lopsided, ..good });
    assert_eq!(found, DistanceError::Covariance(SemidefiniteError::NotSymmetric { row: 4, column: 2 }));
    let mut impossible = covariance.clone();
    (impossible[6][1], impossible[1][6]) = (0.003, 0.003);
    let found = error(&BothAxes { x_covariance: &impossible, ..good });
    assert_eq!(found, DistanceError::Covariance(SemidefiniteError::NotSemidefinite { row: 6, column: 1 }));
    let all_one = error(&BothAxes { standard_of: &[2; 7], ..good });
    assert_eq!(all_one, DistanceError::TooFew { needed: 2, found: 1 });
    let none = error(&BothAxes { y: &[], y_uncertainty: &[], standard_of: &[], ..good });
    assert_eq!(none, DistanceError::TooFew { needed: 2, found: 0 });
    let beyond = error(&BothAxes { standard_of: &[0, 1, 2, 3, 4, 5, 7], ..good });
    assert_eq!(beyond, DistanceError::NoSuchStandard { reading: 6, standard: 7, standards: 7 });
    let short = error(&BothAxes { y_uncertainty: &U[..6], ..good });
    assert!(matches!(short, DistanceError::Length { found: 6, expected: 7, .. }), "{short}");
    let mut x = X;
    x[2] = f64::NAN;
    assert_eq!(error(&BothAxes { x: &x, ..good }), DistanceError::NotFinite { what: "standard", index: 2 });
    let mut u = U;
    u[1] = 1e-70;
    assert_eq!(error(&BothAxes { y_uncertainty: &u, ..good }), DistanceError::OutOfRange);
    x[2] = -1.0;
    let outside = distance_fit(&Family::Log, &BothAxes { x: &x, ..good }, &[1.0, 2.0]).unwrap_err();
    assert_eq!(outside, DistanceError::Undefined { standard: 2, x: -1.0 });
    // b₁ exp(b₂x) with b₁ = 0 and a flat line of readings: nothing says what b₂ is.
    let flat = BothAxes { y: &[1.0; 7], ..good };
    let found = distance_fit(&Shape::Exponential, &flat, &[1.0, 0.0, 0.1]).unwrap_err();
    assert_eq!(found, DistanceError::Undetermined { coefficients: 3 });
}
