//! An evaluation as one JSON document, schema `assize.fit/1`: the command line prints it, the report attaches it.
//!
//! Numbers are shortest round-trip doubles; `null` where a quantity does not exist.

mod characteristics;
mod fitted;
mod near_zero;
mod residual_tests;

use crate::project::{Project, evaluate::Evaluation, figures::Figure};
use serde_json::{Map, Value, json};

/// The whole document.
#[must_use]
pub fn document(project: &Project, evaluation: &Evaluation) -> Value {
    let data = &evaluation.data;
    json!({
        "schema": "assize.fit/1",
        "settings": settings(project, evaluation),
        "data": {
            "n": data.readings,
            "n_applications": data.applications,
            "distinct_standards": data.distinct_standards,
            "zero_readings": data.zero_readings,
            "zeros": data.zeros,
            "set_aside": data.set_aside,
            "corrected": data.corrected,
        },
        "fits": evaluation.columns.iter().map(|c| fitted::fit(project, evaluation, c)).collect::<Vec<_>>(),
        "zero": near_zero::zero(evaluation),
        "advice": {
            "family": evaluation.advice.column.as_ref().map(|c| c.family.to_string()),
            "weights": evaluation.advice.column.as_ref().map(|c| c.weights.to_string()),
            "because": evaluation.advice.because,
        },
        "chosen": project.choice.as_ref().map(|c| json!({
            "family": c.column.family.to_string(),
            "weights": c.column.weights.to_string(),
            "because": &*c.because,
            "by": &*c.by,
            "at": c.at.to_string(),
        })),
        "findings": evaluation.findings.iter().map(|f| json!({
            "code": f.code,
            "severity": f.severity,
            "place": f.place.to_string(),
            "message": f.message,
            "hint": f.hint,
        })).collect::<Vec<_>>(),
        "figures": printed(&evaluation.figures),
    })
}

fn settings(project: &Project, evaluation: &Evaluation) -> Value {
    let plan = &project.plan;
    json!({
        "input": {"name": &*plan.input.name, "unit": plan.input.unit.as_str()},
        "output": {"name": &*plan.output.name, "unit": plan.output.unit.as_str()},
        "stage": format!("{:?}", evaluation.data.stage),
        "level": plan.level,
        "alpha": plan.detection.alpha,
        "beta": plan.detection.beta,
        "k": plan.detection.k,
        "target": plan.detection.target,
        "interval": plan.interval.map(|(low, high)| [low, high]),
        "p_methods": p_methods(),
    })
}

fn p_methods() -> Value {
    let own = [
        ("shape_p", "Simes' combination of next-term F, next-but-one term F and lack-of-fit F"),
        ("lack_of_fit", "F, upper tail"),
    ];
    own.iter()
        .chain(&residual_tests::METHODS)
        .map(|(key, how)| ((*key).to_owned(), json!(how)))
        .collect::<Map<_, _>>()
        .into()
}

/// The figures as window and report show them.
fn printed(figures: &[Figure]) -> Value {
    Value::Object(figures.iter().map(|f| (f.key.clone(), json!(f.shown()))).collect())
}
