//! Ratios of quadratic forms against closed forms and an independent integral.

use super::quadratic_form::{ratio_moments, ratio_tails, residual_eigenvalues};
use proptest::prelude::*;
use serde_json::Value;

const VALUES: &str = include_str!("../../../tests/published/quadratic-forms/values.json");

/// Both tails against Imhof's integral with 60 digits (tests/published/quadratic-forms/SOURCE.md).
#[test]
fn agrees_with_the_integral_of_imhof() {
    let table: Value = serde_json::from_str(VALUES).unwrap();
    let (mut worst, mut smallest, mut compared) = (0.0_f64, 1.0_f64, 0);
    for row in table["rows"].as_array().unwrap() {
        let eigenvalues: Vec<f64> =
            row["eigenvalues"].as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect();
        let found = ratio_tails(&eigenvalues, row["d"].as_f64().unwrap());
        let exact = |key: &str| row[key].as_str().unwrap().parse::<f64>().unwrap();
        let pairs = [(found.lower, exact("lower")), (found.upper, exact("upper"))];
        let small = usize::from(pairs[1].1 < pairs[0].1);
        let relative = (pairs[small].0 / pairs[small].1 - 1.0).abs();
        assert!(relative < 2e-12, "{row}: {found:?}, {relative:e}");
        assert!((pairs[1 - small].0 - pairs[1 - small].1).abs() < 1e-14, "{row}: {found:?}");
        worst = worst.max(relative);
        smallest = smallest.min(pairs[small].1);
        compared += 1;
    }
    println!("{compared} places, worst relative error of the smaller tail {worst:e}, smallest tail {smallest:e}");
    assert!(compared >= 30 && smallest < 1e-12);
}

/// Two eigenvalues: the arcsine law, P(D ≤ d) = (2/π) asin √((d − λ₁)/(λ₂ − λ₁)).
#[test]
fn two_eigenvalues_give_the_arcsine_law() {
    for share in [1e-9_f64, 1e-3, 0.2, 0.5, 0.77, 0.999] {
        let exact = 2.0 / std::f64::consts::PI * share.sqrt().asin();
        let found = ratio_tails(&[1.0, 3.0], 1.0 + 2.0 * share);
        assert!((found.lower / exact - 1.0).abs() < 1e-7_f64.min(1e-14 / share + 1e-12), "{share}: {found:?}");
    }
}

/// k eigenvalues 1 and m eigenvalues 0: D is beta distributed with k/2 and m/2.
#[test]
fn ones_and_zeros_give_the_beta_distribution() {
    for (k, m) in [(1, 1), (1, 4), (2, 3), (7, 5), (40, 60), (250, 240)] {
        let mut eigenvalues = vec![1.0; k];
        eigenvalues.extend(vec![0.0; m]);
        for d in [0.01, 0.3, 0.5, 0.55, 0.9] {
            let found = ratio_tails(&eigenvalues, d);
            let exact = super::beta_lower(d, k as f64 / 2.0, m as f64 / 2.0);
            let other = super::beta_lower(1.0 - d, m as f64 / 2.0, k as f64 / 2.0);
            for (found, exact) in [(found.lower, exact), (found.upper, other)] {
                assert!((found - exact).abs() <= 1e-11 * exact.max(1e-280) + 1e-15, "{k} {m} {d}: {found:e} {exact:e}");
                let relative = if exact > 1e-14 { found / exact - 1.0 } else { 0.0 };
                assert!(relative.abs() < 1e-9 || exact > 0.99, "{k} {m} {d}: {relative:e}");
            }
        }
    }
}

#[test]
fn one_eigenvalue_and_places_outside_are_certain() {
    let tails = |l: &[f64], d: f64| {
        let t = ratio_tails(l, d);
        (t.lower, t.upper)
    };
    assert_eq!(tails(&[2.0], 1.0), (0.0, 1.0));
    assert_eq!(tails(&[2.0], 3.0), (1.0, 0.0));
    assert_eq!(tails(&[2.0], 2.0), (1.0, 1.0));
    assert_eq!(tails(&[1.0, 3.0], 0.9), (0.0, 1.0));
    assert_eq!(tails(&[1.0, 3.0], 3.0), (1.0, 0.0));
    assert!(tails(&[], 1.0).0.is_nan() && tails(&[1.0, f64::NAN], 1.0).0.is_nan());
    assert!(tails(&[1.0, 2.0], f64::INFINITY).1.is_nan());
}

/// Without columns they are those of the matrix; the residual space of the constant leaves all but zero.
#[test]
fn eigenvalues_of_the_difference_matrix() {
    let n = 9;
    let differences = |v: &[f64]| {
        let at = |i: isize| v[i.clamp(0, n as isize - 1) as usize];
        (0..n as isize).map(|i| 2.0 * v[i as usize] - at(i - 1) - at(i + 1)).collect()
    };
    let known = |i: usize| 2.0 * (1.0 - (std::f64::consts::PI * i as f64 / n as f64).cos());
    let whole = residual_eigenvalues(n, differences, &[]);
    assert!(whole.iter().enumerate().all(|(i, l)| (l - known(i)).abs() < 1e-13), "{whole:?}");
    let constant = vec![1.0 / 3.0; n];
    let rest = residual_eigenvalues(n, differences, std::slice::from_ref(&constant));
    assert_eq!(rest.len(), n - 1);
    assert!(rest.iter().enumerate().all(|(i, l)| (l - known(i + 1)).abs() < 1e-13), "{rest:?}");
    assert!(residual_eigenvalues(1, |v| v.to_vec(), &[vec![1.0]]).is_empty());
}

/// Negative eigenvalues are not mistaken for the zeros of the projection.
#[test]
fn a_matrix_of_both_signs_keeps_its_residual_eigenvalues() {
    let flip = |v: &[f64]| v.iter().enumerate().map(|(i, v)| if i % 2 == 0 { *v } else { -*v }).collect();
    let first = vec![1.0, 0.0, 0.0, 0.0];
    let found = residual_eigenvalues(4, flip, std::slice::from_ref(&first));
    assert!(found.iter().zip([-1.0, -1.0, 1.0]).all(|(a, b)| (a - b).abs() < 1e-14), "{found:?}");
}

/// Uniform on [0, 1] when λ = 1, 1, 0, 0: mean ½, variance 1/12.
#[test]
fn moments() {
    let (mean, variance) = ratio_moments(2.0, 2.0, 4);
    assert!((mean - 0.5).abs() < 1e-15 && (variance - 1.0 / 12.0).abs() < 1e-15);
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(100))]

    #[test]
    fn tails_are_probabilities_that_follow_d(
        eigenvalues in proptest::collection::vec(-5.0..5.0_f64, 1..40),
        d in -6.0..6.0_f64,
        step in 1e-6..1.0_f64,
    ) {
        let (here, there) = (ratio_tails(&eigenvalues, d), ratio_tails(&eigenvalues, d + step));
        prop_assert!((here.lower + here.upper - 1.0).abs() < 1e-12);
        prop_assert!(here.lower <= there.lower * (1.0 + 1e-10) + 1e-300);
        prop_assert!(there.upper <= here.upper * (1.0 + 1e-10) + 1e-300);
        let mirrored: Vec<f64> = eigenvalues.iter().map(|l| -l).collect();
        let turned = ratio_tails(&mirrored, -d);
        prop_assert!((turned.upper - here.lower).abs() <= 1e-11 * here.lower + 1e-15);
    }

    #[test]
    fn nothing_panics(eigenvalues in proptest::collection::vec(any::<f64>(), 0..6), d in any::<f64>()) {
        let tails = ratio_tails(&eigenvalues, d);
        prop_assert!(tails.lower.is_nan() || (0.0..=1.0).contains(&tails.lower));
    }
}
