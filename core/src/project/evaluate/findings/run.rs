//! How the readings were taken: looks, order, an origin that nobody measured.

use super::{Facts, family::looks_against_applications, finding};
use crate::{
    project::evaluate::{
        finding::{Finding, Place, Severity},
        observe::Observation,
        words::plain,
    },
    quantity::format::{p_value, significant, with_unit},
    readings::{Applied, Source, Stage},
};

pub(super) fn findings(facts: &Facts<'_>) -> Vec<Finding> {
    let mut found = Vec::new();
    found.extend(looks(facts));
    found.extend(order_is_level(facts));
    found.extend(origin(facts));
    found
}

/// Looks are not applications.
fn looks(facts: &Facts<'_>) -> Option<Finding> {
    let standards = || facts.observations.iter().filter(|o| !o.is_zero());
    let several = standards().filter(|o| o.readings.len() > 1).count();
    let most = facts.observations.iter().map(|o| o.readings.len()).max().unwrap_or(0);
    let hint = "take the standard off and put it on again between readings";
    if several > 0 && facts.data.applications == facts.data.distinct_standards {
        let message = format!(
            "each of {} standards was applied once and looked at up to {most} times: looks at one placement are one \
             placement",
            facts.data.distinct_standards
        );
        return Some(finding("applied-once", Severity::Look, Place::Data, message, hint));
    }
    if let Some(a) = looks_against_applications(facts.project, facts.observations).filter(|a| a.test.p <= 0.05) {
        let unit = facts.project.plan.output.unit.as_str();
        let message = format!(
            "applications of one standard differ by {} (SD) beyond what looks at one of them do, {} ({}): the mean of \
             the looks counts as one",
            with_unit(&significant(a.between, 2), unit),
            with_unit(&significant(a.within, 2), unit),
            p_value(a.test.p)
        );
        return Some(finding("applications-scatter", Severity::Note, Place::Data, message, hint));
    }
    let several = facts.observations.iter().filter(|o| o.readings.len() > 1).count();
    (several > 0).then(|| {
        let message = format!(
            "{several} applications were looked at more than once, up to {most} times; the mean of the looks counts as one"
        );
        finding("looks-averaged", Severity::Note, Place::Data, message, hint)
    })
}

/// Standards applied in the order of their value, with nothing repeated that could show a drift.
fn order_is_level(facts: &Facts<'_>) -> Option<Finding> {
    let zeros = facts.observations.iter().filter(|o| o.is_zero()).count();
    let checked = facts.project.readings.iter().any(|r| r.stage == Stage::Check && r.counts());
    if zeros > 1 || checked || facts.data.distinct_standards < 3 {
        return None;
    }
    let mut run: Vec<(f64, &Observation)> =
        facts.observations.iter().filter(|o| !o.is_zero()).map(|o| Some((o.order?, o))).collect::<Option<_>>()?;
    run.sort_by(|a, b| a.0.total_cmp(&b.0));
    let rising = run.windows(2).all(|w| w[1].1.x > w[0].1.x);
    let falling = run.windows(2).all(|w| w[1].1.x < w[0].1.x);
    if !rising && !falling {
        return None;
    }
    let (first, last) = (run.first()?.1.x, run.last()?.1.x);
    let message = format!(
        "{} standards went on in the order of their value, {} to {}: a drift would look like gain",
        run.len(),
        plain(first),
        with_unit(&plain(last), facts.project.plan.input.unit.as_str())
    );
    let hint = "repeat the zero or one standard at start, middle and end, or mix the order";
    Some(finding("order-is-level", Severity::Look, Place::Data, message, hint))
}

/// A typed (0, 0) without a time: an origin that was assumed, not measured.
fn origin(facts: &Facts<'_>) -> Option<Finding> {
    let standard_is_zero = |applied: &Applied| match applied {
        Applied::Standard(id) => facts.project.standard(*id).is_some_and(|s| s.value == 0.0),
        Applied::Nothing { .. } => false,
    };
    let at_zero = || {
        let stage = facts.data.stage;
        facts.project.readings.iter().filter(move |r| r.counts() && r.stage == stage && standard_is_zero(&r.applied))
    };
    let invented = |r: &&crate::readings::Reading| r.value == 0.0 && r.source == Source::Typed && r.time.is_none();
    let first = at_zero().find(invented)?;
    // Where zero was read with another result as well, it was read.
    if at_zero().any(|r| !invented(&r)) {
        return None;
    }
    let message = format!(
        "zero is a reading too: reading {}, {} at 0, was typed without a time and counts in every fit",
        first.id.0, first.raw
    );
    let hint = "read the instrument with nothing applied and enter that as a zero reading, or take this one out";
    Some(finding("invented-origin", Severity::Stop, Place::Reading(first.id.0), message, hint))
}
