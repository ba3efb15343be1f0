//! Title, instrument, work, conditions, standards.

use super::{Source, number};
use crate::{
    exchange::report::kit::{Align, Block, Cell, Column, FactColumn, Row, Table},
    project::{Project, about::Condition, about::Kind, evaluate::words::plain, plan::Quantity},
    quantity::{Text, format::with_unit},
    standards::{Standard, StatedUncertainty},
};

pub(super) fn blocks(source: &Source<'_>) -> Vec<Block> {
    let project = source.project();
    let mut all = vec![Block::Title { text: "Calibration record".to_owned(), right: Some(number(project)) }];
    let laboratory = project.plan.laboratory.as_deref().unwrap_or("laboratory not stated");
    let notice = (project.kind == Kind::Practice).then(|| "practice: never a record of real work".to_owned());
    all.push(Block::Byline { left: laboratory.to_owned(), notice });
    all.push(Block::Facts { columns: vec![instrument(project), work(source)] });
    all.push(Block::Facts { columns: vec![conditions(project), standards_summary(project)] });
    all.extend(standards_table(project));
    all.push(Block::Rule);
    all
}

fn instrument(project: &Project) -> FactColumn {
    let item = &project.item;
    let identity: Vec<&str> = [&item.identity, &item.maker, &item.model].into_iter().flatten().map(|t| &**t).collect();
    let serial = item.serial.as_ref().map(|s| format!("serial {s}"));
    let identity = identity.into_iter().map(str::to_owned).chain(serial).collect::<Vec<_>>().join(", ");
    let quantity = |q: &Quantity| q.heading();
    let mut rows = vec![
        ("item".to_owned(), item.description.as_deref().unwrap_or("not described").to_owned()),
        ("identity".to_owned(), if identity.is_empty() { "not stated".to_owned() } else { identity }),
        ("quantity".to_owned(), format!("{} → {}", quantity(&project.plan.input), quantity(&project.plan.output))),
    ];
    if let Some((low, high)) = project.plan.interval {
        let text = format!("{} … {}", plain(low), with_unit(&plain(high), project.plan.input.unit.as_str()));
        rows.push(("interval".to_owned(), text));
    }
    optional(&mut rows, "channel", item.channel.as_ref());
    optional(&mut rows, "condition", item.condition.as_ref());
    FactColumn { heading: "Instrument".to_owned(), rows }
}

fn work(source: &Source<'_>) -> FactColumn {
    let project = source.project();
    let mut rows = Vec::new();
    optional(&mut rows, "customer", project.plan.customer.as_ref());
    optional(&mut rows, "received", project.item.received.as_ref());
    rows.push(("performed".to_owned(), performed(source)));
    optional(&mut rows, "method", project.plan.method.as_ref());
    optional(&mut rows, "place", project.plan.place.as_ref());
    rows.push(("issued".to_owned(), source.issue.at.readable()));
    if let Some(earlier) = &project.earlier {
        rows.push(("earlier record".to_owned(), earlier.number.to_string()));
    }
    FactColumn { heading: "Work".to_owned(), rows }
}

/// From the first to the last entry that brought readings.
fn performed(source: &Source<'_>) -> String {
    use crate::project::command::Command;
    let mut times = source.document.acts().iter().filter(|a| matches!(a.command, Command::Readings(_))).map(|a| a.at);
    match (times.next(), times.next_back()) {
        (None, _) => "no readings".to_owned(),
        (Some(only), None) => only.readable(),
        (Some(first), Some(last)) if first.date() == last.date() => {
            format!("{} {} to {}", first.date(), first.clock(), &last.readable()[11..])
        }
        (Some(first), Some(last)) => format!("{} to {}", first.readable(), last.readable()),
    }
}

fn conditions(project: &Project) -> FactColumn {
    let mut rows = Vec::new();
    let end = |name: &Text| project.conditions.end.iter().find(|c| c.name == *name).map(|c| c.value.to_string());
    for Condition { name, value } in &project.conditions.start {
        let text = match end(name) {
            Some(later) if later != **value => format!("{value} to {later}"),
            _ => value.to_string(),
        };
        rows.push((name.to_string(), text));
    }
    for late in project.conditions.end.iter().filter(|c| !project.conditions.start.iter().any(|s| s.name == c.name)) {
        rows.push((late.name.to_string(), format!("{} at the end", late.value)));
    }
    if rows.is_empty() {
        rows.push(("conditions".to_owned(), "not stated".to_owned()));
    }
    FactColumn { heading: "Conditions".to_owned(), rows }
}

fn standards_summary(project: &Project) -> FactColumn {
    let mut rows = vec![("values".to_owned(), project.standards.len().to_string())];
    let first = project.standards.first();
    let same = project.standards.iter().all(|s| Some(&s.papers) == first.map(|f| &f.papers));
    match first.filter(|_| same) {
        Some(s) => {
            optional(&mut rows, "reference", s.papers.identity.as_ref());
            optional(&mut rows, "certificate", s.papers.certificate.as_ref());
            optional(&mut rows, "due", s.papers.due.as_ref());
            rows.push(("uncertainty".to_owned(), stated(project, s)));
        }
        None => rows.push(("papers".to_owned(), "see the table of standards".to_owned())),
    }
    FactColumn { heading: "Standards".to_owned(), rows }
}

fn optional(rows: &mut Vec<(String, String)>, label: &str, text: Option<&Text>) {
    rows.extend(text.map(|t| (label.to_owned(), t.to_string())));
}

fn stated(project: &Project, standard: &Standard) -> String {
    let unit = project.plan.input.unit.as_str();
    match standard.papers.uncertainty {
        None => "not stated: treated as exact".to_owned(),
        Some(StatedUncertainty::Standard(u)) => format!("u = {}", with_unit(&plain(u), unit)),
        Some(StatedUncertainty::Expanded { expanded, factor }) => {
            format!("U = {} (k = {})", with_unit(&plain(expanded), unit), plain(factor))
        }
        Some(StatedUncertainty::Limits(a)) => format!("limits ±{}", with_unit(&plain(a), unit)),
    }
}

/// A table of its own when the standards do not share one set of papers.
fn standards_table(project: &Project) -> Option<Block> {
    let first = project.standards.first()?;
    if project.standards.iter().all(|s| s.papers == first.papers) {
        return None;
    }
    let head = ["standard", "identity", "certificate", "due", "uncertainty"];
    let columns = head.iter().enumerate().map(|(i, h)| Column {
        head: vec![if i == 0 { project.plan.input.heading() } else { (*h).to_owned() }],
        align: if i == 0 { Align::Right } else { Align::Left },
        weight: if i == 4 { 2.0 } else { 1.0 },
    });
    let text = |t: &Option<Text>| Cell::new(t.as_deref().unwrap_or("–"));
    let rows = project.standards.iter().map(|s| Row {
        cells: vec![
            Cell::new(&*s.raw),
            text(&s.papers.identity),
            text(&s.papers.certificate),
            text(&s.papers.due),
            Cell::new(stated(project, s)),
        ],
        shade: false,
    });
    Some(Block::Table(Table {
        caption: Some("Standards".to_owned()),
        columns: columns.collect(),
        rows: rows.collect(),
        note: None,
    }))
}
