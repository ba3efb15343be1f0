//! Readings left out, outliers, saturation, cut digits, many fits.

use super::bench::{Bench, LINE, QUADRATIC, caught, noted, plant, tiny};
use crate::{
    fit::Weights,
    model::Family,
    numerics::streams::Stream,
    project::{
        columns::{ColumnSpec, Declared},
        evaluate::Severity,
    },
    quantity::Text,
};

fn straight(design: (u32, u32), stream: &mut Stream) -> Bench {
    Bench::new().cycles(design, false, |x, _| 50.0 * x + stream.normal())
}

/// Sets readings aside: (position, how far off they were).
fn without(stream: &mut Stream, gone: &[usize], off: f64) -> Bench {
    let mut bench = straight((5, 3), stream);
    for i in gone {
        let reading = bench.project.readings.get_mut(*i).unwrap();
        reading.value += off;
        reading.set_aside = Some(Text::from("a cause"));
    }
    bench.family(LINE)
}

#[test]
fn what_was_left_out_is_sized() {
    let met = caught("set-aside", |stream| without(stream, &[3, 4], 20.0));
    assert!(met.messages[0].starts_with("2 of 15 readings set aside: with them values move by"), "{}", met.messages[0]);
    // One of 15 is a note whatever it does; two that change nothing are one too.
    let one = plant("set-aside", |stream| without(stream, &[3], 20.0));
    assert_eq!((one.note, one.loud()), (200, 0));
    tiny("set-aside", |stream| {
        let mut bench = straight((5, 40), stream);
        for i in [3, 4] {
            bench.project.readings.get_mut(i).unwrap().set_aside = Some(Text::from("a cause"));
        }
        bench.family(LINE)
    });
}

/// 8 × 1 with one reading 8 SD off; 3 × 6 with one repeat 8 SD off.
#[test]
fn an_outlier_is_noted_with_its_size() {
    let off = |design: (u32, u32)| {
        move |stream: &mut Stream| {
            let mut bench = straight(design, stream);
            bench.project.readings.get_mut(3).unwrap().value += 8.0;
            bench.family(LINE)
        }
    };
    let met = noted("outlier", off((8, 1)));
    assert!(met.messages[0].contains("reading 4") && met.messages[0].contains("kN"), "{}", met.messages[0]);
    noted("outlier", off((3, 6)));
    let clean = plant("outlier", |stream| straight((8, 1), stream).family(LINE));
    assert!(clean.any() <= 24, "{clean:?}");
}

/// A ceiling between the third and the fourth of five standards.
#[test]
fn a_ceiling_is_caught() {
    let clipped = |noise: f64| {
        move |stream: &mut Stream| {
            let ceiling = 165.0 + stream.below(20) as f64;
            Bench::new()
                .cycles((5, 3), false, |x, _| {
                    let ideal = 50.0 * x + stream.normal();
                    if ideal > ceiling { ceiling + noise * stream.normal() } else { ideal }
                })
                .family(LINE)
        }
    };
    let met = caught("saturation", clipped(0.0));
    assert!(met.messages[0].contains("occurs at 4 and at 5 kN"), "{}", met.messages[0]);
    caught("saturation", clipped(1.0));
    // A step as small as the scatter is no loss.
    let met = plant("saturation", |stream| {
        let mut bench = Bench::new();
        for i in 0..30 {
            let x = f64::from(i % 10) + if i % 10 == 9 { -0.999 } else { 0.0 };
            bench.apply(x, &[(10.0 * x + stream.normal()).round()]);
        }
        bench.family(LINE)
    });
    assert!(met.loud() <= 2, "{met:?}");
    assert_eq!(plant("saturation", |stream| straight((5, 3), stream).family(LINE)).any(), 0);
}

#[test]
fn a_reading_at_full_scale_stops() {
    let with = |full: Option<f64>| {
        let mut bench = straight((5, 3), &mut Stream::new(1, 1)).family(LINE);
        bench.project.plan.full_scale = full;
        bench
    };
    let top = with(None).evaluate().observations.iter().map(|o| o.y).fold(0.0, f64::max);
    let found = with(Some(top / 0.985)).find("saturation").expect("98.5 % of the full scale");
    assert_eq!(found.severity, Severity::Stop);
    assert!(found.message.contains("98.5 %"), "{}", found.message);
    for roomy in [None, Some(top / 0.97)] {
        assert_eq!(with(roomy).find("saturation"), None);
    }
}

#[test]
fn digits_cut_off_are_caught() {
    let declared = |digits: usize| {
        move |stream: &mut Stream| {
            // A large constant and a fine scale: three digits move the answer.
            let mut bench =
                Bench::new().cycles((6, 3), false, |x, _| 812.37 + 53.678 * x + 0.05 * stream.normal()).family(LINE);
            let fit = bench.evaluate().columns[0].outcome.as_ref().unwrap().fit.clone();
            let text = |b: f64| format!("{b:.*e}", digits - 1);
            let formula = format!("{} + {}*x", text(fit.coefficients[0]), text(fit.coefficients[1]));
            bench.project.declared =
                Some(Declared { formula: Text::from(formula), origin: Text::from("the last fit") });
            bench
        }
    };
    caught("digits-cut", declared(3));
    assert_eq!(plant("digits-cut", declared(8)).any(), 0);
    // Another function is another function, not this one cut short.
    let mut other = straight((6, 3), &mut Stream::new(1, 1)).family(LINE);
    other.project.declared = Some(Declared { formula: Text::from("2.5 + 48*x"), origin: Text::from("nominal") });
    assert_eq!(other.find("digits-cut"), None);
}

#[test]
fn many_fits_are_noted() {
    let mut bench = straight((6, 3), &mut Stream::new(1, 1)).family(LINE);
    let by = |weights| ColumnSpec { weights, ..ColumnSpec::plain(LINE) };
    bench.project.columns =
        vec![by(Weights::Equal), by(Weights::InverseX), by(Weights::InverseX2), by(Weights::InverseY)];
    assert_eq!(bench.find("many-tried"), None, "three of its own");
    bench.project.columns.push(ColumnSpec::plain(QUADRATIC));
    assert_eq!(bench.find("many-tried"), None, "the quadratic is there from the start");
    bench.project.columns.push(ColumnSpec::plain(Family::Polynomial(3)));
    let found = bench.find("many-tried").unwrap();
    assert!(found.severity == Severity::Note && found.message.contains("best of 7"), "{found:?}");
}
