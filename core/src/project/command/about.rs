//! Kind, number, item, people, conditions.

use super::Refused;
use crate::{
    project::{
        Project,
        about::{Adjustment, Condition, EarlierRecord, Kind, Person, UnitConversion},
    },
    quantity::Text,
};
use serde::{Deserialize, Serialize};

/// A field of the item.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[expect(missing_docs, reason = "the names are those of the fields of `Item`, documented there")]
pub enum ItemField {
    Description,
    Identity,
    Maker,
    Model,
    Serial,
    Channel,
    Condition,
    Received,
}

/// Changes of what the record is about.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum AboutCommand {
    /// Practice or record; practice stays.
    Kind(Kind),
    /// Number of the report.
    Number(Text),
    /// The story behind the data.
    Story(Text),
    /// A field of the item; blank clears it.
    Item(ItemField, Text),
    /// Who is at the bench, and in which role.
    AtBench {
        /// Printed name.
        name: Text,
        /// Role.
        role: Option<Text>,
    },
    /// Conditions at the start.
    ConditionsAtStart(Vec<Condition>),
    /// Conditions at the end.
    ConditionsAtEnd(Vec<Condition>),
    /// An adjustment.
    Adjusted(Adjustment),
    /// The earlier record.
    Earlier(EarlierRecord),
    /// A unit conversion used.
    Conversion(UnitConversion),
}

pub(super) fn apply(project: &mut Project, command: &AboutCommand) -> Result<(), Refused> {
    match command {
        AboutCommand::Kind(Kind::Record) if project.kind == Kind::Practice => {
            return Err(Refused::PracticeStays);
        }
        AboutCommand::Kind(kind) => project.kind = *kind,
        AboutCommand::Number(text) => project.number = filled(text),
        AboutCommand::Story(text) => project.story = filled(text),
        AboutCommand::Item(field, text) => set_item(project, *field, filled(text)),
        AboutCommand::AtBench { name, role } => at_bench(project, name, role.as_ref())?,
        AboutCommand::ConditionsAtStart(list) => project.conditions.start.clone_from(list),
        AboutCommand::ConditionsAtEnd(list) => project.conditions.end.clone_from(list),
        AboutCommand::Adjusted(what) => project.adjustment = Some(what.clone()),
        AboutCommand::Earlier(record) => project.earlier = Some(record.clone()),
        AboutCommand::Conversion(c) => project.conversions.push(c.clone()),
    }
    Ok(())
}

fn set_item(project: &mut Project, field: ItemField, text: Option<Text>) {
    let item = &mut project.item;
    let place = match field {
        ItemField::Description => &mut item.description,
        ItemField::Identity => &mut item.identity,
        ItemField::Maker => &mut item.maker,
        ItemField::Model => &mut item.model,
        ItemField::Serial => &mut item.serial,
        ItemField::Channel => &mut item.channel,
        ItemField::Condition => &mut item.condition,
        ItemField::Received => &mut item.received,
    };
    *place = text;
}

fn at_bench(project: &mut Project, name: &Text, role: Option<&Text>) -> Result<(), Refused> {
    let name = filled(name).ok_or(Refused::NobodyAtBench)?;
    match project.persons.iter_mut().find(|p| p.name == name) {
        Some(known) => known.role = role.cloned().or(known.role.take()),
        None => project.persons.push(Person { name: name.clone(), role: role.cloned() }),
    }
    project.at_bench = Some(name);
    Ok(())
}

/// The text without surrounding space; blank counts as not given.
pub(super) fn filled(text: &Text) -> Option<Text> {
    let trimmed = text.trim();
    (!trimmed.is_empty()).then(|| Text::from(trimmed))
}
