//! The report, signatures, findings.

use super::{Act, Refused, reason};
use crate::{
    project::{
        Project,
        about::{Kind, Signed},
    },
    quantity::Text,
};
use serde::{Deserialize, Serialize};

/// Changes around the record.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum RecordCommand {
    /// Marks a row of the report as not applicable; needs a reason.
    NotApplicable(Text),
    /// Marks a finding as read.
    MarkRead(Text),
    /// A signature was given; undo never crosses it.
    Signed(Signed),
}

pub(super) fn apply(project: &mut Project, command: &RecordCommand, act: &Act) -> Result<(), Refused> {
    match command {
        RecordCommand::NotApplicable(row) => {
            let why = reason(act, "not applicable")?;
            project.not_applicable.insert(row.clone(), why);
        }
        RecordCommand::MarkRead(code) => {
            if !project.marked_read.contains(code) {
                project.marked_read.push(code.clone());
            }
        }
        RecordCommand::Signed(_) if project.kind == Kind::Practice => {
            return Err(Refused::PracticeStays);
        }
        RecordCommand::Signed(signed) => project.signatures.push(signed.clone()),
    }
    Ok(())
}
