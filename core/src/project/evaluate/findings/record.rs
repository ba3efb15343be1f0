//! Findings on the record: what is still to do before it can be signed.

use super::{Facts, digits, finding};
use crate::{
    model::Family,
    project::{
        about::Kind,
        columns::{ColumnSpec, first_columns},
        evaluate::finding::{Finding, Place, Severity},
    },
};

/// What blocks signing, and what an auditor will ask.
pub(super) fn findings(facts: &Facts<'_>) -> Vec<Finding> {
    let mut found = Vec::new();
    found.extend(advice(facts));
    found.extend(choice(facts));
    found.extend(hunting(facts));
    found.extend(digits::findings(facts));
    found.extend(missing(facts));
    found
}

/// Combinations of function and weights from which the best one looks better than it is.
const MANY: usize = 4;

/// Many fits were looked at before one was taken.
fn hunting(facts: &Facts<'_>) -> Option<Finding> {
    let first = first_columns();
    let declared = |c: &ColumnSpec| c.family == Family::Declared;
    let own = facts.project.columns.iter().filter(|c| !first.contains(c) && !declared(c)).count();
    (own >= MANY).then(|| {
        let all = own + first.len();
        let message = format!("{all} functions and weights were compared: the best of {all} looks better than it is");
        let hint = "name the function in the plan before the first reading, or check it on new standards";
        finding("many-tried", Severity::Note, Place::Record, message, hint)
    })
}

fn advice(facts: &Facts<'_>) -> Option<Finding> {
    let none = facts.advice.column.is_none() && facts.data.distinct_standards > 2;
    (none && facts.project.choice.is_none()).then(|| {
        finding(
            "none-good-enough",
            Severity::Look,
            Place::Record,
            facts.advice.because.last().cloned().unwrap_or_else(|| "none of these is good enough".to_owned()),
            "look at the residuals, allow another function in the plan, or add standards",
        )
    })
}

fn choice(facts: &Facts<'_>) -> Option<Finding> {
    (facts.data.applications > 0 && facts.project.choice.is_none()).then(|| {
        finding(
            "not-chosen",
            Severity::Stop,
            Place::Record,
            "no function is chosen yet".to_owned(),
            "press Enter on a column in Compare and give the reason",
        )
    })
}

fn missing(facts: &Facts<'_>) -> Vec<Finding> {
    if facts.data.applications == 0 || facts.project.kind == Kind::Practice {
        return Vec::new();
    }
    let project = facts.project;
    let item = &project.item;
    let rows = [
        ("number-missing", project.number.is_none(), "the report has no number"),
        (
            "item-missing",
            item.identity.is_none() && item.serial.is_none(),
            "the item has no identity mark or serial number",
        ),
        ("input-missing", &*project.plan.input.name == "value", "the quantity that is applied has no name"),
    ];
    rows.into_iter()
        .filter(|(code, gone, _)| *gone && !project.not_applicable.contains_key(*code))
        .map(|(code, _, message)| {
            finding(code, Severity::Stop, Place::Record, message.to_owned(), "fill it in at the Plan")
        })
        .collect()
}
