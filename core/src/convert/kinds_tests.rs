//! Kinds of weights and the doubt of the standards.

use super::{Converter, EndState};
use crate::fit::{FitError, Point, Request, Scatter, StandardsDoubt, Weights, estimate, fit};
use crate::model::Family;
use crate::numerics::streams::Stream;

fn points(pairs: &[(f64, f64)]) -> Vec<Point> {
    pairs.iter().map(|&(x, y)| Point { x, y }).collect()
}

/// Five levels, three repeats each, SD 0.2 about 1 + 2x.
fn repeated(seed: u64) -> Vec<Point> {
    let mut stream = Stream::new(seed, 0);
    let levels = [1.0, 3.25, 5.5, 7.75, 10.0];
    levels.iter().flat_map(|&x| [x; 3]).map(|x| Point { x, y: 1.0 + 2.0 * x + 0.2 * stream.normal() }).collect()
}

#[test]
fn repeats_set_the_scatter_and_the_residuals_only_test() {
    let data = points(&[(1.0, 1.0), (1.0, 1.2), (2.0, 2.4), (2.0, 2.0), (4.0, 4.0), (4.0, 4.2)]);
    let line = Family::Polynomial(1);
    let pooled = fit(&line, &data, Weights::ReplicatesConstant).unwrap();
    // s_pe² = (0.02 + 0.08 + 0.02)/3 with 3 degrees of freedom.
    let Scatter::Repeats { variance, degrees_of_freedom } = pooled.scatter else { panic!("not pooled") };
    assert!((variance - 0.04).abs() < 1e-15 && degrees_of_freedom == 3);
    let equal = fit(&line, &data, Weights::Equal).unwrap();
    assert_eq!(pooled.coefficients, equal.coefficients);
    let ratio = pooled.covariance[1][1] / equal.covariance[1][1];
    let expected = 0.04 / equal.residual_sd.unwrap().powi(2);
    assert!((ratio / expected - 1.0).abs() < 1e-13);
    assert_eq!(pooled.scatter_freedom(), 3.0);
}

#[test]
fn the_more_likely_model_of_the_scatter_is_taken() {
    let constant = points(&[(1.0, 1.0), (1.0, 1.2), (10.0, 10.1), (10.0, 9.9), (100.0, 100.0), (100.0, 100.2)]);
    let growing = points(&[(1.0, 1.0), (1.0, 1.02), (10.0, 10.1), (10.0, 9.9), (100.0, 101.0), (100.0, 99.0)]);
    let ratios = |data: &[Point]| fit(&Family::Polynomial(1), data, Weights::Replicates).unwrap().variance_ratio;
    assert_eq!(ratios(&constant), [1.0; 6]);
    let grown = ratios(&growing);
    assert!((grown[4] / grown[0] - (100.0f64 / 1.01).powi(2)).abs() < 1e-9, "{grown:?}");
}

#[test]
fn absolute_weights_carry_no_residual_scatter_and_test_it_instead() {
    let data = points(&[(1.0, 1.1), (2.0, 1.9), (3.0, 3.2), (4.0, 3.9)]);
    let u = [0.1, 0.1, 0.2, 0.2];
    let line = Family::Polynomial(1);
    let request = Request { reading_uncertainty: Some(&u), ..Request::new(&line, &data, Weights::Typed) };
    let typed = estimate(&request).unwrap();
    assert_eq!(typed.scatter, Scatter::Known);
    let twice = u.map(|u| 2.0 * u);
    let wider = estimate(&Request { reading_uncertainty: Some(&twice), ..request }).unwrap();
    // The coefficients stay, their uncertainties follow the typed ones, χ² falls by four.
    assert!((wider.covariance[0][0] / typed.covariance[0][0] - 4.0).abs() < 1e-12);
    assert!((typed.chi_square().unwrap().0 / wider.chi_square().unwrap().0 - 4.0).abs() < 1e-12);
    assert!(typed.scatter_freedom().is_infinite());
    assert!((typed.coverage_factor(0.95) - 1.959_963_984_540_054).abs() < 1e-12);
    // Between the levels u² is straight, beyond them held.
    assert!((typed.variance_at(2.5) - 0.025).abs() < 1e-15 && (typed.variance_at(9.0) - 0.04).abs() < 1e-15);
}

#[test]
fn weights_that_do_not_exist_say_why() {
    let single = points(&[(1.0, 1.0), (2.0, 2.0), (3.0, 3.1)]);
    let line = Family::Polynomial(1);
    assert_eq!(fit(&line, &single, Weights::Replicates), Err(FitError::NoRepeats));
    assert_eq!(fit(&line, &single, Weights::Typed), Err(FitError::NoUncertainty));
    let same = points(&[(1.0, 1.0), (1.0, 1.0), (2.0, 2.0), (2.0, 2.0), (3.0, 3.1), (3.0, 3.1)]);
    assert_eq!(fit(&line, &same, Weights::Replicates), Err(FitError::IdenticalRepeats));
    assert!(matches!(fit(&line, &same, Weights::Raw), Err(FitError::BadWeight { index: 0, .. })));
    for bad in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        let u = [0.1, bad, 0.1];
        let request = Request { reading_uncertainty: Some(&u), ..Request::new(&line, &single, Weights::Typed) };
        assert!(matches!(estimate(&request), Err(FitError::BadWeight { index: 1, .. })), "{bad}");
    }
}

#[test]
fn a_fitted_power_follows_scatter_that_grows() {
    let mut stream = Stream::new(5, 0);
    let mut data = Vec::new();
    for x in [1.0f64, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0] {
        data.extend((0..40).map(|_| Point { x, y: 2.0 * x * (1.0 + 0.02 * stream.normal()) }));
    }
    let fitted = fit(&Family::Polynomial(1), &data, Weights::Fitted).unwrap();
    let theta = fitted.fitted_power.unwrap();
    assert!((1.8..2.2).contains(&theta), "{theta}");
    let ratio = fitted.variance_at(100.0) / fitted.variance_at(1.0);
    assert!((3.0..5.0).contains(&ratio.log10()), "{ratio}");
}

/// All standards shifted by e shift a value by e; all scaled by 1 + c scale it, through a line.
#[test]
fn errors_that_all_standards_share_reach_the_value_whole() {
    let data = repeated(1);
    let x = [1.0, 3.25, 5.5, 7.75, 10.0];
    let standard_of: Vec<Option<usize>> = data.iter().map(|p| x.iter().position(|s| *s == p.x)).collect();
    let doubt = |common: &dyn Fn(f64, f64) -> f64| StandardsDoubt {
        standard_of: standard_of.clone(),
        values: x.to_vec(),
        independent: vec![0.0; 5],
        common: x.iter().map(|a| x.iter().map(|b| common(*a, *b)).collect()).collect(),
    };
    for family in [Family::Polynomial(1), Family::Polynomial(2), Family::Log] {
        let plain = fit(&family, &data, Weights::Equal).unwrap();
        if family != Family::Log {
            let shifted = plain.clone().with_standards(doubt(&|_, _| 0.01));
            for at in [2.0, 8.0] {
                let input = shifted.standards_variance(at, true) / plain.curve.derivative(at).powi(2);
                assert!((input / 0.01 - 1.0).abs() < 0.02, "{family} {input}");
            }
        }
    }
    let line = fit(&Family::Polynomial(1), &data, Weights::Equal).unwrap();
    let scaled = line.clone().with_standards(doubt(&|a, b| 1e-4 * a * b));
    for at in [2.0, 8.0, 40.0] {
        let share = libm::sqrt(scaled.standards_variance(at, true)) / (line.coefficients[1] * at);
        assert!((share / 0.01 - 1.0).abs() < 1e-9, "{share}");
    }
    // The interval of a converted value widens accordingly, and its factor falls towards the normal one.
    let reading = line.curve.value(8.0);
    let narrow = Converter::new(&line, 1, 0.95).unwrap().convert(reading);
    let wide = Converter::new(&scaled, 1, 0.95).unwrap().convert(reading);
    assert_eq!(wide.low_state, EndState::Finite);
    assert!(wide.standard_uncertainty.unwrap() > narrow.standard_uncertainty.unwrap());
    assert!(wide.coverage_factor.unwrap() < narrow.coverage_factor.unwrap());
}
