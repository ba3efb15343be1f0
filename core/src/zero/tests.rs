//! Detection limits against tables, closed forms, laws and simulation.

use super::asked::{Absent, Asked, Basis, Side, Zeros};
use super::band::ZeroBand;
use super::detection::{Detection, sides};
use crate::convert::reference::{assert_rate, fitted};
use crate::fit::{self, Fit, Point, Weights};
use crate::model::Family;
use crate::numerics::streams::Stream;

const ASKED: Asked = Asked { alpha: 0.05, beta: 0.05, k: 1, basis: Basis::Zeros };

/// A curve known exactly: y = f(x) at 0…10 without scatter.
fn known(degree: u8, f: impl Fn(f64) -> f64, from: i32) -> Fit {
    let points: Vec<Point> = (from..=10).map(f64::from).map(|x| Point { x, y: f(x) }).collect();
    fitted(Family::Polynomial(degree), &points)
}

fn wobbling(f: impl Fn(f64) -> f64) -> Vec<Point> {
    let wobble = [0.3, -1.1, 0.9, 0.4, -0.8, 0.7, -0.4, 0.2];
    (0..8).map(|i| Point { x: f64::from(i), y: f(f64::from(i)) + 0.1 * wobble[i as usize] }).collect()
}

fn zeros_of(n: usize) -> Vec<f64> {
    (0..n).map(|i| 0.05 * f64::from([3, -4, 1, -2, 5, -1, 2, 0][i % 8])).collect()
}

fn with<'a>(band: &'a ZeroBand) -> Zeros<'a> {
    Zeros { count: band.n, band: Some(band) }
}

fn above<'a>(fit: &'a Fit, band: &'a ZeroBand, asked: Asked) -> Detection<'a> {
    Detection::new(fit, with(band), asked, Side::Above).unwrap()
}

/// t, δ and 2t for n zeros, α = β = 0.05: n = 3 2.920 5.516 5.840; 4 2.353 4.456 4.707; 6 2.015 3.870
/// 4.030; 10 1.833 3.575 3.666; 20 1.729 3.415 3.458. Noncentral t, own calculation.
#[test]
fn the_multipliers_of_few_zeros() {
    let fit = known(1, |x| 2.0 * x, 0);
    for (n, t, delta, twice) in [
        (3, 2.920, 5.516, 5.840),
        (4, 2.353, 4.456, 4.707),
        (6, 2.015, 3.870, 4.030),
        (10, 1.833, 3.575, 3.666),
        (20, 1.729, 3.415, 3.458),
    ] {
        let band = ZeroBand::new(&zeros_of(n), 0.95).unwrap();
        let limits = above(&fit, &band, ASKED).limits;
        let unit = band.sd * (1.0 + 1.0 / n as f64).sqrt();
        let multiple = |x: Option<f64>| 2.0 * x.unwrap() / unit;
        assert!(((limits.decision_threshold - band.mean) / unit - t).abs() < 1e-3);
        assert!((multiple(limits.critical_value) - t).abs() < 1e-3);
        assert!((multiple(limits.detection_limit) - delta).abs() < 1e-3);
        assert!((multiple(limits.assured) - twice).abs() < 1e-3);
    }
}

/// 40 CFR 136 Appendix B: Student's t at 99 % for 7 replicates 3.143.
#[test]
fn the_regulators_multiple_and_the_simple_limit() {
    let fit = known(1, |x| 0.5 + 2.0 * x, 0);
    let band = ZeroBand::new(&zeros_of(7), 0.95).unwrap();
    let limits = above(&fit, &band, ASKED).limits;
    assert!((2.0 * limits.regulator.unwrap() / band.sd - 3.143).abs() < 5e-4);
    // The simple limit is absolute: here the curve starts 0.5 above the zeros and traces elsewhere.
    assert!((0.5 + 2.0 * limits.simple.unwrap() - band.next_reading.high).abs() < 1e-12);
    let net = 2.0 * limits.detection_limit.unwrap();
    assert!((0.5 + 2.0 * limits.traced.unwrap() - band.mean - net).abs() < 1e-12);
}

/// ISO 11843-2, 5.1 (equal variances): y_c = a + t·s√(1/K + 1/N + x̄²/S), x_d = δ·s/b·√(same).
#[test]
fn the_calibration_form_of_a_line() {
    let points = wobbling(|x| 1.0 + 2.0 * x);
    let fit = fitted(Family::Polynomial(1), &points);
    let asked = Asked { k: 3, basis: Basis::Calibration, ..ASKED };
    let none = Zeros { count: 0, band: None };
    let detection = Detection::new(&fit, none, asked, Side::Above).unwrap();
    let (a, b, s) = (fit.coefficients[0], fit.coefficients[1], fit.residual_sd.unwrap());
    let unit = s * (1.0 / 3.0 + 1.0 / 8.0 + 3.5 * 3.5 / 42.0_f64).sqrt();
    // t_{0.95, 6} = 1.9432, δ(6; 0.05, 0.05) = 3.7516 (noncentral t, recomputed).
    assert!((detection.limits.decision_threshold - a - 1.943_180_28 * unit).abs() < 1e-7);
    assert!((detection.limits.critical_value.unwrap() - 1.943_180_28 * unit / b).abs() < 1e-7);
    assert!((detection.limits.detection_limit.unwrap() * b / unit - 3.751_603_79).abs() < 1e-6);
    assert_eq!((detection.limits.simple, detection.limits.regulator), (None, None));
}

#[test]
fn on_the_decision_threshold_the_trial_is_the_detection_limit() {
    let band = ZeroBand::new(&zeros_of(6), 0.95).unwrap();
    let curves = [known(1, |x| 2.0 * x, 0), known(2, |x| 1.0 - 3.0 * x + 0.1 * x * x, 0)];
    for fit in &curves {
        for asked in [ASKED, Asked { k: 4, alpha: 0.01, beta: 0.1, ..ASKED }] {
            let detection = above(fit, &band, asked);
            let limits = detection.limits;
            let trial = detection.trial(limits.decision_threshold);
            let limit = limits.detection_limit.unwrap();
            assert!((trial.missed_at_most.unwrap() / limit - 1.0).abs() < 1e-9);
            assert!((trial.false_alarm - asked.alpha).abs() < 1e-9);
            let miss = detection.miss_probability(limit, limits.decision_threshold);
            assert!((miss - asked.beta).abs() < 1e-9);
        }
    }
}

#[test]
fn a_lower_threshold_alarms_more_and_misses_less() {
    let band = ZeroBand::new(&zeros_of(6), 0.95).unwrap();
    let fit = known(1, |x| 2.0 * x, 0);
    let detection = above(&fit, &band, ASKED);
    let trials: Vec<_> = (0..40).map(|i| detection.trial(band.mean + 0.02 * f64::from(i))).collect();
    for pair in trials.windows(2) {
        assert!(pair[1].false_alarm < pair[0].false_alarm);
        assert!(pair[1].missed_at_most.unwrap() >= pair[0].missed_at_most.unwrap());
        assert!(pair[1].traced.unwrap() > pair[0].traced.unwrap());
    }
    assert!((trials[0].false_alarm - 0.5).abs() < 1e-12 && trials[0].distance_sd == 0.0);
    let low = detection.trial(band.mean - 1.0);
    assert_eq!(low.missed_at_most, Some(0.0));
    assert_eq!(detection.trial(1e3).missed_at_most, None);
}

/// Where the output falls from zero the lower edge counts, and everything mirrors.
#[test]
fn a_falling_output_mirrors_a_rising_one() {
    let zeros = zeros_of(6);
    let fallen: Vec<f64> = zeros.iter().map(|z| -z).collect();
    let (up, down) = (ZeroBand::new(&zeros, 0.95).unwrap(), ZeroBand::new(&fallen, 0.95).unwrap());
    let (rising, falling) = (known(2, |x| 2.0 * x - 0.02 * x * x, 0), known(2, |x| -2.0 * x + 0.02 * x * x, 0));
    let (a, b) = (above(&rising, &up, ASKED).limits, above(&falling, &down, ASKED).limits);
    assert!((a.decision_threshold + b.decision_threshold).abs() < 1e-12);
    assert!(b.decision_threshold < down.mean);
    for (x, z) in [(a.detection_limit, b.detection_limit), (a.simple, b.simple), (a.high, b.high), (a.traced, b.traced)]
    {
        assert!((x.unwrap() - z.unwrap()).abs() < 1e-12);
    }
}

#[test]
fn zero_inside_the_interval_has_a_limit_on_either_side() {
    let band = ZeroBand::new(&zeros_of(6), 0.95).unwrap();
    let fit = known(1, |x| 2.0 * x, -10);
    assert_eq!(sides(&fit), [Side::Above, Side::Below]);
    let below = Detection::new(&fit, with(&band), ASKED, Side::Below).unwrap().limits;
    let up = above(&fit, &band, ASKED).limits;
    assert!((below.detection_limit.unwrap() + up.detection_limit.unwrap()).abs() < 1e-12);
    assert!(below.decision_threshold < band.mean && up.decision_threshold > band.mean);
}

#[test]
fn every_absence_has_its_reason() {
    let band = ZeroBand::new(&zeros_of(6), 0.95).unwrap();
    let line = known(1, |x| 2.0 * x, 0);
    let reason = |fit: &Fit, zeros: Zeros<'_>, asked: Asked| Detection::new(fit, zeros, asked, Side::Above).err();
    assert_eq!(reason(&line, Zeros { count: 0, band: None }, ASKED), Some(Absent::NoZeros));
    assert_eq!(reason(&line, Zeros { count: 2, band: None }, ASKED), Some(Absent::TooFewZeros { n: 2 }));
    let same = ZeroBand::new(&[1.0; 5], 0.95).unwrap();
    assert_eq!(reason(&line, with(&same), ASKED), Some(Absent::IdenticalZeros));
    let positive: Vec<Point> = (1..6).map(|i| Point { x: f64::from(i), y: f64::from(i * i) }).collect();
    let log = fitted(Family::Log, &positive);
    assert_eq!(reason(&log, with(&band), ASKED), Some(Absent::NoValueAtZero));
    let turning = known(2, |x| (x - 2.0).powi(2), 0);
    assert_eq!(reason(&turning, with(&band), ASKED), Some(Absent::TurnsBack));
    let two = fitted(Family::Polynomial(1), &positive[..2]);
    let calibration = Asked { basis: Basis::Calibration, ..ASKED };
    assert_eq!(reason(&two, with(&band), calibration), Some(Absent::NoScatter));
}

#[test]
fn a_weak_curve_does_not_reach_its_limit() {
    let band = ZeroBand::new(&zeros_of(6), 0.95).unwrap();
    let weak = known(1, |x| 0.01 * x, 0);
    let detection = above(&weak, &band, ASKED);
    assert_eq!(detection.limits.detection_limit, None);
    assert_eq!(detection.absent, Some(Absent::NotReached { up_to: 10.0 }));
}

/// SD growing with x beyond the lowest standard: the limit then lies further out, and its miss
/// probability is still β.
#[test]
fn growing_scatter_moves_the_limit_outwards() {
    let zeros: Vec<f64> = zeros_of(6).iter().map(|z| 3.0 * z).collect();
    let band = ZeroBand::new(&zeros, 0.95).unwrap();
    let points: Vec<Point> = (0..=20).map(|i| Point { x: 0.5 * f64::from(i), y: f64::from(i) }).collect();
    let even = fit::fit(&Family::Polynomial(1), &points, Weights::Equal).unwrap();
    let growing = fit::fit(&Family::Polynomial(1), &points, Weights::InverseX).unwrap();
    let (a, b) = (above(&even, &band, ASKED), above(&growing, &band, ASKED));
    let (x_even, x_growing) = (a.limits.detection_limit.unwrap(), b.limits.detection_limit.unwrap());
    assert!(x_even > 0.5 && x_growing > x_even, "{x_even} {x_growing}");
    assert!((b.miss_probability(x_growing, b.limits.decision_threshold) - 0.05).abs() < 1e-9);
    assert!(b.limits.assured.unwrap() > x_growing);
}

#[test]
fn scales_and_shifts_carry_through() {
    let zeros = zeros_of(6);
    let moved: Vec<f64> = zeros.iter().map(|z| 100.0 + 5.0 * z).collect();
    let (p, q) = (ZeroBand::new(&zeros, 0.95).unwrap(), ZeroBand::new(&moved, 0.95).unwrap());
    let line = wobbling(|x| 2.0 * x);
    let scaled: Vec<Point> = line.iter().map(|p| Point { x: 1e-3 * p.x, y: 100.0 + 5.0 * p.y }).collect();
    let (f, g) = (fitted(Family::Polynomial(1), &line), fitted(Family::Polynomial(1), &scaled));
    let (a, b) = (above(&f, &p, ASKED).limits, above(&g, &q, ASKED).limits);
    for (x, z) in [(a.detection_limit, b.detection_limit), (a.low, b.low), (a.assured, b.assured)] {
        assert!((1e-3 * x.unwrap() / z.unwrap() - 1.0).abs() < 1e-9);
    }
    assert!((100.0 + 5.0 * a.decision_threshold - b.decision_threshold).abs() < 1e-9);
}

/// (a) α at y_c; (b) β at the limit from the true SD and curve; (c) β at the assured limit with the
/// same zeros; (d) 0.0611 at the limit with s₀ for σ, n = 6. Known curve.
#[test]
fn rates_by_simulation() {
    const RUNS: usize = 20_000;
    const N: usize = 6;
    let fit = known(1, |x| 2.0 * x, 0);
    let mut stream = Stream::new(51, 0);
    let true_limit = 3.870 * 0.1 * (1.0 + 1.0 / N as f64).sqrt() / 2.0;
    let mut counts = [0_usize; 4];
    for _ in 0..RUNS {
        let zeros: Vec<f64> = (0..N).map(|_| 0.1 * stream.normal()).collect();
        let band = ZeroBand::new(&zeros, 0.95).unwrap();
        let limits = above(&fit, &band, ASKED).limits;
        let mut reading = |x: f64| 2.0 * x + 0.1 * stream.normal();
        counts[0] += usize::from(reading(0.0) > limits.decision_threshold);
        counts[1] += usize::from(reading(true_limit) <= limits.decision_threshold);
        counts[2] += usize::from(reading(limits.assured.unwrap()) <= limits.decision_threshold);
        counts[3] += usize::from(reading(limits.detection_limit.unwrap()) <= limits.decision_threshold);
    }
    for (count, expected) in counts.into_iter().zip([0.05, 0.05, 0.05, 0.0611]) {
        assert_rate(count, RUNS, expected);
    }
}
