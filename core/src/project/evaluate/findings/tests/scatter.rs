//! Scatter that grows, and weights that do not follow from it.

use super::bench::{Bench, LINE, caught, noted, plant, quiet, tiny};
use crate::{
    fit::Weights,
    numerics::streams::Stream,
    project::{columns::ColumnSpec, evaluate::Severity, plan::Limits},
};

fn funnel(design: (u32, u32), sd: impl Fn(f64) -> f64 + Copy) -> impl Fn(&mut Stream) -> Bench {
    move |stream| Bench::new().cycles(design, false, |x, _| 50.0 * x + sd(x) * stream.normal()).family(LINE)
}

/// SD growing in proportion, 11-fold over 11 × 3.
#[test]
fn growing_scatter_is_caught() {
    caught("spread", funnel((11, 3), |x| 0.05 * x));
    // A factor of 1.4, certain with 11 × 100, is no reason for weights.
    tiny("spread", funnel((11, 100), |x| 0.05 * (1.0 + 0.04 * (x - 1.0))));
    quiet("spread", funnel((11, 3), |_| 0.05));
}

/// 8 × 1 with even scatter, weights 1/x² chosen.
#[test]
fn weights_without_a_sign_of_growing_scatter_are_caught() {
    let even = |spec: ColumnSpec, design: (u32, u32)| {
        move |stream: &mut Stream| {
            let y = |x: f64, noise: f64| 50.0 * x + noise;
            Bench::new().cycles(design, false, |x, _| y(x, stream.normal())).choose(spec.clone())
        }
    };
    let by = |weights| ColumnSpec { weights, ..ColumnSpec::plain(LINE) };
    caught("weights-unproven", even(by(Weights::InverseX2), (8, 1)));
    for weights in [Weights::InverseX, Weights::InverseY, Weights::InverseY2] {
        caught("weights-unproven", even(by(weights), (8, 1)));
    }
    // Repeats can tell; equal weights claim nothing; a column that nobody chose is only shown.
    assert_eq!(plant("weights-unproven", even(by(Weights::InverseX2), (8, 2))).any(), 0);
    assert_eq!(plant("weights-unproven", even(by(Weights::Equal), (8, 1))).any(), 0);
    let met = plant("weights-unproven", |stream| {
        let mut bench = even(by(Weights::InverseX2), (8, 1))(stream);
        bench.project.choice = None;
        bench
    });
    assert_eq!(met.any(), 0);
    // 20 × 1 with proportional scatter: the readings themselves ask for weights.
    let met = plant("weights-unproven", |stream| {
        let noisy = |x: f64, z: f64| 50.0 * x * (1.0 + 0.05 * z);
        Bench::new().cycles((20, 1), false, |x, _| noisy(x, stream.normal())).choose(by(Weights::InverseX2))
    });
    assert!(met.loud() <= 40, "{met:?}");
}

#[test]
fn raw_weights_from_few_repeats_are_caught() {
    let raw = |repeats: u32| {
        move |stream: &mut Stream| {
            Bench::new().cycles((5, repeats), false, |x, _| 50.0 * x + stream.normal()).weighted(LINE, Weights::Raw)
        }
    };
    let three = plant("weights-raw", raw(3));
    assert_eq!(three.look, three.runs);
    assert!(three.messages[0].contains("3 repeats") && three.messages[0].contains("6.3"), "{:?}", three.messages[0]);
    let four = raw(4)(&mut Stream::new(1, 1)).find("weights-raw").unwrap();
    assert!(four.message.contains("4 repeats") && four.message.contains("3.7"), "{four:?}");
    assert_eq!(raw(20)(&mut Stream::new(1, 1)).find("weights-raw"), None);
    // All repeats alike: no fit at all, and the reason is in the column.
    let coarse = Bench::new().cycles((5, 3), false, |x, _| 50.0 * x).weighted(LINE, Weights::Raw).evaluate();
    assert!(coarse.columns[0].outcome.as_ref().unwrap_err().contains("coarse"), "{:?}", coarse.columns[0].outcome);
}

/// Zeros off the line by 3 SD, weighed as the lowest standard.
#[test]
fn one_over_x_at_zero_is_caught() {
    let with_zero = |off: f64, weights: Weights| {
        move |stream: &mut Stream| {
            let mut bench = Bench::new();
            for i in 0..18 {
                let x = f64::from(i % 6);
                let lift = if x == 0.0 { off } else { 0.0 };
                bench.apply(x, &[50.0 * x + lift + stream.normal()]);
            }
            bench.weighted(LINE, weights)
        }
    };
    let met = caught("weight-at-zero", with_zero(3.0, Weights::InverseX2));
    assert!(met.messages[0].contains("as if they were taken at 1 kN"), "{:?}", met.messages[0]);
    assert!(plant("weight-at-zero", with_zero(0.0, Weights::InverseX)).any() == 200);
    assert_eq!(with_zero(3.0, Weights::Equal)(&mut Stream::new(1, 1)).find("weight-at-zero"), None);
    assert_eq!(with_zero(3.0, Weights::InverseY2)(&mut Stream::new(1, 1)).find("weight-at-zero"), None);
}

/// 5 × 3, one look at the top standard's applications and sixteen at the others.
#[test]
fn means_of_few_and_of_many_looks_are_told_apart() {
    let uneven = |few: usize, own: f64| {
        move |stream: &mut Stream| {
            let mut bench = Bench::new();
            for i in 0..15 {
                let x = f64::from(i % 5 + 1);
                let centre = 50.0 * x + own * stream.normal();
                let looks = if i % 5 == 4 { few } else { 16 };
                let values: Vec<f64> = (0..looks).map(|_| centre + stream.normal()).collect();
                bench.apply(x, &values);
            }
            bench.family(LINE)
        }
    };
    // Without limits the move is about U/5, so about half of them are notes.
    let met = plant("unequal-means", uneven(1, 0.0));
    assert!(met.any() * 10 >= met.runs * 8 && met.look * 10 >= met.runs * 3, "{met:?}");
    caught("unequal-means", |stream| {
        let mut bench = uneven(1, 0.0)(stream);
        bench.project.plan.limits = Some(Limits::Absolute(0.01));
        bench
    });
    // Applications that differ by themselves make looks cheap; equal numbers of looks are equal.
    assert!(plant("unequal-means", uneven(1, 3.0)).any() <= 10);
    assert_eq!(plant("unequal-means", uneven(16, 0.0)).any(), 0);
}

#[test]
fn applications_that_differ_by_more_than_their_looks_are_noted() {
    let made = |applications: u32, own: f64| {
        move |stream: &mut Stream| {
            let mut bench = Bench::new();
            for i in 0..5 * applications {
                let x = f64::from(i % 5 + 1);
                let centre = 50.0 * x + own * stream.normal();
                let looks: Vec<f64> = (0..4).map(|_| centre + stream.normal()).collect();
                bench.apply(x, &looks);
            }
            bench.family(LINE)
        }
    };
    noted("applications-scatter", made(3, 1.5));
    assert!(plant("applications-scatter", made(3, 0.0)).any() <= 20);
    let met = plant("applied-once", made(1, 0.0));
    assert_eq!(met.look, met.runs);
    assert!(met.messages[0].contains("5 standards") && met.messages[0].contains("4 times"));
    assert_eq!(plant("applied-once", made(2, 0.0)).any(), 0);
    let one = made(2, 0.0)(&mut Stream::new(1, 1)).evaluate();
    let about = ["looks-averaged", "applications-scatter", "applied-once"];
    assert_eq!(one.findings.iter().filter(|f| about.contains(&f.code)).count(), 1);
    assert!(one.findings.iter().all(|f| f.code != "looks-averaged" || f.severity == Severity::Note));
}
