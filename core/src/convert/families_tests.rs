//! Every family through the one public fit.

use super::{Converter, EndState, State};
use crate::fit::{FitError, Point, Request, Weights, estimate, fit};
use crate::model::{Curve, Family, TypedFormula, Units, temperature::TemperatureUnit};
use crate::numerics::streams::Stream;

/// A true curve of each family that bends in its coefficients, with standards to fit it at.
fn truths() -> Vec<(Family, Vec<f64>, Vec<f64>)> {
    let even = |low: f64, high: f64| (0..9).map(|i| low + (high - low) * f64::from(i) / 8.0).collect::<Vec<_>>();
    let ratio = |low: f64, high: f64| even(low.ln(), high.ln()).into_iter().map(f64::exp).collect::<Vec<_>>();
    let typed = TypedFormula::new("b1*(1-exp(-b2*x))", "b1=500,b2=0.0001").unwrap();
    vec![
        (Family::LineThroughZero, vec![1.5], even(1.0, 10.0)),
        (Family::Power, vec![2.0, 0.7], ratio(1.0, 100.0)),
        (Family::Exponential, vec![1.0, 5.0, -0.3], even(0.0, 10.0)),
        (Family::Hyperbola, vec![2.0, 30.0, 4.0], even(0.0, 10.0)),
        (Family::Rational, vec![1.0, 2.0, 0.1], even(0.0, 10.0)),
        (Family::Logistic4, vec![0.05, 1.2, 40.0, 2.0], ratio(1.0, 1000.0)),
        (Family::Logistic5, vec![0.05, 1.2, 40.0, 2.0, 0.6], ratio(0.3, 3000.0)),
        (Family::SteinhartHart, vec![1.1e-3, 2.4e-4, 0.8e-7], even(273.15, 313.15)),
        (Family::Beta, vec![3900.0, 10_000.0], even(273.15, 313.15)),
        (Family::CallendarVanDusen, vec![100.0, 3.9083e-3, -5.775e-7], even(273.15, 600.0)),
        (Family::Formula(typed), vec![240.0, 5.5e-4], even(70.0, 760.0)),
    ]
}

/// Readings on the curve, each standard twice, with a scatter of this share of their span.
fn readings(family: &Family, truth: &[f64], xs: &[f64], noise: f64) -> Vec<Point> {
    let curve = Curve::new(family, Units::default(), truth.to_vec());
    let ys: Vec<f64> = xs.iter().map(|x| curve.value(*x)).collect();
    let span = ys.iter().fold(0.0, |m: f64, y| m.max((y - ys[0]).abs()));
    let mut stream = Stream::new(17, 0);
    let twice = xs.iter().zip(&ys).flat_map(|(x, y)| [(*x, *y); 2]);
    twice.map(|(x, y)| Point { x, y: y + noise * span * stream.normal() }).collect()
}

#[test]
fn every_family_finds_its_own_curve() {
    for (family, truth, xs) in truths() {
        let fit = fit(&family, &readings(&family, &truth, &xs, 1e-6), Weights::Equal).unwrap();
        assert_eq!(fit.coefficients.len(), truth.len(), "{family}");
        for ((found, true_value), u) in fit.coefficients.iter().zip(&truth).zip(fit.standard_uncertainties().unwrap()) {
            assert!((found - true_value).abs() < 5.0 * u, "{family}: {found} for {true_value}, u = {u}");
        }
        let lever: f64 = fit.leverage.iter().sum();
        assert!((lever - truth.len() as f64).abs() < 1e-8, "{family}: leverages add to {lever}");
    }
}

/// Var f̂ at an observation is its leverage, and the influences reproduce the variance: Σℓ²v = h.
#[test]
fn variance_and_influence_agree_at_the_observations() {
    for (family, truth, xs) in truths() {
        // So little scatter that it makes no difference whether a derivative is taken at the reading or on the curve.
        let fit = fit(&family, &readings(&family, &truth, &xs, 1e-7), Weights::Equal).unwrap();
        for (i, point) in fit.points.iter().enumerate() {
            let factor = fit.variance_factor(point.x);
            let v = fit.variance_at(point.x);
            assert!((factor / v / fit.leverage[i] - 1.0).abs() < 1e-5, "{family} at {}", point.x);
            let spread: f64 = fit.influence(point.x).iter().zip(&fit.variance_ratio).map(|(l, v)| l * l * v).sum();
            assert!((spread / factor - 1.0).abs() < 1e-4, "{family} at {}: {spread} {factor}", point.x);
        }
    }
}

#[test]
fn every_family_converts_back_what_it_was_given() {
    for (family, truth, xs) in truths() {
        let fit = fit(&family, &readings(&family, &truth, &xs, 1e-3), Weights::Equal).unwrap();
        let converter = Converter::new(&fit, 1, 0.95).unwrap();
        let x = xs[4];
        let found = converter.convert(fit.curve.value(x));
        assert_eq!(found.state, State::InRange, "{family}");
        assert!((found.value.unwrap() / x - 1.0).abs() < 1e-12, "{family}: {:?} for {x}", found.value);
        assert!(found.low.unwrap() < x && x < found.high.unwrap(), "{family}");
    }
}

/// Steinhart–Hart minimises and states its scatter in the measurand: the same in K and °C, 1.8 times in °F.
#[test]
fn a_thermistor_is_judged_in_the_unit_of_the_temperature() {
    let (family, truth, kelvins) = truths().into_iter().find(|(f, ..)| *f == Family::SteinhartHart).unwrap();
    let kelvin = readings(&family, &truth, &kelvins, 1e-3);
    let of = |unit: TemperatureUnit| {
        let points: Vec<Point> = kelvin.iter().map(|p| Point { x: unit.from_kelvin(p.x), y: p.y / 1000.0 }).collect();
        let units = Units { temperature: Some(unit), ohm: Some(1000.0) };
        estimate(&Request { units, ..Request::new(&family, &points, Weights::Equal) }).unwrap()
    };
    let [k, c, f] = [TemperatureUnit::Kelvin, TemperatureUnit::Celsius, TemperatureUnit::Fahrenheit].map(of);
    let plain = fit(&family, &kelvin, Weights::Equal).unwrap();
    for (a, b) in k.coefficients.iter().zip(&plain.coefficients) {
        assert!((a / b - 1.0).abs() < 1e-9);
    }
    let s = plain.residual_sd.unwrap();
    assert!((c.residual_sd.unwrap() / s - 1.0).abs() < 1e-6);
    assert!((f.residual_sd.unwrap() / s / 1.8 - 1.0).abs() < 1e-6);
    // e/|f̂′| is the error of the temperature, and its sum of squares what was minimised.
    let squares: f64 =
        plain.points.iter().zip(&plain.residuals).map(|(p, e)| (e / plain.curve.derivative(p.x)).powi(2)).sum();
    assert!((squares / plain.residual_ss - 1.0).abs() < 1e-9);
}

#[test]
fn thermometers_refuse_other_units() {
    let (family, truth, xs) = truths().into_iter().find(|(f, ..)| *f == Family::Beta).unwrap();
    let points = readings(&family, &truth, &xs, 1e-3);
    let units = Units { temperature: None, ohm: Some(1.0) };
    let refused = estimate(&Request { units, ..Request::new(&family, &points, Weights::Equal) });
    assert!(matches!(refused, Err(FitError::Units { .. })));
    let units = Units { temperature: Some(TemperatureUnit::Kelvin), ohm: None };
    let refused = estimate(&Request { units, ..Request::new(&family, &points, Weights::Equal) });
    assert!(matches!(refused, Err(FitError::Units { .. })));
}

/// Near an asymptote the data set no upper limit, beyond it there is no value, and both are answers.
#[test]
fn a_logistic_gives_one_sided_answers_at_its_asymptote() {
    let (family, truth, xs) = truths().into_iter().find(|(f, ..)| *f == Family::Logistic4).unwrap();
    let fit = fit(&family, &readings(&family, &truth, &xs, 0.01), Weights::Equal).unwrap();
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let top = fit.coefficients[3];
    let near = converter.convert(top - 0.002);
    assert_eq!((near.high_state, near.low_state), (EndState::Unbounded, EndState::Finite), "{near:?}");
    assert_eq!((near.state, near.standard_uncertainty), (State::Unbounded, None));
    let beyond = converter.convert(top + 0.005);
    assert_eq!((beyond.value, beyond.state), (None, State::NoValue));
    assert!(beyond.low.is_some() && beyond.high.is_none(), "{beyond:?}");
    let far = converter.convert(top + 1.0);
    assert_eq!((far.state, far.low_state, far.high_state), (State::NoValue, EndState::None, EndState::None));
}

#[test]
fn wild_input_is_refused_with_a_reason() {
    for (family, ..) in truths() {
        let same = vec![Point { x: 300.0, y: 1.0 }; 12];
        let refused = fit(&family, &same, Weights::Equal);
        // One coefficient can be told from one level.
        assert!(refused.is_err() || family == Family::LineThroughZero, "{family}");
        for wild in [f64::NAN, f64::INFINITY, 1e300, -1e300] {
            let points: Vec<Point> = (1..12).map(|i| Point { x: f64::from(i) * wild, y: f64::from(i) }).collect();
            if let Ok(fit) = fit(&family, &points, Weights::Equal) {
                assert!(fit.coefficients.iter().all(|b| b.is_finite()), "{family} {wild}");
            }
        }
    }
}

/// The ends of every set against a direct scan of its inequality |y − f̂(x)| ≤ q·√(variances at x).
#[test]
fn the_ends_are_where_a_direct_scan_finds_them() {
    for (family, truth, xs) in truths() {
        let fit = fit(&family, &readings(&family, &truth, &xs, 0.01), Weights::Equal).unwrap();
        let converter = Converter::new(&fit, 1, 0.95).unwrap();
        let q = fit.coverage_factor(0.95);
        for place in [xs[1], xs[4], xs[7]] {
            let reading = fit.curve.value(place);
            let found = converter.convert(reading);
            let inside = |x: f64| {
                let v = fit.variances(x, 1).map_or(f64::NAN, |v| v.total());
                (reading - fit.curve.value(x)).abs() <= q * libm::sqrt(v)
            };
            assert!(inside(place), "{family}");
            // Outwards from the value in fine steps of its own uncertainty, to the first place outside.
            let step = 1e-4 * found.standard_uncertainty.unwrap_or(0.01 * place);
            for (end, direction) in [(found.low, -1.0), (found.high, 1.0)] {
                let Some(end) = end else { continue };
                let first_outside = (1..400_000).map(|i| place + direction * f64::from(i) * step).find(|x| !inside(*x));
                let scanned = first_outside.unwrap_or(f64::NAN);
                assert!((scanned - end).abs() <= 1.5 * step, "{family} at {place}: {end} scanned {scanned}");
            }
        }
    }
}

/// Readings of an instrument that hardly answers: the data set no limits, one limit, or leave two pieces.
#[test]
fn sets_without_two_ends_are_answers() {
    // Slope 0.3 of its own uncertainty at best: nothing is excluded.
    let flat: Vec<Point> = (0..8).map(|i| Point { x: f64::from(i), y: f64::from(i * 5 % 8) }).collect();
    let line = fit(&Family::Polynomial(1), &flat, Weights::Equal).unwrap();
    let nothing = Converter::new(&line, 1, 0.95).unwrap().convert(3.4);
    assert_eq!(
        (nothing.low_state, nothing.high_state, nothing.state),
        (EndState::Unbounded, EndState::Unbounded, State::Unbounded)
    );
    assert_eq!(nothing.standard_uncertainty, None);
    // The same instrument far from its mean reading: two pieces, both handed out.
    let far = Converter::new(&line, 1, 0.95).unwrap().convert(60.0);
    assert_eq!(far.pieces.len(), 2, "{far:?}");
    assert_eq!((far.pieces[0].low, far.pieces[1].high), (None, None));
}
