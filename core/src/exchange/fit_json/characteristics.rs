//! Instrument characteristics after IEC 61298-2 (from memory): in the output unit, as input, and in % of span.

use crate::{
    inference::{
        hysteresis::{hysteresis, repeatability},
        levels::levels,
        nonlinearity::nonlinearity,
    },
    project::evaluate::{Evaluation, FitEvaluation},
    readings::Direction,
};
use serde_json::{Map, Value, json};

/// The characteristics of one fit's readings; sizes in output units under the keys of the contract, all three
/// forms under `characteristics`.
pub(super) fn characteristics(evaluation: &Evaluation, e: &FitEvaluation) -> Map<String, Value> {
    let fit = &e.fit;
    let approach: Vec<Direction> = e.used.iter().map(|&i| evaluation.observations[i].direction).collect();
    let means = levels(&fit.points);
    let line = nonlinearity(&means);
    let lag = hysteresis(&fit.points, &approach);
    let repeats = repeatability(&fit.points, &approach);
    let span = line.map(|n| n.span);
    // The mean slope of the level means turns an output size into an input size.
    let run = means.first().zip(means.last()).map(|(low, high)| high.x - low.x);
    let slope = span.zip(run).map(|(span, run)| span / run).filter(|s| s.is_finite() && *s != 0.0);
    let forms = |output: Option<f64>| {
        let output = output?;
        let percent = span.map(|span| 100.0 * output / span.abs());
        Some(json!({"output": output, "input": slope.map(|s| output / s.abs()), "percent_of_span": percent}))
    };
    let all = json!({
        "nonlinearity_independent": forms(line.map(|n| n.independent)),
        "nonlinearity_terminal": forms(line.map(|n| n.terminal)),
        "nonlinearity_zero_based": forms(line.map(|n| n.zero_based)),
        "hysteresis": forms(lag.as_ref().map(|h| h.largest.abs())),
        "hysteresis_free_of_scatter": forms(lag.as_ref().and_then(|h| h.free_of_scatter)),
        "repeatability": forms(repeats.as_ref().map(|r| r.spread)),
        "zero_return": forms(zero_return(evaluation)),
    });
    let sizes = line.map(
        |n| json!({"independent": n.independent, "terminal": n.terminal, "zero_based": n.zero_based, "span": n.span}),
    );
    let entries = [
        ("nonlinearity", json!(sizes)),
        ("hysteresis", json!(lag.map(|h| h.largest.abs()))),
        ("repeatability", json!(repeats.map(|r| r.spread))),
        ("characteristics", all),
    ];
    entries.into_iter().map(|(key, value)| (key.to_owned(), value)).collect()
}

/// The last zero minus the first one, output unit, when something was applied in between.
fn zero_return(evaluation: &Evaluation) -> Option<f64> {
    let all = &evaluation.observations;
    let first = all.iter().position(|o| o.is_zero())?;
    let last = all.iter().rposition(|o| o.is_zero())?;
    let loaded = all.get(first..last)?.iter().any(|o| !o.is_zero());
    loaded.then(|| all[last].y - all[first].y)
}
