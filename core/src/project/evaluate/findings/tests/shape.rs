//! The wrong shape, too few points, nothing left over, too many terms.

use super::bench::{Bench, LINE, QUADRATIC, caught, noted, plant, quiet, tiny};
use crate::{
    model::Family,
    numerics::streams::Stream,
    project::{evaluate::Severity, plan::Limits},
};

/// A parabola that departs from its own best line over 1 … `levels` by `bend` in the middle and at the ends.
fn arch(levels: f64, bend: f64) -> impl Fn(f64) -> f64 {
    move |x| {
        let t = (2.0 * x - levels - 1.0) / (levels - 1.0);
        2.0 * bend * t * t
    }
}

fn bent(design: (u32, u32), slope: f64, bend: f64) -> impl Fn(&mut Stream) -> Bench {
    move |stream| {
        let arch = arch(f64::from(design.0), bend);
        Bench::new().cycles(design, false, |x, _| slope * x + arch(x) + stream.normal()).family(LINE)
    }
}

/// Bend in SDs of one reading. 5 × 3: 1.5; 11 × 1: 2.5.
#[test]
fn a_bend_is_caught_and_r_squared_answered() {
    let met = caught("shape", bent((5, 3), 200.0, 1.5));
    assert!(met.messages.iter().all(|m| m.contains("R² = 0.9")), "{:?}", met.messages.first());
    caught("shape", bent((11, 1), 200.0, 2.5));
    // A small R² proves nothing to anybody, and is not spoken of.
    let met = plant("shape", bent((11, 3), 0.5, 1.5));
    assert!(met.messages.iter().any(|m| !m.contains("R²")));
}

/// 10 levels, 300 repeats each: a bend of 0.1 SD is certain and below U/5 ≈ 0.4 SD.
#[test]
fn a_tiny_bend_is_a_note() {
    tiny("shape", bent((10, 300), 200.0, 0.1));
    // Limits of ±0.5 kN make U/5 irrelevant: 1.5 SD are 0.0075 kN.
    tiny("shape", |stream| {
        let mut bench = bent((5, 3), 200.0, 2.0)(stream);
        bench.project.plan.limits = Some(Limits::Absolute(0.5));
        bench
    });
}

/// Four levels under narrow limits, and three under none.
#[test]
fn too_few_points_never_pass() {
    noted("too-few", |stream| {
        let mut bench = bent((6, 1), 200.0, 0.0)(stream);
        bench.project.plan.limits = Some(Limits::Absolute(0.004));
        bench
    });
    let bench = bent((3, 2), 200.0, 0.0)(&mut Stream::new(1, 1));
    let found = bench.find("too-few").unwrap();
    assert!(found.severity == Severity::Note && found.message.contains("3 different standards"), "{found:?}");
    let few = bent((6, 1), 200.0, 0.0)(&mut Stream::new(2, 1));
    let mut narrow = few.clone();
    narrow.project.plan.limits = Some(Limits::Absolute(1e-4));
    let caption = |b: &Bench| b.evaluate().columns[0].captions.residuals.text.clone();
    assert_eq!(
        (caption(&few).as_str(), caption(&narrow).as_str()),
        ("cloud: only scatter is left", "too few points to tell")
    );
    let figure = narrow.evaluate().columns[0].figures.iter().find(|f| f.key == "leftover_bend").unwrap().text.clone();
    assert_eq!(figure, "too few points");
}

#[test]
fn nothing_left_over_shows_nothing() {
    for (levels, family) in [(2, LINE), (3, QUADRATIC)] {
        let bench = Bench::new().cycles((levels, 1), false, |x, _| 3.0 * x + 0.1 * x * x).family(family);
        let found = bench.find("nothing-left").unwrap();
        assert_eq!(found.severity, Severity::Look);
        assert!(found.message.contains(&format!("{levels} applications for {levels} coefficients")), "{found:?}");
    }
    let enough = Bench::new().cycles((3, 1), false, |x, _| 3.0 * x + 0.1 * x * x).family(LINE);
    assert_eq!(enough.find("nothing-left"), None);
}

/// A polynomial of degree 5 through 8 × 1 of a straight line.
#[test]
fn the_extra_bend_that_follows_the_noise_is_caught() {
    let straight = |family: Family, design: (u32, u32)| {
        move |stream: &mut Stream| {
            Bench::new().cycles(design, false, |x, _| 200.0 * x + stream.normal()).family(family.clone())
        }
    };
    caught("too-many-terms", straight(Family::Polynomial(5), (8, 1)));
    caught("too-many-terms", straight(Family::Polynomial(3), (5, 2)));
    // 300 repeats: the extra bend is real in no run, and too small to matter in any.
    tiny("too-many-terms", straight(QUADRATIC, (5, 60)));
    let met = plant("too-many-terms", straight(LINE, (6, 1)));
    assert_eq!(met.any(), 0, "never on the line");
}

#[test]
fn a_needed_bend_is_not_called_noise() {
    let met = quiet("too-many-terms", |stream| {
        let arch = arch(6.0, 5.0);
        Bench::new().cycles((6, 1), false, |x, _| 200.0 * x + arch(x) + stream.normal()).family(QUADRATIC)
    });
    assert!(met.any() <= 10, "{met:?}");
}

/// 100 … 101 with degree 3.
#[test]
fn powers_that_are_nearly_the_same_are_noted() {
    let near = |offset: f64| {
        move |stream: &mut Stream| {
            let mut bench = Bench::new();
            for i in 0..24 {
                let t = f64::from(i % 8) / 7.0;
                bench.apply(offset + t, &[5.0 * t + 3.0 * t * t * t + 1e-3 * stream.normal()]);
            }
            bench.family(Family::Polynomial(3))
        }
    };
    let met = plant("powers-alike", near(100.0));
    assert_eq!((met.note, met.loud()), (met.runs, 0));
    let other = near(300.0)(&mut Stream::new(1, 1)).find("powers-alike").unwrap();
    assert_ne!(met.messages[0], other.message);
    assert_eq!(near(0.0)(&mut Stream::new(1, 1)).find("powers-alike"), None);
}
