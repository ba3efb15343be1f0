//! W against the first published example and its edges; a general library: inference/reference_tests.rs.

use super::shapiro_wilk;
use crate::numerics::streams::Stream;
use serde_json::Value;

/// Weights of eleven men, W = 0.79: tests/published/shapiro-wilk/SOURCE.md.
#[test]
fn published_example() {
    let example: Value =
        serde_json::from_str(include_str!("../../../tests/published/shapiro-wilk/example.json")).unwrap();
    let values: Vec<f64> = example["values"].as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect();
    let printed: f64 = example["w"].as_str().unwrap().parse().unwrap();
    let found = shapiro_wilk(&values).unwrap();
    assert!((found.w - printed).abs() < 0.005 && found.p < 0.01, "{found:?}");
}

/// Three values: W = 3/4 when two coincide, 1 when equally spaced, and p is exact (uniform).
#[test]
fn three_values() {
    let two = shapiro_wilk(&[1.0, 1.0, 2.0]).unwrap();
    assert!((two.w - 0.75).abs() < 1e-15 && two.p < 1e-7);
    let even = shapiro_wilk(&[1.0, 2.0, 3.0]).unwrap();
    assert!((even.w - 1.0).abs() < 1e-15 && (even.p - 1.0).abs() < 1e-7);
}

/// Clean samples of every regime: p is uniform at 5 and 1 in 100 (Royston's own accuracy is about 2 %).
#[test]
fn clean_samples_are_suspected_at_the_nominal_rate() {
    const RUNS: usize = 10_000;
    for n in [3, 5, 11, 12, 50, 400] {
        let mut stream = Stream::new(31, n);
        let mut hits = [0, 0];
        for _ in 0..RUNS {
            let sample: Vec<f64> = (0..n).map(|_| stream.normal()).collect();
            let p = shapiro_wilk(&sample).unwrap().p;
            hits[0] += usize::from(p <= 0.05);
            hits[1] += usize::from(p <= 0.01);
        }
        let [five, one] = hits.map(|h| h as f64 / RUNS as f64);
        println!("n = {n}: {five} {one}");
        assert!((five - 0.05).abs() < 0.009 && (one - 0.01).abs() < 0.004, "n = {n}: {five} {one}");
    }
}

#[test]
fn neither_offset_nor_unit_nor_sign_nor_order_matters() {
    let values = [0.0, 0.25, 0.5, 1.0, 1.125, 2.0, 4.0, 8.5];
    let first = shapiro_wilk(&values).unwrap();
    let same = |values: Vec<f64>| {
        let found = shapiro_wilk(&values).unwrap();
        assert!((found.w - first.w).abs() < 1e-14 && (found.p / first.p - 1.0).abs() < 1e-12, "{found:?} {first:?}");
    };
    same(values.iter().map(|v| v + 1e9).collect());
    same(values.iter().map(|v| v * 1e-300).collect());
    same(values.iter().map(|v| v * 2e307).collect());
    same(values.iter().map(|v| -v).collect());
    same(values.iter().rev().copied().collect());
}

#[test]
fn outside_its_sizes_there_is_no_test() {
    let climbing = |n: usize| (0..n).map(|i| i as f64).collect::<Vec<f64>>();
    assert_eq!(shapiro_wilk(&climbing(2)), None);
    assert!(shapiro_wilk(&climbing(5000)).is_some());
    assert_eq!(shapiro_wilk(&climbing(5001)), None);
    assert_eq!(shapiro_wilk(&[3.3; 10]), None);
    assert_eq!(shapiro_wilk(&[1.0, 2.0, f64::NAN, 3.0]), None);
    assert_eq!(shapiro_wilk(&[1.0, 2.0, f64::INFINITY, 3.0]), None);
    // One value far from many equal ones: W at its smallest, p far out, both finite.
    let mut lone = vec![0.0; 11];
    lone[3] = 1.0;
    let found = shapiro_wilk(&lone).unwrap();
    assert!(found.w > 0.0 && found.p < 1e-5);
}
