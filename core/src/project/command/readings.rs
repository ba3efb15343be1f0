//! Readings: added, corrected with the old value kept, set aside with a reason. None is ever deleted.

use super::{Act, Refused, finite, reason, standards::named_by_value};
use crate::standards::StandardId;
use crate::{
    project::{Project, about::Import},
    quantity::{Moment, Text},
    readings::{Applied, Correction, Direction, Reading, ReadingId, Slip, Source, Stage},
};
use serde::{Deserialize, Serialize};
use std::{collections::BTreeMap, sync::Arc};

/// What a new reading stands for.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum What {
    /// A standard, named by its value: as typed, and in the input unit.
    Standard(Text, f64),
    /// Nothing was applied; what was applied since the zero before, if noted.
    Nothing(Option<Text>),
}

/// A reading to be added; everything but value and standard may be left out.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct NewReading {
    /// What was applied.
    pub what: What,
    /// The text as typed.
    pub raw: Text,
    /// The value, output unit.
    pub value: f64,
    /// Standard uncertainty, output unit.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub uncertainty: Option<f64>,
    /// Stage.
    #[serde(default)]
    pub stage: Stage,
    /// Run, from 1.
    #[serde(default = "one")]
    pub run: u32,
    /// Cycle, from 1.
    #[serde(default = "one")]
    pub cycle: u32,
    /// Direction.
    #[serde(default)]
    pub direction: Direction,
    /// Application; `None` = a new one.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub application: Option<u32>,
    /// Run order where it is known.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub order: Option<u32>,
    /// When it was taken, where known.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub time: Option<Moment>,
    /// Where it came from.
    #[serde(default)]
    pub source: Source,
    /// It was questioned and let stand.
    #[serde(default)]
    pub questioned: bool,
}

fn one() -> u32 {
    1
}

impl NewReading {
    /// A reading with everything optional left at its default.
    #[must_use]
    pub fn new(what: What, raw: &str, value: f64) -> Self {
        Self {
            what,
            raw: Text::from(raw),
            value,
            uncertainty: None,
            stage: Stage::default(),
            run: 1,
            cycle: 1,
            direction: Direction::default(),
            application: None,
            order: None,
            time: None,
            source: Source::default(),
            questioned: false,
        }
    }
}

/// Changes of readings.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum ReadingsCommand {
    /// Adds readings in this order.
    Add(Vec<NewReading>),
    /// Adds the rows of an imported file and keeps the file.
    Import(Arc<Import>, Vec<NewReading>),
    /// Replaces a value; the old one stays visible.
    Correct {
        /// Which reading.
        id: ReadingId,
        /// The new text.
        raw: Text,
        /// The new value, output unit.
        value: f64,
        /// Why.
        slip: Slip,
    },
    /// Names another standard for a reading; needs a reason.
    Reapply {
        /// Which reading.
        id: ReadingId,
        /// What was applied.
        what: What,
    },
    /// Sets a reading aside; needs a reason.
    SetAside(ReadingId),
    /// Lets a reading count again; needs a reason.
    CountAgain(ReadingId),
    /// Marks a reading as questioned and let stand.
    LetStand(ReadingId),
}

pub(super) fn apply(project: &mut Project, command: &ReadingsCommand, act: &Act) -> Result<(), Refused> {
    match command {
        ReadingsCommand::Add(rows) => add_all(project, rows, act),
        ReadingsCommand::Import(import, rows) => {
            project.imports.push(Arc::clone(import));
            add_all(project, rows, act)
        }
        ReadingsCommand::Correct { id, raw, value, slip } => {
            let value = finite(*value, "reading", raw)?;
            if *slip == Slip::Other {
                reason(act, "a correction")?;
            }
            let reading = find(project, *id)?;
            let old = Correction {
                raw: std::mem::replace(&mut reading.raw, raw.clone()),
                value: std::mem::replace(&mut reading.value, value),
                slip: *slip,
                at: act.at,
                by: act.by.clone(),
            };
            reading.corrections.push(old);
            Ok(())
        }
        ReadingsCommand::Reapply { id, what } => {
            reason(act, "another standard for a reading")?;
            let applied = applied(project, what)?;
            find(project, *id)?.applied = applied;
            Ok(())
        }
        ReadingsCommand::SetAside(id) => {
            let why = reason(act, "setting a reading aside")?;
            let reading = find(project, *id)?;
            if reading.set_aside.is_some() {
                return Err(Refused::Already("the reading is set aside"));
            }
            reading.set_aside = Some(why);
            Ok(())
        }
        ReadingsCommand::CountAgain(id) => {
            reason(act, "letting a reading count again")?;
            find(project, *id)?.set_aside.take().map(|_| ()).ok_or(Refused::Already("the reading counts"))
        }
        ReadingsCommand::LetStand(id) => {
            find(project, *id)?.questioned = true;
            Ok(())
        }
    }
}

fn add_all(project: &mut Project, rows: &[NewReading], act: &Act) -> Result<(), Refused> {
    let mut looks = Looks::of(project);
    for row in rows {
        add(project, row, act, &mut looks)?;
    }
    if !rows.is_empty() {
        project.plan.fixed.get_or_insert(act.at);
    }
    Ok(())
}

/// How many looks each application has so far, counted once for a whole batch of rows.
struct Looks {
    counts: BTreeMap<(u32, Stage, Option<StandardId>), u32>,
    last: u32,
}

impl Looks {
    fn of(project: &Project) -> Self {
        let mut looks = Self { counts: BTreeMap::new(), last: 0 };
        for r in project.readings.iter() {
            looks.next(r.application, r.stage, &r.applied);
        }
        looks
    }

    fn next(&mut self, application: u32, stage: Stage, applied: &Applied) -> u32 {
        let standard = match applied {
            Applied::Standard(id) => Some(*id),
            Applied::Nothing { .. } => None,
        };
        self.last = self.last.max(application);
        let count = self.counts.entry((application, stage, standard)).or_insert(0);
        *count += 1;
        *count
    }
}

fn add(project: &mut Project, row: &NewReading, act: &Act, looks: &mut Looks) -> Result<(), Refused> {
    let value = finite(row.value, "reading", &row.raw)?;
    let applied = applied(project, &row.what)?;
    let application = row.application.unwrap_or(looks.last.saturating_add(1));
    let look = looks.next(application, row.stage, &applied);
    let id = ReadingId(u32::try_from(project.readings.len()).unwrap_or(u32::MAX - 1) + 1);
    project.readings.push(Reading {
        id,
        applied,
        raw: row.raw.clone(),
        value,
        uncertainty: row.uncertainty,
        stage: row.stage,
        run: row.run,
        cycle: row.cycle,
        direction: row.direction,
        application,
        look,
        order: row.order,
        time: row.time,
        person: act.by.clone(),
        source: row.source.clone(),
        questioned: row.questioned,
        early: false,
        set_aside: None,
        corrections: Vec::new(),
    });
    Ok(())
}

fn applied(project: &mut Project, what: &What) -> Result<Applied, Refused> {
    Ok(match what {
        What::Standard(raw, value) => Applied::Standard(named_by_value(project, raw, *value)?),
        What::Nothing(between) => Applied::Nothing { between: between.clone() },
    })
}

fn find(project: &mut Project, id: ReadingId) -> Result<&mut Reading, Refused> {
    let none = Refused::NoSuch { what: "reading", number: id.0 };
    let index = (id.0 as usize).checked_sub(1).ok_or(none.clone())?;
    project.readings.get_mut(index).ok_or(none)
}
