//! What the tables of the bench show: one row a reading, in order of entry; knows no window.

use assize_core::{
    project::Project,
    quantity::format::with_unit,
    readings::{Applied, Direction, Reading, ReadingId, Stage},
    standards::StandardId,
    trail::sentences::words,
};
use std::collections::BTreeMap;

/// One reading as a table shows it.
#[derive(Debug, Clone, PartialEq)]
pub struct Row {
    /// Its number.
    pub id: ReadingId,
    /// The standard as typed; for a zero reading what was applied since the zero before.
    pub standard: String,
    /// The reading as typed.
    pub reading: String,
    /// Direction.
    pub direction: Direction,
    /// Number of the application, and of the look where there is more than one.
    pub application: String,
    /// Stage.
    pub stage: Stage,
    /// Values it had before, newest first.
    pub was: String,
    /// State and reasons in words.
    pub note: String,
    /// Whether it is set aside.
    pub aside: bool,
    /// Whether it was questioned and let stand.
    pub questioned: bool,
}

/// The readings of standards.
#[must_use]
pub fn standard_rows(project: &Project) -> Vec<Row> {
    rows(project, false)
}

/// The zero readings.
#[must_use]
pub fn zero_rows(project: &Project) -> Vec<Row> {
    rows(project, true)
}

/// What looks of one application have in common.
type Group = (u32, Stage, Option<StandardId>);

fn rows(project: &Project, zeros: bool) -> Vec<Row> {
    let mut looks: BTreeMap<Group, usize> = BTreeMap::new();
    for r in project.readings.iter() {
        *looks.entry(group(r)).or_default() += 1;
    }
    let wanted = project.readings.iter().filter(|r| r.is_zero() == zeros);
    wanted.map(|r| row(project, r, looks.get(&group(r)).is_some_and(|n| *n > 1))).collect()
}

fn group(reading: &Reading) -> Group {
    let standard = match reading.applied {
        Applied::Standard(id) => Some(id),
        Applied::Nothing { .. } => None,
    };
    (reading.application, reading.stage, standard)
}

fn row(project: &Project, reading: &Reading, several: bool) -> Row {
    let application =
        if several { format!("{}.{}", reading.application, reading.look) } else { reading.application.to_string() };
    let was: Vec<&str> = reading.corrections.iter().rev().map(|c| &*c.raw).collect();
    Row {
        id: reading.id,
        standard: applied(project, reading),
        reading: reading.raw.to_string(),
        direction: reading.direction,
        application,
        stage: reading.stage,
        was: was.join(", "),
        note: note(reading),
        aside: reading.set_aside.is_some(),
        questioned: reading.questioned,
    }
}

fn applied(project: &Project, reading: &Reading) -> String {
    match &reading.applied {
        Applied::Standard(id) => project.standard(*id).map_or(String::new(), |s| s.raw.to_string()),
        Applied::Nothing { between } => between.as_deref().unwrap_or_default().to_owned(),
    }
}

fn note(reading: &Reading) -> String {
    let mut parts = Vec::new();
    if let Some(why) = &reading.set_aside {
        parts.push(format!("set aside: {why}"));
    }
    if let Some(last) = reading.corrections.last() {
        parts.push(format!("corrected: {}", words::slip(last.slip)));
    }
    if reading.questioned {
        parts.push("questioned, let stand".to_owned());
    }
    if reading.early {
        parts.push("taken early".to_owned());
    }
    parts.join("; ")
}

/// What a screen reader and the pointer are told about a reading.
#[must_use]
pub fn told(row: &Row, project: &Project) -> String {
    let output = with_unit(&row.reading, project.plan.output.unit.as_str());
    let mut text = format!("reading {}: {output}", row.id.0);
    if !row.was.is_empty() {
        text.push_str(&format!("; it was {}", row.was));
    }
    if !row.note.is_empty() {
        text.push_str(&format!("; {}", row.note));
    }
    text
}

/// Counts over a table: `22 readings, 1 set aside`.
#[must_use]
pub fn counted(rows: &[Row], one: &str, many: &str) -> String {
    let aside = rows.iter().filter(|r| r.aside).count();
    let all = match rows.len() {
        0 => return format!("no {many}"),
        1 => format!("1 {one}"),
        n => format!("{n} {many}"),
    };
    if aside == 0 { all } else { format!("{all}, {aside} set aside") }
}

/// The next direction when the letter is pressed.
#[must_use]
pub fn next_direction(direction: Direction) -> Direction {
    match direction {
        Direction::None => Direction::Rising,
        Direction::Rising => Direction::Falling,
        Direction::Falling => Direction::TurningPoint,
        Direction::TurningPoint => Direction::None,
    }
}

/// The next stage when the letter is pressed.
#[must_use]
pub fn next_stage(stage: Stage) -> Stage {
    match stage {
        Stage::AsFound => Stage::AsLeft,
        Stage::AsLeft => Stage::Check,
        Stage::Check => Stage::AsFound,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rooms::bench::entry::tests::{act, after, begun};
    use assize_core::{
        project::command::{Command, ReadingsCommand},
        readings::Slip,
    };

    #[test]
    fn a_corrected_and_set_aside_reading_keeps_its_row_and_says_why() {
        let project = begun(&[("1", "0.402"), ("2", "0.81")], &["0.001"]);
        let correct = Command::Readings(ReadingsCommand::Correct {
            id: ReadingId(2),
            raw: "0.801".into(),
            value: 0.801,
            slip: Slip::TypedWrong,
        });
        let project = after(&project, act(correct));
        let aside = Command::Readings(ReadingsCommand::SetAside(ReadingId(2)));
        let project = after(&project, act(aside));
        let rows = standard_rows(&project);
        assert_eq!(rows.len(), 2, "no row vanishes");
        assert_eq!((rows[1].reading.as_str(), rows[1].was.as_str()), ("0.801", "0.81"));
        assert_eq!(rows[1].note, "set aside: because; corrected: typed wrong");
        assert!(rows[1].aside && !rows[0].aside);
        assert_eq!(counted(&rows, "reading", "readings"), "2 readings, 1 set aside");
        assert_eq!(
            told(&rows[1], &project),
            "reading 2: 0.801; it was 0.81; set aside: because; corrected: typed wrong"
        );
        assert_eq!(zero_rows(&project).len(), 1);
        assert_eq!(counted(&[], "zero reading", "zero readings"), "no zero readings");
    }

    #[test]
    fn looks_of_one_application_are_numbered_only_where_there_are_several() {
        let mut project = begun(&[("1", "0.402"), ("2", "0.81")], &[]);
        assert_eq!(standard_rows(&project)[0].application, "1");
        project = after(&project, act(crate::rooms::bench::entry::tests::again("2", "0.82", 2)));
        let shown: Vec<String> = standard_rows(&project).into_iter().map(|r| r.application).collect();
        assert_eq!(shown, ["1", "2.1", "2.2"]);
    }

    #[test]
    fn letters_walk_through_every_direction_and_stage() {
        let mut direction = Direction::None;
        let mut seen = Vec::new();
        for _ in 0..4 {
            direction = next_direction(direction);
            seen.push(direction);
        }
        assert_eq!(direction, Direction::None);
        assert!(seen.contains(&Direction::Rising) && seen.contains(&Direction::TurningPoint));
        assert_eq!(next_stage(next_stage(next_stage(Stage::AsFound))), Stage::AsFound);
    }
}
