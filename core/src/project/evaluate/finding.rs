//! Findings: what a person should know, sized and placed.

use serde::Serialize;
use std::fmt;

/// How much a finding matters. The word always stands beside the shape.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Severity {
    /// ■ Blocks signing.
    Stop,
    /// ◆ To be looked at.
    Look,
    /// ○ Worth knowing.
    Note,
}

impl fmt::Display for Severity {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Stop => "Stop",
            Self::Look => "Look",
            Self::Note => "Note",
        })
    }
}

/// Where a finding belongs, and where a click on it goes.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Place {
    /// The data as a whole.
    Data,
    /// A reading, by its number.
    Reading(u32),
    /// The zero readings.
    Zeros,
    /// A column, by its head.
    Column(String),
    /// The plan.
    Plan,
    /// The record.
    Record,
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Data => f.write_str("data"),
            Self::Reading(n) => write!(f, "reading {n}"),
            Self::Zeros => f.write_str("zero readings"),
            Self::Column(head) => write!(f, "column {head}"),
            Self::Plan => f.write_str("plan"),
            Self::Record => f.write_str("record"),
        }
    }
}

/// One cause, one finding.
#[derive(Debug, Clone, PartialEq)]
pub struct Finding {
    /// Stable name, e.g. `bends`.
    pub code: &'static str,
    /// How much it matters.
    pub severity: Severity,
    /// Where.
    pub place: Place,
    /// What was found, with its size.
    pub message: String,
    /// What to do about it.
    pub hint: String,
}
