//! Standards and readings, told.

use super::{Before, one_line, words};
use crate::{
    project::command::{NewReading, ReadingsCommand, StandardsCommand, What},
    quantity::format::with_unit,
    readings::{Applied, ReadingId, Slip},
    standards::StandardId,
};

pub(super) fn standards(command: &StandardsCommand, before: &Before<'_>) -> String {
    let unit = before.input_unit();
    match command {
        StandardsCommand::Add { raw, papers, .. } => {
            format!("added the standard {} ({})", with_unit(&one_line(raw), unit), words::papers(papers, unit))
        }
        StandardsCommand::Papers { id, papers } => before.change(
            &format!("the papers of {}", standard(*id, before)),
            |p| p.standard(*id).map(|s| words::papers(&s.papers, unit)),
            &words::papers(papers, unit),
        ),
        StandardsCommand::PapersOf { raw, papers, .. } => {
            format!(
                "noted the papers of the standard {}: {}",
                with_unit(&one_line(raw), unit),
                words::papers(papers, unit)
            )
        }
        StandardsCommand::PapersForAll(papers) => {
            format!("gave all standards the same papers: {}", words::papers(papers, unit))
        }
        StandardsCommand::Value { id, raw, .. } => before.change(
            &format!("the value of standard {}", id.0),
            |p| p.standard(*id).map(|s| with_unit(&s.raw, unit)),
            &with_unit(raw, unit),
        ),
    }
}

pub(super) fn readings(command: &ReadingsCommand, before: &Before<'_>) -> String {
    match command {
        ReadingsCommand::Add(rows) => added(rows, "", before),
        ReadingsCommand::Import(import, rows) => {
            let digest = import.digest.get(..8).unwrap_or(&import.digest);
            let file = format!(" from the file {} (SHA-256 {digest} …)", one_line(&import.name));
            added(rows, &file, before)
        }
        ReadingsCommand::Correct { id, raw, slip, .. } => {
            let unit = before.output_unit();
            let new = with_unit(&one_line(raw), unit);
            let why = match slip {
                Slip::Other => String::new(),
                known => format!(": {}", words::slip(*known)),
            };
            match before.project.and_then(|p| p.reading(*id)) {
                Some(old) => format!("corrected {} from {} to {new}{why}", reading(*id, before), one_line(&old.raw)),
                None => format!("corrected {} to {new}{why}", reading(*id, before)),
            }
        }
        ReadingsCommand::Reapply { id, what } => {
            let new = what_applied(what, before);
            match before.project.and_then(|p| p.reading(*id)) {
                Some(old) => format!("moved {} from {} to {new}", reading(*id, before), applied(&old.applied, before)),
                None => format!("moved {} to {new}", reading(*id, before)),
            }
        }
        ReadingsCommand::SetAside(id) => {
            format!("set {} aside{}", reading(*id, before), value_of(*id, before))
        }
        ReadingsCommand::CountAgain(id) => {
            format!("let {} count again{}", reading(*id, before), value_of(*id, before))
        }
        ReadingsCommand::LetStand(id) => {
            format!("let {} stand after a question", reading(*id, before))
        }
    }
}

fn added(rows: &[NewReading], from: &str, before: &Before<'_>) -> String {
    let (Some(first), Some(last)) = (rows.first(), rows.last()) else {
        return "added no readings".to_owned();
    };
    let verb = words::came(&first.source);
    let next = before.project.map(|p| p.readings.len() + 1);
    if rows.len() == 1 {
        let number = next.map_or(String::new(), |n| format!(" {n}"));
        let zero = matches!(first.what, What::Nothing(_));
        let kind = if zero { "zero reading" } else { "reading" };
        return format!("{verb} {kind}{number}{from}: {}", one(first, before));
    }
    let zeros = rows.iter().filter(|r| matches!(r.what, What::Nothing(_))).count();
    let kind = match zeros {
        0 => format!("{} readings", rows.len()),
        z if z == rows.len() => format!("{z} zero readings"),
        z => format!("{} readings, {z} of them zero readings,", rows.len()),
    };
    let numbers = next.map_or(String::new(), |n| format!(" ({n} to {})", n + rows.len() - 1));
    format!("{verb} {kind}{numbers}{from}: {} … {}", one(first, before), one(last, before))
}

fn one(row: &NewReading, before: &Before<'_>) -> String {
    let value = with_unit(&one_line(&row.raw), before.output_unit());
    let direction = words::direction(row.direction);
    let direction = if direction.is_empty() { String::new() } else { format!(", {direction}") };
    match &row.what {
        What::Standard(raw, _) => {
            format!("{value} at {}{direction}", with_unit(&one_line(raw), before.input_unit()))
        }
        What::Nothing(Some(between)) => format!("{value} after {}{direction}", one_line(between)),
        What::Nothing(None) => format!("{value}{direction}"),
    }
}

fn what_applied(what: &What, before: &Before<'_>) -> String {
    match what {
        What::Standard(raw, _) => with_unit(&one_line(raw), before.input_unit()),
        What::Nothing(_) => "nothing applied".to_owned(),
    }
}

fn applied(applied: &Applied, before: &Before<'_>) -> String {
    match applied {
        Applied::Standard(id) => match before.project.and_then(|p| p.standard(*id)) {
            Some(s) => with_unit(&one_line(&s.raw), before.input_unit()),
            None => format!("standard {}", id.0),
        },
        Applied::Nothing { .. } => "nothing applied".to_owned(),
    }
}

fn standard(id: StandardId, before: &Before<'_>) -> String {
    match before.project.and_then(|p| p.standard(id)) {
        Some(s) => format!("standard {} ({})", id.0, with_unit(&one_line(&s.raw), before.input_unit())),
        None => format!("standard {}", id.0),
    }
}

fn reading(id: ReadingId, before: &Before<'_>) -> String {
    let zero = before.project.and_then(|p| p.reading(id)).is_some_and(|r| r.is_zero());
    format!("{} {}", if zero { "zero reading" } else { "reading" }, id.0)
}

fn value_of(id: ReadingId, before: &Before<'_>) -> String {
    let known = before.project.and_then(|p| p.reading(id));
    known.map_or(String::new(), |r| {
        let value = with_unit(&one_line(&r.raw), before.output_unit());
        match &r.applied {
            Applied::Standard(_) => format!(" ({value} at {})", applied(&r.applied, before)),
            Applied::Nothing { .. } => format!(" ({value})"),
        }
    })
}
