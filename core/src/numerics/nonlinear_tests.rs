//! Fits against linear ones, against published sets with several regressors or exact decimals, and at
//! the edges.

use super::least_squares::{Basis, LeastSquares, ScaledWeights, SolveError};
use super::levenberg::NotConverged;
use super::nonlinear::{Function, Model, NonlinearError, fit_model, fit_nonlinear};
use super::orthogonal::fit_polynomial;
use super::{Dd, Real};
use proptest::prelude::*;
use serde_json::Value;

const NELSON: &str = include_str!("../../../tests/published/strd/Nelson.json");
const LANCZOS_1: &str = include_str!("../../../tests/published/strd/Lanczos1.json");
const PONTIUS: &str = include_str!("../../../tests/published/strd/Pontius.json");
const REFIT: &str = include_str!("../../../tests/published/strd/nonlinear-refit.json");

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

/// b0 + b1 x + … + b(p−1) x^(p−1).
struct Polynomial(usize);
impl Function for Polynomial {
    fn parameters(&self) -> usize {
        self.0
    }
    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        b.iter().rev().fold(T::zero(), |sum, b| sum * x + *b)
    }
}

/// b0 e^(b1 x).
struct Exponential;
impl Function for Exponential {
    fn parameters(&self) -> usize {
        2
    }
    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        b[0] * (b[1] * x).exp()
    }
}

fn ulps(a: f64, b: f64) -> f64 {
    if a == b { 0.0 } else { (a - b).abs() / (f64::EPSILON * b.abs()) }
}

fn assert_alike(a: &LeastSquares, b: &LeastSquares) {
    let pairs = a.coefficients.iter().zip(&b.coefficients).chain(a.uncertainties.iter().zip(&b.uncertainties));
    let matrices = a.covariance.iter().flatten().zip(b.covariance.iter().flatten());
    let units = a.unit_covariance.iter().flatten().zip(b.unit_covariance.iter().flatten());
    for (a, b) in pairs.chain(matrices).chain(units).chain(a.residuals.iter().zip(&b.residuals)) {
        assert!(ulps(*a, *b) <= 1.0, "{a:e} {b:e}");
    }
    assert!(ulps(a.residual_ss, b.residual_ss) <= 1.0);
    assert!(ulps(a.residual_sd.unwrap(), b.residual_sd.unwrap()) <= 1.0);
    assert!((a.condition / b.condition - 1.0).abs() < 1e-9);
}

/// A linear problem has one answer, whichever way it is reached.
#[test]
fn a_polynomial_comes_out_as_from_the_linear_fit() {
    let set: Value = serde_json::from_str(PONTIUS).unwrap();
    let (x, y) = (numbers(&set["x"]), numbers(&set["y"]));
    for weights in [ScaledWeights::equal(x.len()), ScaledWeights::inverse_power(&y, 2).unwrap()] {
        let linear = fit_polynomial(&x, &y, &weights, 2).unwrap();
        let found = fit_nonlinear(&Polynomial(3), &x, &y, &weights, &[1.0, 1e-6, 0.0]).unwrap();
        assert_alike(&found.solved, &linear);
        let leverage = |fit: &LeastSquares, i: usize| -> f64 { fit.orthonormal.iter().map(|c| c[i] * c[i]).sum() };
        let Basis::Triangular(_) = &found.solved.basis else { panic!("{:?}", found.solved.basis) };
        for (i, x_i) in x.iter().enumerate() {
            let expected = leverage(&linear, i);
            assert!((leverage(&found.solved, i) - expected).abs() < 1e-14);
            let sum = |z: Vec<f64>| -> f64 { z.iter().map(|z| z * z).sum() };
            let by_basis = sum(found.solved.basis.at_regressors(&[1.0, *x_i, x_i * x_i]));
            let expected = sum(linear.basis.at(*x_i));
            assert!((by_basis / expected - 1.0).abs() < 1e-9, "{by_basis} {expected}");
        }
    }
}

/// Decimal digits as typed, in double-double.
fn decimal(value: &Value) -> Dd {
    let text = value.to_string();
    let (mantissa, exponent) = text.split_once('e').unwrap_or((&text, "0"));
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    let digits: f64 = format!("{whole}{fraction}").parse().unwrap();
    let exponent = exponent.parse::<i32>().unwrap() - i32::try_from(fraction.len()).unwrap();
    let power = Real::powi(Dd::from(10.0), exponent.abs());
    if exponent < 0 { Dd::from(digits) / power } else { Dd::from(digits) * power }
}

fn decimals(value: &Value) -> Vec<Dd> {
    value.as_array().unwrap().iter().map(decimal).collect()
}

/// Digits that agree, capped at the 11 certified ones.
fn digits(found: f64, certified: &Value) -> f64 {
    let certified = certified.as_f64().unwrap();
    (-libm::log10(((found - certified) / certified).abs())).min(11.0)
}

fn assert_certified(set: &Value, fit: &LeastSquares, least: f64) {
    for (j, c) in set["certified"].as_array().unwrap().iter().enumerate() {
        let (b, u) = (digits(fit.coefficients[j], &c["estimate"]), digits(fit.uncertainties[j], &c["sd"]));
        assert!(b >= least && u >= least, "{} b{}: {b:.1} {u:.1}", set["name"], j + 1);
    }
    let s = digits(fit.residual_sd.unwrap(), &set["residual_sd"]);
    assert!(s >= least.min(9.0), "{} s: {s:.1}", set["name"]);
}

/// ln y = b1 − b2 x1 exp(−b3 x2).
struct Nelson {
    x: Vec<Vec<f64>>,
}
impl Model for Nelson {
    fn parameters(&self) -> usize {
        3
    }
    fn value<T: Real>(&self, b: &[T], i: usize) -> T {
        let at = |k: usize| T::of(self.x[k][i]);
        b[0] - b[1] * at(0) * (-(b[2] * at(1))).exp()
    }
}

/// NIST/ITL Statistical Reference Datasets, non-linear (tests/published/strd/SOURCE.md), and the same set
/// refitted with 80 digits.
#[test]
fn nelson_with_two_regressors_agrees_with_nist_from_both_starts() {
    let set: Value = serde_json::from_str(NELSON).unwrap();
    let model = Nelson { x: set["x"].as_array().unwrap().iter().map(numbers).collect() };
    let y: Vec<Dd> = numbers(&set["y"]).into_iter().map(|y| Dd::from(y).ln()).collect();
    let refits: Value = serde_json::from_str(REFIT).unwrap();
    let refit = refits.as_array().unwrap().iter().find(|r| r["name"] == "Nelson").unwrap();
    let exact = |v: &Value| v.as_str().unwrap().parse::<f64>().unwrap();
    for name in ["start1", "start2"] {
        let start = numbers(&set["starts"][name]);
        let fit = fit_model(&model, &y, &ScaledWeights::equal(y.len()), &start).unwrap();
        println!("Nelson {name}: {} iterations, {} evaluations", fit.iterations, fit.evaluations);
        assert_certified(&set, &fit.solved, 10.0);
        for j in 0..3 {
            assert!(ulps(fit.solved.coefficients[j], exact(&refit["coefficients"][j])) <= 1.0);
            assert!(ulps(fit.solved.uncertainties[j], exact(&refit["sds"][j])) <= 1.0);
        }
    }
}

/// Σ b(2k−1) exp(−b(2k) x), x in double-double.
struct ThreeExponentials {
    x: Vec<Dd>,
}
impl Model for ThreeExponentials {
    fn parameters(&self) -> usize {
        6
    }
    fn value<T: Real>(&self, b: &[T], i: usize) -> T {
        let x = T::of_dd(self.x[i]);
        b.chunks_exact(2).fold(T::zero(), |sum, b| sum + b[0] * (-(b[1] * x)).exp())
    }
}

/// The residuals of Lanczos1 are 1e-13, so that rounding its decimals to doubles alone spoils the
/// uncertainties; for the decimals themselves the certificate is reached.
#[test]
fn lanczos_1_agrees_with_nist_when_its_decimals_are_not_rounded() {
    let set: Value = serde_json::from_str(LANCZOS_1).unwrap();
    let (x, y) = (decimals(&set["x"]), decimals(&set["y"]));
    let start = numbers(&set["starts"]["start1"]);
    let fit = fit_model(&ThreeExponentials { x }, &y, &ScaledWeights::equal(y.len()), &start).unwrap();
    assert_certified(&set, &fit.solved, 10.0);
}

#[test]
fn exact_data_leave_exactly_nothing() {
    let x: Vec<f64> = (1..=9).map(f64::from).collect();
    let y: Vec<f64> = x.iter().map(|x| 3.0 - 2.0 * x + 0.25 * x * x).collect();
    let fit = fit_nonlinear(&Polynomial(3), &x, &y, &ScaledWeights::equal(9), &[1.0; 3]).unwrap().solved;
    assert_eq!(fit.coefficients, [3.0, -2.0, 0.25]);
    assert_eq!((fit.residual_ss, fit.residual_sd), (0.0, Some(0.0)));
    assert!(fit.residuals.iter().chain(&fit.uncertainties).all(|v| *v == 0.0));
    // Doubles of an exponential are not exact: what is left is their rounding, not zero.
    let y: Vec<f64> = x.iter().map(|x| 5.0 * libm::exp(-0.3 * x)).collect();
    let fit = fit_nonlinear(&Exponential, &x, &y, &ScaledWeights::equal(9), &[1.0, -0.1]).unwrap().solved;
    let s = fit.residual_sd.unwrap();
    assert!(s > 1e-17 && s < 1e-15, "{s:e}");
    // All readings zero: reached from a start elsewhere.
    let none = fit_nonlinear(&Polynomial(2), &x, &[0.0; 9], &ScaledWeights::equal(9), &[1.0, 2.0]).unwrap().solved;
    assert_eq!(none.residual_ss, 0.0);
    assert!(none.coefficients.iter().all(|b| b.abs() < 1e-28), "{:?}", none.coefficients);
}

#[test]
fn as_many_points_as_coefficients_go_through_all_of_them() {
    let fit = fit_nonlinear(&Exponential, &[1.0, 2.0], &[6.0, 12.0], &ScaledWeights::equal(2), &[1.0, 1.0]).unwrap();
    let solved = fit.solved;
    assert!(ulps(solved.coefficients[0], 3.0) <= 1.0 && ulps(solved.coefficients[1], std::f64::consts::LN_2) <= 1.0);
    assert_eq!((solved.residual_sd, solved.uncertainties.len(), solved.covariance.len()), (None, 0, 0));
}

const X: [f64; 5] = [1.0, 2.0, 3.0, 4.0, 5.0];
const Y: [f64; 5] = [2.1, 3.9, 6.2, 7.9, 10.1];

/// b0·b1·x: only the product counts.
struct Product;
impl Function for Product {
    fn parameters(&self) -> usize {
        2
    }
    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        b[0] * b[1] * x
    }
}

/// b0·ln(x − b1).
struct Logarithm;
impl Function for Logarithm {
    fn parameters(&self) -> usize {
        2
    }
    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        b[0] * (x - b[1]).ln()
    }
}

/// b0(1 − exp(−b1 x)).
struct Saturation;
impl Function for Saturation {
    fn parameters(&self) -> usize {
        2
    }
    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        b[0] * (T::one() - (-(b[1] * x)).exp())
    }
}

fn refused<F: Function>(f: &F, y: &[f64], start: &[f64]) -> NotConverged {
    match fit_nonlinear(f, &X[..y.len()], y, &ScaledWeights::equal(y.len()), start) {
        Err(NonlinearError::NotConverged(error)) => error,
        other => panic!("{other:?}"),
    }
}

#[test]
fn what_cannot_be_determined_is_an_error_with_its_numbers() {
    let few = refused(&Exponential, &Y[..1], &[1.0, 1.0]);
    assert_eq!(few, NotConverged::TooFew { observations: 1, parameters: 2 });
    // Only the product counts, so that the second factor has no influence of its own.
    let product = refused(&Product, &Y, &[1.0, 1.0]);
    assert!(matches!(product, NotConverged::Singular { parameter: 1, remains, .. } if remains < 1e-15), "{product:?}");
    // x − b1 is not positive for the first point.
    let outside = refused(&Logarithm, &Y, &[1.0, 1.0]);
    assert_eq!(outside, NotConverged::NotFiniteAtStart { observation: 0 });
    // All y equal: better and better for b1 → ∞, never best.
    let flat = refused(&Saturation, &[3.0; 5], &[1.0, 1.0]);
    assert!(matches!(flat, NotConverged::Singular { parameter: 1, .. }), "{flat:?}");
    // A straight line: better and better for b1 → 0.
    let line = refused(&Saturation, &X, &[10.0, 0.1]);
    assert!(line.tried().is_some_and(|t| t.evaluations <= 5000 && t.relative_offset > 1e-3), "{line:?}");
    // b0 = 0 hides b1 at the start only.
    let hidden = fit_nonlinear(&Exponential, &X, &Y, &ScaledWeights::equal(5), &[0.0, 0.0]).unwrap();
    let open = fit_nonlinear(&Exponential, &X, &Y, &ScaledWeights::equal(5), &[1.0, 0.1]).unwrap();
    assert_alike(&hidden.solved, &open.solved);
}

#[test]
fn lengths_and_ranges_are_checked() {
    let weights = ScaledWeights::equal(5);
    let short = fit_nonlinear(&Exponential, &X[..4], &Y, &weights, &[1.0, 1.0]);
    assert_eq!(short, Err(NonlinearError::Lengths { x: 4, y: 5, weights: 5 }));
    let light = fit_nonlinear(&Exponential, &X, &Y, &ScaledWeights::equal(4), &[1.0, 1.0]);
    assert_eq!(light, Err(NonlinearError::Lengths { x: 5, y: 5, weights: 4 }));
    // Squares of 1e-300 are no doubles, as in a linear fit.
    let tiny = Y.map(|y| y * 1e-300);
    let found = fit_nonlinear(&Polynomial(2), &X, &tiny, &weights, &[0.0, 1e-300]);
    assert_eq!(found, Err(NonlinearError::Solve(SolveError::OutOfRange)));
}

proptest! {
    /// Units that differ by powers of two change nothing but the powers of two.
    #[test]
    fn units_do_not_matter(k in -150..150_i32, m in -150..150_i32, noise in prop::array::uniform9(-0.05..0.05_f64)) {
        let x: Vec<f64> = (0..9).map(f64::from).collect();
        let y: Vec<f64> = x.iter().zip(noise).map(|(x, e)| 4.0 * libm::exp(-0.4 * x) + e).collect();
        let weights = ScaledWeights::equal(9);
        let plain = fit_nonlinear(&Exponential, &x, &y, &weights, &[3.0, -0.3]).unwrap().solved;
        let by = |v: &[f64], e: i32| v.iter().map(|v| libm::scalbn(*v, e)).collect::<Vec<_>>();
        let start = [libm::scalbn(3.0, m), libm::scalbn(-0.3, -k)];
        let scaled = fit_nonlinear(&Exponential, &by(&x, k), &by(&y, m), &weights, &start).unwrap().solved;
        for (j, e) in [m, -k].into_iter().enumerate() {
            prop_assert!(ulps(scaled.coefficients[j], libm::scalbn(plain.coefficients[j], e)) <= 1.0);
            prop_assert!(ulps(scaled.uncertainties[j], libm::scalbn(plain.uncertainties[j], e)) <= 1.0);
        }
    }

    /// From wherever it starts, the search ends; and what it calls a minimum is the only one there is.
    #[test]
    fn any_start_ends_in_the_minimum_or_in_an_error(top in -1e3..1e3_f64, rate in -5.0..5.0_f64) {
        let weights = ScaledWeights::equal(5);
        let best = fit_nonlinear(&Exponential, &X, &Y, &weights, &[1.0, 0.3]).unwrap().solved;
        match fit_nonlinear(&Exponential, &X, &Y, &weights, &[top, rate]) {
            Ok(fit) => prop_assert!((fit.solved.residual_ss / best.residual_ss - 1.0).abs() < 1e-15),
            Err(NonlinearError::NotConverged(error)) => prop_assert!(error.tried().is_some(), "{error:?}"),
            Err(error) => prop_assert!(false, "{error:?}"),
        }
    }
}
