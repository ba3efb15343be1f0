//! Captions say the right side: planted bows of both signs, rising and falling functions.

use assize_core::{
    model::Family,
    numerics::streams::Stream,
    project::{
        columns::ColumnSpec,
        command::{Act, Command, NewReading, ReadingsCommand, What},
        evaluate::{ColumnEvaluation, evaluate},
    },
    quantity::Text,
    trail::Document,
};

/// Readings of y = 0.1 + slope·x + bend·x² with a little scatter, nine levels.
fn bowed(slope: f64, bend: f64, repeats: usize) -> Document {
    let mut noise = Stream::new(7, 1);
    let mut rows = Vec::new();
    for x in (0..9).map(|i| 1.0 + f64::from(i)).cycle().take(9 * repeats) {
        let y = 0.1 + slope * x + bend * x * x + 1e-3 * noise.normal();
        rows.push(NewReading::new(What::Standard(Text::from(x.to_string()), x), &y.to_string(), y));
    }
    let mut document = Document::default();
    let act = Act {
        by: Text::from("A. Person"),
        at: "2026-11-03T09:12:00+00:00".parse().expect("a moment"),
        because: None,
        command: Command::Readings(ReadingsCommand::Add(rows)),
    };
    document.enter(act).expect("readings");
    document
}

fn line(document: &Document) -> ColumnEvaluation {
    let spec = ColumnSpec::plain(Family::Polynomial(1));
    evaluate(document.project()).columns.into_iter().find(|c| c.spec == spec).expect("the line")
}

#[test]
fn reads_high_and_low_point_the_right_way() {
    for slope in [0.5, -0.5] {
        for bend in [0.01, -0.01] {
            let column = line(&bowed(slope, bend, 3));
            let fit = &column.outcome.as_ref().expect("fitted").fit;
            // By hand: the value that the line gives back for the mean reading, minus the standard, at its worst.
            let worst = (0..9)
                .map(|i| 1.0 + f64::from(i))
                .map(|x| {
                    let of_level: Vec<f64> =
                        fit.points.iter().filter(|p| p.x.total_cmp(&x).is_eq()).map(|p| p.y).collect();
                    let mean = of_level.iter().sum::<f64>() / of_level.len() as f64;
                    let (a, b) = (fit.coefficients[0], fit.coefficients[1]);
                    (x, (mean - a) / b - x)
                })
                .max_by(|p, q| p.1.abs().total_cmp(&q.1.abs()))
                .expect("nine levels");
            let side = if worst.1 > 0.0 { "high" } else { "low" };
            let caption = &column.captions.residuals.text;
            assert!(
                caption.starts_with("bows: reads up to") && caption.contains(&format!("{side} at {}", worst.0)),
                "slope {slope}, bend {bend}: {caption:?}, by hand {worst:?}"
            );
        }
    }
}

#[test]
fn without_a_bow_only_scatter_is_left() {
    assert_eq!(line(&bowed(0.5, 0.0, 3)).captions.residuals.text, "cloud: only scatter is left");
    assert_eq!(line(&bowed(-0.5, 0.0, 3)).captions.residuals.text, "cloud: only scatter is left");
}

#[test]
fn a_bow_below_what_matters_is_said_to_be_tiny() {
    // So many repeats find a bow a tenth as large as the uncertainty of one reading.
    let column = line(&bowed(0.5, 2e-5, 300));
    let (caption, e) = (&column.captions.residuals.text, column.outcome.as_ref().expect("fitted"));
    assert!(e.shape.rejected());
    assert!(caption.starts_with("bows, real but tiny: reads up to"), "{caption}");
}
