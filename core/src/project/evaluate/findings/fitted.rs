//! Findings on one fitted column. Those with a significance test are judged as one family.

use super::{context::Context, family::Tests, forced, order, points, reach, scatter, shape, terms, thermistor};
use crate::{
    model::Family,
    project::{
        Project,
        evaluate::{
            finding::{Finding, Severity},
            observe::Observation,
            types::{Caption, ColumnEvaluation},
        },
    },
};

/// Findings of a column, most serious first.
#[must_use]
pub fn of_column(project: &Project, observations: &[Observation], column: &ColumnEvaluation) -> Vec<Finding> {
    let Ok(e) = &column.outcome else {
        return Vec::new();
    };
    let c = Context::new(project, observations, column, e);
    if e.fit.family == Family::Declared {
        return Vec::new();
    }
    let tests = Tests::of(&c);
    let judged = tests.judge();
    let mut found: Vec<Finding> = shape::findings(&c, &tests, &judged).into_iter().collect();
    found.extend(scatter::findings(&c, &tests, &judged));
    found.extend(order::findings(&c, &tests, &judged));
    found.extend(forced::findings(&c, &tests, &judged));
    found.extend(terms::findings(&c));
    found.extend(thermistor::findings(&c));
    let funnel = found.iter().any(|f| f.code == "spread" && f.severity == Severity::Look);
    found.extend(reach::findings(&c, funnel));
    // Where the scatter grows, the noisy end is no outlier.
    if !funnel {
        found.extend(points::findings(&c));
    }
    found.sort_by_key(|f| f.severity);
    found
}

/// Makes the caption over the residuals and the figure of the bend say no more than the findings do.
///
/// The caption is made from one column's shape alone; the findings weigh it against all other tests, and
/// know whether a bend that matters could have been seen.
pub fn agree(column: &mut ColumnEvaluation) {
    let caption = &mut column.captions.residuals;
    if let Some(shape) = column.findings.iter().find(|f| f.code == "shape") {
        caption.severity = Some(shape.severity);
    }
    let Some(few) = column.findings.iter().find(|f| f.code == "too-few") else {
        return;
    };
    if caption.severity.is_none() {
        *caption = Caption::with(few.severity, "too few points to tell");
    }
    if let Some(bend) = column.figures.iter_mut().find(|f| f.key == "leftover_bend" && f.text == "none seen") {
        "too few points".clone_into(&mut bend.text);
    }
}
