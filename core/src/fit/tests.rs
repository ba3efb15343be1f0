//! Published fits through the public functions.

use super::reference_fits::{POINTS, ROWS};
use super::*;
use serde_json::Value;

fn set(text: &str) -> (Value, Vec<Point>) {
    let value: Value = serde_json::from_str(text).unwrap();
    let numbers = |key: &str| -> Vec<f64> {
        let list = value[key].as_array().unwrap();
        list.iter().map(|v| v.as_f64().unwrap()).collect()
    };
    let (x, y) = (numbers("x"), numbers("y"));
    let points = x.into_iter().zip(y).map(|(x, y)| Point { x, y }).collect();
    (value, points)
}

/// Digits that agree: −log₁₀ of the relative error (absolute where zero is certified), capped at the 15
/// certified digits; 0 when not within a factor of 2.
fn digits(found: f64, certified: f64) -> f64 {
    let error = if certified == 0.0 { found.abs() } else { ((found - certified) / certified).abs() };
    let near = certified == 0.0 || (0.5..2.0).contains(&(found / certified));
    if near { (-libm::log10(error)).clamp(0.0, 15.0) } else { 0.0 }
}

/// Every certified figure of a set, to so many digits for coefficients and for SDs, sums of squares and R².
fn assert_certified(text: &str, degree: u8, (coefficient_digits, sd_digits): (f64, f64)) {
    let (set, points) = set(text);
    let fit = fit(&Family::Polynomial(degree), &points, Weights::Equal).unwrap();
    let name = set["name"].as_str().unwrap();
    let mut least = (15.0_f64, 15.0_f64);
    let u = fit.standard_uncertainties().unwrap();
    for (i, c) in set["certified"].as_array().unwrap().iter().enumerate() {
        least.0 = least.0.min(digits(fit.coefficients[i], c["estimate"].as_f64().unwrap()));
        least.1 = least.1.min(digits(u[i], c["sd"].as_f64().unwrap()));
        let from_covariance = libm::sqrt(fit.covariance[i][i]);
        assert!((from_covariance - u[i]).abs() <= 4e-16 * u[i]);
    }
    least.1 = least.1.min(digits(fit.residual_sd.unwrap(), set["residual_sd"].as_f64().unwrap()));
    least.1 = least.1.min(digits(fit.residual_ss, set["rss"].as_f64().unwrap()));
    let r_squared = digits(fit.r_squared().unwrap(), set["r_squared"].as_f64().unwrap());
    println!("{name}: coefficients {:.1}, SDs {:.1}, R² {r_squared:.1}", least.0, least.1);
    assert!(least.0 >= coefficient_digits, "{name} coefficients: {}", least.0);
    assert!(least.1 >= sd_digits, "{name} SDs: {}", least.1);
    assert!(r_squared >= 13.0, "{name} R²: {r_squared}");
    assert_eq!(fit.degrees_of_freedom as u64, set["df"].as_u64().unwrap());
}

macro_rules! strd {
    ($name:literal) => {
        include_str!(concat!("../../../tests/published/strd/", $name, ".json"))
    };
}

/// NIST/ITL Statistical Reference Datasets, linear (tests/published/strd/SOURCE.md). The certificates hold
/// for the decimal data: 15 digits are reached where the decimals are exact doubles.
#[test]
fn linear_reference_sets_agree_with_nist() {
    assert_certified(strd!("Norris"), 1, (14.0, 13.7));
    assert_certified(strd!("Pontius"), 2, (13.4, 13.5));
    assert_certified(strd!("Filip"), 10, (13.9, 14.5));
    assert_certified(strd!("Wampler1"), 5, (15.0, 15.0));
    assert_certified(strd!("Wampler2"), 5, (13.0, 15.0));
    assert_certified(strd!("Wampler3"), 5, (15.0, 14.4));
    assert_certified(strd!("Wampler4"), 5, (15.0, 14.4));
    assert_certified(strd!("Wampler5"), 5, (15.0, 14.4));
}

/// The same sets as doubles, refitted with 120 digits (tests/published/strd/SOURCE.md): every figure is
/// within two units of the last place, R² of the lines through zero (about zero) and of Wampler5 too.
#[test]
fn every_figure_is_rounded_once() {
    let refits: Value = serde_json::from_str(strd!("refit")).unwrap();
    let refit = |name: &Value| refits.as_array().unwrap().iter().find(|r| r["name"] == *name).unwrap();
    let texts = [
        (strd!("Norris"), Family::Polynomial(1)),
        (strd!("Pontius"), Family::Polynomial(2)),
        (strd!("NoInt1"), Family::LineThroughZero),
        (strd!("NoInt2"), Family::LineThroughZero),
        (strd!("Filip"), Family::Polynomial(10)),
        (strd!("Wampler3"), Family::Polynomial(5)),
        (strd!("Wampler4"), Family::Polynomial(5)),
        (strd!("Wampler5"), Family::Polynomial(5)),
    ];
    for (text, family) in texts {
        let (set, points) = set(text);
        let refit = refit(&set["name"]);
        let fit = fit(&family, &points, Weights::Equal).unwrap();
        let u = fit.standard_uncertainties().unwrap();
        let close = |found: f64, exact: &Value| {
            let exact = exact.as_f64().unwrap();
            let ulp = libm::scalbn(1.0, libm::frexp(exact).1 - 53);
            assert!((found - exact).abs() <= 2.0 * ulp, "{}: {found:e} for {exact:e}", set["name"]);
        };
        for i in 0..refit["coefficients"].as_array().unwrap().len() {
            close(fit.coefficients[i], &refit["coefficients"][i]);
            close(u[i], &refit["sds"][i]);
        }
        close(fit.residual_ss, &refit["rss"]);
        close(fit.residual_sd.unwrap(), &refit["residual_sd"]);
        close(fit.r_squared().unwrap(), &refit["r_squared"]);
        assert_eq!(fit.has_constant(), family != Family::LineThroughZero);
    }
}

/// An 80-digit refit of the doubles gives s = 0 for Wampler1 and 7.0e-16 for Wampler2.
#[test]
fn exact_sets_show_the_scatter_of_their_doubles_only() {
    let fifth = Family::Polynomial(5);
    let first = fit(&fifth, &set(strd!("Wampler1")).1, Weights::Equal).unwrap();
    assert_eq!(first.residual_sd, Some(0.0));
    assert!(first.residuals.iter().all(|e| *e == 0.0));
    let second = fit(&fifth, &set(strd!("Wampler2")).1, Weights::Equal).unwrap();
    let s = second.residual_sd.unwrap();
    assert!((6.95e-16..7.05e-16).contains(&s), "{s:e}");
}

/// JCGM 100:2008 H.3, Table H.6 and equations H.13 to H.17; seen in print.
#[test]
fn thermometer_of_the_guide() {
    let t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.010, 26.511];
    let b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.160];
    let points: Vec<Point> = t.into_iter().zip(b).map(|(t, b)| Point { x: t - 20.0, y: b }).collect();
    let fit = fit(&Family::Polynomial(1), &points, Weights::Equal).unwrap();
    let u = fit.standard_uncertainties().unwrap();
    let printed = |value: f64, expected: f64, half: f64| {
        assert!((value - expected).abs() <= half, "{value} for {expected}");
    };
    printed(fit.coefficients[0], -0.1712, 5e-5);
    printed(u[0], 0.0029, 5e-5);
    printed(fit.coefficients[1], 0.00218, 5e-6);
    printed(u[1], 0.00067, 5e-6);
    printed(fit.covariance[0][1] / (u[0] * u[1]), -0.930, 5e-4);
    printed(fit.residual_sd.unwrap(), 0.0035, 5e-5);
    printed(fit.curve.value(10.0), -0.1494, 5e-5);
    printed(libm::sqrt(fit.mean_variance(10.0)), 0.0041, 5e-5);
    // At 24.0085 °C the correction is known best; there its uncertainty is that of the mean.
    printed(libm::sqrt(fit.mean_variance(4.0085)), 0.0011, 5e-5);
    printed(fit.fitted()[0], -0.1679, 5e-5);
    assert_eq!(fit.degrees_of_freedom, 9);
}

/// Coefficients, uncertainties, Σwe² of twelve invented points, refitted from the normal equations with
/// 80 digits (mpmath 1.3.0).
#[test]
fn weighted_fits_agree_with_a_refit_in_eighty_digits() {
    let points = POINTS.map(|(x, y)| Point { x, y });
    for (weights, family, coefficients, uncertainties, ss) in &ROWS {
        let fit = fit(family, &points, *weights).unwrap();
        let close = |a: f64, b: f64| assert!((a - b).abs() <= 2.3e-16 * b.abs(), "{a:e} {b:e}");
        let u = fit.standard_uncertainties().unwrap();
        for i in 0..coefficients.len() {
            close(fit.coefficients[i], coefficients[i]);
            close(u[i], uncertainties[i]);
        }
        close(fit.residual_ss, *ss);
    }
}

/// The corrected Akaike criterion of N = 33, Σe² = 0.0124, K = 3 is −159.8 (worked by hand).
#[test]
fn information_criteria_by_hand() {
    let mut line = line_of(33);
    line.residual_ss = 0.0124;
    assert!((line.aicc().unwrap() + 159.8).abs() < 0.05);
    // K ln N instead of 2K + 2K(K + 1)/(N − K − 1).
    let difference = line.bic().unwrap() - line.aicc().unwrap();
    let expected = 3.0 * 33.0_f64.ln() - 6.0 - 24.0 / 29.0;
    assert!((difference - expected).abs() < 1e-12);
}

/// A slightly scattered line with every third value repeated.
fn line_of(n: u32) -> Fit {
    let point = |i: u32| {
        let x = f64::from(i / 3 * 3);
        Point { x, y: 1.0 + 2.0 * x + 0.1 * (f64::from(i) * 2.7).sin() }
    };
    let points: Vec<Point> = (0..n).map(point).collect();
    fit(&Family::Polynomial(1), &points, Weights::Equal).unwrap()
}

/// Deletion formulas against fits that really leave the observations out.
#[test]
fn leaving_out_is_what_it_says() {
    for weights in [Weights::Equal, Weights::InverseY] {
        let all = fit(&Family::Polynomial(1), &line_of(15).points, weights).unwrap();
        let without = |gone: &dyn Fn(usize) -> bool| {
            let kept = all.points.iter().enumerate().filter(|(i, _)| !gone(*i));
            let kept: Vec<Point> = kept.map(|(_, p)| *p).collect();
            fit(&Family::Polynomial(1), &kept, weights).unwrap()
        };
        let (mut press, mut level_out) = (0.0, 0.0);
        let external = all.studentised();
        for (i, p) in all.points.iter().enumerate() {
            let one = without(&|k| k == i);
            let error = p.y - one.curve.value(p.x);
            press += error * error;
            let spread = all.variance_ratio[i] * (1.0 - all.leverage[i]);
            let scale = one.residual_sd.unwrap() * libm::sqrt(spread);
            assert!((external[i].unwrap() - all.residuals[i] / scale).abs() < 1e-10);
            let rest = without(&|k| all.points[k].x == p.x);
            level_out += (p.y - rest.curve.value(p.x)).powi(2);
        }
        let n = all.points.len() as f64;
        assert!((all.press_rmse().unwrap() / libm::sqrt(press / n) - 1.0).abs() < 1e-11);
        assert!((all.level_out_rmse().unwrap() / libm::sqrt(level_out / n) - 1.0).abs() < 1e-11);
    }
}

/// Influences reproduce the fit; the variance is the sum of their squares times v.
#[test]
fn influences_add_up() {
    let (_, points) = set(strd!("Pontius"));
    for (family, weights) in [(Family::Polynomial(2), Weights::InverseX), (Family::Log, Weights::Equal)] {
        let fit = fit(&family, &points, weights).unwrap();
        for x in [2e5, 7.7e5, 3.1e6] {
            let l = fit.influence(x);
            let value: f64 = l.iter().zip(&points).map(|(l, p)| l * p.y).sum();
            assert!((value / fit.curve.value(x) - 1.0).abs() < 1e-12);
            let sum: f64 = l.iter().zip(&fit.variance_ratio).map(|(l, v)| l * l * v).sum();
            assert!((sum / fit.variance_factor(x) - 1.0).abs() < 1e-12);
            let s2 = fit.residual_sd.unwrap().powi(2);
            assert!((fit.mean_variance(x) / (s2 * sum) - 1.0).abs() < 1e-12);
            let h = 1e-3 * x;
            let slope = |x: f64| fit.influence(x);
            let moved = slope(x + h).into_iter().zip(slope(x - h)).map(|(a, b)| (a - b) / (2.0 * h));
            let slope_variance: f64 = moved.zip(&fit.variance_ratio).map(|(d, v)| d * d * v).sum();
            assert!((slope_variance / fit.slope_variance_factor(x) - 1.0).abs() < 1e-4);
        }
    }
}

/// A figure known by hand: a line over 1, 2, 3 has leverages 5/6, 1/3, 5/6 and Cook's distances from them.
#[test]
fn three_points_by_hand() {
    let points = [(1.0, 1.0), (2.0, 2.5), (3.0, 3.0)].map(|(x, y)| Point { x, y });
    let fit = fit(&Family::Polynomial(1), &points, Weights::Equal).unwrap();
    for (h, expected) in fit.leverage.iter().zip([5.0 / 6.0, 1.0 / 3.0, 5.0 / 6.0]) {
        assert!((h - expected).abs() < 1e-15);
    }
    // e = (−1/6, 1/3, −1/6), s² = 1/6, so every |r| = 1.
    for (r, expected) in fit.standardised().iter().zip([-1.0, 1.0, -1.0]) {
        assert!((r.unwrap() - expected).abs() < 1e-12);
    }
    for (d, expected) in fit.cooks_distance().iter().zip([2.5, 0.25, 2.5]) {
        assert!((d.unwrap() - expected).abs() < 1e-11);
    }
    assert!(fit.studentised().iter().all(Option::is_none));
    assert_eq!(fit.level_leverage().len(), 3);
    assert!((fit.r_squared().unwrap() - (1.0 - (1.0 / 6.0) / (13.0 / 6.0))).abs() < 1e-15);
}
