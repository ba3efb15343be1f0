//! Typed formulas: what they mean, and what is said when they cannot be read.

use super::{Formula, FormulaError};
use proptest::prelude::*;

fn value(text: &str, x: f64) -> f64 {
    text.parse::<Formula>().unwrap_or_else(|e| panic!("{text}: {e}")).value(x)
}

fn error(text: &str) -> FormulaError {
    text.parse::<Formula>().expect_err(text)
}

#[test]
fn precedence_and_association() {
    for (text, expected) in [
        ("1+2*3", 7.0),
        ("(1+2)*3", 9.0),
        ("10-4-3", 3.0),
        ("12/3/2", 2.0),
        ("2^3^2", 512.0),
        ("(2^3)^2", 64.0),
        ("-3^2", -9.0),
        ("(-3)^2", 9.0),
        ("2^-2", 0.25),
        ("2^-2*8", 2.0),
        ("-2*-3", 6.0),
        ("+4 - -4", 8.0),
        ("--4", 4.0),
        ("6/-2", -3.0),
        ("2*-3^2", -18.0),
    ] {
        assert_eq!(value(text, 0.0), expected, "{text}");
    }
    assert_eq!(value("-x^2", 3.0), -9.0);
}

#[test]
fn numbers_signs_and_names_as_people_type_them() {
    for (text, expected) in [
        ("1e-3*x", 2e-3),
        ("1.5E+2 × x", 300.0),
        (".5·x", 1.0),
        ("5.", 5.0),
        ("x − 1", 1.0),
        ("1e−3", 1e-3),
        (" x\t+ 0 ", 2.0),
        ("pi", std::f64::consts::PI),
        ("2*π", std::f64::consts::TAU),
    ] {
        assert_eq!(value(text, 2.0), expected, "{text}");
    }
}

#[test]
fn functions_and_their_exact_slopes() {
    let e = std::f64::consts::E;
    for (text, x, f, slope) in [
        ("exp(2*x)", 0.5, e, 2.0 * e),
        ("ln(x)", e, 1.0, 1.0 / e),
        ("log10(x)", 100.0, 2.0, std::f64::consts::LOG10_E / 100.0),
        ("sqrt(x)", 9.0, 3.0, 1.0 / 6.0),
        ("sin(x)", 0.0, 0.0, 1.0),
        ("cos(x)", 0.0, 1.0, 0.0),
        ("atan(x)", 1.0, std::f64::consts::FRAC_PI_4, 0.5),
        ("abs(x)", -3.0, 3.0, -1.0),
        ("abs(x)", 0.0, 0.0, 0.0),
        ("x^3", -2.0, -8.0, 12.0),
        ("x^0", 0.0, 1.0, 0.0),
        ("2^x", 3.0, 8.0, 8.0 * std::f64::consts::LN_2),
        ("x^x", 1.0, 1.0, 1.0),
        ("1/x", 4.0, 0.25, -1.0 / 16.0),
        ("(x+1)*(x-1)", 3.0, 8.0, 6.0),
        ("4 + 0*sqrt(0)", 1.0, 4.0, 0.0),
        ("sqrt(4) + x", 1.0, 3.0, 1.0),
    ] {
        let formula: Formula = text.parse().unwrap();
        let close = |a: f64, b: f64| (a - b).abs() <= 4e-16 * b.abs().max(1.0);
        assert!(close(formula.value(x), f), "{text}: {}", formula.value(x));
        assert!(close(formula.derivative(x), slope), "{text}′: {}", formula.derivative(x));
    }
}

#[test]
fn no_value_is_not_a_number() {
    for (text, x) in [("ln(x)", 0.0), ("1/x", 0.0), ("sqrt(x)", -1.0), ("exp(x)", 1000.0), ("x^0.5", -1.0)] {
        let formula: Formula = text.parse().unwrap();
        assert!(formula.value(x).is_nan() && formula.derivative(x).is_nan(), "{text}");
    }
    let root: Formula = "sqrt(x)".parse().unwrap();
    assert_eq!(root.value(0.0), 0.0);
    assert!(root.derivative(0.0).is_nan());
}

#[test]
fn errors_say_where_and_what_would_be_accepted() {
    for (text, column, part) in [
        ("", 1, "the end is not expected here; a number, x, pi, a function or “(” would be"),
        ("2x", 2, "“x” is not expected here; one of + − * / ^ or the end"),
        ("2 + ", 5, "the end is not expected"),
        ("(1+2", 5, "or “)” would be"),
        ("1+2)", 4, "“)” is not expected"),
        ("3 * * x", 5, "“*” is not expected"),
        ("sin x", 5, "“(” after the name of a function"),
        ("tan(x)", 1, "“tan” is not known; x, pi and the functions exp, ln, log10, sqrt"),
        ("y + 1", 1, "“y” is not known"),
        ("1,5*x", 2, "a point as decimal mark"),
        ("x = 3", 3, "“=” is not expected"),
        ("1.2.3", 4, "the number 0.3 is not expected"),
        (".", 1, "a number such as 12, 0.5 or 1.6e-3"),
        ("1e400", 1, "too large"),
        ("1e", 2, "“e” is not expected"),
        ("−−−x−", 6, "the end is not expected"),
    ] {
        let error = error(text);
        assert_eq!(error.column(), column, "{text}: {error}");
        let message = error.to_string();
        assert!(message.contains(part), "{text}: {message}");
        assert!(message.starts_with(&format!("column {column}: ")));
    }
}

#[test]
fn deep_and_long_formulas_are_refused_not_overrun() {
    let nested = |n: usize| format!("{}x{}", "(".repeat(n), ")".repeat(n));
    assert_eq!(value(&nested(50), 2.0), 2.0);
    assert!(matches!(error(&nested(100)), FormulaError::TooDeep { .. }));
    assert!(matches!(error(&"-".repeat(500)), FormulaError::TooDeep { .. }));
    assert!(matches!(error(&format!("{}x", "x^".repeat(300))), FormulaError::TooDeep { .. }));
    assert_eq!(error(&"x".repeat(2001)), FormulaError::TooLong { column: 2001 });
    // Long but flat is no trouble.
    assert_eq!(value(&format!("{}1", "1+".repeat(900)), 0.0), 901.0);
}

#[test]
fn stored_and_shown_as_typed() {
    let text = " 4 + 1.6*x ";
    let formula: Formula = text.parse().unwrap();
    assert_eq!((formula.to_string().as_str(), formula.source()), (text, text));
    let stored = serde_json::to_string(&formula).unwrap();
    assert_eq!(stored, "\" 4 + 1.6*x \"");
    assert_eq!(serde_json::from_str::<Formula>(&stored).unwrap(), formula);
    let bad = serde_json::from_str::<Formula>("\"2x\"").unwrap_err();
    assert!(bad.to_string().contains("column 2"));
}

/// Random formulas as text, tame enough for a difference to see x in them: small constants, and nothing
/// that grows or swings fast.
fn any_formula() -> impl Strategy<Value = String> {
    let leaf = prop_oneof![
        Just("x".to_owned()),
        (-2..3_i32).prop_map(|n| format!("({n})")),
        (0.1..2.0_f64).prop_map(|v| format!("{v}")),
    ];
    leaf.prop_recursive(4, 20, 2, |inner| {
        let sign = prop::sample::select(vec!["+", "-", "*", "/"]);
        let power = prop::sample::select(vec!["2", "-1", "0.5"]);
        let name = prop::sample::select(vec!["ln", "log10", "sqrt", "sin", "cos", "atan", "abs"]);
        prop_oneof![
            (inner.clone(), sign, inner.clone()).prop_map(|(a, sign, b)| format!("({a} {sign} {b})")),
            (inner.clone(), power).prop_map(|(a, power)| format!("({a})^{power}")),
            inner.clone().prop_map(|a| format!("2^(sin({a}))")),
            inner.clone().prop_map(|a| format!("exp(cos({a}))")),
            inner.clone().prop_map(|a| format!("-{a}")),
            (name, inner).prop_map(|(name, a)| format!("{name}({a})")),
        ]
    })
}

proptest! {
    #[test]
    fn no_text_panics(text in "\\PC{0,60}", x in any::<f64>()) {
        if let Ok(formula) = text.parse::<Formula>() {
            let _ = (formula.value(x), formula.derivative(x));
        }
    }

    #[test]
    fn no_text_made_of_its_own_letters_panics(text in "[-+*/^()x0-9.e− pisnlogqrt]{0,40}", x in any::<f64>()) {
        match text.parse::<Formula>() {
            Ok(formula) => drop((formula.value(x), formula.derivative(x))),
            Err(error) => prop_assert!((1..=text.chars().count() + 1).contains(&error.column())),
        }
    }

    #[test]
    fn slopes_agree_with_differences(text in any_formula(), x in 0.3..3.0_f64) {
        let formula: Formula = text.parse().unwrap();
        let slope = formula.derivative(x);
        let difference = |h: f64| (formula.value(x + h) - formula.value(x - h)) / (2.0 * h);
        let rough = [1e-4, 2.3e-5, 1e-5].map(difference);
        // Only where three widths agree does a difference say anything.
        let close = |a: f64, b: f64| (a - b).abs() < 1e-3 * (1.0 + b.abs());
        let tame = close(rough[0], rough[2]) && close(rough[1], rough[2]);
        if tame && slope.is_finite() && formula.value(x).abs() < 1e6 {
            let near = (rough[2] - slope).abs() < 1e-2 * (1.0 + slope.abs());
            prop_assert!(near, "{text} at {x}: {slope} for {rough:?}");
        }
    }
}
