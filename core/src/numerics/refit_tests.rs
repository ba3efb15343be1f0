//! All linear reference sets of NIST/ITL and 200 slightly moved copies of each, straight through the two
//! solvers, against refits of the same doubles with 120 digits (tests/published/strd/refit.py).

use super::Dd;
use super::householder::fit_columns;
use super::least_squares::{LeastSquares, ScaledWeights};
use super::orthogonal::fit_polynomial;
use super::sums::determination;
use serde_json::Value;

const REFIT: &str = include_str!("../../../tests/published/strd/refit.json");
const PERTURBED: &str = include_str!("../../../tests/published/strd/perturbed.json");

macro_rules! sets {
    ($($name:literal),*) => {
        [$(include_str!(concat!("../../../tests/published/strd/", $name, ".json"))),*]
    };
}

/// In the order in which the copies are numbered.
const SETS: [&str; 11] = sets!(
    "Norris", "Pontius", "NoInt1", "NoInt2", "Filip", "Longley", "Wampler1", "Wampler2", "Wampler3", "Wampler4",
    "Wampler5"
);

/// How far a figure may lie from the exact one: the nearest double, its neighbour, or the next (in fact all are the nearest).
const ULPS: f64 = 2.0;

/// A published set: which design, and its numbers.
struct Set {
    name: String,
    intercept: bool,
    degree: Option<usize>,
    columns: Vec<Vec<f64>>,
    y: Vec<f64>,
    certified: Value,
}

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

impl Set {
    fn read(text: &str) -> Self {
        let certified: Value = serde_json::from_str(text).unwrap();
        let x = certified["x"].as_array().unwrap();
        let several = x[0].is_array();
        let intercept = certified["basis"]["intercept"].as_bool().unwrap();
        let degree = certified["basis"]["degree"].as_u64().filter(|_| intercept && !several);
        Self {
            name: certified["name"].as_str().unwrap().to_owned(),
            intercept,
            degree: degree.map(|d| usize::try_from(d).unwrap()),
            columns: if several { x.iter().map(numbers).collect() } else { vec![numbers(&certified["x"])] },
            y: numbers(&certified["y"]),
            certified,
        }
    }

    fn fit(&self) -> LeastSquares {
        let weights = ScaledWeights::equal(self.y.len());
        if let Some(degree) = self.degree {
            return fit_polynomial(&self.columns[0], &self.y, &weights, degree).unwrap();
        }
        let exact = |column: &Vec<f64>| column.iter().copied().map(Dd::from).collect();
        let constant = self.intercept.then(|| vec![Dd::ONE; self.y.len()]);
        let columns: Vec<Vec<Dd>> = constant.into_iter().chain(self.columns.iter().map(exact)).collect();
        fit_columns(&columns, &self.y, &weights).unwrap()
    }

    fn r_squared(&self, fit: &LeastSquares) -> f64 {
        let even = vec![1.0; self.y.len()];
        determination(&self.y, &fit.residuals, &even, self.intercept).unwrap()
    }

    /// Copy `copy` of set `number`, by the rule in refit.py.
    fn perturbed(&self, number: u64, copy: u64) -> Self {
        let mut state = 1000 * number + copy + 1;
        let mut moved = |value: f64| {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
            let k = f64::from(u32::try_from(state >> 57).unwrap()) - 64.0;
            value * (1.0 + k / 1_048_576.0)
        };
        let mut columns = self.columns.clone();
        let mut y = self.y.clone();
        for i in 0..y.len() {
            for column in &mut columns {
                column[i] = moved(column[i]);
            }
            y[i] = moved(y[i]);
        }
        Self { columns, y, name: format!("{} {copy}", self.name), certified: Value::Null, ..*self }
    }
}

/// |found − exact| in units of the last place of the exact figure.
fn ulps(found: f64, exact: f64) -> f64 {
    if found == exact {
        return 0.0;
    }
    let (_, exponent) = libm::frexp(exact);
    (found - exact).abs() / libm::scalbn(1.0, exponent - 53)
}

/// Digits that agree: −log₁₀ of the relative error, absolute where zero is certified, capped at 15.
fn digits(found: f64, certified: f64) -> f64 {
    let size = if certified == 0.0 { 1.0 } else { certified.abs() };
    (-libm::log10((found - certified).abs() / size)).min(15.0)
}

/// Largest s that the rounding of the data alone could leave of a set that lies on its curve.
fn rounding(y: &[f64]) -> f64 {
    let top = y.iter().fold(0.0, |top: f64, v| top.max(v.abs()));
    4.0 * f64::EPSILON / 2.0 * top / libm::sqrt(y.len() as f64)
}

/// Every figure of every published set, also those of sets that lie on their curve.
#[test]
fn the_published_sets_are_within_two_units_of_the_last_place() {
    let refits: Value = serde_json::from_str(REFIT).unwrap();
    for (text, refit) in SETS.into_iter().zip(refits.as_array().unwrap()) {
        let set = Set::read(text);
        assert_eq!(set.name, refit["name"]);
        let fit = set.fit();
        let close = |what: &str, found: f64, exact: f64| {
            let off = ulps(found, exact);
            assert!(off <= ULPS, "{} {what}: {found:e} for {exact:e}, {off} ulp", set.name);
        };
        for (found, exact) in fit.coefficients.iter().zip(numbers(&refit["coefficients"])) {
            close("coefficient", *found, exact);
        }
        close("R²", set.r_squared(&fit), refit["r_squared"].as_f64().unwrap());
        let (s, exact) = (fit.residual_sd.unwrap(), refit["residual_sd"].as_f64().unwrap());
        if set.name == "Wampler1" || set.name == "Wampler2" {
            assert!((s - exact).abs() <= rounding(&set.y), "{} s: {s:e} for {exact:e}", set.name);
        } else {
            close("s", s, exact);
            close("Σe²", fit.residual_ss, refit["rss"].as_f64().unwrap());
            for (found, exact) in fit.uncertainties.iter().zip(numbers(&refit["sds"])) {
                close("SD", *found, exact);
            }
        }
        assert_eq!(fit.coefficients.len(), numbers(&refit["sds"]).len());
    }
}

/// The certificates hold for the decimals; 13 digits of them survive the step to doubles everywhere.
#[test]
fn the_published_sets_agree_with_their_certificates() {
    for text in SETS {
        let set = Set::read(text);
        let fit = set.fit();
        let holds = |what: &str, found: f64, certified: f64| {
            let agree = digits(found, certified);
            assert!(agree >= 13.0, "{} {what}: {agree:.1} digits, {found:e} for {certified:e}", set.name);
        };
        for (i, c) in set.certified["certified"].as_array().unwrap().iter().enumerate() {
            holds("coefficient", fit.coefficients[i], c["estimate"].as_f64().unwrap());
            holds("SD", fit.uncertainties[i], c["sd"].as_f64().unwrap());
        }
        holds("s", fit.residual_sd.unwrap(), set.certified["residual_sd"].as_f64().unwrap());
        holds("Σe²", fit.residual_ss, set.certified["rss"].as_f64().unwrap());
        holds("R²", set.r_squared(&fit), set.certified["r_squared"].as_f64().unwrap());
        let freedom = set.certified["df"].as_u64().unwrap();
        assert_eq!((fit.residuals.len() - fit.coefficients.len()) as u64, freedom, "{}", set.name);
    }
}

/// Coefficients, SDs and s of 2200 moved copies; R² to two units of the last place of 1, since the
/// residuals it is made of are doubles.
#[test]
fn slightly_moved_copies_are_within_two_units_of_the_last_place() {
    let expected: Value = serde_json::from_str(PERTURBED).unwrap();
    for (number, text) in (0..).zip(SETS) {
        let set = Set::read(text);
        let copies = expected[&set.name].as_array().unwrap();
        assert_eq!(copies.len(), 200);
        for (copy, row) in (0..).zip(copies) {
            let moved = set.perturbed(number, copy);
            let fit = moved.fit();
            let mut found = [fit.coefficients.as_slice(), &fit.uncertainties].concat();
            found.push(fit.residual_sd.unwrap());
            let exact = numbers(row);
            assert_eq!(found.len() + 1, exact.len());
            for (i, (found, exact)) in found.iter().zip(&exact).enumerate() {
                let off = ulps(*found, *exact);
                assert!(off <= ULPS, "{} figure {i}: {found:e} for {exact:e}, {off} ulp", moved.name);
            }
            let r_squared = moved.r_squared(&fit);
            assert!((r_squared - exact[exact.len() - 1]).abs() <= f64::EPSILON, "{} R²", moved.name);
        }
    }
}
