//! The advice, by the rule of the inference layer, bounded by the plan.

use super::{
    observe::{Observation, fitted},
    types::Advice,
    words,
};
use crate::{
    fit::Weights,
    inference::advice::{Outcome, Rules, advise as advise_points},
    model::{Family, Units},
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
    let ask = |zeros: bool, families: &dyn Fn(&Family) -> bool| {
        let used = fitted(observations, plan.zeros_part, zeros);
        let points: Vec<_> = used.iter().map(|&i| observations[i].point()).collect();
        let stated: Vec<f64> = used.iter().map(|&i| observations[i].uncertainty.unwrap_or(f64::NAN)).collect();
        let (allowed, suggested) = candidates(project, families);
        let units = Units::of(&plan.input.unit, &plan.output.unit);
        let rules = Rules { allowed, suggested, units, reading_uncertainty: Some(stated) };
        advise_points(&points, weights, &rules)
    };
    let zeros_fitted =
        zero_is_value && plan.zeros_part == ZerosPart::Fitted && observations.iter().any(Observation::is_zero);
    // A family without a value at zero competes on the readings of standards alone.
    let with_zeros = ask(zero_is_value, &|f| !zeros_fitted || f.has_value_at(0.0));
    let line_stands = with_zeros.outcome == Outcome::Advised(Family::Polynomial(1));
    let advice = if zeros_fitted && !line_stands {
        let without = ask(false, &|_| true);
        let beyond = matches!(&without.outcome, Outcome::Advised(f) if !f.has_value_at(0.0));
        if beyond { without } else { with_zeros }
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

/// The families that may be advised, and those among them that the plan names for this instrument.
fn candidates(project: &Project, wanted: &dyn Fn(&Family) -> bool) -> (Vec<Family>, Vec<Family>) {
    let plan = &project.plan;
    let usual = (1..=5).map(Family::Polynomial).chain([Family::Log, Family::Logistic4]);
    let allowed = usual.filter(|f| plan.allows(f) && wanted(f)).collect();
    let of_its_own = |f: &&Family| !matches!(f, Family::Polynomial(_) | Family::Log | Family::OnePoint);
    let suggested = plan.families.iter().filter(of_its_own).filter(|f| wanted(f)).cloned().collect();
    (allowed, suggested)
}

/// Weights of the shown columns when they all agree, else equal: spread decides weights, not the family.
fn weights(project: &Project) -> Weights {
    let columns = project.shown_columns();
    let mut fitted = columns.iter().filter(|c| c.family != Family::Declared).map(|c| c.weights);
    let first = fitted.next().unwrap_or(Weights::Equal);
    if fitted.all(|w| w == first) { first } else { Weights::Equal }
}
