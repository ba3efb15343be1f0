//! `assize convert`: readings to values with uncertainty.

use super::{Failed, load, print};
use crate::platform;
use assize_core::{
    convert::{Conversion, Converter, EndState, State},
    exchange::table::{Purpose, TableOptions, read_table},
    project::{
        columns::ColumnSpec,
        command::{ColumnsCommand, Command},
        evaluate::{Evaluation, FitEvaluation, NearZeroOutcome, evaluate},
    },
    trail::Document,
};
use clap::Args;
use serde_json::{Value, json};
use std::path::PathBuf;

/// Options of `convert`.
#[derive(Debug, Args)]
pub struct Options {
    /// A project, or a table of standards and readings.
    source: PathBuf,
    /// Readings to convert: a table with a column of readings, or numbers one a line.
    readings: PathBuf,
    /// The function; needed when the project has no choice.
    #[arg(long)]
    family: Option<String>,
    /// Each number is the mean of so many readings.
    #[arg(long, default_value_t = 1)]
    repeat: usize,
    /// Head of the column that holds the readings.
    #[arg(long)]
    by_column: Option<String>,
    /// Level of the intervals.
    #[arg(long)]
    level: Option<f64>,
    /// Writes a CSV file instead of printing.
    #[arg(long)]
    out: Option<PathBuf>,
    /// Prints JSON.
    #[arg(long)]
    json: bool,
    #[command(flatten)]
    table: load::TableArgs,
}

/// Carries it out.
pub fn run(options: &Options) -> Result<(), Failed> {
    let readings = readings(options)?;
    let (document, spec) = source(options)?;
    let evaluation = evaluate(document.project());
    let e = fitted(&evaluation, &spec)?;
    let level = options.level.unwrap_or(document.project().plan.level);
    let converter = Converter::new(&e.fit, options.repeat, level)
        .ok_or_else(|| Failed::Wrong("the function cannot be inverted with these data".to_owned()))?;
    let results: Vec<Conversion> = readings.iter().map(|y| converter.convert(*y)).collect();
    let threshold = threshold(e);
    if let Some(out) = &options.out {
        platform::write_whole(out, table(&results).as_bytes())?;
        print(&format!("{}: {} values", out.display(), results.len()));
    } else if options.json {
        let all: Vec<Value> = results.iter().map(|r| one(r, threshold)).collect();
        print(&format!("{:#}", json!({"schema": "assize.convert/1", "results": all})));
    } else {
        print(table(&results).trim_end());
    }
    Ok(())
}

fn readings(options: &Options) -> Result<Vec<f64>, Failed> {
    let bytes = platform::read(&options.readings)?;
    let mut wanted = TableOptions { purpose: Purpose::Zeros, ..TableOptions::default() };
    if let Some(head) = &options.by_column {
        wanted.columns.insert(assize_core::exchange::table::Role::Reading, head.clone());
    }
    let place = |e: String| Failed::Wrong(format!("{}: {e}", options.readings.display()));
    let table = read_table(&bytes, &wanted).map_err(|e| place(e.to_string()))?;
    let records =
        table.records().map_err(|all| place(all.iter().map(ToString::to_string).collect::<Vec<_>>().join("\n")))?;
    Ok(records.iter().map(|r| r.reading.value).collect())
}

/// The document with the wanted column shown, and that column.
fn source(options: &Options) -> Result<(Document, ColumnSpec), Failed> {
    let is_project = load::is_project(&platform::read(&options.source)?);
    let mut document = if is_project {
        load::project(&options.source)?
    } else {
        load::in_memory(&load::table(&options.source, &options.table, false)?, None)?
    };
    let spec = match (&options.family, &document.project().choice) {
        (Some(text), _) => super::fit::column(text)?,
        (None, Some(choice)) => choice.column.clone(),
        (None, None) => {
            let shown = options.source.display();
            return Err(Failed::Wrong(format!("{shown}: no function is chosen; name one with --family")));
        }
    };
    let show = Command::Columns(ColumnsCommand::Show(vec![spec.clone()]));
    load::enter(&mut document, show, "command line", None)?;
    Ok((document, spec))
}

fn fitted<'a>(evaluation: &'a Evaluation, spec: &ColumnSpec) -> Result<&'a FitEvaluation, Failed> {
    let column = evaluation.columns.iter().find(|c| c.spec == *spec);
    match column.map(|c| &c.outcome) {
        Some(Ok(e)) => Ok(e),
        Some(Err(reason)) => Err(Failed::Wrong(format!("{}: {reason}", spec.head()))),
        None => Err(Failed::Wrong(format!("{} is not among the columns", spec.head()))),
    }
}

/// Decision threshold and whether the signal rises from it.
fn threshold(e: &FitEvaluation) -> Option<(f64, bool)> {
    match &e.near_zero {
        NearZeroOutcome::Limits(all) if all.len() == 1 => {
            let rises = e.fit.curve.derivative(0.0) > 0.0;
            all.first().map(|side| (side.limits.decision_threshold, rises))
        }
        _ => None,
    }
}

fn one(r: &Conversion, threshold: Option<(f64, bool)>) -> Value {
    let pieces: Vec<Value> = r.pieces.iter().map(|p| json!({"low": p.low, "high": p.high})).collect();
    json!({
        "reading": r.reading, "value": r.value, "standard_uncertainty": r.standard_uncertainty,
        "low": r.low, "high": r.high, "low_state": end(r.low_state), "high_state": end(r.high_state),
        "pieces": if pieces.len() > 1 { json!(pieces) } else { Value::Null },
        "candidates": r.candidates,
        "degrees_of_freedom": r.degrees_of_freedom, "coverage_factor": r.coverage_factor,
        "above_threshold": threshold.map(|(y, rises)| if rises { r.reading > y } else { r.reading < y }),
        "state": state(r.state), "flipped_value": r.flipped_value,
    })
}

fn end(state: EndState) -> &'static str {
    match state {
        EndState::Finite => "finite",
        EndState::Unbounded => "unbounded",
        EndState::None => "none",
    }
}

fn state(state: State) -> &'static str {
    match state {
        State::InRange => "in range",
        State::BetweenZeroAndLowest => "between zero and lowest standard",
        State::Extrapolated => "extrapolated",
        State::NoValue => "no value",
        State::TwoValues => "two values",
        State::Unbounded => "unbounded",
        State::TwoPieces => "two pieces",
    }
}

fn table(results: &[Conversion]) -> String {
    let cell = |v: Option<f64>| v.map(|v| v.to_string()).unwrap_or_default();
    let mut out = String::from("reading,value,standard_uncertainty,low,high,low_state,high_state,state\n");
    for r in results {
        let row = [
            r.reading.to_string(),
            cell(r.value),
            cell(r.standard_uncertainty),
            cell(r.low),
            cell(r.high),
            end(r.low_state).to_owned(),
            end(r.high_state).to_owned(),
            state(r.state).to_owned(),
        ];
        out.push_str(&row.join(","));
        out.push('\n');
    }
    out
}
