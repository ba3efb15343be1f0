//! Householder against the published sets it alone can fit, and against orthogonal polynomials.

use super::Dd;
use super::householder::{fit_columns, fit_columns_exactly};
use super::least_squares::{Basis, ScaledWeights, SolveError};
use super::orthogonal::fit_polynomial;
use serde_json::Value;

const LONGLEY: &str = include_str!("../../../tests/published/strd/Longley.json");
const NO_INT_1: &str = include_str!("../../../tests/published/strd/NoInt1.json");
const NO_INT_2: &str = include_str!("../../../tests/published/strd/NoInt2.json");
const FILIP: &str = include_str!("../../../tests/published/strd/Filip.json");

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

/// Digits that agree: −log₁₀ of the relative error, capped at the 15 certified ones.
fn digits(found: f64, certified: f64) -> f64 {
    let error = ((found - certified) / certified).abs();
    (-libm::log10(error)).min(15.0)
}

fn assert_certified(set: &Value, columns: &[Vec<Dd>]) {
    let y = numbers(&set["y"]);
    let fit = fit_columns(columns, &y, &ScaledWeights::equal(y.len())).unwrap();
    for (i, c) in set["certified"].as_array().unwrap().iter().enumerate() {
        let estimate = digits(fit.coefficients[i], c["estimate"].as_f64().unwrap());
        let sd = digits(fit.uncertainties[i], c["sd"].as_f64().unwrap());
        assert!(estimate >= 14.0, "{} {i}: {estimate}", set["name"]);
        assert!(sd >= 14.0, "{} sd {i}: {sd}", set["name"]);
    }
    let s = fit.residual_sd.unwrap();
    assert!(digits(s, set["residual_sd"].as_f64().unwrap()) >= 14.0);
}

#[test]
fn longley_and_lines_through_zero_agree_with_nist() {
    let longley: Value = serde_json::from_str(LONGLEY).unwrap();
    let mut columns = vec![vec![Dd::ONE; 16]];
    for predictor in longley["x"].as_array().unwrap() {
        columns.push(numbers(predictor).into_iter().map(Dd::from).collect());
    }
    assert_certified(&longley, &columns);
    for text in [NO_INT_1, NO_INT_2] {
        let set: Value = serde_json::from_str(text).unwrap();
        let x = numbers(&set["x"]).into_iter().map(Dd::from).collect();
        assert_certified(&set, &[x]);
    }
}

/// Two independent routes: reflections on raw powers, and the Stieltjes recurrence.
#[test]
fn both_schemes_give_the_same_filip() {
    let set: Value = serde_json::from_str(FILIP).unwrap();
    let (x, y) = (numbers(&set["x"]), numbers(&set["y"]));
    let weights = ScaledWeights::inverse_power(&y, 2).unwrap();
    let orthogonal = fit_polynomial(&x, &y, &weights, 10).unwrap();
    let mut columns = vec![vec![Dd::ONE; x.len()]];
    for k in 0..10 {
        let next = columns[k].iter().zip(&x).map(|(c, x)| *c * *x).collect();
        columns.push(next);
    }
    let reflected = fit_columns(&columns, &y, &weights).unwrap();
    let close = |a: f64, b: f64| ((a - b) / b).abs() < 3e-16;
    for i in 0..11 {
        assert!(close(orthogonal.coefficients[i], reflected.coefficients[i]));
        assert!(close(orthogonal.uncertainties[i], reflected.uncertainties[i]));
        for j in 0..11 {
            assert!(close(orthogonal.covariance[i][j], reflected.covariance[i][j]));
        }
    }
    assert!(close(orthogonal.residual_ss, reflected.residual_ss));
    assert!((orthogonal.condition / reflected.condition - 1.0).abs() < 1e-9);
}

#[test]
fn orthonormal_columns_are_orthonormal() {
    let set: Value = serde_json::from_str(FILIP).unwrap();
    let (x, y) = (numbers(&set["x"]), numbers(&set["y"]));
    let fit = fit_polynomial(&x, &y, &ScaledWeights::equal(82), 10).unwrap();
    for (i, a) in fit.orthonormal.iter().enumerate() {
        for (j, b) in fit.orthonormal.iter().enumerate() {
            let dot: f64 = a.iter().zip(b).map(|(a, b)| a * b).sum();
            let expected = if i == j { 1.0 } else { 0.0 };
            assert!((dot - expected).abs() < 1e-14, "{i} {j} {dot}");
        }
    }
    assert!(matches!(fit.basis, Basis::Orthogonal { .. }));
}

#[test]
fn readings_in_double_double_keep_their_low_words() {
    let y: Vec<Dd> = [1e-20, 3e-20, 2e-20].iter().map(|low| Dd::from_sum(1.0, *low)).collect();
    let fit = fit_columns_exactly(&[vec![Dd::ONE; 3]], &y, &ScaledWeights::equal(3)).unwrap();
    // Twenty digits down, sums of numbers near one are good to 1e-31.
    let close = |a: f64, b: f64| (a / b - 1.0).abs() < 1e-10;
    assert!(close(fit.residual_sd.unwrap(), 1e-20) && close(fit.residuals[1], 1e-20), "{fit:?}");
}

#[test]
fn dependent_columns_are_refused() {
    let one = vec![Dd::ONE; 4];
    let two = vec![Dd::from(2.0); 4];
    let equal = ScaledWeights::equal(4);
    let y = [1.0, 2.0, 3.0, 4.0];
    assert_eq!(fit_columns(&[one, two], &y, &equal), Err(SolveError::Singular));
    assert_eq!(fit_polynomial(&[1.0; 4], &y, &equal, 1), Err(SolveError::Singular));
    assert_eq!(fit_columns(&[], &y, &equal), Err(SolveError::Singular));
    let zero = vec![Dd::ZERO; 4];
    assert_eq!(fit_columns(&[zero], &y, &equal), Err(SolveError::Singular));
}

#[test]
fn weights_too_far_apart_are_refused() {
    let refused = ScaledWeights::inverse_power(&[1e-70, 1e70], 2);
    assert_eq!(refused, Err(SolveError::OutOfRange));
    let weights = ScaledWeights::inverse_power(&[1e-50, 3e-50], 2).unwrap();
    assert_eq!(weights.exponent % 2, 0);
    let ratio = (weights.values[0] / weights.values[1]).to_f64();
    let expected = 9.000_000_000_000_002;
    assert!((ratio - expected).abs() < 1e-14, "{ratio:e}");
}
