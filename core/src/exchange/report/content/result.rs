//! The function, its coefficients, its figures, and what else was compared.

use super::Source;
use crate::{
    convert::digits::Form,
    exchange::report::kit::{Align, Block, Cell, Column, FactColumn, ParagraphStyle, Row, Table},
    fit::Scatter,
    model::Family,
    project::columns::Axes,
    project::evaluate::{ColumnEvaluation, FitEvaluation, words::plain},
    quantity::format::{significant, with_unit},
};

pub(super) fn blocks(source: &Source<'_>) -> Vec<Block> {
    let mut all = vec![Block::Heading { level: 1, text: "Result".to_owned() }];
    let speaking = source.evaluation.speaking_column();
    match speaking.and_then(|c| c.outcome.as_ref().ok().map(|e| (c, e))) {
        Some((column, e)) => all.extend(function(source, column, e)),
        None => all.push(body("No function is chosen and none is advised: there is no result to state.")),
    }
    all
}

/// What else was compared, and the advice of the program.
pub(super) fn others(source: &Source<'_>) -> Vec<Block> {
    let mut all = vec![compared(source)];
    all.extend(advice(source));
    all
}

fn body(text: &str) -> Block {
    Block::Paragraph { text: text.to_owned(), style: ParagraphStyle::Body }
}

fn function(source: &Source<'_>, column: &ColumnEvaluation, e: &FitEvaluation) -> Vec<Block> {
    let project = source.project();
    let unit = project.plan.input.unit.as_str();
    let xs = || e.fit.points.iter().map(|p| p.x);
    let (low, high) = (xs().fold(f64::INFINITY, f64::min), xs().fold(f64::NEG_INFINITY, f64::max));
    let sentence = format!(
        "{}{} over {} … {}, {}, {} observations, {} degrees of freedom. y: {}; x: {}.",
        column.formula,
        column.spec.family.own_units(),
        plain(low),
        with_unit(&plain(high), unit),
        estimator(column, e),
        e.fit.points.len(),
        e.fit.degrees_of_freedom,
        project.plan.output.heading(),
        project.plan.input.heading()
    );
    let mut all = vec![Block::Paragraph { text: sentence, style: ParagraphStyle::Strong }];
    match &project.choice {
        Some(choice) => all.push(body(&format!(
            "{} was chosen by {}, {}: {}",
            column.head,
            choice.by,
            choice.at.readable(),
            choice.because
        ))),
        None => all.push(body(&format!("{}: as advised, not yet chosen.", column.head))),
    }
    if !e.coefficients.is_empty() {
        all.push(coefficients(e));
    }
    let rows = |keys: &[&str]| -> Vec<(String, String)> {
        let wanted = column.figures.iter().filter(|f| keys.iter().any(|k| f.key.starts_with(k)));
        wanted.map(|f| (f.label.clone(), f.shown())).collect()
    };
    let left = rows(&["residual_sd", "chi_square", "degrees_of_freedom", "lack_of_fit", "shape", "r_squared"]);
    let right = rows(&["worst_read_back", "leftover_bend", "left_out", "detection_limit", "smallest_change"]);
    all.push(Block::Facts {
        columns: vec![
            FactColumn { heading: "Scatter and shape".to_owned(), rows: left },
            FactColumn { heading: "In the measurand".to_owned(), rows: right },
        ],
    });
    all
}

/// How the coefficients were found, and what the weights mean.
fn estimator(column: &ColumnEvaluation, e: &FitEvaluation) -> String {
    if column.spec.family == Family::Declared {
        return "declared, nothing fitted".to_owned();
    }
    if column.spec.axes == Axes::Both {
        return "generalised distance regression on readings and standards (absolute)".to_owned();
    }
    let meaning = match e.fit.scatter {
        Scatter::Residuals => "relative: the residuals set the scatter".to_owned(),
        Scatter::Repeats { degrees_of_freedom, .. } => {
            format!("pooled: all repeats set the scatter, {degrees_of_freedom} degrees of freedom")
        }
        Scatter::Means { degrees_of_freedom, .. } => {
            format!("relative: the level means set the scatter, {degrees_of_freedom} degrees of freedom")
        }
        Scatter::Known => "absolute: the stated uncertainties set the scatter".to_owned(),
    };
    let minimised = if e.fit.family.fitted_in_measurand() { " of the temperature" } else { "" };
    format!("least squares{minimised}, {} ({meaning})", column.spec.weights.plain_name())
}

/// The coefficients as they are to be handed on: as many digits as no converted value misses.
fn handed_on(e: &FitEvaluation) -> (usize, String) {
    const MANY: usize = 10;
    let all = "The attached evaluation holds all digits and the covariance.";
    match &e.printed {
        None => (MANY, all.to_owned()),
        Some(p) if p.form == Form::Plain => {
            let promise = format!(
                "{} significant digits: read back from this table, no converted value moves by more than a twentieth \
                 of its standard uncertainty. {all}",
                p.digits
            );
            (p.digits, promise)
        }
        Some(p) => {
            let Form::Shifted { centre, scale } = p.form else { return (MANY, all.to_owned()) };
            let form = format!(
                "Powers of x need more digits than a device holds. Hand on the coefficients of t = (x − {centre})/{scale} \
                 instead, constant term first: {}. {all}",
                p.texts.join(", ")
            );
            (MANY, form)
        }
    }
}

fn coefficients(e: &FitEvaluation) -> Block {
    let column = |head: &str, align, weight| Column { head: vec![head.to_owned()], align, weight };
    let (many, note) = handed_on(e);
    let digits = |v: f64| significant(v, many);
    let rows = e.coefficients.iter().map(|c| {
        let u = c.standard_uncertainty.map_or_else(|| "–".to_owned(), |u| significant(u, 2));
        let interval = c.interval.map_or_else(
            || "–".to_owned(),
            |(low, high)| format!("{} … {}", significant(low, 6), significant(high, 6)),
        );
        let cells = [c.printed.clone(), digits(c.value), u, interval, c.unit.clone()];
        Row { cells: cells.into_iter().map(Cell::new).collect(), shade: false }
    });
    Block::Table(Table {
        caption: Some("Coefficients".to_owned()),
        columns: vec![
            column("", Align::Left, 0.5),
            column("value", Align::Right, 1.5),
            column("standard uncertainty", Align::Right, 1.2),
            column("interval", Align::Right, 2.0),
            column("unit", Align::Left, 1.0),
        ],
        rows: rows.collect(),
        note: Some(note),
    })
}

fn compared(source: &Source<'_>) -> Block {
    let head = ["function", "verdict on its residuals", "residual SD", "detection limit"];
    let weights = [1.2, 2.6, 1.2, 1.4];
    let columns = head.iter().zip(weights).enumerate().map(|(i, (h, weight))| Column {
        head: vec![(*h).to_owned()],
        align: if i < 2 { Align::Left } else { Align::Right },
        weight,
    });
    let rows = source.evaluation.columns.iter().enumerate().map(|(i, column)| {
        let mark = match (source.evaluation.chosen == Some(i), source.evaluation.speaking == Some(i)) {
            (true, _) => " (chosen)",
            (false, true) => " (advised)",
            _ => "",
        };
        let verdict = match &column.outcome {
            Ok(_) => column.captions.residuals.text.clone(),
            Err(reason) => reason.clone(),
        };
        let figure = |key: &str| {
            crate::project::figures::find(&column.figures, key).map_or_else(|| "–".to_owned(), |f| f.shown())
        };
        let cells = [format!("{}{mark}", column.head), verdict, figure("residual_sd"), figure("detection_limit")];
        Row { cells: cells.into_iter().map(Cell::new).collect(), shade: false }
    });
    Block::Table(Table {
        caption: Some("Functions compared".to_owned()),
        columns: columns.collect(),
        rows: rows.collect(),
        note: None,
    })
}

fn advice(source: &Source<'_>) -> Option<Block> {
    let because = &source.evaluation.advice.because;
    (!because.is_empty()).then(|| Block::Paragraph {
        text: format!("Advice of the program: {}.", because.join("; ")),
        style: ParagraphStyle::Small,
    })
}
