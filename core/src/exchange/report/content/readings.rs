//! Readings against the function, zero readings, those set aside with their reasons.

use super::Source;
use crate::{
    exchange::report::kit::{Align, Block, Cell, Column, Row, Table},
    project::evaluate::{Evaluation, FitEvaluation},
    quantity::{
        format::{decimals, significant, to_place},
        unit::scale_for,
    },
    readings::{Applied, Direction, Reading, Slip, Stage},
};

pub(super) fn blocks(source: &Source<'_>) -> Vec<Block> {
    let mut all = vec![Block::Heading { level: 1, text: "Readings".to_owned() }];
    all.push(standards(source));
    let zeros: Vec<&Reading> = source.project().readings.iter().filter(|r| r.is_zero()).collect();
    if !zeros.is_empty() {
        all.push(zero_table(source, &zeros));
    }
    all
}

fn column(head: &str, align: Align, weight: f32) -> Column {
    Column { head: vec![head.to_owned()], align, weight }
}

fn standards(source: &Source<'_>) -> Block {
    let project = source.project();
    let error_scale = error_scale(source.evaluation);
    let unit = scale_for(&project.plan.input.unit, error_scale);
    let columns = vec![
        column("no.", Align::Right, 0.5),
        column(&project.plan.input.heading(), Align::Right, 1.2),
        column(&project.plan.output.heading(), Align::Right, 1.4),
        column("function", Align::Right, 1.2),
        column(&format!("read-back error, {}", unit.unit), Align::Right, 1.3),
        column("notes", Align::Left, 2.6),
    ];
    let fitted = source.evaluation.speaking_column().and_then(|c| c.outcome.as_ref().ok());
    let rows = project.readings.iter().filter(|r| !r.is_zero()).enumerate().map(|(n, r)| {
        let x = applied_value(source, r);
        let (value, error) = against(fitted.map(|e| &**e), x, r, unit.factor, error_scale * unit.factor);
        let aside = r.set_aside.is_some();
        let cell = |text: &str| Cell { text: text.to_owned(), strike: aside, soft: aside };
        let cells = vec![
            Cell::new(r.id.0.to_string()),
            cell(&applied_text(source, r)),
            cell(&r.raw),
            cell(&value),
            cell(&error),
            Cell::new(notes(r)),
        ];
        Row { cells, shade: n % 2 == 1 }
    });
    Block::Table(Table {
        caption: Some("Readings against the function".to_owned()),
        columns,
        rows: rows.collect(),
        note: Some("Read-back error: value of the reading by the function, minus the certified value.".to_owned()),
    })
}

/// Typical size of the read-back errors, input unit: decides the unit of their column.
fn error_scale(evaluation: &Evaluation) -> f64 {
    let Some(Ok(e)) = evaluation.speaking_column().map(|c| c.outcome.as_ref()) else { return 1.0 };
    e.residual_sd_input.filter(|s| *s > 0.0).unwrap_or(1.0)
}

fn against(e: Option<&FitEvaluation>, x: f64, r: &Reading, factor: f64, size: f64) -> (String, String) {
    let none = || ("–".to_owned(), "–".to_owned());
    let Some(e) = e else { return none() };
    let value = e.fit.curve.value(x);
    if !value.is_finite() {
        return none();
    }
    let places = r.raw.split(['.', ',']).nth(1).map_or(0, |d| d.chars().take_while(char::is_ascii_digit).count()) + 1;
    let error = crate::convert::root_near(&e.fit.curve, r.value, x).map(|back| (back - x) * factor);
    let place = crate::quantity::format::exponent(size, 1) - 1;
    let shown = |v: f64| if v > 0.0 { format!("+{}", to_place(v, place)) } else { to_place(v, place) };
    (decimals(value, places), error.map_or_else(|| "–".to_owned(), shown))
}

fn applied_value(source: &Source<'_>, r: &Reading) -> f64 {
    match r.applied {
        Applied::Standard(id) => source.project().standard(id).map_or(f64::NAN, |s| s.value),
        Applied::Nothing { .. } => 0.0,
    }
}

fn applied_text(source: &Source<'_>, r: &Reading) -> String {
    match r.applied {
        Applied::Standard(id) => source.project().standard(id).map_or_else(|| "–".to_owned(), |s| s.raw.to_string()),
        Applied::Nothing { .. } => "0".to_owned(),
    }
}

fn notes(r: &Reading) -> String {
    let mut parts = Vec::new();
    match r.direction {
        Direction::Rising => parts.push("rising".to_owned()),
        Direction::Falling => parts.push("falling".to_owned()),
        Direction::TurningPoint => parts.push("turning point".to_owned()),
        Direction::None => {}
    }
    match r.stage {
        Stage::AsFound => {}
        Stage::AsLeft => parts.push("as left".to_owned()),
        Stage::Check => parts.push("check".to_owned()),
    }
    parts.extend(r.set_aside.as_ref().map(|why| format!("set aside: {why}")));
    parts.extend(r.corrections.last().map(|c| format!("was {}, {}", c.raw, slip(c.slip))));
    if r.questioned {
        parts.push("questioned".to_owned());
    }
    if r.early {
        parts.push("early".to_owned());
    }
    parts.join("; ")
}

fn slip(slip: Slip) -> &'static str {
    match slip {
        Slip::TypedWrong => "typed wrong",
        Slip::ReadWrong => "read wrong",
        Slip::WrongRow => "wrong row",
        Slip::NotSettled => "not settled",
        Slip::Other => "other reason",
    }
}

fn zero_table(source: &Source<'_>, zeros: &[&Reading]) -> Block {
    let project = source.project();
    let columns = vec![
        column("no.", Align::Right, 0.5),
        column(&project.plan.output.heading(), Align::Right, 1.4),
        column("from the zero mean, SD", Align::Right, 1.4),
        column("notes", Align::Left, 3.0),
    ];
    let band = source.evaluation.zeros.band.as_ref().filter(|b| !b.identical());
    let rows = zeros.iter().enumerate().map(|(n, r)| {
        let aside = r.set_aside.is_some();
        let cell = |text: &str| Cell { text: text.to_owned(), strike: aside, soft: aside };
        let distance = band.map_or_else(|| "–".to_owned(), |b| significant((r.value - b.mean) / b.sd, 2));
        let cells = vec![Cell::new(r.id.0.to_string()), cell(&r.raw), cell(&distance), Cell::new(notes(r))];
        Row { cells, shade: n % 2 == 1 }
    });
    Block::Table(Table { caption: Some("Zero readings".to_owned()), columns, rows: rows.collect(), note: None })
}
