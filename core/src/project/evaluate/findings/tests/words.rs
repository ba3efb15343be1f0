//! Sentences speak in the unit of the measurand, whatever the family, and name a cure.

use super::bench::{Bench, LINE, QUADRATIC};
use crate::{fit::Weights, model::Family, numerics::streams::Stream, project::columns::ColumnSpec};

/// Cubic data that no family here but the cubic describes.
fn crooked() -> Bench {
    let mut stream = Stream::new(4, 4);
    Bench::new().cycles((8, 3), false, |x, _| 40.0 + 30.0 * x + 2.0 * (x - 4.5).powi(3) + 0.5 * stream.normal())
}

/// R² and residual size are never compared across transforms: every caption is in kN, never in ln or mV.
#[test]
fn captions_of_every_family_are_in_the_measurand() {
    let families = [LINE, QUADRATIC, Family::LineThroughZero, Family::Log];
    let mut bench = crooked();
    bench.project.columns = families.iter().cloned().map(ColumnSpec::plain).collect();
    bench.project.columns.push(ColumnSpec { weights: Weights::InverseX2, ..ColumnSpec::plain(LINE) });
    for column in &bench.evaluate().columns {
        let caption = &column.captions.residuals.text;
        let shows = if column.spec.family == Family::Polynomial(3) { "cloud" } else { " kN" };
        assert!(caption.contains(shows) && !caption.contains("mV"), "{}: {caption}", column.head);
        for f in &column.findings {
            assert!(!f.hint.is_empty() && !f.message.contains("NaN") && !f.message.contains("inf"), "{f:?}");
        }
    }
}

#[test]
fn a_shape_refused_by_chance_among_many_tests_is_no_louder_in_the_caption() {
    for seed in 0..400 {
        let mut stream = Stream::new(seed, 9);
        let bench = Bench::new().cycles((5, 3), true, |x, _| 50.0 * x + stream.normal()).family(LINE);
        for column in bench.evaluate().columns {
            let shape = column.findings.iter().find(|f| f.code == "shape").map(|f| f.severity);
            if shape.is_some() {
                assert_eq!(column.captions.residuals.severity, shape);
            }
        }
    }
}
