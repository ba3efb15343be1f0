//! From a table as understood to the commands that enter it into a project.

use super::table::{Direction as TableDirection, Kind, Record, Role, Stage as TableStage, Table};
use crate::{
    project::{
        about::Import,
        command::{Command, NewReading, PlanCommand, PlanField, ReadingsCommand, StandardsCommand, What},
        plan::Quantity,
    },
    quantity::Text,
    readings::{Direction, Source, Stage},
    standards::{StandardPapers, StatedUncertainty},
    trail::Digest,
};
use base64ct::{Base64, Encoding as _};
use std::sync::Arc;

/// A file to be taken in: its name without folder, its bytes, the table and its records.
#[derive(Debug, Clone, Copy)]
pub struct Taken<'a> {
    /// File name without its folder.
    pub name: &'a str,
    /// The bytes as they were.
    pub bytes: &'a [u8],
    /// The table as understood.
    pub table: &'a Table,
    /// Its records.
    pub records: &'a [Record],
    /// Every row is a zero reading.
    pub zeros: bool,
}

/// The commands that enter a table: its readings with the file, then uncertainties of standards it carries.
#[must_use]
pub fn commands(taken: &Taken<'_>) -> Vec<Command> {
    let import = Arc::new(import(taken));
    let digest = import.digest.clone();
    let rows = taken.records.iter().filter_map(|r| reading(r, taken.zeros, &digest)).collect();
    let mut all = vec![Command::Readings(ReadingsCommand::Import(import, rows))];
    if !taken.zeros {
        all.extend(uncertainties(taken.records));
    }
    all
}

/// Names and units of input and output as the heads of the table give them.
#[must_use]
pub fn quantities(table: &Table) -> Vec<Command> {
    let of = |role: Role| {
        let at = *table.roles.get(&role)?;
        let unit = table.units.get(at).cloned().flatten().unwrap_or_default();
        Some(Quantity::new(table.headers.get(at)?, &unit))
    };
    let set = |field| Command::Plan(PlanCommand::Set(field));
    let input = of(Role::Standard).map(|q| set(PlanField::Input(q)));
    let output = of(Role::Reading).map(|q| set(PlanField::Output(q)));
    input.into_iter().chain(output).collect()
}

fn import(taken: &Taken<'_>) -> Import {
    let table = taken.table;
    let delimiter = table.delimiter.map_or_else(|| "one column".to_owned(), |d| d.to_string());
    let mut mapping = vec![format!(
        "encoding {:?}, {delimiter}, decimal {:?}, {} header rows",
        table.encoding, table.decimal, table.header_rows
    )];
    mapping.extend(table.roles.iter().map(|(role, at)| format!("{role} = {}", table.headers[*at])));
    Import {
        name: Text::from(taken.name),
        digest: Text::from(Digest::of(taken.bytes).hex()),
        base64: Arc::from(Base64::encode_string(taken.bytes)),
        mapping: mapping.into_iter().map(Text::from).collect(),
    }
}

/// The original bytes of an imported file; `None` if its text was tampered with.
#[must_use]
pub fn original(import: &Import) -> Option<Vec<u8>> {
    Base64::decode_vec(&import.base64).ok().filter(|bytes| Digest::of(bytes).hex() == *import.digest)
}

fn reading(record: &Record, zeros: bool, digest: &Text) -> Option<NewReading> {
    let zero = zeros || record.kind == Kind::Zero;
    let what = match (&record.standard, zero) {
        (_, true) => What::Nothing(None),
        (Some(s), false) => What::Standard(Text::from(s.raw.as_str()), s.value),
        (None, false) => return None,
    };
    let mut new = NewReading::new(what, &record.reading.raw, record.reading.value);
    new.uncertainty = record.u_reading;
    new.stage = match (record.kind, record.stage) {
        // Readings taken for the limit near zero are kept but never fitted.
        (Kind::ForLimit, _) | (_, Some(TableStage::Check)) => Stage::Check,
        (_, Some(TableStage::AsLeft)) => Stage::AsLeft,
        (_, Some(TableStage::AsFound) | None) => Stage::AsFound,
    };
    new.run = record.run.unwrap_or(1);
    new.cycle = record.cycle.unwrap_or(1);
    new.direction = match record.direction {
        Some(TableDirection::Rising) => Direction::Rising,
        Some(TableDirection::Falling) => Direction::Falling,
        Some(TableDirection::TurningPoint) => Direction::TurningPoint,
        Some(TableDirection::Undirected) | None => Direction::None,
    };
    new.application = record.application;
    new.order = record.order;
    new.time = record.time.as_deref().and_then(|t| t.parse().ok());
    new.source = Source::File { digest: digest.clone(), line: u32::try_from(record.line).unwrap_or(u32::MAX) };
    Some(new)
}

/// Papers for standards whose rows carry a standard uncertainty.
fn uncertainties(records: &[Record]) -> Vec<Command> {
    let mut seen: Vec<(f64, f64, Text)> = Vec::new();
    for record in records {
        let (Some(s), Some(u)) = (&record.standard, record.u_standard) else {
            continue;
        };
        if !seen.iter().any(|(x, ..)| x.total_cmp(&s.value).is_eq()) {
            seen.push((s.value, u, Text::from(s.raw.as_str())));
        }
    }
    let papers = |u| StandardPapers { uncertainty: Some(StatedUncertainty::Standard(u)), ..StandardPapers::default() };
    seen.into_iter()
        .map(|(value, u, raw)| Command::Standards(StandardsCommand::PapersOf { raw, value, papers: papers(u) }))
        .collect()
}
