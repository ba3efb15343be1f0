//! Edge cases: each has its variant or its state, and a sentence.

use super::*;
use crate::model::Formula;

fn points(pairs: &[(f64, f64)]) -> Vec<Point> {
    pairs.iter().map(|(x, y)| Point { x: *x, y: *y }).collect()
}

fn line(pairs: &[(f64, f64)], weights: Weights) -> Result<Fit, FitError> {
    fit(&Family::Polynomial(1), &points(pairs), weights)
}

#[test]
fn nothing_one_level_and_too_few_levels() {
    let too_few = |needed, found| FitError::TooFew { needed, coefficients: needed, found };
    assert_eq!(line(&[], Weights::Equal), Err(too_few(2, 0)));
    assert_eq!(line(&[(1.0, 2.0), (1.0, 3.0)], Weights::Equal), Err(too_few(2, 1)));
    let three = points(&[(0.0, 1.0), (-0.0, 2.0), (1.0, 3.0)]);
    assert_eq!(fit(&Family::Polynomial(2), &three, Weights::Equal), Err(too_few(3, 2)));
    let message = too_few(3, 2).to_string();
    assert_eq!(message, "3 different standards are needed for 3 coefficients; there are 2");
}

#[test]
fn a_constant_needs_one_level_only() {
    let fit = fit(&Family::Polynomial(0), &points(&[(5.0, 1.0), (5.0, 2.0)]), Weights::Equal).unwrap();
    assert_eq!(fit.coefficients, [1.5]);
    assert_eq!(fit.residual_sd, Some(libm::sqrt(0.5)));
    assert!((fit.mean_variance(99.0) - 0.25).abs() < 1e-15);
}

#[test]
fn as_many_points_as_coefficients_leave_no_sd() {
    let fit = line(&[(1.0, 2.0), (3.0, 5.0)], Weights::Equal).unwrap();
    assert_eq!(fit.coefficients, [0.5, 1.5]);
    assert_eq!((fit.degrees_of_freedom, fit.residual_sd), (0, None));
    assert!(fit.covariance.is_empty() && fit.standard_uncertainties().is_none());
    assert!(fit.mean_variance(2.0).is_nan());
    assert!(fit.variance_factor(2.0) > 0.0);
    assert!(fit.standardised().iter().all(Option::is_none));
    assert_eq!((fit.press_rmse(), fit.level_out_rmse(), fit.aicc()), (None, None, None));
    assert!(fit.residuals.iter().all(|e| *e == 0.0));
}

#[test]
fn identical_replicates_and_a_perfect_fit() {
    let perfect = [(0.1, 0.7), (0.1, 0.7), (0.2, 0.9), (0.2, 0.9), (0.3, 1.1)];
    let fit = line(&perfect[..4], Weights::Equal).unwrap();
    assert_eq!((fit.residual_ss, fit.residual_sd), (0.0, Some(0.0)));
    assert_eq!((fit.aicc(), fit.bic(), fit.r_squared()), (None, None, Some(1.0)));
    assert!(fit.cooks_distance().iter().all(Option::is_none));
    assert_eq!(fit.press_rmse(), Some(0.0));
    // The third level is not on the line in doubles: 0.3 is not 0.1 + 0.2.
    let scattered = line(&perfect, Weights::Equal).unwrap();
    assert!(scattered.residual_sd.unwrap() < 1e-16);
}

#[test]
fn equal_indications_have_no_r_squared() {
    let fit = line(&[(1.0, 4.0), (2.0, 4.0), (3.0, 4.0)], Weights::Equal).unwrap();
    assert_eq!((fit.coefficients.as_slice(), fit.r_squared()), ([4.0, 0.0].as_slice(), None));
    let zero = line(&[(1.0, 0.0), (2.0, 0.0), (3.0, 0.0)], Weights::Equal).unwrap();
    assert_eq!((zero.residual_sd, zero.r_squared()), (Some(0.0), None));
}

#[test]
fn values_that_are_not_finite_are_named() {
    for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        let found = line(&[(1.0, 2.0), (2.0, bad), (3.0, 1.0)], Weights::Equal);
        assert_eq!(found, Err(FitError::NotFinite { index: 1 }));
        let found = line(&[(bad, 2.0), (2.0, 1.0), (3.0, 1.0)], Weights::Equal);
        assert_eq!(found, Err(FitError::NotFinite { index: 0 }));
    }
    let message = FitError::NotFinite { index: 0 }.to_string();
    assert_eq!(message, "observation 1 is not a finite number");
}

#[test]
fn the_logarithm_of_zero_or_less_is_an_error_that_names_the_row() {
    for x in [0.0, -3.0] {
        let found = fit(&Family::Log, &points(&[(1.0, 1.0), (x, 2.0), (3.0, 3.0)]), Weights::Equal);
        assert_eq!(found, Err(FitError::OutsideDomain { what: "the logarithm of", index: 1, x }));
    }
}

#[test]
fn what_cannot_be_fitted_is_refused() {
    let three = points(&[(0.0, 1.0), (1.0, 2.0), (2.0, 3.0)]);
    assert_eq!(fit(&Family::Declared, &three, Weights::Equal), Err(FitError::NotFitted));
    let high = fit(&Family::Polynomial(11), &three, Weights::Equal);
    assert_eq!(high, Err(FitError::DegreeTooHigh { degree: 11 }));
}

#[test]
fn weights_that_do_not_exist() {
    let bad = |pairs: &[(f64, f64)], weights| match line(pairs, weights) {
        Err(FitError::BadWeight { index, reason }) => (index, reason),
        other => panic!("{other:?}"),
    };
    let negative = [(-1.0, 1.0), (1.0, 2.0), (2.0, 3.0)];
    let at = |index: usize, reason: &str| (index, reason.to_owned());
    assert_eq!(bad(&negative, Weights::InverseX), at(0, "the standard is negative"));
    assert_eq!(bad(&negative, Weights::InverseX2), at(0, "the standard is negative"));
    let zero_y = [(1.0, 1.0), (2.0, 0.0), (3.0, 2.0)];
    assert_eq!(bad(&zero_y, Weights::InverseY), at(1, "the indication is zero"));
    assert_eq!(bad(&zero_y, Weights::InverseY2), at(1, "the indication is zero"));
    let negative_y = [(1.0, 1.0), (2.0, -2.0), (3.0, -4.5)];
    assert_eq!(bad(&negative_y, Weights::InverseY), at(1, "the indication is negative"));
    assert!(line(&negative_y, Weights::InverseY2).is_ok());
    let all_zero = fit(&Family::Polynomial(0), &points(&[(0.0, 1.0), (0.0, 2.0)]), Weights::InverseX);
    assert!(matches!(all_zero, Err(FitError::BadWeight { index: 0, .. })));
}

#[test]
fn the_variance_at_zero_is_floored_at_the_smallest_positive_standard() {
    let with_zero = [(0.0, 0.1), (2.0, 2.1), (4.0, 4.3), (8.0, 8.1)];
    let fit = line(&with_zero, Weights::InverseX2).unwrap();
    assert_eq!(fit.variance_ratio, [4.0, 4.0, 16.0, 64.0]);
    for (x, v) in [(-1.0, 4.0), (0.0, 4.0), (1.0, 4.0), (3.0, 9.0), (100.0, 1e4)] {
        assert_eq!(fit.variance_at(x), v);
    }
    let by_y = line(&with_zero, Weights::InverseY).unwrap();
    assert_eq!(by_y.variance_at(4.0), by_y.curve.value(4.0));
    assert_eq!(by_y.variance_at(-5.0), 0.1);
    assert_eq!(line(&with_zero, Weights::Equal).unwrap().variance_at(7.0), 1.0);
}

#[test]
fn huge_and_tiny_numbers_fit_or_say_so() {
    let scaled = |x: f64, y: f64| [(x, y), (2.0 * x, 3.0 * y), (3.0 * x, 4.0 * y), (4.0 * x, 7.0 * y)];
    for (x, y) in [(1e70, 1e-70), (1e-70, 1e70), (1e-150, 1.0), (1.0, 1e150)] {
        let fit = line(&scaled(x, y), Weights::Equal).unwrap();
        assert!((fit.coefficients[1] * x / y - 1.9).abs() < 1e-12, "{x:e} {y:e}");
        assert!((fit.residual_sd.unwrap() / y - 0.591_607_978).abs() < 1e-8);
    }
    // Here the slope is 1e-600, or Σe² is, or 1e600: no double holds it.
    for (x, y) in [(1e300, 1e-300), (1.0, 1e-300), (1.0, 1e300), (1e300, 1e300), (1e-300, 1.0)] {
        assert_eq!(line(&scaled(x, y), Weights::Equal), Err(FitError::OutOfRange), "{x:e} {y:e}");
    }
    let far = line(&[(1e-300, 1.0), (1.0, 2.0), (1e300, 3.0)], Weights::InverseX2);
    assert_eq!(far, Err(FitError::OutOfRange));
    let log = fit(&Family::Log, &points(&[(1e-300, 1.0), (1.0, 2.0), (1e300, 3.5)]), Weights::Equal);
    assert!((log.unwrap().coefficients[1] - 2.5 / (2.0 * 690.775_527_898_213_7)).abs() < 1e-18);
}

#[test]
fn levels_next_to_each_other_fit_until_they_cannot_be_told_apart() {
    let near = [(1.0, 0.0), (1.0 + f64::EPSILON, 1.0), (1.0 + 2.0 * f64::EPSILON, 3.0)];
    let fit_near = line(&near, Weights::Equal).unwrap();
    assert!((fit_near.coefficients[1] * f64::EPSILON - 1.5).abs() < 1e-12);
    let lost = [(1e-30, 0.0), (2e-30, 1.0), (1.0, 3.0), (1e30, 5.0)];
    let cubic = fit(&Family::Polynomial(3), &points(&lost), Weights::Equal);
    assert_eq!(cubic, Err(FitError::TooClose { coefficients: 4 }));
}

#[test]
fn a_declared_function_has_errors_instead_of_residuals() {
    let formula: Formula = "4 + 1.6*x".parse().unwrap();
    let fit = declared(&formula, &points(&[(0.0, 4.25), (5.0, 12.0), (10.0, 19.75)])).unwrap();
    assert_eq!(fit.residuals, [0.25, 0.0, -0.25]);
    assert_eq!((fit.degrees_of_freedom, fit.residual_ss), (3, 0.125));
    assert_eq!(fit.residual_sd, Some(libm::sqrt(0.125 / 3.0)));
    assert_eq!(fit.coefficients.len() + fit.covariance.len(), 0);
    assert_eq!((fit.mean_variance(3.0), fit.variance_at(3.0)), (0.0, 1.0));
    assert_eq!(fit.influence(3.0), [0.0; 3]);
    assert_eq!((fit.r_squared(), fit.condition()), (None, 1.0));
    assert_eq!(fit.press_rmse(), fit.residual_sd);
    let rmse = fit.level_out_rmse().unwrap() / fit.residual_sd.unwrap();
    assert!((rmse - 1.0).abs() < 1e-15);
    let empty = declared(&formula, &[]).unwrap();
    assert_eq!((empty.residual_sd, empty.level_out_rmse(), empty.press_rmse()), (None, None, None));
    let root: Formula = "sqrt(x)".parse().unwrap();
    let outside = declared(&root, &points(&[(1.0, 1.0), (-1.0, 1.0)]));
    assert_eq!(outside, Err(FitError::Undefined { index: 1, x: -1.0 }));
}
