//! Formulas with coefficients: names, slopes against published values, and what is refused.

use super::{Formula, FormulaError, FreeFormula};
use crate::numerics::{Dd, Dual, Real};
use proptest::prelude::*;
use serde_json::Value;

fn read(text: &str) -> FreeFormula {
    text.parse().unwrap_or_else(|e| panic!("{text}: {e}"))
}

fn error(text: &str) -> FormulaError {
    text.parse::<FreeFormula>().expect_err(text)
}

#[test]
fn coefficients_keep_their_names_in_order_of_appearance() {
    for (text, names) in [
        ("b0 + b1*x", vec!["b0", "b1"]),
        ("top*(1 - exp(-x/tau)) + offset", vec!["top", "tau", "offset"]),
        ("c*x + a*x^2 + c", vec!["c", "a"]),
        ("α·x^β_2", vec!["α", "β_2"]),
        ("A*x + a", vec!["A", "a"]),
        ("expo*ln(x1)", vec!["expo", "x1"]),
        ("e*x + 1e3", vec!["e"]),
        ("k", vec!["k"]),
    ] {
        assert_eq!(read(text).coefficient_names(), names, "{text}");
    }
}

#[test]
fn values_follow_the_order_of_names() {
    assert_eq!(read("c*x + a").value(&[2.0, 5.0], 3.0), 11.0);
    assert_eq!(read("-a^2 + 2^b^2").value(&[3.0, 2.0], 0.0), 7.0);
    assert_eq!(read("a*x^2").value(&[1.0], -3.0), 9.0);
    // Missing coefficients have no value; more than enough do no harm.
    assert!(read("a + b").value(&[1.0], 0.0).is_nan());
    assert_eq!(read("a").value(&[1.0, 2.0], 0.0), 1.0);
}

#[test]
fn whole_powers_of_negative_numbers_are_exact_in_double_double() {
    let x = -1.000_000_123_456_789;
    let square = read("a*x^2").value(&[Dd::ONE], Dd::from(x));
    assert_eq!(square, Dd::from_product(x, x));
    let slope = read("a*x^3").value(&[Dual::constant(Dd::ONE)], Dual::variable(Dd::from(x))).slope;
    assert_eq!(slope, Dd::from_product(x, x) * 3.0);
    assert!((read("a*pi").value(&[Dd::ONE], Dd::ZERO) - Dd::PI).to_f64() == 0.0);
}

#[test]
fn errors_say_where_and_what_would_be_accepted() {
    for (text, column, part) in [
        ("", 1, "a number, x, pi, a coefficient, a function or “(” would be"),
        ("2*x + 1", 8, "no coefficient to fit; name at least one, as in a + b*x"),
        ("a b", 3, "“b” is not expected here; one of + − * / ^ or the end would be"),
        ("2a", 2, "“a” is not expected here"),
        ("a*tan(x)", 3, "“tan” is no function; the functions are exp, ln, log10, sqrt, sin, cos, atan, abs"),
        ("a(1 - x)", 1, "and a product needs its *"),
        ("a*X", 3, "“X” would be a coefficient; write “x” or another name"),
        ("a*Exp(x)", 3, "write “exp” or another name"),
        ("a*PI", 3, "write “pi”"),
        ("a*sin", 6, "“(” after the name of a function"),
        ("a,b", 2, "a point as decimal mark"),
        ("_a", 1, "“_” is not expected"),
        ("a + (b*x", 9, "or “)” would be"),
        ("a+b+c+d+e+f+g+h+i+j+k+l+m", 25, "“m” is one coefficient too many; up to 12 are accepted"),
    ] {
        let error = error(text);
        assert_eq!(error.column(), column, "{text}: {error}");
        let message = error.to_string();
        assert!(message.contains(part), "{text}: {message}");
        assert!(message.starts_with(&format!("column {column}: ")));
    }
    assert_eq!(read("a+b+c+d+e+f+g+h+i+j+k+l+a+b").coefficient_names().len(), 12);
    // What an instrument declares has nothing to fit.
    assert!(matches!("a + b*x".parse::<Formula>(), Err(FormulaError::UnknownName { column: 1, .. })));
}

#[test]
fn deep_and_long_formulas_are_refused_not_overrun() {
    let nested = |n: usize| format!("{}a{}", "(".repeat(n), ")".repeat(n));
    assert_eq!(read(&nested(50)).value(&[2.0], 0.0), 2.0);
    assert!(matches!(error(&nested(100)), FormulaError::TooDeep { .. }));
    assert!(matches!(error(&"exp(".repeat(400)), FormulaError::TooDeep { .. }));
    assert_eq!(error(&"a".repeat(2001)), FormulaError::TooLong { column: 2001 });
    assert_eq!(read(&format!("{}a", "1+".repeat(900))).value(&[1.0], 0.0), 901.0);
}

#[test]
fn stored_and_shown_as_typed() {
    let text = " a + b*x ";
    let formula = read(text);
    assert_eq!((formula.to_string().as_str(), formula.source()), (text, text));
    let stored = serde_json::to_string(&formula).unwrap();
    assert_eq!(stored, "\" a + b*x \"");
    assert_eq!(serde_json::from_str::<FreeFormula>(&stored).unwrap(), formula);
    assert!(serde_json::from_str::<FreeFormula>("\"a b\"").unwrap_err().to_string().contains("column 3"));
}

/// Values and derivatives by x and by each coefficient at 1000 random points, computed symbolically and
/// evaluated with 50 digits (tests/published/formula-derivatives/SOURCE.md).
#[test]
fn derivatives_agree_with_symbolic_ones_at_a_thousand_points() {
    let text = include_str!("../../../tests/published/formula-derivatives/values.json");
    let sets: Value = serde_json::from_str(text).unwrap();
    let numbers = |v: &Value| v.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect::<Vec<f64>>();
    let mut points = 0;
    for set in sets.as_array().unwrap() {
        let formula = read(set["formula"].as_str().unwrap());
        for point in set["points"].as_array().unwrap() {
            let (b, expected) = (numbers(&point["b"]), numbers(&point["values"]));
            let x = point["x"].as_f64().unwrap();
            // By x, then by each coefficient.
            for (k, expected) in expected[1..].iter().enumerate() {
                let close = |found: f64, bound: f64| (found - expected).abs() <= bound * expected.abs();
                let exact = along(&formula, &b, x, k, Dd::from);
                assert!(close(exact.slope.to_f64(), 2.3e-16), "{formula} {point} {k}: {:?}", exact.slope);
                let rounded = along(&formula, &b, x, k, |v| v);
                assert!(close(rounded.slope, 1e-12), "{formula} {point} {k}: {:e}", rounded.slope);
            }
            let value = formula.value(&b.iter().map(|b| Dd::from(*b)).collect::<Vec<_>>(), Dd::from(x));
            assert!((value.to_f64() - expected[0]).abs() <= 2.3e-16 * expected[0].abs(), "{formula} {point}");
            points += 1;
        }
    }
    assert_eq!(points, 1000);
}

/// Value and derivative by x (k = 0) or by coefficient k − 1.
fn along<T: Real>(formula: &FreeFormula, b: &[f64], x: f64, k: usize, number: impl Fn(f64) -> T) -> Dual<T> {
    let dual = |v: f64, moves: bool| if moves { Dual::variable(number(v)) } else { Dual::constant(number(v)) };
    let b: Vec<Dual<T>> = b.iter().enumerate().map(|(j, b)| dual(*b, j + 1 == k)).collect();
    formula.value(&b, dual(x, k == 0))
}

proptest! {
    #[test]
    fn no_text_panics(text in "\\PC{0,60}", b in any::<f64>(), x in any::<f64>()) {
        match text.parse::<FreeFormula>() {
            Ok(formula) => {
                let all = vec![Dual::variable(Dd::from(b)); formula.coefficient_names().len()];
                let _ = (formula.value(&[b], x), formula.value(&all, Dual::constant(Dd::from(x))));
            }
            Err(error) => prop_assert!((1..=text.chars().count() + 1).contains(&error.column())),
        }
    }

    #[test]
    fn no_text_made_of_its_own_letters_panics(text in "[-+*/^()xab0-9.e− pisnlogqrt_]{0,40}", b in any::<f64>(), x in any::<f64>()) {
        match text.parse::<FreeFormula>() {
            Ok(formula) => {
                let names = formula.coefficient_names();
                prop_assert!((1..=12).contains(&names.len()));
                let all = vec![Dual::variable(b); names.len()];
                let _ = formula.value(&all, Dual::constant(x));
            }
            Err(error) => prop_assert!((1..=text.chars().count() + 1).contains(&error.column())),
        }
    }

    #[test]
    fn without_names_both_kinds_read_the_same(text in "[-+*/^()x0-9. ]{0,20}", x in -10.0..10.0_f64) {
        let declared = text.parse::<Formula>();
        match (format!("0*k + ({text})").parse::<FreeFormula>(), declared) {
            (Ok(free), Ok(declared)) => {
                let (free, declared) = (free.value(&[1.0], x), declared.value(x));
                prop_assert!(free == declared || !free.is_finite() && declared.is_nan());
            }
            // x0 is a name of its own; parentheses may close what was opened outside.
            (Ok(free), Err(FormulaError::UnknownName { .. })) => prop_assert!(free.coefficient_names().len() > 1),
            (Ok(_), Err(error)) => prop_assert!(text.contains(')'), "{error}"),
            (Err(error), declared) => prop_assert!(declared.is_err(), "{error}"),
        }
    }
}
