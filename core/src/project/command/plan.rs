//! The plan: free until the first reading, then only with a reason.

use super::{Act, Refused, about::filled, finite, reason};
use crate::{
    model::Family,
    project::{
        Project,
        plan::{DetectionQuestion, Hazard, Limits, Quantity, ZeroState, ZerosPart},
    },
    quantity::Text,
};
use serde::{Deserialize, Serialize};

/// A change of the plan.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum PlanCommand {
    /// Sets one field.
    Set(PlanField),
}

/// A field of the plan with its new content; blank text clears a field.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum PlanField {
    /// What is applied.
    Input(Quantity),
    /// What is shown.
    Output(Quantity),
    /// Measuring interval, input unit; `None` clears it.
    Interval(Option<(f64, f64)>),
    /// Whether nothing applied exists.
    ZeroState(ZeroState),
    /// The zeros' part.
    ZerosPart(ZerosPart),
    /// Functions allowed, by their names; empty = all.
    Families(Vec<Text>),
    /// Detection question.
    Detection(DetectionQuestion),
    /// Level of bands.
    Level(f64),
    /// Limits.
    Limits(Option<Limits>),
    /// Decision rule.
    DecisionRule(Text),
    /// Levels.
    Levels(Vec<f64>),
    /// Repeats.
    Repeats(Option<u32>),
    /// Order.
    Order(Text),
    /// Method.
    Method(Text),
    /// Place.
    Place(Text),
    /// Customer.
    Customer(Text),
    /// Laboratory.
    Laboratory(Text),
    /// What the plan works with.
    Hazards(Vec<Hazard>),
    /// The largest indication that the instrument can show, output unit; `None` clears it.
    FullScale(Option<f64>),
}

pub(super) fn apply(project: &mut Project, command: &PlanCommand, act: &Act) -> Result<(), Refused> {
    let PlanCommand::Set(field) = command;
    if let Some(since) = project.plan.fixed
        && reason(act, "a change of the plan").is_err()
    {
        return Err(Refused::PlanFixed { since: since.readable() });
    }
    check(field)?;
    set(project, field)?;
    project.plan.version += 1;
    Ok(())
}

fn check(field: &PlanField) -> Result<(), Refused> {
    let probability = |p: f64, what| {
        let good = p > 0.0 && p < 1.0;
        let wrong = Refused::NotUsable { what, found: p.to_string(), accepted: "a number between 0 and 1 is accepted" };
        if good { Ok(()) } else { Err(wrong) }
    };
    match field {
        PlanField::Interval(Some((low, high))) if !(low < high && low.is_finite() && high.is_finite()) => {
            Err(Refused::NotUsable {
                what: "measuring interval",
                found: format!("{low} … {high}"),
                accepted: "two finite numbers are accepted, the lower one first",
            })
        }
        PlanField::Level(p) => probability(*p, "level"),
        PlanField::Detection(q) => {
            probability(q.alpha, "α")?;
            probability(q.beta, "β")?;
            probability(q.target, "target")?;
            let none = Refused::NotUsable { what: "k", found: "0".into(), accepted: "1 or more is accepted" };
            if q.k == 0 { Err(none) } else { Ok(()) }
        }
        PlanField::FullScale(Some(full)) => finite(*full, "full scale", &full.to_string()).map(|_| ()),
        PlanField::Levels(levels) => levels.iter().try_for_each(|&x| finite(x, "level", &x.to_string()).map(|_| ())),
        _ => Ok(()),
    }
}

fn set(project: &mut Project, field: &PlanField) -> Result<(), Refused> {
    let plan = &mut project.plan;
    match field {
        PlanField::Input(q) => plan.input = q.clone(),
        PlanField::Output(q) => plan.output = q.clone(),
        PlanField::Interval(i) => plan.interval = *i,
        PlanField::ZeroState(z) => plan.zero_state = *z,
        PlanField::ZerosPart(z) => plan.zeros_part = *z,
        PlanField::Families(names) => plan.families = families(names)?,
        PlanField::Detection(q) => plan.detection = *q,
        PlanField::Level(p) => plan.level = *p,
        PlanField::Limits(l) => plan.limits.clone_from(l),
        PlanField::DecisionRule(t) => plan.decision_rule = filled(t),
        PlanField::Levels(l) => plan.levels.clone_from(l),
        PlanField::Repeats(r) => plan.repeats = *r,
        PlanField::FullScale(full) => plan.full_scale = *full,
        PlanField::Order(t) => plan.order = filled(t),
        PlanField::Method(t) => plan.method = filled(t),
        PlanField::Place(t) => plan.place = filled(t),
        PlanField::Customer(t) => plan.customer = filled(t),
        PlanField::Laboratory(t) => plan.laboratory = filled(t),
        PlanField::Hazards(h) => {
            plan.hazards.clone_from(h);
            plan.hazards.sort_unstable();
            plan.hazards.dedup();
        }
    }
    Ok(())
}

fn families(names: &[Text]) -> Result<Vec<Family>, Refused> {
    names
        .iter()
        .map(|name| {
            name.parse().map_err(|_| Refused::NotUsable {
                what: "function",
                found: name.to_string(),
                accepted: "names such as line, quadratic, cubic, polynomial:4, log are accepted",
            })
        })
        .collect()
}
