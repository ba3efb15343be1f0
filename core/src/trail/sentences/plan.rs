//! Changes of the plan, told.

use super::{Before, words};
use crate::{
    model::Family,
    project::{
        Project,
        cautions::caution,
        command::{PlanCommand, PlanField},
        plan::{DetectionQuestion, Hazard},
    },
    quantity::Text,
};

pub(super) fn tell(command: &PlanCommand, before: &Before<'_>) -> String {
    let PlanCommand::Set(field) = command;
    let after_fixing = before.project.is_some_and(|p| p.plan.fixed.is_some());
    let told = field_told(field, before);
    if after_fixing { format!("{told}, after the first reading") } else { told }
}

fn field_told(field: &PlanField, before: &Before<'_>) -> String {
    let unit = before.input_unit();
    let text = |what: &str, old: fn(&Project) -> &Option<Text>, new: &Text| {
        before.change(what, |p| old(p).as_ref().map(ToString::to_string), new)
    };
    match field {
        PlanField::Input(q) => before.change("the input", |p| Some(p.plan.input.heading()), &q.heading()),
        PlanField::Output(q) => before.change("the output", |p| Some(p.plan.output.heading()), &q.heading()),
        PlanField::Interval(i) => {
            before.change("the measuring interval", |p| Some(interval(p.plan.interval, unit)), &interval(*i, unit))
        }
        PlanField::ZeroState(z) => before.change(
            "the state of nothing applied",
            |p| Some(quoted(words::zero_state(p.plan.zero_state))),
            &quoted(words::zero_state(*z)),
        ),
        PlanField::ZerosPart(z) => before.change(
            "the part of the zero readings",
            |p| Some(quoted(words::zeros_part(p.plan.zeros_part))),
            &quoted(words::zeros_part(*z)),
        ),
        PlanField::Families(names) => {
            let new: Vec<String> = names.iter().map(|n| family(n)).collect();
            before.change("the functions allowed", |p| Some(families(&p.plan.families)), &listed(&new, "all"))
        }
        PlanField::Detection(q) => {
            before.change("the detection question", |p| Some(detection(&p.plan.detection)), &detection(q))
        }
        PlanField::Level(l) => {
            before.change("the level of bands", |p| Some(words::percent(p.plan.level)), &words::percent(*l))
        }
        PlanField::Limits(l) => before.change(
            "the limits",
            |p| p.plan.limits.as_ref().map(|old| words::limits(Some(old), unit)),
            &words::limits(l.as_ref(), unit),
        ),
        PlanField::DecisionRule(t) => text("the decision rule", |p| &p.plan.decision_rule, t),
        PlanField::Levels(l) => {
            before.change("the levels planned", |p| Some(words::numbers(&p.plan.levels)), &words::numbers(l))
        }
        PlanField::Repeats(r) => before.change(
            "the repeats planned",
            |p| p.plan.repeats.map(|n| n.to_string()),
            &r.map_or(String::new(), |n| n.to_string()),
        ),
        PlanField::FullScale(full) => before.change(
            "the full scale of the output",
            |p| p.plan.full_scale.map(words::number),
            &full.map_or(String::new(), words::number),
        ),
        PlanField::Order(t) => text("the order of application", |p| &p.plan.order, t),
        PlanField::Method(t) => text("the method", |p| &p.plan.method, t),
        PlanField::Place(t) => text("the place", |p| &p.plan.place, t),
        PlanField::Customer(t) => text("the customer", |p| &p.plan.customer, t),
        PlanField::Laboratory(t) => text("the laboratory", |p| &p.plan.laboratory, t),
        PlanField::Hazards(h) => before.change("the hazards", |p| Some(hazards(&p.plan.hazards)), &hazards(h)),
    }
}

fn quoted(text: &str) -> String {
    format!("“{text}”")
}

fn interval(interval: Option<(f64, f64)>, unit: &str) -> String {
    interval.map_or(String::new(), |(low, high)| format!("{} … {} {unit}", words::number(low), words::number(high)))
}

fn family(name: &str) -> String {
    name.parse::<Family>().map_or_else(|_| name.to_owned(), |f| f.plain_name())
}

fn families(families: &[Family]) -> String {
    let names: Vec<String> = families.iter().map(Family::plain_name).collect();
    listed(&names, "all")
}

fn hazards(hazards: &[Hazard]) -> String {
    let shown: Vec<String> = hazards.iter().map(|&h| caution(h).heading.to_lowercase()).collect();
    shown.join(", ")
}

fn listed(names: &[String], none: &str) -> String {
    if names.is_empty() { none.to_owned() } else { names.join(", ") }
}

fn detection(q: &DetectionQuestion) -> String {
    format!(
        "α = {}, β = {}, mean of {} readings, from {}, quantified at {} %",
        words::number(q.alpha),
        words::number(q.beta),
        q.k,
        words::basis(q.basis),
        words::number(100.0 * q.target)
    )
}
