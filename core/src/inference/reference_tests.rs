//! Everything a general statistics library says about the same data: tests/published/statsmodels/SOURCE.md.
//!
//! Differences are in units of the larger of the value and its standard uncertainty for coefficients, of
//! the largest of the vector for residuals and what is made of them, absolute for leverages, else relative.
//! Bound: 1e-9, or 20 times what the library itself is away from a refit with 60 digits where that is more;
//! to that refit 1e-12 always.

use super::breusch_pagan::breusch_pagan;
use super::durbin_watson::{DurbinWatsonReference, durbin_watson};
use super::normality::normality;
use crate::distributions::t_quantile;
use crate::fit::{self, Fit, Point, Weights};
use crate::model::Family;
use serde_json::Value;

const REFERENCE: &str = include_str!("../../../tests/published/statsmodels/reference.json");
/// To the refit with 60 digits.
const EXACT: f64 = 1e-12;
/// Above this error of its own the library has lost the fit altogether.
const LOST: f64 = 1e-4;

/// One fit of the reference and ours.
struct Case<'a> {
    row: &'a Value,
    fit: Fit,
    order: Vec<f64>,
    /// The bound towards the library.
    bound: f64,
}

impl Case<'_> {
    fn name(&self) -> String {
        ["data", "family", "weights"].map(|k| self.row[k].as_str().unwrap_or("?")).join(", ")
    }

    /// Whether the library's own fit can be compared with.
    fn library_holds(&self) -> bool {
        number(&self.row["library_error"]) < LOST
    }

    #[track_caller]
    fn close(&self, what: &str, found: f64, expected: f64, scale: f64, bound: f64) {
        let apart = (found - expected).abs() / scale;
        assert!(
            apart <= bound,
            "{}: {what} {found:e}, expected {expected:e}, apart {apart:e} > {bound:e}",
            self.name()
        );
    }

    /// Vectors in units of the largest of the expected ones; what does not exist for us is left out.
    #[track_caller]
    fn vectors(&self, what: &str, found: &[Option<f64>], expected: &Value, bound: f64) {
        let expected = expected.as_array().unwrap();
        assert_eq!(found.len(), expected.len(), "{}: {what}", self.name());
        let pairs: Vec<(f64, f64)> =
            found.iter().zip(expected).filter_map(|(f, e)| f.map(|f| (f, number(e)))).collect();
        let scale = pairs.iter().fold(0.0, |top: f64, p| top.max(p.1.abs()));
        for (f, e) in pairs {
            self.close(what, f, e, scale, bound);
        }
    }
}

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("{value} is no number"))
}

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(number).collect()
}

fn some(values: &[f64]) -> Vec<Option<f64>> {
    values.iter().copied().map(Some).collect()
}

/// Runs a comparison on every fit of the reference and returns how many there were.
fn every(mut compare: impl FnMut(&Case)) -> usize {
    let reference: Value = serde_json::from_str(REFERENCE).unwrap();
    let rows = reference["fits"].as_array().unwrap();
    for row in rows {
        let data = &reference["data"][row["data"].as_str().unwrap()];
        let points: Vec<Point> =
            numbers(&data["x"]).into_iter().zip(numbers(&data["y"])).map(|(x, y)| Point { x, y }).collect();
        let family = match row["family"].as_str().unwrap() {
            "line" => Family::Polynomial(1),
            "quadratic" => Family::Polynomial(2),
            "cubic" => Family::Polynomial(3),
            _ => Family::Log,
        };
        let weights: Weights = row["weights"].as_str().unwrap().parse().unwrap();
        let fit = fit::fit(&family, &points, weights).unwrap();
        let bound = (20.0 * number(&row["library_error"])).max(1e-9);
        compare(&Case { row, fit, order: numbers(&data["order"]), bound });
    }
    rows.len()
}

/// Coefficients, standard uncertainties, residuals, leverages and Σwe² of the refit with 60 digits.
#[test]
fn fits_are_those_of_sixty_digits() {
    let count = every(|case| {
        let (fit, exact) = (&case.fit, &case.row["exact"]);
        let uncertainties = fit.standard_uncertainties().unwrap();
        let (beta, bse) = (numbers(&exact["beta"]), numbers(&exact["bse"]));
        for i in 0..beta.len() {
            case.close("coefficient", fit.coefficients[i], beta[i], beta[i].abs().max(bse[i]), EXACT);
            case.close("uncertainty", uncertainties[i], bse[i], bse[i], EXACT);
        }
        case.vectors("residual", &some(&fit.residuals), &exact["residual"], EXACT);
        for (h, expected) in fit.leverage.iter().zip(numbers(&exact["leverage"])) {
            case.close("leverage", *h, expected, 1.0, EXACT);
        }
        let ssr = number(&exact["ssr"]);
        case.close("Σwe²", fit.residual_ss, ssr, ssr, EXACT);
    });
    assert!(count >= 80);
}

#[test]
fn summaries_are_those_of_the_library() {
    let (mut compared, mut tight) = (0, 0);
    every(|case| {
        if !case.library_holds() {
            return;
        }
        compared += 1;
        tight += usize::from(case.bound <= 1e-9);
        let (fit, row) = (&case.fit, case.row);
        let uncertainties = fit.standard_uncertainties().unwrap();
        let t = t_quantile(0.975, fit.degrees_of_freedom as f64);
        let params = numbers(&row["params"]);
        for (i, expected) in params.iter().enumerate() {
            let (value, u) = (fit.coefficients[i], uncertainties[i]);
            let size = expected.abs().max(u);
            case.close("coefficient", value, *expected, size, case.bound);
            case.close("uncertainty", u, number(&row["bse"][i]), u, case.bound);
            case.close("lower limit", value - t * u, number(&row["conf_int"][i][0]), size.max(t * u), case.bound);
            case.close("upper limit", value + t * u, number(&row["conf_int"][i][1]), size.max(t * u), case.bound);
            for (j, other) in uncertainties.iter().enumerate() {
                case.close("covariance", fit.covariance[i][j], number(&row["cov"][i][j]), u * other, 3.0 * case.bound);
            }
        }
        assert_eq!(fit.degrees_of_freedom as f64, number(&row["df_resid"]));
        let ss = fit.residual_ss;
        case.close("Σwe²", ss, number(&row["ssr"]), ss, 3.0 * case.bound);
        let s2 = fit.residual_sd.unwrap().powi(2);
        case.close("s²", s2, number(&row["mse_resid"]), s2, 3.0 * case.bound);
        case.close("R²", fit.r_squared().unwrap(), number(&row["rsquared"]), 1.0, case.bound);
        case.vectors("residual", &some(&fit.residuals), &row["resid"], case.bound);
        criteria(case);
    });
    println!("{compared} fits compared, {tight} of them to 1e-9");
    assert!(compared >= 77 && tight >= 70);
}

/// AICc and BIC with K = p + 1; BIC as the library prints it counts one less.
fn criteria(case: &Case) {
    let (fit, row) = (&case.fit, case.row);
    let n = fit.points.len() as f64;
    if let (Some(aicc), Some(bic)) = (fit.aicc(), fit.bic()) {
        // N·(relative error of Σwe²) is what an error of the fit does to these.
        let scale = n.max(aicc.abs());
        case.close("AICc", aicc, number(&row["aicc"]), scale, 3.0 * case.bound);
        case.close("BIC", bic, number(&row["bic"]), scale, 3.0 * case.bound);
        case.close("printed BIC", bic - n.ln(), number(&row["bic_as_printed"]), scale, 3.0 * case.bound);
    }
}

#[test]
fn influences_are_those_of_the_library() {
    let mut compared = 0;
    every(|case| {
        if !case.library_holds() {
            return;
        }
        compared += 1;
        let (fit, row) = (&case.fit, case.row);
        for (h, expected) in fit.leverage.iter().zip(numbers(&row["hat_diag"])) {
            case.close("leverage", *h, expected, 1.0, case.bound);
        }
        // 1 − h near zero magnifies what is wrong with h and with the residual.
        let least = fit.leverage.iter().map(|h| 1.0 - h).filter(|rest| *rest > 1e-9).fold(1.0, f64::min);
        let bound = case.bound * (1.0 / least).max(1.0);
        case.vectors("standardised", &fit.standardised(), &row["internal"], bound);
        case.vectors("Cook's distance", &fit.cooks_distance(), &row["cooks_distance"], 3.0 * bound);
        if fit.degrees_of_freedom > 1 {
            case.vectors("studentised", &fit.studentised(), &row["external"], 3.0 * bound);
        }
        if let Some(press) = fit.press_rmse() {
            case.close("PRESS", press, number(&row["press_rmse"]), press, bound);
        }
    });
    assert!(compared >= 77);
}

/// d against the library, P(D ≤ d) against Imhof's integral with 40 digits.
#[test]
fn durbin_watson_agrees() {
    let (mut compared, mut worst) = (0, 0.0_f64);
    every(|case| {
        let Some(reference) = DurbinWatsonReference::new(&case.fit, &case.order) else {
            assert!(case.fit.degrees_of_freedom < 2);
            return;
        };
        let found = durbin_watson(&case.fit, &reference).unwrap();
        let (d, p) = (number(&case.row["tests"]["durbin_watson"]), number(&case.row["tests"]["durbin_watson_p"]));
        case.close("d", found.d, d, 1.0, EXACT);
        case.close("P(D ≤ d)", found.p_alike, p, p.min(1.0 - p), 1e-11);
        case.close("two-sided p", found.p, 2.0 * p.min(1.0 - p), 1.0, 1e-11);
        worst = worst.max((found.p_alike / p - 1.0).abs());
        compared += 1;
    });
    println!("{compared} designs, worst relative difference {worst:e}");
    assert!(compared >= 70);
}

#[test]
fn shapiro_wilk_agrees() {
    let (mut compared, mut worst) = (0, [0.0_f64; 2]);
    every(|case| {
        let found = normality(&case.fit).unwrap();
        let [w, p] = [0, 1].map(|i| number(&case.row["tests"]["shapiro"][i]));
        case.close("W", found.w, w, 1.0, 1e-9);
        // A p of the library of 0 or 1 stands for what its rounding leaves.
        case.close("p", found.p, p, p.max(0.1), 1e-7);
        worst = [worst[0].max((found.w - w).abs()), worst[1].max((found.p - p).abs())];
        compared += 1;
    });
    println!("{compared} sets, worst differences of W and p {worst:?}");
    assert!(compared >= 80);
}

#[test]
fn breusch_pagan_agrees() {
    let mut compared = 0;
    every(|case| {
        let expected = &case.row["tests"]["breusch_pagan"];
        let Some(found) = breusch_pagan(&case.fit) else {
            assert!(case.fit.points.len() < 4);
            return;
        };
        let [lm, p, f, f_p] = [0, 1, 2, 3].map(|i| number(&expected[i]));
        case.close("LM", found.lm, lm, lm.max(1e-3), 1e-9);
        case.close("p", found.p, p, p, 1e-9);
        case.close("F", found.f.f, f, f.max(1e-3), 1e-8);
        case.close("p of F", found.f.p, f_p, f_p, 1e-8);
        compared += 1;
    });
    assert!(compared >= 78);
}
