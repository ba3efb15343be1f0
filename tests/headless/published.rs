//! The reference datasets through the command line: NIST/ITL StRD, least squares.

use super::{Bench, shipped};
use serde_json::Value;
use std::fmt::Write as _;

const LINEAR: [(&str, &str); 10] = [
    ("Norris", "line"),
    ("Pontius", "quadratic"),
    ("NoInt1", "line-zero"),
    ("NoInt2", "line-zero"),
    ("Filip", "polynomial:10"),
    ("Wampler1", "quintic"),
    ("Wampler2", "quintic"),
    ("Wampler3", "quintic"),
    ("Wampler4", "quintic"),
    ("Wampler5", "quintic"),
];

fn document(name: &str) -> Value {
    let path = shipped(&format!("tests/published/strd/{name}.json"));
    serde_json::from_slice(&std::fs::read(path).expect("a published set")).expect("JSON")
}

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().expect("a list").iter().map(number).collect()
}

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("{value} is a number"))
}

/// The data as a table whose texts read back to the same doubles.
fn table(set: &Value) -> String {
    let mut text = "standard,reading\n".to_owned();
    for (x, y) in numbers(&set["x"]).iter().zip(numbers(&set["y"])) {
        let _ = writeln!(text, "{x},{y}");
    }
    text
}

/// −log₁₀ of the relative error, at most `cap`; 0 beyond a factor of two.
fn agreeing(found: f64, certified: f64, cap: f64) -> f64 {
    let relative = if certified == 0.0 { found.abs() } else { ((found - certified) / certified).abs() };
    let within = certified == 0.0 || (0.5..2.0).contains(&(found / certified));
    if within { (-relative.log10()).clamp(0.0, cap) } else { 0.0 }
}

/// How many doubles lie between two numbers.
fn ulps(a: f64, b: f64) -> u64 {
    let place = |v: f64| if v < 0.0 { -(v.abs().to_bits() as i128) } else { v.to_bits() as i128 };
    u64::try_from((place(a) - place(b)).abs()).unwrap_or(u64::MAX)
}

/// Every figure within two units of the last place of an 80-digit refit of the same doubles, and at least 13
/// digits of the certificate. Where the fit is exact, s is held to 4·2⁻⁵³·max|y|/√N instead.
#[test]
fn the_linear_sets_agree_to_the_last_place() {
    let bench = Bench::new();
    let refits = document("refit");
    for (name, family) in LINEAR {
        let set = document(name);
        let refit = refits.as_array().expect("a list").iter().find(|r| r["name"] == name).expect("a refit");
        let path = bench.file("data.csv", table(&set));
        let found = bench.json(&["fit", &path, "--family", family, "--json"]);
        let fit = &found["fits"][0];
        let (y, sd) = (numbers(&set["y"]), number(&fit["residual_sd"]));
        let exact =
            4.0 * f64::powi(2.0, -53) * y.iter().fold(0.0, |m: f64, y| m.max(y.abs())) / (y.len() as f64).sqrt();
        let s_refit = number(&refit["residual_sd"]);
        assert!(ulps(sd, s_refit) <= 2 || (sd - s_refit).abs() <= exact, "{name}: s {sd:e} {s_refit:e}");
        let certified = set["certified"].as_array().expect("certificates");
        for (i, c) in fit["coefficients"].as_array().expect("coefficients").iter().enumerate() {
            let (value, u) = (number(&c["value"]), number(&c["standard_uncertainty"]));
            assert!(ulps(value, number(&refit["coefficients"][i])) <= 2, "{name} b{i}: {value:e}");
            let digits = agreeing(value, number(&certified[i]["estimate"]), 15.0);
            assert!(digits >= 13.0, "{name} b{i}: {digits:.1} digits");
            if s_refit > exact {
                assert!(ulps(u, number(&refit["sds"][i])) <= 2, "{name} u(b{i}): {u:e}");
                let digits = agreeing(u, number(&certified[i]["sd"]), 15.0);
                assert!(digits >= 13.0, "{name} u(b{i}): {digits:.1} digits");
            }
        }
    }
}

/// Both published starts of every set with one regressor: 8 of 11 digits on coefficients, 7 on their SDs; the
/// SDs of Lanczos1 cannot be had from doubles, whose rounding alone moves its residuals (see the card).
#[test]
fn the_non_linear_sets_converge_from_both_starts() {
    const NAMES: [&str; 26] = [
        "Misra1a", "Misra1b", "Misra1c", "Misra1d", "Chwirut1", "Chwirut2", "Lanczos1", "Lanczos2", "Lanczos3",
        "Gauss1", "Gauss2", "Gauss3", "DanWood", "Kirby2", "Hahn1", "MGH09", "MGH10", "MGH17", "Roszman1", "ENSO",
        "Thurber", "BoxBOD", "Rat42", "Rat43", "Eckerle4", "Bennett5",
    ];
    let bench = Bench::new();
    for name in NAMES {
        let set = document(name);
        let path = bench.file("data.csv", table(&set));
        let formula = set["expr"].as_str().expect("a model").replace("**", "^");
        let certified = set["certified"].as_array().expect("certificates");
        for start in ["start1", "start2"] {
            let values = numbers(&set["starts"][start]);
            let named: Vec<String> = certified
                .iter()
                .zip(values)
                .map(|(c, v)| format!("{}={v}", c["name"].as_str().expect("a name")))
                .collect();
            let found = bench.json(&["fit", &path, "--formula", &formula, "--start", &named.join(","), "--json"]);
            let fit = &found["fits"][0];
            assert_eq!(fit["converged"], true, "{name} {start}: {}", fit["message"]);
            assert!(fit["iterations"].is_number() && fit["evaluations"].is_number());
            for c in certified {
                let of = |f: &&Value| f["name"] == c["name"];
                let mine = fit["coefficients"].as_array().expect("coefficients").iter().find(of).expect("by name");
                let value = agreeing(number(&mine["value"]), number(&c["estimate"]), 11.0);
                let sd = agreeing(number(&mine["standard_uncertainty"]), number(&c["sd"]), 11.0);
                let enough = value >= 8.0 && (sd >= 7.0 || name == "Lanczos1");
                assert!(enough, "{name} {start} {}: {value:.1} and {sd:.1} digits", c["name"]);
            }
        }
    }
}
