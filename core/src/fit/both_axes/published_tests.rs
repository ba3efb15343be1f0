//! Printed examples, to their printed digits.

use super::shapes::diagonal;
use super::*;
use crate::model::Family;
use serde_json::Value;

/// ISO/TS 28037:2010 clause 7.4 (tests/published/iso-ts-28037/SOURCE.md).
const CLAUSE_7: &str = include_str!("../../../../tests/published/iso-ts-28037/clause-7.json");
/// ISO/TS 28037:2010 clause 6 (tests/published/iso-ts-28037/SOURCE.md).
const CLAUSE_6: &str = include_str!("../../../../tests/published/iso-ts-28037/clause-6.json");
/// York et al. 2004, Table II (tests/published/york/SOURCE.md).
const PEARSON: &str = include_str!("../../../../tests/published/york/pearson.json");

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

/// A line fitted to one reading for each standard.
fn line(x: &[f64], u_x: &[f64], y: &[f64], u_y: &[f64], start: [f64; 2]) -> DistanceFit {
    let places: Vec<usize> = (0..x.len()).collect();
    let covariance = diagonal(u_x);
    let data = BothAxes { x, x_covariance: &covariance, y, y_uncertainty: u_y, standard_of: &places };
    distance_fit(&Family::Polynomial(1), &data, &start).unwrap()
}

/// Against the printed figure within half of its last place, and against the recomputed one closely.
fn assert_printed(set: &Value, name: &str, found: f64, relative: f64) {
    let printed: f64 = set["expected"][name].as_str().unwrap().parse().unwrap();
    let tolerance = set["tolerance"][name].as_f64().unwrap();
    assert!((found - printed).abs() <= 1.000_001 * tolerance, "{name}: {found} instead of {printed}");
    if let Some(exact) = set["recomputed"][name].as_f64() {
        assert!((found - exact).abs() <= relative * exact.abs(), "{name}: {found} instead of {exact}");
    }
}

#[test]
fn generalised_distance_regression_of_iso_ts_28037() {
    let set: Value = serde_json::from_str(CLAUSE_7).unwrap();
    let get = |name: &str| numbers(&set["inputs"][name]);
    let fit = line(&get("x"), &get("u_x"), &get("y"), &get("u_y"), [0.5, 2.0]);
    let u = fit.standard_uncertainties();
    assert_printed(&set, "a", fit.coefficients[0], 1e-12);
    assert_printed(&set, "b", fit.coefficients[1], 1e-12);
    assert_printed(&set, "u_a", u[0], 1e-12);
    assert_printed(&set, "u_b", u[1], 1e-12);
    assert_printed(&set, "cov_ab", fit.covariance[0][1], 1e-12);
    assert_printed(&set, "chi2_obs", fit.chi_square, 1e-12);
    assert_eq!(fit.degrees_of_freedom, 4);
    // Indication at x = 3.5 with u(x) = 0.2.
    let curve = fit.coefficients[0] + fit.coefficients[1] * 3.5;
    let (v_s, v_x) = fit.variance_at(&Family::Polynomial(1), 3.5);
    let own = fit.coefficients[1] * 0.2;
    assert_printed(&set, "y_at_3.5", curve, 1e-12);
    assert_printed(&set, "u_y_at_3.5", libm::sqrt(v_s + v_x + own * own), 1e-12);
}

#[test]
fn exact_standards_give_the_weighted_line_of_iso_ts_28037() {
    let set: Value = serde_json::from_str(CLAUSE_6).unwrap();
    let get = |name: &str| numbers(&set["inputs"][name]);
    let x = get("x");
    let fit = line(&x, &vec![0.0; x.len()], &get("y"), &get("u_y"), [0.0, 1.0]);
    let u = fit.standard_uncertainties();
    for (name, found) in [("a", fit.coefficients[0]), ("b", fit.coefficients[1]), ("u_a", u[0]), ("u_b", u[1])] {
        assert_printed(&set, name, found, 1e-13);
    }
    assert_printed(&set, "cov_ab", fit.covariance[0][1], 1e-13);
    assert_printed(&set, "chi2_obs", fit.chi_square, 1e-13);
}

#[test]
fn pearsons_data_with_yorks_weights() {
    let set: Value = serde_json::from_str(PEARSON).unwrap();
    let get = |name: &str| numbers(&set["inputs"][name]);
    let u = |name: &str| -> Vec<f64> { get(name).iter().map(|w| 1.0 / libm::sqrt(*w)).collect() };
    let (x, y) = (get("x"), get("y"));
    let fit = line(&x, &u("weight_x"), &y, &u("weight_y"), [6.0, -0.5]);
    let uncertainties = fit.standard_uncertainties();
    let birge = libm::sqrt(fit.chi_square / 8.0);
    assert_printed(&set, "a", fit.coefficients[0], 1e-13);
    assert_printed(&set, "b", fit.coefficients[1], 1e-13);
    assert_printed(&set, "u_a", uncertainties[0], 1e-12);
    assert_printed(&set, "u_b", uncertainties[1], 1e-12);
    assert_printed(&set, "birge_ratio", birge, 1e-12);
    assert_printed(&set, "scaled_u_a", birge * uncertainties[0], 1e-12);
    assert_printed(&set, "scaled_u_b", birge * uncertainties[1], 1e-12);
}
