//! `evaluate(&Project) -> Evaluation`: everything that is computed, computed here, purely.
//!
//! ```text
//! readings → observations → (columns + advice candidates) → fits → inference → zero → words → findings
//! ```

mod advice;
pub mod column;
mod doubt;
pub mod finding;
pub mod findings;
pub mod near_zero;
mod numbers;
pub mod observe;
mod summary;
mod types;
pub mod words;

pub use finding::{Finding, Place, Severity};
pub use near_zero::{NearZeroOutcome, SideLimits, ZeroFacts};
pub use observe::Observation;
pub use types::{
    Advice, Caption, Captions, Coefficient, ColumnEvaluation, DataSummary, Evaluation, FitEvaluation, NearZero,
};

use super::{Project, columns::ColumnSpec};

/// Computes everything from what was entered.
///
/// # Shapes and units
/// Input quantities in the plan's input unit, indications in its output unit.
///
/// # Errors
/// None: a stage that cannot answer says why in a caption, a reason or a finding, and blocks nothing else.
#[must_use]
pub fn evaluate(project: &Project) -> Evaluation {
    let stage = observe::fitted_stage(project);
    let observations = observe::observations(project, stage);
    let data = summary::summary(project, stage, &observations);
    let zeros = ZeroFacts::new(project, &observations);
    let advice = advice::advise(project, &observations);
    let specs = specs(project, &advice);
    let mut columns: Vec<ColumnEvaluation> =
        specs.iter().map(|spec| column::evaluate(project, &observations, spec, &zeros)).collect();
    for column in &mut columns {
        column.findings = findings::of_column(project, &observations, column);
        findings::agree(column);
    }
    let at = |wanted: &ColumnSpec| columns.iter().position(|c| c.spec == *wanted && c.outcome.is_ok());
    let chosen = project.choice.as_ref().and_then(|c| at(&c.column));
    let advised = advice.column.as_ref().and_then(at);
    let speaking = chosen.or(advised);
    let facts = findings::Facts {
        project,
        data: &data,
        observations: &observations,
        zeros: &zeros,
        advice: &advice,
        columns: &columns,
        speaking: speaking.map(|i| &columns[i]),
    };
    let findings = findings::all(&facts);
    let figures = summary::figures(project, &data, &zeros);
    let near_zero = near_zero::row(project, &observations, &zeros);
    Evaluation {
        near_zero,
        zeros,
        data,
        observations,
        columns,
        advice,
        provisional: chosen.is_none(),
        chosen,
        speaking,
        findings,
        figures,
    }
}

/// Shown columns, and behind them the chosen and the advised one when they are not among them, six at most.
fn specs(project: &Project, advice: &Advice) -> Vec<ColumnSpec> {
    let mut specs = project.shown_columns();
    let wanted = project.choice.as_ref().map(|c| &c.column).into_iter().chain(&advice.column);
    for spec in wanted {
        if !specs.contains(spec) {
            specs.push(spec.clone());
        }
    }
    specs
}
