//! The wrong shape, a shape that cannot be told, and a curve that passes through every point.

use super::{
    context::Context,
    family::{Judging, Tests},
    finding,
};
use crate::{
    model::Family,
    project::evaluate::{
        finding::{Finding, Severity},
        words::{r_squared, tolerance},
    },
};

/// R² from which people take it for proof.
const PROOF: f64 = 0.99;

pub(super) fn findings(c: &Context<'_>, tests: &Tests, judged: &Judging) -> Option<Finding> {
    if c.fit().family == Family::OnePoint {
        return None;
    }
    if c.fit().degrees_of_freedom == 0 {
        return Some(nothing_left(c));
    }
    if c.e.shape.rejected() {
        return wrong(c, tests, judged);
    }
    too_few(c)
}

/// Nothing is left over that could show an error.
fn nothing_left(c: &Context<'_>) -> Finding {
    let (n, p) = (c.fit().points.len(), c.fit().coefficients.len());
    let message = format!(
        "{} passes through every point because it has to: {n} applications for {p} coefficients leave nothing over \
         to show its error with",
        c.head()
    );
    finding("nothing-left", Severity::Look, c.place(), message, "add a standard, or apply one of them again")
}

/// The caption sizes it; R² is answered here when it looks like a proof.
fn wrong(c: &Context<'_>, tests: &Tests, judged: &Judging) -> Option<Finding> {
    // A zero that the data refuse bends the residuals of a line through zero: one cause, one finding.
    if super::forced::explains(c, tests, judged) {
        return None;
    }
    let family = judged.shape?;
    let caption = &c.column.captions.residuals;
    let severity = if family.rejected { caption.severity? } else { Severity::Note };
    let mut message = format!("{} {}", c.head(), caption.text);
    if let Some(r2) = c.fit().r_squared().filter(|r2| *r2 >= PROOF) {
        let text = r_squared(r2);
        message.push_str(&format!("; R² = {text} says only that the reading follows the standard, not how straight"));
    }
    Some(finding(
        "shape",
        severity,
        c.place(),
        message,
        "compare the residual plots; a cloud around zero is what a good fit leaves",
    ))
}

/// Too few points, or too few to see a bend that matters.
fn too_few(c: &Context<'_>) -> Option<Finding> {
    let head = c.head();
    if let Some(few) = c.e.shape.too_few {
        // Terms that leave no standard over are said as such.
        if super::terms::too_many_for_levels(c) {
            return None;
        }
        let message = format!(
            "{head}: too few points to tell the shape ({} different standards, {} would do; {} degrees of freedom, \
             {} would do)",
            few.levels, few.levels_needed, few.degrees_of_freedom, few.degrees_needed
        );
        return Some(finding("too-few", Severity::Note, c.place(), message, "add standards between those you have"));
    }
    let (low, high) = c.ends()?;
    let middle = f64::midpoint(low, high);
    let bend = (c.e.shape.detectable_bend? / c.fit().curve.derivative(middle)).abs();
    let (limit, name) = match tolerance(&c.project.plan, middle) {
        Some(limit) => (limit / 4.0, "a quarter of the limit"),
        None => (c.expanded(middle, 1)?, "the uncertainty of one reading"),
    };
    (bend.is_finite() && bend > limit).then(|| {
        let message = format!(
            "{head}: too few points to tell; a bend of {} could hide here, more than {name} ({})",
            c.size(bend),
            c.size(limit)
        );
        finding("too-few", Severity::Note, c.place(), message, "repeat each standard, or add standards")
    })
}
