//! Which findings the strip shows, in which order, and where a click on one goes; knows no window.

use crate::{rooms::Room, session::Message};
use assize_core::project::{
    Project,
    evaluate::{Evaluation, Finding, Place, Severity},
};

/// How many lines the strip has at most.
pub const LINES: usize = 3;

/// One line of the strip.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// How much it matters.
    pub severity: Severity,
    /// What is said.
    pub text: String,
    /// What to do about it; may be empty.
    pub hint: String,
    /// Where a click goes.
    pub goes: Option<(Room, Place)>,
    /// Stable name, to mark the finding as read; `None` for a message of the program.
    pub code: Option<&'static str>,
    /// Marked as read.
    pub read: bool,
}

/// All lines: messages of the program first, then findings, those marked as read last.
#[must_use]
pub fn lines(messages: &[Message], project: &Project, evaluation: &Evaluation) -> Vec<Line> {
    let mut all: Vec<Line> = messages.iter().rev().map(of_message).collect();
    all.sort_by_key(|line| line.severity);
    let mut findings: Vec<Line> = evaluation.findings.iter().map(|f| of_finding(f, project)).collect();
    findings.sort_by_key(|line| (line.read, line.severity));
    all.extend(findings);
    all
}

/// What stands behind the lines that are shown: `and 4 notes`, `and 2 to look at, 1 note`; empty for nothing.
#[must_use]
pub fn rest(hidden: &[Line]) -> String {
    let count = |severity| hidden.iter().filter(|l| l.severity == severity).count();
    let parts: Vec<String> = [
        (count(Severity::Stop), "stop", "stops"),
        (count(Severity::Look), "to look at", "to look at"),
        (count(Severity::Note), "note", "notes"),
    ]
    .into_iter()
    .filter(|(n, ..)| *n > 0)
    .map(|(n, one, many)| format!("{n} {}", if n == 1 { one } else { many }))
    .collect();
    if parts.is_empty() { String::new() } else { format!("and {}", parts.join(", ")) }
}

fn of_message(message: &Message) -> Line {
    Line {
        severity: message.severity,
        text: message.text.clone(),
        hint: message.hint.clone(),
        goes: None,
        code: None,
        read: false,
    }
}

fn of_finding(finding: &Finding, project: &Project) -> Line {
    Line {
        severity: finding.severity,
        text: finding.message.clone(),
        hint: finding.hint.clone(),
        goes: Some((room_of(finding), finding.place.clone())),
        code: Some(finding.code),
        read: project.marked_read.iter().any(|code| **code == *finding.code),
    }
}

/// The room in which something can be done about a finding.
fn room_of(finding: &Finding) -> Room {
    match (&finding.place, finding.code) {
        (Place::Record, "not-chosen" | "none-good-enough") | (Place::Column(_), _) => Room::Compare,
        (Place::Record, _) if finding.code.ends_with("-missing") => Room::Plan,
        (Place::Record, _) => Room::Record,
        (Place::Plan, _) => Room::Plan,
        (Place::Data | Place::Reading(_) | Place::Zeros, _) => Room::Bench,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn line(severity: Severity) -> Line {
        Line { severity, text: String::new(), hint: String::new(), goes: None, code: None, read: false }
    }

    #[test]
    fn what_is_not_shown_is_counted_in_words() {
        use Severity::{Look, Note, Stop};
        let all = |list: &[Severity]| list.iter().map(|s| line(*s)).collect::<Vec<_>>();
        assert_eq!(rest(&all(&[])), "");
        assert_eq!(rest(&all(&[Note])), "and 1 note");
        assert_eq!(rest(&all(&[Note; 4])), "and 4 notes");
        assert_eq!(rest(&all(&[Stop, Look, Look, Note])), "and 1 stop, 2 to look at, 1 note");
    }

    #[test]
    fn a_finding_leads_to_the_room_where_something_can_be_done() {
        let finding = |code, place| Finding {
            code,
            severity: Severity::Look,
            place,
            message: String::new(),
            hint: String::new(),
        };
        assert_eq!(room_of(&finding("not-chosen", Place::Record)), Room::Compare);
        assert_eq!(room_of(&finding("number-missing", Place::Record)), Room::Plan);
        assert_eq!(room_of(&finding("shape", Place::Column("Line".into()))), Room::Compare);
        assert_eq!(room_of(&finding("outlier", Place::Reading(4))), Room::Bench);
    }
}
