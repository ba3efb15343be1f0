//! Findings of a whole evaluation: data, zeros, record, and the column that speaks.

mod context;
mod data;
mod digits;
mod family;
mod fitted;
mod forced;
mod order;
mod points;
mod reach;
mod record;
mod run;
mod saturation;
mod scatter;
mod shape;
mod terms;
#[cfg(test)]
mod tests;
mod thermistor;
mod zeros;

pub use fitted::{agree, of_column};

use super::{
    finding::{Finding, Place, Severity},
    near_zero::ZeroFacts,
    observe::Observation,
    types::{Advice, ColumnEvaluation, DataSummary},
};
use crate::project::Project;

/// What the findings are made from.
#[derive(Debug, Clone, Copy)]
pub struct Facts<'a> {
    /// The project.
    pub project: &'a Project,
    /// Counts.
    pub data: &'a DataSummary,
    /// Observations of the fitted stage.
    pub observations: &'a [Observation],
    /// The zeros.
    pub zeros: &'a ZeroFacts,
    /// Advice.
    pub advice: &'a Advice,
    /// All columns.
    pub columns: &'a [ColumnEvaluation],
    /// The column that speaks, if any.
    pub speaking: Option<&'a ColumnEvaluation>,
}

/// Findings in order: Stop, Look, Note; inside each in order of the work.
#[must_use]
pub fn all(facts: &Facts<'_>) -> Vec<Finding> {
    let mut found = data::findings(facts);
    found.extend(zeros::findings(facts));
    found.extend(facts.speaking.map(|c| c.findings.clone()).unwrap_or_default());
    found.extend(record::findings(facts));
    found.sort_by_key(|f| f.severity);
    found
}

fn finding(code: &'static str, severity: Severity, place: Place, message: String, hint: &str) -> Finding {
    Finding { code, severity, place, message, hint: hint.to_owned() }
}
