//! The advice, by the rule of the inference layer, bounded by the plan.

use super::{
    observe::{Observation, fitted},
    types::Advice,
    words,
};
use crate::{
    fit::Weights,
    inference::advice::{Outcome, Rules, advise as advise_points},
    model::Family,
    project::{
        Project,
        columns::ColumnSpec,
        plan::{ZeroState, ZerosPart},
    },
};

/// Which column is advised, and why.
pub(super) fn advise(project: &Project, observations: &[Observation]) -> Advice {
    let plan = &project.plan;
    let zero_is_value = matches!(plan.zero_state, ZeroState::Zero | ZeroState::LiveZero);
    let weights = weights(project);
    let ask = |zeros: bool, log: bool| {
        let used = fitted(observations, plan.zeros_part, zeros);
        let points: Vec<_> = used.iter().map(|&i| observations[i].point()).collect();
        let families = (1..=5).map(Family::Polynomial).chain(log.then_some(Family::Log));
        let rules = Rules { allowed: families.filter(|f| plan.allows(f)).collect(), suggested: Vec::new() };
        advise_points(&points, weights, &rules)
    };
    let zeros_fitted =
        zero_is_value && plan.zeros_part == ZerosPart::Fitted && observations.iter().any(Observation::is_zero);
    // A logarithm has no value at zero: it competes on the readings of standards alone.
    let with_zeros = ask(zero_is_value, !zeros_fitted);
    let line_stands = with_zeros.outcome == Outcome::Advised(Family::Polynomial(1));
    let advice = if zeros_fitted && !line_stands && plan.allows(&Family::Log) {
        let without = ask(false, true);
        let log = without.outcome == Outcome::Advised(Family::Log);
        if log { without } else { with_zeros }
    } else {
        with_zeros
    };
    let mut because: Vec<String> = advice.because.iter().map(words::because).collect();
    let column = match &advice.outcome {
        Outcome::Advised(family) => Some(ColumnSpec { weights, ..ColumnSpec::plain(family.clone()) }),
        Outcome::NoneGoodEnough | Outcome::TooFewToTell(..) | Outcome::NothingToJudge => {
            because.push(words::outcome(&advice.outcome));
            None
        }
    };
    Advice { column, because }
}

/// Weights of the shown columns when they all agree, else equal: spread decides weights, not the family.
fn weights(project: &Project) -> Weights {
    let columns = project.shown_columns();
    let mut fitted = columns.iter().filter(|c| c.family != Family::Declared).map(|c| c.weights);
    let first = fitted.next().unwrap_or(Weights::Equal);
    if fitted.all(|w| w == first) { first } else { Weights::Equal }
}
