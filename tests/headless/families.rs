//! Every family on the command line, with every key of the contract.

use super::{Bench, err};
use serde_json::Value;
use std::fmt::Write as _;

/// Family as typed, further arguments, heads of the table, and the curve behind its rows.
type Case = (&'static str, &'static [&'static str], &'static str, fn(f64) -> f64);

fn cases() -> Vec<Case> {
    const PLAIN: &str = "standard,reading";
    const BATH: &str = "standard (°C),reading (Ω)";
    vec![
        ("line", &[], PLAIN, |x| 1.0 + 2.0 * x),
        ("line-zero", &[], PLAIN, |x| 2.0 * x),
        ("one-point", &[], PLAIN, |x| 2.0 * x),
        ("quadratic", &[], PLAIN, |x| 1.0 + 2.0 * x - 0.05 * x * x),
        ("cubic", &[], PLAIN, |x| 1.0 + 2.0 * x - 0.05 * x * x),
        ("quartic", &[], PLAIN, |x| 1.0 + 2.0 * x - 0.05 * x * x),
        ("quintic", &[], PLAIN, |x| 1.0 + 2.0 * x - 0.05 * x * x),
        ("polynomial:6", &[], PLAIN, |x| 1.0 + 2.0 * x),
        ("log", &[], PLAIN, |x| 1.0 + 2.0 * x.ln()),
        ("power", &[], PLAIN, |x| 2.0 * x.powf(0.7)),
        ("exponential", &[], PLAIN, |x| 9.0 - 8.0 * (-0.3 * x).exp()),
        ("hyperbola", &[], PLAIN, |x| 9.0 - 30.0 / (x + 4.0)),
        ("rational", &[], PLAIN, |x| (1.0 + 2.0 * x) / (1.0 + 0.1 * x)),
        ("logistic4", &[], PLAIN, |x| 9.0 - 8.0 / (1.0 + (x / 4.0).powi(2))),
        ("logistic5", &[], PLAIN, |x| 9.0 - 8.0 / (1.0 + (x / 4.0).powi(2)).powf(0.8)),
        ("steinhart-hart", &[], BATH, thermistor),
        ("beta", &[], BATH, thermistor),
        ("callendar-van-dusen", &[], BATH, |t| 100.0 * (1.0 + 3.9083e-3 * t - 5.775e-7 * t * t)),
        ("formula", &["--formula", "a + b*x", "--start", "a=0,b=1"], PLAIN, |x| 1.0 + 2.0 * x),
    ]
}

/// A 10 kΩ bead by the equation with two coefficients, ohm.
fn thermistor(celsius: f64) -> f64 {
    1e4 * (3900.0 * (1.0 / (celsius + 273.15) - 1.0 / 298.15)).exp()
}

/// Ten levels, each twice, with a scatter that follows no curve, in run order.
fn table(head: &str, f: fn(f64) -> f64) -> String {
    let mut text = format!("{head},order\n");
    for (i, x) in (0_u32..).zip([0.5, 1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 7.0, 8.0, 9.5].repeat(2)) {
        let wobble = f64::from(i * 37 % 23) / 11.0 - 1.0;
        let _ = writeln!(text, "{x},{},{}", f(x) * (1.0 + 1e-4 * wobble), i + 1);
    }
    text
}

/// The keys of a fit that scripts may rely on.
pub(super) const KEYS: [&str; 32] = [
    "family",
    "weights",
    "converged",
    "message",
    "n_used",
    "not_used",
    "coefficients",
    "covariance",
    "residual_sd",
    "degrees_of_freedom",
    "residual_ss",
    "r_squared",
    "aicc",
    "bic",
    "press_rmse",
    "level_out_rmse",
    "shape_p",
    "lack_of_fit",
    "residuals",
    "studentised",
    "leverage",
    "cooks_distance",
    "durbin_watson",
    "shapiro_wilk",
    "runs",
    "breusch_pagan",
    "nonlinearity",
    "hysteresis",
    "repeatability",
    "sensitivity",
    "detection",
    "printed_coefficients",
];

/// Keys that are rightly `null` here, by family (`""`: every one).
const NULL: [(&str, &str); 13] = [
    ("", "message"),
    // No direction was recorded.
    ("", "hysteresis"),
    ("one-point", "lack_of_fit"),
    ("one-point", "shape_p"),
    ("one-point", "shapiro_wilk"),
    ("one-point", "level_out_rmse"),
    ("one-point", "aicc"),
    ("one-point", "bic"),
    ("one-point", "durbin_watson"),
    ("one-point", "runs"),
    ("one-point", "breusch_pagan"),
    ("one-point", "nonlinearity"),
    ("", "repeatability"),
];

#[test]
fn every_family_fills_every_key() {
    let bench = Bench::new();
    for (family, arguments, head, f) in cases() {
        let path = bench.file("data.csv", table(head, f));
        let mut args = vec!["fit", &path, "--family", family, "--json"];
        args.extend(arguments);
        let document = bench.json(&args);
        let fit = &document["fits"][0];
        assert_eq!(fit["converged"], true, "{family}: {}", fit["message"]);
        for key in KEYS {
            let value = fit.get(key).unwrap_or_else(|| panic!("{family}: {key} is missing"));
            let rightly = NULL.iter().any(|(of, null)| *null == key && (of.is_empty() || *of == family));
            assert!(!value.is_null() || rightly, "{family}: {key} is null");
        }
        let finite = |v: &Value| v.as_f64().is_some_and(f64::is_finite);
        let named = fit["coefficients"].as_array().expect("coefficients");
        assert!(named.iter().all(|c| finite(&c["value"]) && c["name"].is_string()), "{family}");
        assert!(!bench.run(&args).stdout.windows(3).any(|w| w == b"NaN"), "{family}");
    }
}

/// A flat line of numbers, one level, too few rows: every family says so and none fails without words.
#[test]
fn no_family_panics_on_data_without_a_shape() {
    let bench = Bench::new();
    for (family, arguments, head, _) in cases() {
        for rows in ["1,1\n1,1\n1,1\n", "1,2\n", "1,5\n2,5\n3,5\n4,5\n5,5\n6,5\n7,5\n8,5\n9,5\n", "0,0\n-1,0\n-2,1\n"] {
            let path = bench.file("data.csv", format!("{head}\n{rows}"));
            let mut args = vec!["fit", &path, "--family", family, "--json"];
            args.extend(arguments);
            let out = bench.run(&args);
            let said = err(&out);
            assert!(matches!(out.status.code(), Some(0 | 2)) && !said.contains("panicked"), "{family} {rows}: {said}");
        }
    }
}

#[test]
fn formulas_and_units_that_do_not_fit_are_named() {
    let bench = Bench::new();
    let path = bench.file("data.csv", "standard (bar),reading (V)\n1,2\n2,4\n3,6.1\n4,8\n");
    assert!(bench.fails(2, &["fit", &path, "--family", "formula"]).contains("--formula"));
    let said = bench.fails(2, &["fit", &path, "--formula", "a + b*("]);
    assert!(said.contains("column 8"), "{said}");
    let said = bench.fails(2, &["fit", &path, "--formula", "a + b*x", "--start", "c=1"]);
    assert!(said.contains("c=1") && said.contains("a, b"), "{said}");
    let said = bench.fails(2, &["fit", &path, "--family", "steinhart-hart"]);
    assert!(said.contains("°C") && said.contains("temperature"), "{said}");
    let said = bench.fails(2, &["fit", &path, "--family", "line", "--both-axes"]);
    assert!(said.contains("uncertainty of the standards"), "{said}");
    assert!(bench.fails(2, &["fit", &path, "--stage", "later"]).contains("as-left"));
    assert!(bench.fails(2, &["fit", &path, "--weights", "typed", "--family", "line"]).contains("u_reading"));
}

/// As found and as left are fitted apart.
#[test]
fn a_stage_is_fitted_alone() {
    let bench = Bench::new();
    let mut text = "standard,reading,stage\n".to_owned();
    for (stage, slope) in [("as found", 2.0), ("as left", 2.5)] {
        for x in [1.0, 2.0, 3.0, 4.0, 5.0] {
            let _ = writeln!(text, "{x},{},{stage}", slope * x);
        }
    }
    let path = bench.file("data.csv", text);
    for (stage, slope) in [("as-found", 2.0), ("as-left", 2.5)] {
        let document = bench.json(&["fit", &path, "--family", "line", "--stage", stage, "--json"]);
        assert_eq!(document["fits"][0]["coefficients"][1]["value"], slope, "{stage}");
    }
}
