//! Values and derivatives computed elsewhere, and two published thermometers (tests/published/families/SOURCE.md).

use super::*;
use crate::model::temperature::TemperatureUnit;
use serde_json::Value;

const FAMILIES_JSON: &str = include_str!("../../../../tests/published/families/families.json");
const THERMOMETERS: &str = include_str!("../../../../tests/published/families/thermometers.json");

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

/// Own calculation, mpmath at 140 digits: every value within some last bits of what its parts allow, every
/// derivative to 12 digits.
#[test]
fn values_and_derivatives_of_mpmath() {
    let more: [(&str, Function); 3] = [
        ("steinhart_hart_resistance", steinhart_hart::resistance),
        ("beta_resistance", beta::resistance),
        ("callendar_van_dusen_fixed", callendar_van_dusen::value),
    ];
    let data: Value = serde_json::from_str(FAMILIES_JSON).unwrap();
    let mut tested = 0;
    for (name, function) in FAMILIES.iter().map(|f| (f.name, f.function)).chain(more) {
        for row in data[name].as_array().unwrap() {
            let (b, x, right) = (numbers(&row[0]), row[1].as_f64().unwrap(), row[2].as_f64().unwrap());
            let (value, found) = slopes(function, &b, x);
            let right_slopes = numbers(&row[3]);
            let allowed = 4.0 * f64::EPSILON * reach(&b, x, right, &right_slopes);
            assert!((value - right).abs() <= allowed, "{name} {b:?} at {x}: {value} for {right}");
            for (found, right) in found.iter().zip(&right_slopes) {
                assert!((found - right).abs() <= 1e-12 * right.abs(), "{name} {b:?} at {x}: slope {found} for {right}");
            }
            assert_eq!(found.len(), right_slopes.len());
            tested += 1;
        }
    }
    assert_eq!(tested, 13 * 60);
}

/// IEC 60751, Pt100: every printed digit, and back.
#[test]
fn pt100_of_iec_60751() {
    let data: Value = serde_json::from_str(THERMOMETERS).unwrap();
    let pt = &data["iec60751"];
    let part = |key: &str| pt[key].as_f64().unwrap();
    let full = [part("r0"), part("a"), part("b"), part("c")];
    assert_eq!(full[3], callendar_van_dusen::FIXED_C);
    let (t, printed, exact) = (numbers(&pt["celsius"]), numbers(&pt["printed_ohm"]), numbers(&pt["exact_ohm"]));
    assert_eq!((t[0], t[7]), callendar_van_dusen::RANGE);
    for b in [&full[..], &full[..3]] {
        for ((t, printed), exact) in t.iter().zip(&printed).zip(&exact) {
            let r = callendar_van_dusen::value(b, *t);
            assert!((r - printed).abs() <= 0.005 && (r - exact).abs() < 1e-12, "{t}: {r}");
            let back = callendar_van_dusen::solve(b, *exact).unwrap();
            assert!((back - t).abs() < 1e-11, "{t}: {back}");
        }
    }
    // All eight levels, two of them below −50 °C, give the coefficients back, C too.
    let points: Vec<(f64, f64)> = t.iter().copied().zip(exact).collect();
    let found = callendar_van_dusen::self_start(&points).unwrap();
    for (found, right) in found.iter().zip(full) {
        assert!((found - right).abs() < 1e-9 * right.abs(), "{found} for {right}");
    }
    assert_eq!(found.len(), 4);
    // Without the coldest one C is not told, and the others come out as well.
    let found = callendar_van_dusen::self_start(&points[1..]).unwrap();
    assert!(found.len() == 3 && found.iter().zip(full).all(|(f, r)| (f - r).abs() < 1e-11 * r.abs()), "{found:?}");
    assert!(!callendar_van_dusen::tells_c(&[-80.0, -80.0, -50.0, 20.0, 30.0]));
    assert!(!callendar_van_dusen::tells_c(&[-80.0, -81.0, 20.0]) && !callendar_van_dusen::tells_c(&[]));
    assert!(callendar_van_dusen::tells_c(&[20.0, -80.0, 0.0, -81.0]));
    let linear = callendar_van_dusen::to_linear(&full);
    let sum: f64 = linear.iter().zip(callendar_van_dusen::regressors(-100.0, true)).map(|(p, g)| p * g).sum();
    assert!((sum - 60.255_84).abs() < 1e-12, "{sum}");
}

/// The commonly published 10 kΩ bead, and its coefficients from three of its own points.
#[test]
fn ten_kiloohm_thermistor() {
    let data: Value = serde_json::from_str(THERMOMETERS).unwrap();
    let bead = &data["steinhart_hart"];
    let part = |key: &str| bead[key].as_f64().unwrap();
    let b = [part("a"), part("b"), part("c")];
    let celsius = TemperatureUnit::Celsius.from_kelvin(steinhart_hart::temperature(&b, part("ohm")));
    assert!((celsius - part("printed_celsius")).abs() < part("tolerance"), "{celsius}");
    let points: Vec<(f64, f64)> = [0.0, 25.0, 70.0]
        .map(|c| TemperatureUnit::Celsius.to_kelvin(c))
        .map(|t| (steinhart_hart::solve(&b, t).unwrap(), t))
        .to_vec();
    let found = steinhart_hart::self_start(&points).unwrap();
    for (found, right) in found.iter().zip(b) {
        assert!((found - right).abs() < 1e-10 * right, "{found} for {right}");
    }
    let m = steinhart_hart::centre(&points).unwrap();
    let back = steinhart_hart::from_internal(&steinhart_hart::to_internal(&b, m), m);
    assert!(back.iter().zip(b).all(|(f, r)| (f - r).abs() < 1e-13 * r), "{back:?}");
}
