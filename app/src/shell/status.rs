//! The line under the name of each room; knows no window.

use super::head::to_do;
use crate::rooms::Room;
use assize_core::project::{Project, about::Kind, evaluate::Evaluation};

/// What the column of rooms says under a room's name.
#[must_use]
pub fn status(room: Room, project: &Project, evaluation: &Evaluation) -> String {
    match room {
        Room::Plan => match project.plan.fixed {
            Some(since) => format!("fixed {}", since.clock()),
            None => "not fixed yet".to_owned(),
        },
        Room::Bench => bench(evaluation),
        Room::Compare => compare(project, evaluation),
        Room::Record => record(project, evaluation),
    }
}

fn bench(evaluation: &Evaluation) -> String {
    let data = &evaluation.data;
    match (data.readings, data.zero_readings) {
        (0, 0) => "no readings".to_owned(),
        (1, 0) => "1 reading".to_owned(),
        (n, 0) => format!("{n} readings"),
        (n, 1) => format!("{n} + 1 zero"),
        (n, z) => format!("{n} + {z} zeros"),
    }
}

fn compare(project: &Project, evaluation: &Evaluation) -> String {
    let fits = evaluation.columns.iter().filter(|c| c.outcome.is_ok()).count();
    match (&project.choice, fits) {
        (Some(choice), _) => choice.column.head().to_lowercase(),
        (None, 0) => "no fit yet".to_owned(),
        (None, 1) => "1 fit".to_owned(),
        (None, n) => format!("{n} fits"),
    }
}

fn record(project: &Project, evaluation: &Evaluation) -> String {
    match (project.signatures.len(), to_do(project, evaluation)) {
        (0, _) if project.kind == Kind::Practice => "practice".to_owned(),
        (0, 0) => "nothing to do".to_owned(),
        (0, n) => format!("{n} to do"),
        (1, _) => "signed".to_owned(),
        (n, _) => format!("{n} signatures"),
    }
}
