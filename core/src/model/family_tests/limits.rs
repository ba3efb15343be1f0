//! Ends of the domains: zero, infinity, poles, and what is outside.

use super::*;
use crate::{numerics::Dd, quantity::Unit};

type DeepFunction = fn(&[Dual<Dd>], Dual<Dd>) -> Dual<Dd>;

const FOUR: [f64; 4] = [0.7, 2.0, 30.0, 5.1];

fn five(steep: f64, g: f64) -> Vec<f64> {
    vec![FOUR[0], steep, FOUR[2], FOUR[3], g]
}

#[test]
fn logistics_at_zero() {
    for (steep, by_x) in [(2.0, 0.0), (1.0, (5.1 - 0.7) / 30.0), (0.5, f64::INFINITY)] {
        let b = [FOUR[0], steep, FOUR[2], FOUR[3]];
        let (value, found) = slopes(logistic4::value, &b, 0.0);
        assert_eq!(value, 0.7);
        assert!(found[0] == by_x || (found[0] - by_x).abs() < 1e-15, "{steep} {found:?}");
        assert_eq!(found[1..], [1.0, 0.0, 0.0, 0.0]);
        let (value, found) = slopes(logistic5::value, &five(steep, 3.0), 0.0);
        assert_eq!(value, 0.7);
        assert!(found[0] == 3.0 * by_x || (found[0] - 3.0 * by_x).abs() < 1e-15, "{steep} {found:?}");
        assert_eq!(found[1..], [1.0, 0.0, 0.0, 0.0, 0.0]);
    }
    // Falling with an infinite slope.
    let (_, found) = slopes(logistic4::value, &[5.0, 0.5, 30.0, 1.0], 0.0);
    assert_eq!(found[0], f64::NEG_INFINITY);
}

#[test]
fn logistics_far_out() {
    for x in [1e200, f64::MAX] {
        let (value, found) = slopes(logistic4::value, &FOUR, x);
        assert_eq!((value, &found[1..]), (5.1, &[0.0, 0.0, 0.0, 1.0][..]));
        let (value, found) = slopes(logistic5::value, &five(2.0, 3.0), x);
        assert_eq!((value, &found[1..]), (5.1, &[0.0, 0.0, 0.0, 1.0, 0.0][..]));
    }
    for x in [1e-200, f64::MIN_POSITIVE, 5e-324] {
        let (value, found) = slopes(logistic5::value, &five(2.0, 3.0), x);
        assert!(value == 0.7 && found.iter().all(|s| s.is_finite()), "{x} {found:?}");
    }
    assert_eq!((logistic4::asymptotes(&FOUR), logistic5::asymptotes(&five(2.0, 3.0))), {
        let both = (Some(0.7), Some(5.1));
        (both, both)
    });
}

#[test]
fn five_with_g_one_is_four() {
    let mut stream = Stream::new(4, 4);
    for _ in 0..200 {
        let (mut b, x) = draw("logistic4", &mut stream);
        let four = logistic4::value(&b, x);
        let size = b[0].abs() + b[3].abs();
        b.push(1.0);
        assert!((logistic5::value(&b, x) - four).abs() <= 4.0 * f64::EPSILON * size);
    }
    let back = logistic5::from_internal(&logistic5::to_internal(&five(2.0, 3.0)));
    assert!(back.iter().zip(five(2.0, 3.0)).all(|(a, b)| (a - b).abs() < 1e-14 * b), "{back:?}");
}

/// Each stated limit is approached, each missing one is not.
#[test]
fn asymptotes_are_approached() {
    let close = |value: f64, limit: Option<f64>| limit.is_some_and(|l| (value - l).abs() < 1e-6);
    let check = |value: &dyn Fn(f64) -> f64, limits: (Option<f64>, Option<f64>), places: (f64, f64)| {
        for (limit, place) in [(limits.0, places.0), (limits.1, places.1)] {
            assert!(close(value(place), limit) || (limit.is_none() && value(place).abs() > 1e3), "{place} {limit:?}");
        }
    };
    let wide = (-1e9, 1e9);
    for b in [[2.0, 3.0, 0.5], [2.0, -3.0, -0.5]] {
        check(&|x| exponential::value(&b, x), exponential::asymptotes(&b), (-100.0, 100.0));
        check(&|x| hyperbola::value(&b, x), hyperbola::asymptotes(&b), wide);
        check(&|x| rational::value(&b, x), rational::asymptotes(&b), wide);
    }
    check(&|x| rational::value(&[2.0, 3.0, 0.0], x), rational::asymptotes(&[2.0, 3.0, 0.0]), wide);
    for b in [[2.0, 3.0], [2.0, -3.0]] {
        check(&|x| power::value(&b, x), power::asymptotes(&b), (1e-6, 1e6));
    }
    check(&|x| line_zero::value(&[2.0], x), line_zero::asymptotes(&[2.0]), wide);
    let b = [1.1e-3, 2.3e-4, 9e-8];
    assert_eq!(steinhart_hart::asymptotes(&b), (None, Some(0.0)));
    assert!(steinhart_hart::temperature(&b, 1e300) < 50.0 && steinhart_hart::temperature(&b, 1e-3).is_nan());
    for beta in [3950.0, -3950.0] {
        let (low, high) = beta::asymptotes(&[beta, 1e4]);
        assert_eq!((low.is_none(), high), if beta > 0.0 { (true, Some(0.0)) } else { (false, None) });
    }
}

#[test]
fn poles_and_turns() {
    assert_eq!(hyperbola::poles(&[1.0, 2.0, 3.0]), [-3.0]);
    assert!(hyperbola::value(&[1.0, 2.0, 3.0], -3.0).is_nan() && hyperbola::poles(&[1.0, 0.0, 3.0]).is_empty());
    assert_eq!(rational::poles(&[1.0, 3.0, 2.0]), [-0.5]);
    assert!(rational::value(&[1.0, 3.0, 2.0], -0.5).is_nan() && rational::poles(&[1.0, 3.0, 0.0]).is_empty());
    assert!(rational::poles(&[1.0, 2.0, 2.0]).is_empty());
    let turning = [1e-3, 3e-4, -1e-6];
    let turns = steinhart_hart::turning_points(&turning);
    assert!((libm::log(turns[1]) - 10.0).abs() < 1e-14 && (turns[0] * turns[1] - 1.0).abs() < 1e-14);
    let slope = |r: f64| slopes(steinhart_hart::temperature, &turning, r).1[0];
    assert!(slope(0.999 * turns[1]) < 0.0 && slope(1.001 * turns[1]) > 0.0);
    assert!(steinhart_hart::is_monotone(&turning, 1e3, 2e4) && !steinhart_hart::is_monotone(&turning, 1e3, 3e4));
    // Between 0.1 Ω and 1 kΩ ln R passes zero, where B alone counts.
    assert!(!steinhart_hart::is_monotone(&[1e-3, -1e-6, 1e-6], 0.1, 1e3));
    assert!(steinhart_hart::turning_points(&[1e-3, 3e-4, 1e-7]).is_empty());
    // B ≤ 0 with C > 0: the branch above the turn.
    let late = [1e-3, -1e-5, 1e-6];
    let r = steinhart_hart::solve(&late, 400.0).unwrap();
    assert!(slopes(steinhart_hart::temperature, &late, r).1[0] < 0.0);
}

#[test]
fn no_number_outside_the_domain() {
    for family in &FAMILIES {
        let (b, x) = draw(family.name, &mut Stream::new(1, 1));
        assert!((family.domain)(x));
        for outside in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1e300, -1e-3, 0.0, 851.0, -200.1] {
            let (value, found) = slopes(family.function, &b, outside);
            if !(family.domain)(outside) {
                assert!(value.is_nan() && found[0].is_nan(), "{} at {outside}", family.name);
            }
        }
    }
    assert!(![0.0, -1.0].into_iter().any(power::domain) && !logistic4::domain(-1e-9) && logistic5::domain(0.0));
    assert!(logistic4::value(&[1.0, -1.0, 2.0, 3.0], 1.0).is_nan());
    assert!(logistic5::value(&[1.0, 1.0, 2.0, 3.0, 0.0], 1.0).is_nan());
    assert!(callendar_van_dusen::regressors(900.0, true)[1].is_nan());
}

#[test]
fn units_of_coefficients() {
    let (y, x) = (Unit::new("mV"), Unit::new("mg/L"));
    let all = |unit: fn(usize, &Unit, &Unit) -> String, count| (0..count).map(|i| unit(i, &y, &x)).collect::<Vec<_>>();
    assert_eq!(all(line_zero::unit, 1), ["mV (mg/L)⁻¹"]);
    assert_eq!(all(power::unit, 2), ["mV", ""]);
    assert_eq!(all(exponential::unit, 3), ["mV", "mV", "(mg/L)⁻¹"]);
    assert_eq!(all(hyperbola::unit, 3), ["mV", "mV (mg/L)", "mg/L"]);
    assert_eq!(all(rational::unit, 3), ["mV", "mV (mg/L)⁻¹", "(mg/L)⁻¹"]);
    assert_eq!(all(logistic4::unit, 4), ["mV", "", "mg/L", "mV"]);
    assert_eq!(all(logistic5::unit, 5), ["mV", "", "mg/L", "mV", ""]);
    assert_eq!(all(steinhart_hart::unit, 3), ["K⁻¹", "K⁻¹", "K⁻¹"]);
    assert_eq!(all(beta::unit, 2), ["K", "Ω"]);
    assert_eq!(all(callendar_van_dusen::unit, 4), ["mV", "°C⁻¹", "°C⁻²", "°C⁻⁴"]);
    assert_eq!(hyperbola::unit(1, &Unit::new(""), &Unit::new("m")), "m");
}

/// Double-doubles have the same values and slopes as doubles, and far out at least some wherever doubles have.
#[test]
fn double_double_has_values_wherever_doubles_have() {
    let table: [DeepFunction; 10] = [
        line_zero::value,
        power::value,
        exponential::value,
        hyperbola::value,
        rational::value,
        logistic4::value,
        logistic5::value,
        steinhart_hart::temperature,
        beta::temperature,
        callendar_van_dusen::value,
    ];
    for (family, deep) in FAMILIES.iter().zip(table) {
        let mut stream = Stream::new(12, 1);
        for k in 0..400 {
            let (b, mut x) = draw(family.name, &mut stream);
            let far = k >= 300;
            if far && (family.domain)(x * 1e60) {
                x *= size(&mut stream, -200.0, 200.0);
            }
            let (value, shallow) = slopes(family.function, &b, x);
            let (deep_value, deep) = deep_slopes(deep, &b, x);
            let text = format!("{} {b:?} at {x}: {deep_value} for {value}, {deep:?} for {shallow:?}", family.name);
            let close = |a: f64, b: f64, scale: f64| a == b || (a - b).abs() <= 1e-12 * scale;
            if far {
                let all = |v: f64, s: &[f64]| v.is_finite() && s.iter().all(|s| s.is_finite());
                assert!(all(deep_value, &deep) || !all(value, &shallow), "{text}");
            } else {
                assert!(close(deep_value, value, reach(&b, x, value, &shallow)), "{text}");
                assert!(deep.iter().zip(&shallow).all(|(d, s)| close(*d, *s, s.abs())), "{text}");
            }
        }
    }
}

fn deep_slopes(function: DeepFunction, b: &[f64], x: f64) -> (f64, Vec<f64>) {
    let number = |v: f64, varies: bool| Dual { value: Dd::from(v), slope: Dd::from(f64::from(varies)) };
    let by = |k: usize| {
        let b: Vec<Dual<Dd>> = b.iter().enumerate().map(|(i, v)| number(*v, i + 1 == k)).collect();
        function(&b, number(x, k == 0))
    };
    let all: Vec<Dual<Dd>> = (0..=b.len()).map(by).collect();
    (all[0].value.to_f64(), all.iter().map(|d| d.slope.to_f64()).collect())
}
