//! Published data and small helpers shared by the tests of this layer.

use crate::fit::{self, Fit, Point, Weights};
use crate::model::Family;
use crate::numerics::streams::Stream;

/// Deflections of a load cell at 150 000 … 3 000 000 lb in steps of 150 000 lb, two runs.
/// NIST/ITL StRD, Pontius (P. Pontius, NIST, Load Cell Calibration); y column in print.
pub(crate) const PONTIUS: [f64; 40] = [
    0.11019, 0.21956, 0.32949, 0.43899, 0.54803, 0.65694, 0.76562, 0.87487, 0.98292, 1.09146, 1.20001, 1.30822,
    1.41599, 1.52399, 1.63194, 1.73947, 1.84646, 1.95392, 2.06128, 2.16844, 0.11052, 0.22018, 0.32939, 0.43886,
    0.54798, 0.65739, 0.76596, 0.87474, 0.98300, 1.09150, 1.20004, 1.30818, 1.41613, 1.52408, 1.63159, 1.73965,
    1.84696, 1.95445, 2.06177, 2.16829,
];

/// The load-cell data as points.
pub(crate) fn pontius() -> Vec<Point> {
    let load = |i: usize| 150_000.0 * (i % 20 + 1) as f64;
    PONTIUS.iter().enumerate().map(|(i, &y)| Point { x: load(i), y }).collect()
}

/// An ordinary fit that must succeed.
pub(crate) fn fitted(family: Family, points: &[Point]) -> Fit {
    fit::fit(&family, points, Weights::Equal).unwrap()
}

/// `levels` equally spaced standards, each `repeats` times, level by level, y = f(x) + sd(x)·normal.
pub(crate) fn simulated(
    stream: &mut Stream,
    (levels, repeats): (usize, usize),
    f: impl Fn(f64) -> f64,
    sd: impl Fn(f64) -> f64,
) -> Vec<Point> {
    (0..levels * repeats)
        .map(|i| {
            let x = (i / repeats + 1) as f64;
            Point { x, y: f(x) + sd(x) * stream.normal() }
        })
        .collect()
}

/// Asserts that `count` of `runs` agrees with the rate `expected` to within four Monte-Carlo SDs.
#[track_caller]
pub(crate) fn assert_rate(count: usize, runs: usize, expected: f64) {
    let rate = count as f64 / runs as f64;
    let sd = (expected * (1.0 - expected) / runs as f64).sqrt();
    assert!((rate - expected).abs() < 4.0 * sd, "rate {rate}, expected {expected} ± {sd}");
}
