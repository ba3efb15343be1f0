//! Standards: added with the first reading at a new value, completed from their papers.

use super::{Act, Refused, finite, reason};
use crate::{
    project::Project,
    quantity::Text,
    standards::{Standard, StandardId, StandardPapers},
};
use serde::{Deserialize, Serialize};
use std::sync::Arc;

/// Changes of standards.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum StandardsCommand {
    /// Adds a standard by its value as typed.
    Add {
        /// As typed.
        raw: Text,
        /// Certified value, input unit.
        value: f64,
        /// What stands on paper.
        papers: StandardPapers,
    },
    /// Replaces what stands on paper.
    Papers {
        /// Which standard.
        id: StandardId,
        /// The papers.
        papers: StandardPapers,
    },
    /// Replaces the papers of the standard with this value, adding it when there is none.
    PapersOf {
        /// As typed.
        raw: Text,
        /// Certified value, input unit.
        value: f64,
        /// The papers.
        papers: StandardPapers,
    },
    /// Gives the same papers to all standards (one reference for all levels).
    PapersForAll(StandardPapers),
    /// Corrects the value; needs a reason once there are readings.
    Value {
        /// Which standard.
        id: StandardId,
        /// As typed.
        raw: Text,
        /// Certified value, input unit.
        value: f64,
    },
}

pub(super) fn apply(project: &mut Project, command: &StandardsCommand, act: &Act) -> Result<(), Refused> {
    match command {
        StandardsCommand::Add { raw, value, papers } => {
            usable(papers)?;
            add(project, raw, *value, papers.clone())?;
        }
        StandardsCommand::Papers { id, papers } => {
            usable(papers)?;
            find(project, *id)?.papers = papers.clone();
        }
        StandardsCommand::PapersOf { raw, value, papers } => {
            usable(papers)?;
            let id = named_by_value(project, raw, *value)?;
            find(project, id)?.papers = papers.clone();
        }
        StandardsCommand::PapersForAll(papers) => {
            usable(papers)?;
            Arc::make_mut(&mut project.standards).iter_mut().for_each(|s| s.papers = papers.clone());
        }
        StandardsCommand::Value { id, raw, value } => {
            if !project.readings.is_empty() {
                reason(act, "a new value of a standard that has readings")?;
            }
            let value = finite(*value, "standard", raw)?;
            let standard = find(project, *id)?;
            standard.value = value;
            standard.raw = raw.clone();
        }
    }
    Ok(())
}

/// The standard with this value, added when there is none yet.
pub(super) fn named_by_value(project: &mut Project, raw: &Text, value: f64) -> Result<StandardId, Refused> {
    match project.standards.iter().find(|s| s.value.total_cmp(&value).is_eq()) {
        Some(known) => Ok(known.id),
        None => add(project, raw, value, StandardPapers::default()),
    }
}

fn add(project: &mut Project, raw: &Text, value: f64, papers: StandardPapers) -> Result<StandardId, Refused> {
    let value = finite(value, "standard", raw)?;
    let id = StandardId(u32::try_from(project.standards.len()).unwrap_or(u32::MAX - 1) + 1);
    Arc::make_mut(&mut project.standards).push(Standard { id, raw: raw.clone(), value, papers });
    Ok(id)
}

fn find(project: &mut Project, id: StandardId) -> Result<&mut Standard, Refused> {
    Arc::make_mut(&mut project.standards)
        .iter_mut()
        .find(|s| s.id == id)
        .ok_or(Refused::NoSuch { what: "standard", number: id.0 })
}

fn usable(papers: &StandardPapers) -> Result<(), Refused> {
    match papers.uncertainty {
        Some(u) if !u.is_usable() => Err(Refused::NotUsable {
            what: "uncertainty of the standard",
            found: format!("{u:?}"),
            accepted: "U with k > 0, limits, or u, none negative",
        }),
        _ => Ok(()),
    }
}
