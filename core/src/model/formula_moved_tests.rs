//! 200 slightly moved copies of every non-linear reference set, against refits of the same doubles with 80
//! digits (tests/published/strd/nonlinear_perturbed.py): nothing here can know the published numbers.

use super::FreeFormula;
use super::formula_strd_tests::{SETS, numbers, typed};
use crate::numerics::fit_nonlinear;
use crate::numerics::least_squares::ScaledWeights;
use serde_json::Value;

const MOVED: &str = include_str!("../../../tests/published/strd/nonlinear-perturbed.json");

/// The nearest double, its neighbour, or the next.
const ULPS: f64 = 2.0;

/// Copy `copy` of set `number`, by the rule in refit.py.
fn moved(set: &Value, number: u64, copy: u64) -> (Vec<f64>, Vec<f64>) {
    let mut state = 1000 * number + copy + 1;
    let mut next = |value: f64| {
        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        let k = (state >> 57) as f64 - 64.0;
        value * (1.0 + k * libm::ldexp(1.0, -20))
    };
    let pairs = numbers(&set["x"]).into_iter().zip(numbers(&set["y"]));
    pairs.map(|(x, y)| (next(x), next(y))).unzip()
}

fn ulps(found: f64, expected: f64) -> f64 {
    (found - expected).abs() / (libm::nextafter(expected.abs(), f64::INFINITY) - expected.abs())
}

/// The largest distance of any figure of a copy from its refit.
fn distance(formula: &FreeFormula, places: &[usize], start: &[f64], (x, y): (&[f64], &[f64]), refit: &[f64]) -> f64 {
    let p = places.len();
    let from: Vec<f64> = places.iter().map(|place| start[*place]).collect();
    let Ok(fit) = fit_nonlinear(formula, x, y, &ScaledWeights::equal(y.len()), &from) else {
        return f64::INFINITY;
    };
    let mut worst = ulps(fit.solved.residual_sd.unwrap(), refit[2 * p]);
    for (j, place) in places.iter().enumerate() {
        worst = worst.max(ulps(fit.solved.coefficients[j], refit[*place]));
        worst = worst.max(ulps(fit.solved.uncertainties[j], refit[p + place]));
    }
    worst
}

/// Every copy of these sets from the second published start.
fn agree(wanted: impl Fn(usize) -> bool) {
    let refits: Value = serde_json::from_str(MOVED).unwrap();
    for (place, text) in SETS.iter().enumerate().filter(|(place, _)| wanted(*place)) {
        let set: Value = serde_json::from_str(text).unwrap();
        let name = set["name"].as_str().unwrap();
        let (formula, places) = typed(&set);
        let start = numbers(&set["starts"]["start2"]);
        let rows = refits[name].as_array().unwrap();
        assert_eq!(rows.len(), 200, "{name}");
        for (copy, row) in (0..).zip(rows) {
            let (x, y) = moved(&set, 100 + place as u64, copy);
            let far = distance(&formula, &places, &start, (&x, &y), &numbers(row));
            assert!(far <= ULPS, "{name}, copy {copy}: {far} units of the last place");
        }
    }
}

/// Split in two so that both halves run side by side.
#[test]
fn moved_copies_agree_to_the_last_place_even_sets() {
    agree(|place| place % 2 == 0);
}

#[test]
fn moved_copies_agree_to_the_last_place_odd_sets() {
    agree(|place| place % 2 == 1);
}
