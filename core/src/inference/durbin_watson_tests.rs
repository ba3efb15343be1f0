//! Durbin and Watson's d against published bounds, its size by simulation, and its two methods.

use super::*;
use crate::convert::reference::{assert_rate, fitted, simulated};
use crate::fit::{self, Point, Weights};
use crate::model::Family;
use crate::numerics::streams::Stream;

fn counted(n: usize) -> Vec<f64> {
    (0..n).map(|i| i as f64).collect()
}

/// A line or quadratic over six to 33 observations: exact p rejects 5 and 1 times in 100, both ways.
#[test]
fn the_exact_p_has_its_size() {
    const RUNS: usize = 4000;
    for (number, (design, degree)) in
        (0..).zip([((6, 1), 1), ((6, 1), 2), ((7, 1), 1), ((11, 1), 1), ((5, 3), 1), ((11, 3), 1)])
    {
        let mut stream = Stream::new(61, number);
        let mut clean = || fitted(Family::Polynomial(degree), &simulated(&mut stream, design, |x| x, |_| 1.0));
        let reference = DurbinWatsonReference::new(&clean(), &counted(design.0 * design.1)).unwrap();
        let mut hits = [0; 4];
        for _ in 0..RUNS {
            let found = durbin_watson(&clean(), &reference).unwrap();
            assert_eq!(found.method, Method::Exact);
            hits[0] += usize::from(found.p <= 0.05);
            hits[1] += usize::from(found.p <= 0.01);
            hits[2] += usize::from(found.p_alike <= 0.05);
            hits[3] += usize::from(found.p_alike <= 0.01);
        }
        println!("{design:?} degree {degree}: {:?}", hits.map(|h| h as f64 / RUNS as f64));
        for (count, size) in hits.into_iter().zip([0.05, 0.01, 0.05, 0.01]) {
            assert_rate(count, RUNS, size);
        }
    }
}

/// The lower and upper bounds of the 5 % points have the eigenvalues 2(1 − cos(πi/n)) left when p of them
/// are taken away at the upper or the lower end: tests/published/durbin-watson/SOURCE.md.
#[test]
fn published_bounds_are_five_per_cent_points() {
    let table: serde_json::Value =
        serde_json::from_str(include_str!("../../../tests/published/durbin-watson/bounds.json")).unwrap();
    for row in table["rows"].as_array().unwrap() {
        let whole = |i: usize| row[i].as_u64().unwrap() as usize;
        let (n, regressors) = (whole(0), whole(1));
        let all: Vec<f64> = (1..n).map(|i| 2.0 * (1.0 - (std::f64::consts::PI * i as f64 / n as f64).cos())).collect();
        for (bound, kept) in [(2, &all[..n - 1 - regressors]), (3, &all[regressors..])] {
            let printed: f64 = row[bound].as_str().unwrap().parse().unwrap();
            let half = 0.5 * 10.0_f64.powi(-(row[bound].as_str().unwrap().split_once('.').unwrap().1.len() as i32));
            let p = |d: f64| ratio_tails(kept, d).lower;
            // Half a last digit, and as much again for the tables' own error.
            assert!(p(printed - 2.0 * half) < 0.05 && 0.05 < p(printed + 2.0 * half), "{row}: {}", p(printed));
        }
    }
}

#[test]
fn neighbours_that_copy_each_other_are_seen() {
    let mut stream = Stream::new(62, 0);
    let mut last = 0.0;
    let points: Vec<Point> = (0..30)
        .map(|i| {
            last = 0.9 * last + stream.normal();
            let x = f64::from(i * 7 % 30);
            Point { x, y: 3.0 * x + last }
        })
        .collect();
    let fit = fitted(Family::Polynomial(1), &points);
    let found = durbin_watson(&fit, &DurbinWatsonReference::new(&fit, &counted(30)).unwrap()).unwrap();
    assert!(found.d < 1.0 && found.p_alike < 1e-3 && (found.p / found.p_alike - 2.0).abs() < 1e-12, "{found:?}");
    // Backwards in time is the same neighbourhood.
    let backwards: Vec<f64> = counted(30).iter().map(|o| -o).collect();
    let again = durbin_watson(&fit, &DurbinWatsonReference::new(&fit, &backwards).unwrap()).unwrap();
    assert!((again.d - found.d).abs() < 1e-12 && (again.p / found.p - 1.0).abs() < 1e-9);
}

/// Points shuffled together with their order keep d and p, weights included.
#[test]
fn the_order_counts_not_the_file() {
    let mut stream = Stream::new(63, 0);
    let points = simulated(&mut stream, (6, 2), |x| 2.0 * x, |x| 0.1 * x);
    let order: Vec<f64> = (0..12).map(|i| f64::from(i * 5 % 12)).collect();
    let shuffled: Vec<usize> = (0..12).map(|i| i * 7 % 12).collect();
    let p = |points: &[Point], order: &[f64]| {
        let fit = fit::fit(&Family::Polynomial(1), points, Weights::InverseX2).unwrap();
        durbin_watson(&fit, &DurbinWatsonReference::new(&fit, order).unwrap()).unwrap()
    };
    let first = p(&points, &order);
    let moved: Vec<Point> = shuffled.iter().map(|&i| points[i]).collect();
    let moved_order: Vec<f64> = shuffled.iter().map(|&i| order[i]).collect();
    let second = p(&moved, &moved_order);
    assert!((first.d - second.d).abs() < 1e-12 && (first.p / second.p - 1.0).abs() < 1e-9);
}

/// At 500 observations the beta distribution is within 1e-4 of the exact one, and both follow d.
#[test]
fn the_beta_approximation_takes_over_smoothly() {
    let points = simulated(&mut Stream::new(64, 0), (501, 1), |x| x, |_| 1.0);
    let long = fitted(Family::Polynomial(2), &points);
    let reference = DurbinWatsonReference::new(&long, &counted(501)).unwrap();
    assert_eq!(durbin_watson(&long, &reference).unwrap().method, Method::Beta);

    let short = fitted(Family::Polynomial(2), &points[..500]);
    let exact_reference = DurbinWatsonReference::new(&short, &counted(500)).unwrap();
    let approximate =
        DurbinWatsonReference { order: (0..500).collect(), shape: beta(500, short.orthonormal_columns()).unwrap() };
    for d in [1.7, 1.8, 1.9, 2.0, 2.1, 2.2] {
        let (a, b) = (exact_reference.tails(d), approximate.tails(d));
        assert!((a.lower - b.lower).abs() < 1e-4, "{d}: {a:?} {b:?}");
        assert!((a.lower + a.upper - 1.0).abs() < 1e-12 && (b.lower + b.upper - 1.0).abs() < 1e-9);
    }
}

/// The traces of the beta approximation are the power sums of the eigenvalues.
#[test]
fn traces_are_sums_of_eigenvalues() {
    let fit = fitted(Family::Polynomial(3), &simulated(&mut Stream::new(65, 0), (12, 1), |x| x, |_| 1.0));
    let Some(Distribution::Exact(l)) = exact(12, fit.orthonormal_columns()) else { panic!("exact") };
    let (t1, t2) = (l.iter().sum::<f64>(), dot(&l, &l));
    let (mean, variance) = ratio_moments(t1, t2, 8);
    let Some(Distribution::Beta(a, b)) = beta(12, fit.orthonormal_columns()) else { panic!("beta") };
    assert!((4.0 * a / (a + b) - mean).abs() < 1e-12);
    assert!((16.0 * a * b / ((a + b).powi(2) * (a + b + 1.0)) - variance).abs() < 1e-12);
}

#[test]
fn without_an_order_or_freedom_there_is_nothing() {
    let points = simulated(&mut Stream::new(66, 0), (6, 1), |x| x, |_| 1.0);
    let fit = fitted(Family::Polynomial(1), &points);
    for order in [vec![], vec![1.0], vec![f64::NAN; 6], vec![0.0, 1.0, 2.0, 3.0, 4.0, 4.0]] {
        assert_eq!(DurbinWatsonReference::new(&fit, &order), None, "{order:?}");
    }
    let three = fitted(Family::Polynomial(1), &points[..3]);
    assert_eq!(DurbinWatsonReference::new(&three, &counted(3)), None);
    let exact: Vec<Point> = (1..7).map(|i| Point { x: f64::from(i), y: 0.3 * f64::from(i) }).collect();
    let perfect = fitted(Family::Polynomial(1), &exact);
    let reference = DurbinWatsonReference::new(&perfect, &counted(6)).unwrap();
    assert_eq!(durbin_watson(&perfect, &reference), None);
}
