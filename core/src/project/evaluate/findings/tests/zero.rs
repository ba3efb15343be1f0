//! A forced zero, a factor from one standard, an invented origin.

use super::bench::{Bench, LINE, caught, plant, quiet, tiny};
use crate::{model::Family, numerics::streams::Stream, project::evaluate::Severity, readings::Source};

fn missing(design: (u32, u32), constant: f64) -> impl Fn(&mut Stream) -> Bench {
    move |stream| {
        Bench::new().cycles(design, false, |x, _| constant + 50.0 * x + stream.normal()).family(Family::LineThroughZero)
    }
}

/// A constant of 3 SD in 5 × 3; one of 10 SD is more than U at the lowest standard.
#[test]
fn a_forced_zero_is_caught() {
    caught("forced-zero", missing((5, 3), 3.0));
    let met = plant("forced-zero", missing((5, 3), 10.0));
    assert!(met.stop * 10 >= met.runs * 8, "{met:?}");
    tiny("forced-zero", missing((5, 400), 0.25));
    quiet("forced-zero", missing((5, 3), 0.0));
}

#[test]
fn a_forced_zero_is_one_finding_not_two() {
    let both = |seed: u64| {
        let found = missing((5, 3), 8.0)(&mut Stream::new(seed, 1)).evaluate().findings;
        found.iter().filter(|f| ["forced-zero", "shape"].contains(&f.code)).count() == 2
    };
    // But for the free lines that chance bends, five in a hundred.
    let count = (0..200).filter(|&seed| both(seed)).count();
    assert!(count <= 20, "{count} of 200");
}

#[test]
fn two_standards_cannot_refuse_a_zero() {
    let two = missing((2, 1), 20.0)(&mut Stream::new(1, 1)).find("forced-zero-untold").unwrap();
    assert!(two.severity == Severity::Note && two.message.contains("2 different standards"), "{two:?}");
    assert_eq!(missing((5, 1), 0.0)(&mut Stream::new(1, 1)).find("forced-zero-untold"), None);
}

/// Factors that fall off towards the bottom by a constant of 10 SD.
#[test]
fn one_standard_is_no_calibration() {
    let factor = |constant: f64, levels: u32| {
        move |stream: &mut Stream| {
            Bench::new()
                .cycles((levels, 3), false, |x, _| constant + 50.0 * x + stream.normal())
                .family(Family::OnePoint)
        }
    };
    let met = caught("one-point", factor(10.0, 4));
    assert!(met.messages[0].contains("at 4 kN; the others give") && met.messages[0].contains("at 1 kN"));
    // Alone, nothing contradicts it.
    assert_eq!(plant("one-point", factor(0.0, 1)).look, 200);
    assert!(plant("forced-zero", factor(10.0, 4)).loud() >= 160);
}

#[test]
fn an_origin_that_nobody_read_stops() {
    let with = |source: Source, y: f64| {
        let mut bench = Bench::new().cycles((5, 2), false, |x, _| 3.0 * x);
        bench.apply(0.0, &[y]).source = source;
        bench.family(LINE)
    };
    let found = with(Source::Typed, 0.0).find("invented-origin").unwrap();
    assert!(found.severity == Severity::Stop && found.message.contains("reading 11"), "{found:?}");
    assert_eq!(with(Source::Typed, 0.01).find("invented-origin"), None);
    assert_eq!(with(Source::Pasted, 0.0).find("invented-origin"), None);
    let mut timed = Bench::new().cycles((5, 2), false, |x, _| 3.0 * x);
    let reading = timed.apply(0.0, &[0.0]);
    (reading.source, reading.time) = (Source::Typed, "2026-11-03T09:12:00+00:00".parse().ok());
    assert_eq!(timed.find("invented-origin"), None);
    let mut twice = with(Source::Typed, 0.0);
    twice.apply(0.0, &[0.02]).source = Source::Typed;
    assert_eq!(twice.find("invented-origin"), None, "read again with another result");
}
