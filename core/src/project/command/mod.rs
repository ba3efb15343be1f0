//! Every change is a command: a value that says what; the entry around it says who, when and why.
//!
//! Commands are also what a project file stores, so this enum is its format: variants and fields may be
//! added, those that exist never change their meaning. `Project` itself is never written.

mod about;
mod columns;
mod plan;
mod readings;
mod record;
mod standards;

pub use about::{AboutCommand, ItemField};
pub use columns::ColumnsCommand;
pub use plan::{PlanCommand, PlanField};
pub use readings::{NewReading, ReadingsCommand, What};
pub use record::RecordCommand;
pub use standards::StandardsCommand;

use super::Project;
use crate::quantity::{Moment, Text};
use serde::{Deserialize, Serialize};

/// A change, by subject.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Command {
    /// Kind, number, item, people, conditions.
    About(AboutCommand),
    /// The plan.
    Plan(PlanCommand),
    /// Standards.
    Standards(StandardsCommand),
    /// Readings and zero readings.
    Readings(ReadingsCommand),
    /// Columns, declared function, choice.
    Columns(ColumnsCommand),
    /// Report, signatures, findings.
    Record(RecordCommand),
    /// Takes back the latest effective change of what was entered.
    TakeBack,
    /// Puts back what was taken back last.
    PutBack,
}

/// A command with its author, time and reason.
#[derive(Debug, Clone, PartialEq)]
pub struct Act {
    /// Who.
    pub by: Text,
    /// When.
    pub at: Moment,
    /// Why, where it matters.
    pub because: Option<Text>,
    /// What.
    pub command: Command,
}

/// Why a command was refused; nothing was changed.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum Refused {
    /// The plan is fixed.
    #[error("the plan is fixed since the first reading ({since}); a change needs a reason")]
    PlanFixed {
        /// Since when.
        since: String,
    },
    /// A reason is missing.
    #[error("{what} needs a reason in words")]
    ReasonNeeded {
        /// What needs it.
        what: &'static str,
    },
    /// A name is missing.
    #[error("say who is at the bench first: an entry carries the name of a person")]
    NobodyAtBench,
    /// No such thing.
    #[error("there is no {what} number {number}")]
    NoSuch {
        /// Kind of thing.
        what: &'static str,
        /// Its number.
        number: u32,
    },
    /// A number that cannot be used.
    #[error("{what}: {found:?} cannot be used; {accepted}")]
    NotUsable {
        /// Which field.
        what: &'static str,
        /// What was found.
        found: String,
        /// What would be accepted.
        accepted: &'static str,
    },
    /// A practice project cannot become a record.
    #[error("a practice project stays one: it cannot be made or signed as a record")]
    PracticeStays,
    /// Nothing to take back or put back.
    #[error("{0}")]
    NothingTo(&'static str),
    /// The change was made already.
    #[error("{0} already")]
    Already(&'static str),
}

/// The project after one act.
///
/// # Errors
/// [`Refused`] says why; the project handed in is unchanged in either case.
pub fn apply(project: &Project, act: &Act) -> Result<Project, Refused> {
    if act.by.trim().is_empty() {
        return Err(Refused::NobodyAtBench);
    }
    let mut next = project.clone();
    match &act.command {
        Command::About(c) => about::apply(&mut next, c)?,
        Command::Plan(c) => plan::apply(&mut next, c, act)?,
        Command::Standards(c) => standards::apply(&mut next, c, act)?,
        Command::Readings(c) => readings::apply(&mut next, c, act)?,
        Command::Columns(c) => columns::apply(&mut next, c, act)?,
        Command::Record(c) => record::apply(&mut next, c, act)?,
        Command::TakeBack => return Err(Refused::NothingTo("there is nothing to take back")),
        Command::PutBack => return Err(Refused::NothingTo("there is nothing to put back")),
    }
    Ok(next)
}

/// The reason of an act, or a refusal when it is missing or blank.
fn reason(act: &Act, what: &'static str) -> Result<Text, Refused> {
    act.because.clone().filter(|why| !why.trim().is_empty()).ok_or(Refused::ReasonNeeded { what })
}

/// Refuses numbers that are not finite.
fn finite(value: f64, what: &'static str, raw: &str) -> Result<f64, Refused> {
    if value.is_finite() {
        return Ok(value);
    }
    Err(Refused::NotUsable { what, found: raw.to_owned(), accepted: "a finite number is accepted, e.g. 1.25 or 1,25" })
}
