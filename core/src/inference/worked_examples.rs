//! Worked examples of lines and quadratics as printed (tests/published/worked-lines/SOURCE.md): every figure
//! to its printed digits, and to eleven digits of the same example recomputed in full precision.

use super::bands::Bands;
use super::lack_of_fit::lack_of_fit;
use crate::convert::Converter;
use crate::convert::reference::{fitted, pontius};
use crate::distributions::{chi2_quantile, f_upper, t_quantile};
use crate::fit::{Fit, Point, Request, Weights, estimate};
use crate::model::Family;
use crate::numerics::sums::Deviations;
use serde_json::Value;

const LINE: Family = Family::Polynomial(1);

macro_rules! example {
    ($name:literal) => {
        Example(
            serde_json::from_str(include_str!(concat!("../../../tests/published/worked-lines/", $name, ".json")))
                .unwrap(),
        )
    };
}

/// One worked example.
struct Example(Value);

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| value.as_str().unwrap().parse().unwrap())
}

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().map_or_else(|| vec![number(value)], |list| list.iter().map(number).collect())
}

impl Example {
    fn input(&self, key: &str) -> Vec<f64> {
        numbers(&self.0["inputs"][key])
    }

    fn points(&self, x: &str, y: &str) -> Vec<Point> {
        self.input(x).into_iter().zip(self.input(y)).map(|(x, y)| Point { x, y }).collect()
    }

    /// Against what was printed, where it was.
    #[track_caller]
    fn prints(&self, key: &str, found: &[f64]) {
        let expected = numbers(&self.0["expected"][key]);
        assert_eq!(expected.len(), found.len(), "{key}");
        let tolerance = number(&self.0["tolerance"][key]);
        for (found, expected) in found.iter().zip(expected) {
            assert!((found - expected).abs() <= tolerance, "{key}: {found} for {expected} in print");
        }
    }

    /// Against the recomputation.
    #[track_caller]
    fn recomputes(&self, key: &str, found: &[f64]) {
        let expected = numbers(&self.0["recomputed"][key]);
        assert_eq!(expected.len(), found.len(), "{key}");
        for (found, expected) in found.iter().zip(expected) {
            assert!((found - expected).abs() <= 1e-11 * expected.abs(), "{key}: {found} for {expected} recomputed");
        }
    }

    #[track_caller]
    fn both(&self, key: &str, found: &[f64]) {
        self.prints(key, found);
        self.recomputes(key, found);
    }
}

fn u(fit: &Fit, j: usize) -> f64 {
    fit.standard_uncertainties().unwrap()[j]
}

/// Absolute weights 1/u².
fn known(points: &[Point], u: &[f64]) -> Fit {
    let request = Request { reading_uncertainty: Some(u), ..Request::new(&LINE, points, Weights::Typed) };
    estimate(&request).unwrap()
}

#[test]
fn thermometer() {
    let example = example!("thermometer");
    let points: Vec<Point> =
        example.points("t_C", "b_C").into_iter().map(|p| Point { x: p.x - 20.0, y: p.y }).collect();
    let fit = fitted(LINE, &points);
    example.both("y1_C", &fit.coefficients[..1]);
    example.both("y2", &fit.coefficients[1..]);
    example.both("s_y1_C", &[u(&fit, 0)]);
    example.both("s_y2", &[u(&fit, 1)]);
    example.both("r", &[fit.covariance[0][1] / (u(&fit, 0) * u(&fit, 1))]);
    example.both("s_C", &[fit.residual_sd.unwrap()]);
    example.both("b30_C", &[fit.curve.value(10.0)]);
    example.both("u_b30_C", &[libm::sqrt(fit.mean_variance(10.0))]);
    example.both("dof", &[fit.degrees_of_freedom as f64]);
    example.both("fitted_C", &fit.fitted());
    // Where the correction is known best its uncertainty is that of the mean.
    let best = -fit.covariance[0][1] / fit.covariance[1][1];
    example.both("t_min_u_C", &[20.0 + best]);
    example.both("y1_centred_C", &[fit.curve.value(best)]);
    example.both("s_y1_centred_C", &[libm::sqrt(fit.mean_variance(best))]);
}

#[test]
fn equal_known_uncertainties() {
    let example = example!("equal-weights");
    let points = example.points("x", "y");
    let fit = known(&points, &example.input("u_y"));
    example.both("a", &fit.coefficients[..1]);
    example.both("b", &fit.coefficients[1..]);
    example.both("u_a", &[u(&fit, 0)]);
    example.both("u_b", &[u(&fit, 1)]);
    example.both("cov_ab", &[fit.covariance[0][1]]);
    let (chi_square, freedom) = fit.chi_square().unwrap();
    example.both("chi2_obs", &[chi_square]);
    example.both("chi2_95_4", &[chi2_quantile(0.95, freedom as f64)]);
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let result = converter.convert(example.input("inverse_y")[0]);
    example.both("x_at_10.5", &[result.value.unwrap()]);
    example.both("u_x", &[result.standard_uncertainty.unwrap()]);
    assert_eq!(result.degrees_of_freedom, Some(f64::INFINITY));
    let (x, u_x) = (example.input("forward_x")[0], example.input("forward_u_x")[0]);
    example.both("y_at_3.5", &[fit.curve.value(x)]);
    let along = fit.curve.derivative(x) * u_x;
    example.both("u_y_at_3.5", &[libm::sqrt(fit.mean_variance(x) + along * along)]);
}

#[test]
fn load_cell() {
    let example = example!("load-cell");
    let line = fitted(LINE, &pontius());
    example.both("line_b0", &line.coefficients[..1]);
    example.both("line_b1", &line.coefficients[1..]);
    example.both("line_sd_b0", &[u(&line, 0)]);
    example.both("line_sd_b1", &[u(&line, 1)]);
    example.both("line_residual_sd", &[line.residual_sd.unwrap()]);
    example.both("line_residual_dof", &[line.degrees_of_freedom as f64]);
    let test = lack_of_fit(&line).unwrap();
    example.both("line_lof_F", &[test.f]);
    example.both("line_lof_dof", &[test.df1 as f64, test.df2 as f64]);
    let critical = |key: &str| number(&example.0["recomputed"][key]);
    assert!((f_upper(critical("line_lof_Fcrit"), 18.0, 20.0) - 0.05).abs() < 1e-12);
    let quadratic = fitted(Family::Polynomial(2), &pontius());
    example.both("quad_lof_F", &[lack_of_fit(&quadratic).unwrap().f]);
    assert!((f_upper(critical("quad_lof_Fcrit_17_20"), 17.0, 20.0) - 0.05).abs() < 1e-12);
    let reading = example.input("new_deflection")[0];
    let one = Converter::new(&quadratic, 1, 0.95).unwrap().convert(reading);
    example.both("load_at_1.239722", &[one.value.unwrap()]);
    example.recomputes("load_95_inverted_prediction_band", &[one.low.unwrap(), one.high.unwrap()]);
    // The mean of very many readings leaves the doubt of the curve alone.
    let many = Converter::new(&quadratic, 1_000_000_000_000_000, 0.95).unwrap().convert(reading);
    example.recomputes("load_95_inverted_confidence_band", &[many.low.unwrap(), many.high.unwrap()]);
}

#[test]
fn linewidth_standards() {
    let example = example!("linewidth");
    let fit = fitted(LINE, &example.points("x_reference_um", "y_measured_um"));
    let s = fit.residual_sd.unwrap();
    example.both("a", &fit.coefficients[..1]);
    example.both("b", &fit.coefficients[1..]);
    example.both("sd_a", &[u(&fit, 0)]);
    example.both("sd_b", &[u(&fit, 1)]);
    example.both("residual_sd", &[s]);
    example.recomputes("cov_ab", &[fit.covariance[0][1]]);
    let test = lack_of_fit(&fit).unwrap();
    assert_eq!((test.df1, test.df2), (8, 30));
    example.recomputes("lof_F_8_30", &[test.f]);
    // Check standards: read back minus certified, and the limits for three at once.
    let converter = Converter::new(&fit, 1, 0.95).unwrap();
    let check = example.points("check_x", "check_y");
    let read_back: Vec<f64> = check.iter().map(|p| converter.convert(p.y).value.unwrap() - p.x).collect();
    for (found, printed) in read_back.iter().zip(numbers(&example.0["recomputed"]["check_W"])) {
        // These were made with a and b as printed, to four digits.
        assert!((found - printed).abs() < 5e-4, "{found} {printed}");
    }
    example.prints("check_sd_17dof", &[Deviations::new(&read_back).unwrap().sd().unwrap()]);
    let one_of_three = 1.0 - 0.95_f64.powf(1.0 / example.input("p_check")[0]);
    let t = t_quantile(1.0 - one_of_three / 2.0, 38.0);
    example.recomputes("t_star", &[t]);
    example.recomputes("control_limit", &[s / fit.coefficients[1] * t]);
}

#[test]
fn fluorescein_standards() {
    let example = example!("fluorescein");
    let fit = fitted(LINE, &example.points("x_pg_per_ml", "y_intensity"));
    let (s, t) = (fit.residual_sd.unwrap(), fit.coverage_factor(0.95));
    example.both("a", &fit.coefficients[..1]);
    example.both("b", &fit.coefficients[1..]);
    example.both("r", &[libm::sqrt(fit.r_squared().unwrap())]);
    example.both("s_yx", &[s]);
    example.both("s_a", &[u(&fit, 0)]);
    example.both("s_b", &[u(&fit, 1)]);
    example.both("a_halfwidth95", &[t * u(&fit, 0)]);
    example.both("b_halfwidth95", &[t * u(&fit, 1)]);
    example.both("LOD_x", &[3.0 * s / fit.coefficients[1]]);
    let inverse = example.0["inputs"]["inverse"].as_array().unwrap();
    let converted = inverse.iter().map(|pair| {
        let (reading, k) = (number(&pair[0]), pair[1].as_u64().unwrap());
        Converter::new(&fit, usize::try_from(k).unwrap(), 0.95).unwrap().convert(reading)
    });
    let converted: Vec<_> = converted.collect();
    let of = |f: &dyn Fn(&crate::convert::Conversion) -> f64| -> Vec<f64> { converted.iter().map(f).collect() };
    example.both("x0", &of(&|c| c.value.unwrap()));
    example.both("s_x0", &of(&|c| c.standard_uncertainty.unwrap()));
    example.both("x0_halfwidth95", &of(&|c| c.coverage_factor.unwrap() * c.standard_uncertainty.unwrap()));
    // The interval itself is Fieller's, lopsided by the doubt of the slope (g = 0.003).
    let half = of(&|c| 0.5 * (c.high.unwrap() - c.low.unwrap()));
    for (half, printed) in half.iter().zip(numbers(&example.0["recomputed"]["x0_halfwidth95"])) {
        assert!((half / printed - 1.0).abs() < 0.004, "{half} {printed}");
    }
    // At the mean of the standards the mean band is narrowest: t·s/√7.
    let bands = Bands::new(&fit, 0.95, 1).unwrap();
    assert!((bands.at(6.0).unwrap().mean - t * s / libm::sqrt(7.0)).abs() < 1e-12);
}

#[test]
fn weighted_line() {
    let example = example!("weighted-line");
    let points = example.points("x", "y");
    let fit = known(&points, &example.input("s_y"));
    let total: f64 = fit.variance_ratio.iter().map(|v| 1.0 / v).sum();
    let weights: Vec<f64> = fit.variance_ratio.iter().map(|v| 6.0 / (v * total)).collect();
    example.both("weights", &weights);
    example.both("a_w", &fit.coefficients[..1]);
    example.both("b_w", &fit.coefficients[1..]);
    let centre = -fit.covariance[0][1] / fit.covariance[1][1];
    example.both("xbar_w", &[centre]);
    example.both("ybar_w", &[fit.curve.value(centre)]);
    let read = |fit: &Fit| -> Vec<f64> {
        let converter = Converter::new(fit, 1, 0.95).unwrap();
        example.input("inverse_y").iter().map(|y| converter.convert(*y).value.unwrap()).collect()
    };
    example.both("x_w", &read(&fit));
    let plain = fitted(LINE, &points);
    example.both("a_unweighted", &plain.coefficients[..1]);
    example.both("b_unweighted", &plain.coefficients[1..]);
    example.both("x_unweighted", &read(&plain));
}
