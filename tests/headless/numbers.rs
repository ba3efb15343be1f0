//! Published figures through the command line.

use super::{Bench, families::KEYS, shipped};
use serde_json::Value;

const PONTIUS: &str = "demo-projects/load-cell-nist.csv";

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("{value} is a number"))
}

/// Digits agreeing with a reference.
fn digits(found: f64, reference: f64) -> f64 {
    if found.total_cmp(&reference).is_eq() { 16.0 } else { -((found - reference).abs() / reference.abs()).log10() }
}

fn fit<'a>(document: &'a Value, family: &str) -> &'a Value {
    let all = document["fits"].as_array().expect("fits");
    all.iter().find(|f| f["family"] == family).unwrap_or_else(|| panic!("{family} is among the fits"))
}

#[test]
fn pontius_agrees_with_the_certified_values() {
    // NIST/ITL StRD, Pontius: certified estimates and standard deviations.
    let certified = [
        (0.000_673_565_789_473_684, 0.000_107_938_612_033_077),
        (7.320_591_604_010_03e-7, 1.578_173_999_816_59e-10),
        (-3.160_818_713_450_29e-15, 4.866_528_499_920_36e-17),
    ];
    let document = Bench::new().json(&["fit", &shipped(PONTIUS), "--json"]);
    let quadratic = fit(&document, "quadratic");
    for (c, (value, sd)) in quadratic["coefficients"].as_array().expect("three").iter().zip(certified) {
        let found = (digits(number(&c["value"]), value), digits(number(&c["standard_uncertainty"]), sd));
        assert!(found.0 >= 12.0 && found.1 >= 12.0, "{}: {found:?} digits", c["name"]);
    }
    assert!(digits(number(&quadratic["residual_sd"]), 0.000_205_177_424_076_185) >= 12.0);
    // NIST/SEMATECH e-Handbook of Statistical Methods, 4.6.1.
    let lack = &fit(&document, "line")["lack_of_fit"];
    assert!((number(&lack["f"]) - 214.747).abs() < 6e-4);
    assert_eq!((lack["df1"].as_u64(), lack["df2"].as_u64()), (Some(18), Some(20)));
    assert!((number(&quadratic["lack_of_fit"]["f"]) - 0.8107).abs() < 6e-5);
}

#[test]
fn pontius_converts_a_reading() {
    // NIST/SEMATECH e-Handbook of Statistical Methods, 4.6.1; limits recomputed in full precision.
    let bench = Bench::new();
    let readings = bench.file("unknown.csv", "reading\n1.239722\n");
    let document = bench.json(&["convert", &shipped(PONTIUS), &readings, "--family", "quadratic", "--json"]);
    let result = &document["results"][0];
    for (key, expected) in [("value", 1_705_105.57), ("low", 1_704_513.37), ("high", 1_705_697.76)] {
        assert!((number(&result[key]) - expected).abs() < 0.006, "{key}: {} against {expected}", result[key]);
    }
    assert_eq!((&result["state"], &result["low_state"]), (&Value::from("in range"), &Value::from("finite")));
}

#[test]
fn the_thermometer_of_the_guide_comes_out_as_printed() {
    // JCGM 100:2008, H.3, Table H.6: corrections b against t − 20 °C; results H.3.3 and H.3.4.
    let t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.010, 26.511];
    let b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.160];
    let rows: Vec<String> = t.iter().zip(b).map(|(t, b)| format!("{:.3},{b}", t - 20.0)).collect();
    let bench = Bench::new();
    let data = bench.file("h3.csv", format!("standard,reading\n{}\n", rows.join("\n")));
    let document = bench.json(&["fit", &data, "--family", "line", "--json"]);
    let line = fit(&document, "line");
    assert_eq!(line["figures"]["coefficient.b0"], "−0.1712(29)");
    assert_eq!(line["figures"]["coefficient.b1"], "0.00218(67)");
    let covariance = |i: usize, j: usize| number(&line["covariance"][i][j]);
    let r = covariance(0, 1) / (covariance(0, 0) * covariance(1, 1)).sqrt();
    assert!((r - -0.930).abs() < 5e-4, "r = {r}");
}

/// Every key of the contract stands there; `null` only where this list says why.
#[test]
fn no_key_is_null_without_a_reason() {
    let document = Bench::new().json(&["fit", &shipped("demo-projects/tension-link.assize"), "--json"]);
    let quadratic = fit(&document, "quadratic");
    for key in KEYS {
        let value = quadratic.get(key).unwrap_or_else(|| panic!("{key} is missing"));
        // One reading a direction and level: there are no repeats in one direction here.
        // The project records no run order, without which neighbours in time are not known.
        let fine = !value.is_null() || ["message", "repeatability", "durbin_watson"].contains(&key);
        assert!(fine, "{key} is null without a reason");
    }
    for (key, value) in quadratic["detection"].as_object().expect("an object") {
        // The reason is null where there is a limit.
        assert!(!value.is_null() || key == "reason", "detection.{key}");
    }
}

/// Characteristics in three forms that belong together, the zero return among them.
#[test]
fn characteristics_stand_in_three_forms() {
    let bench = Bench::new();
    let rows = "standard,reading,kind,direction\n,0.10,zero,\n1,2.0,standard,rising\n2,4.1,standard,rising\n3,6.0,standard,\n\
                2,4.3,standard,falling\n1,2.2,standard,falling\n,0.16,zero,\n";
    let path = bench.file("data.csv", rows);
    let document = bench.json(&["fit", &path, "--family", "line", "--json"]);
    let line = fit(&document, "line");
    let (span, run) = (number(&line["nonlinearity"]["span"]), 3.0);
    let all = line["characteristics"].as_object().expect("an object");
    for key in ["nonlinearity_independent", "nonlinearity_terminal", "hysteresis", "zero_return"] {
        let (output, percent) = (number(&all[key]["output"]), number(&all[key]["percent_of_span"]));
        assert!((percent - 100.0 * output / span.abs()).abs() < 1e-9, "{key}");
        let input = number(&all[key]["input"]);
        assert!((input / output * span.abs() / run - 1.0).abs() < 1e-9, "{key}: {input} {output}");
    }
    assert!((number(&all["hysteresis"]["output"]) - 0.2).abs() < 1e-12);
    assert!((number(&all["zero_return"]["output"]) - 0.06).abs() < 1e-12);
    assert_eq!(line["hysteresis"], all["hysteresis"]["output"]);
}
