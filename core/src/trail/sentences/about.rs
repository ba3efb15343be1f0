//! Kind, number, item, people, conditions, told.

use super::{Before, one_line, words};
use crate::project::{
    Project,
    command::{AboutCommand, ItemField},
};

pub(super) fn tell(command: &AboutCommand, before: &Before<'_>) -> String {
    match command {
        AboutCommand::Kind(kind) => format!("made this {}", words::kind(*kind)),
        AboutCommand::Number(text) => {
            before.change("the number of the record", |p| p.number.as_ref().map(ToString::to_string), text)
        }
        AboutCommand::Story(_) => "wrote the story behind the data".to_owned(),
        AboutCommand::Item(field, text) => before.change(words::item_field(*field), |p| item(p, *field), text),
        AboutCommand::AtBench { name, role } => match role {
            Some(role) => format!("noted {} at the bench ({})", one_line(name), one_line(role)),
            None => format!("noted {} at the bench", one_line(name)),
        },
        AboutCommand::ConditionsAtStart(list) => before.change(
            "the conditions at the start",
            |p| Some(words::conditions(&p.conditions.start)),
            &words::conditions(list),
        ),
        AboutCommand::ConditionsAtEnd(list) => before.change(
            "the conditions at the end",
            |p| Some(words::conditions(&p.conditions.end)),
            &words::conditions(list),
        ),
        AboutCommand::Adjusted(a) => {
            format!(
                "noted an adjustment: {} adjusted {} because {}",
                one_line(&a.who),
                one_line(&a.what),
                one_line(&a.why)
            )
        }
        AboutCommand::Earlier(record) => {
            format!("linked the earlier record {}", one_line(&record.number))
        }
        AboutCommand::Conversion(c) => {
            format!("noted the unit conversion {} (× {})", one_line(&c.id), words::number(c.factor))
        }
    }
}

fn item(project: &Project, field: ItemField) -> Option<String> {
    let item = &project.item;
    let text = match field {
        ItemField::Description => &item.description,
        ItemField::Identity => &item.identity,
        ItemField::Maker => &item.maker,
        ItemField::Model => &item.model,
        ItemField::Serial => &item.serial,
        ItemField::Channel => &item.channel,
        ItemField::Condition => &item.condition,
        ItemField::Received => &item.received,
    };
    text.as_ref().map(ToString::to_string)
}
