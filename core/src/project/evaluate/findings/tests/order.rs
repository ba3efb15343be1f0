//! Drift, settling, hysteresis, order, readings that copy each other.

use super::bench::{Bench, LINE, caught, noted, plant, quiet, tiny};
use crate::{numerics::streams::Stream, project::evaluate::Severity, readings::Direction};

fn moving(design: (u32, u32), per_step: f64) -> impl Fn(&mut Stream) -> Bench {
    move |stream| {
        let y = |x: f64, place: f64, z: f64| 50.0 * x + per_step * place + z;
        Bench::new().cycles(design, true, |x, place| y(x, place, stream.normal())).family(LINE)
    }
}

/// 5 × 3 in cycles, drifting by 4 SD over the run.
#[test]
fn drift_is_caught() {
    caught("drift", moving((5, 3), 4.0 / 14.0));
    tiny("drift", moving((5, 500), 0.2 / 2499.0));
    quiet("drift", moving((5, 3), 0.0));
}

/// 5 × 4, level by level, creeping by 1.5 SD a reading.
#[test]
fn settling_is_caught() {
    let creeping = |repeats: u32, per_step: f64| {
        move |stream: &mut Stream| {
            let mut bench = Bench::new();
            for i in 0..5 * repeats {
                let x = f64::from(i / repeats + 1);
                let y = 50.0 * x + per_step * f64::from(i % repeats) + stream.normal();
                bench.apply(x, &[y]).order = Some(i + 1);
            }
            bench.family(LINE)
        }
    };
    caught("settling", creeping(4, 1.5));
    tiny("settling", creeping(60, 0.02));
    quiet("settling", creeping(4, 0.0));
}

/// 8 levels up and down once, 3 SD apart.
#[test]
fn hysteresis_is_caught() {
    let rounds = |cycles: u32| {
        let one = (1..=8).map(|i| (i, Direction::Rising)).chain((1..=8).rev().map(|i| (i, Direction::Falling)));
        (0..cycles).flat_map(move |_| one.clone())
    };
    let lagging = |cycles: u32, lag: f64| {
        move |stream: &mut Stream| {
            let mut bench = Bench::new();
            for (level, direction) in rounds(cycles) {
                let side = if direction == Direction::Rising { -0.5 } else { 0.5 };
                let x = f64::from(level);
                bench.apply(x, &[50.0 * x + side * lag + stream.normal()]).direction = direction;
            }
            bench.family(LINE)
        }
    };
    caught("hysteresis", lagging(1, 3.0));
    tiny("hysteresis", lagging(250, 0.15));
    quiet("hysteresis", lagging(1, 0.0));
}

#[test]
fn an_order_that_follows_the_level_hides_drift() {
    let met = plant("order-is-level", moving((6, 1), 0.0));
    assert_eq!(met.look, met.runs);
    let nine = moving((9, 1), 0.0)(&mut Stream::new(1, 1)).find("order-is-level").unwrap();
    assert!(nine.message.starts_with("9 standards") && met.messages[0].starts_with("6 standards"));
    assert_eq!(moving((6, 2), 0.0)(&mut Stream::new(1, 1)).find("order-is-level"), None);
    let mut zeros = moving((6, 1), 0.0)(&mut Stream::new(1, 1));
    zeros.zero(0.1);
    zeros.zero(0.2);
    assert_eq!(zeros.find("order-is-level"), None, "repeated zeros show a drift");
    // Two standards have no other order than theirs.
    assert_eq!(moving((2, 1), 0.0)(&mut Stream::new(1, 1)).find("order-is-level"), None);
}

/// 5 × 6 in cycles, neighbours with a correlation of 0.8.
#[test]
fn readings_that_copy_each_other_are_noted() {
    let alike = |r: f64| {
        move |stream: &mut Stream| {
            let mut memory = stream.normal();
            let y = |x: f64, stream: &mut Stream, memory: &mut f64| {
                *memory = r * *memory + (1.0 - r * r).sqrt() * stream.normal();
                50.0 * x + *memory
            };
            Bench::new().cycles((5, 6), true, |x, _| y(x, stream, &mut memory)).family(LINE)
        }
    };
    let met = noted_or_drift(alike(0.8));
    assert!(met >= 160, "{met}");
    assert!(plant("neighbours-alike", alike(0.0)).any() <= 8);
    noted("neighbours-alike", |stream| {
        // A slow swing: neither drift nor settling.
        let swing = |place: f64| 2.0 * libm::sin(place * 0.7);
        Bench::new().cycles((5, 6), true, |x, place| 50.0 * x + swing(place) + 0.7 * stream.normal()).family(LINE)
    });
}

/// A wandering instrument: readings copy each other, or it drifted.
fn noted_or_drift(make: impl Fn(&mut Stream) -> Bench) -> usize {
    let one = |seed: u64| {
        let found = make(&mut Stream::new(seed, 77)).evaluate().findings;
        let about: Vec<_> =
            found.iter().filter(|f| ["neighbours-alike", "drift", "settling"].contains(&f.code)).collect();
        assert!(about.iter().all(|f| f.code != "neighbours-alike" || f.severity == Severity::Note));
        !about.is_empty()
    };
    let count = (0..200).filter(|&seed| one(seed)).count();
    println!("neighbours-alike or drift: {count} of 200");
    count
}
