//! An evaluation as one JSON document, schema `assize.fit/1`: the command line prints it, the report attaches it.
//!
//! Numbers are shortest round-trip doubles; `null` where a quantity does not exist. Keys that a later
//! version will compute are listed in [`NOT_YET`] and are `null`.

use crate::{
    inference::{
        departure::Departure,
        ftest::FTest,
        hysteresis::{hysteresis, repeatability},
        levels::levels,
        nonlinearity::nonlinearity,
    },
    project::{
        Project,
        evaluate::{ColumnEvaluation, Evaluation, FitEvaluation, NearZeroOutcome, near_zero::absent_words},
        figures::Figure,
        plan::DetectionBasis,
    },
    readings::Direction,
};
use serde_json::{Map, Value, json};

/// Keys that are `null` in this version, each with its reason.
pub const NOT_YET: [(&str, &str); 5] = [
    ("durbin_watson", "the exact test of serial correlation is not computed yet"),
    ("shapiro_wilk", "the test of normality is not computed yet"),
    ("runs", "the runs test is not computed yet"),
    ("breusch_pagan", "the Lagrange-multiplier test of spread is not computed yet"),
    ("quantification_limit", "it needs the target relative uncertainty, which a plan cannot hold yet"),
];

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
        "fits": evaluation.columns.iter().map(|c| fit(project, evaluation, c)).collect::<Vec<_>>(),
        "zero": zero(evaluation),
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
        "interval": plan.interval.map(|(low, high)| [low, high]),
        "p_methods": {
            "shape_p": "Simes' combination of next-term F, next-but-one-term F and lack-of-fit F",
            "lack_of_fit": "F, upper tail",
        },
        "not_computed": NOT_YET.iter().map(|(k, why)| ((*k).to_owned(), json!(why))).collect::<Map<_, _>>(),
    })
}

fn fit(project: &Project, evaluation: &Evaluation, column: &ColumnEvaluation) -> Value {
    let mut out = Map::new();
    out.insert("family".into(), json!(column.spec.family.to_string()));
    out.insert("weights".into(), json!(column.spec.weights.to_string()));
    out.insert("formula".into(), json!(column.formula));
    out.insert("allowed".into(), json!(column.allowed));
    match &column.outcome {
        Err(message) => {
            out.insert("converged".into(), json!(false));
            out.insert("message".into(), json!(message));
        }
        Ok(e) => {
            out.insert("converged".into(), json!(true));
            out.insert("message".into(), Value::Null);
            fitted(&mut out, project, evaluation, e);
            out.insert("caption".into(), json!(column.captions.residuals.text));
            out.insert("figures".into(), printed(&column.figures));
        }
    }
    for (key, _) in &NOT_YET[..4] {
        out.insert((*key).into(), Value::Null);
    }
    Value::Object(out)
}

fn fitted(out: &mut Map<String, Value>, project: &Project, evaluation: &Evaluation, e: &FitEvaluation) {
    let fit = &e.fit;
    let coefficients = e.coefficients.iter().map(|c| {
        json!({
            "name": c.name,
            "unit": c.unit,
            "value": c.value,
            "standard_uncertainty": c.standard_uncertainty,
            "low": c.interval.map(|i| i.0),
            "high": c.interval.map(|i| i.1),
        })
    });
    let covariance = (!fit.covariance.is_empty()).then_some(&fit.covariance);
    let entries = [
        ("n_used", json!(fit.points.len())),
        ("not_used", json!(not_used(project, evaluation, e))),
        ("zeros_fitted", json!(e.zeros_fitted)),
        ("coefficients", coefficients.collect()),
        ("covariance", json!(covariance)),
        ("residual_sd", json!(fit.residual_sd)),
        ("residual_sd_input", json!(e.residual_sd_input)),
        ("degrees_of_freedom", json!(fit.degrees_of_freedom)),
        ("residual_ss", json!(fit.residual_ss)),
        ("r_squared", json!(fit.r_squared())),
        ("aicc", json!(fit.aicc())),
        ("bic", json!(fit.bic())),
        ("press_rmse", json!(fit.press_rmse())),
        ("level_out_rmse", json!(e.level_out_rmse)),
        ("shape_p", json!(e.shape.p)),
        ("lack_of_fit", json!(e.lack_of_fit.as_ref().map(f_test))),
        ("residuals", per_reading(project, evaluation, e, |i| Some(fit.residuals[i]))),
        ("standardised", per_reading(project, evaluation, e, values(fit.standardised()))),
        ("studentised", per_reading(project, evaluation, e, values(fit.studentised()))),
        ("leverage", per_reading(project, evaluation, e, |i| Some(fit.leverage[i]))),
        ("cooks_distance", per_reading(project, evaluation, e, values(fit.cooks_distance()))),
        ("worst_read_back", worst(&e.departure)),
        ("sensitivity", sensitivity(e)),
        ("detection", detection(project, e)),
    ];
    out.extend(entries.into_iter().map(|(k, v)| (k.to_owned(), v)));
    out.extend(characteristics(evaluation, e));
}

fn values(all: Vec<Option<f64>>) -> impl Fn(usize) -> Option<f64> {
    move |i| all.get(i).copied().flatten()
}

/// One entry a reading of a standard in order of entry, `null` where it is set aside or not used; looks of
/// one application share its value.
fn per_reading(
    project: &Project,
    evaluation: &Evaluation,
    e: &FitEvaluation,
    value: impl Fn(usize) -> Option<f64>,
) -> Value {
    let mut by_reading = vec![None; project.readings.len()];
    for (position, &observation) in e.used.iter().enumerate() {
        for id in &evaluation.observations[observation].readings {
            by_reading[id.0 as usize - 1] = value(position);
        }
    }
    let standards = project.readings.iter().zip(by_reading).filter(|(r, _)| !r.is_zero());
    standards.map(|(_, v)| json!(v)).collect()
}

fn not_used(project: &Project, evaluation: &Evaluation, e: &FitEvaluation) -> Vec<u32> {
    let used: std::collections::BTreeSet<u32> =
        e.used.iter().flat_map(|&i| &evaluation.observations[i].readings).map(|id| id.0).collect();
    project.readings.iter().filter(|r| !r.is_zero() && !used.contains(&r.id.0)).map(|r| r.id.0).collect()
}

fn f_test(test: &FTest) -> Value {
    json!({"f": test.f, "df1": test.df1, "df2": test.df2, "p": test.p})
}

fn worst(departure: &Departure) -> Value {
    let level = departure.worst_read_back.and_then(|i| departure.levels.get(i));
    json!(level.map(|l| json!({"x": l.x, "error": l.read_back_error})))
}

fn sensitivity(e: &FitEvaluation) -> Value {
    levels(&e.fit.points).iter().map(|l| json!({"x": l.x, "value": e.fit.curve.derivative(l.x)})).collect()
}

fn characteristics(evaluation: &Evaluation, e: &FitEvaluation) -> Map<String, Value> {
    let fit = &e.fit;
    let approach: Vec<Direction> = e.used.iter().map(|&i| evaluation.observations[i].direction).collect();
    let line = nonlinearity(&levels(&fit.points)).map(
        |n| json!({"independent": n.independent, "terminal": n.terminal, "zero_based": n.zero_based, "span": n.span}),
    );
    let mut out = Map::new();
    out.insert("nonlinearity".into(), json!(line));
    out.insert("hysteresis".into(), json!(hysteresis(&fit.points, &approach).map(|h| h.largest.abs())));
    out.insert("repeatability".into(), json!(repeatability(&fit.points, &approach).map(|r| r.spread)));
    out
}

fn detection(project: &Project, e: &FitEvaluation) -> Value {
    let q = project.plan.detection;
    let basis = match q.basis {
        DetectionBasis::Zeros => "zeros",
        DetectionBasis::Calibration => "calibration",
    };
    let mut out = json!({
        "basis": basis, "alpha": q.alpha, "beta": q.beta, "k": q.k,
        "decision_threshold_signal": null, "critical_value": null, "detection_limit": null, "low": null, "high": null,
        "assured_detection_limit": null, "traced": null, "simple": null, "quantification_limit": null, "reason": null,
    });
    match &e.near_zero {
        NearZeroOutcome::Absent(absent) => out["reason"] = json!(absent_words(project, *absent)),
        NearZeroOutcome::Change(change) => {
            out["reason"] = json!("no state of nothing: the smallest change near the lowest standard is given instead");
            out["smallest_change"] = json!({"at": change.at, "value": change.smallest_change, "low": change.range.0, "high": change.range.1});
        }
        NearZeroOutcome::Limits(all) => {
            let Some(first) = all.first() else { return out };
            let l = &first.limits;
            out["decision_threshold_signal"] = json!(l.decision_threshold);
            out["critical_value"] = json!(l.critical_value);
            out["detection_limit"] = json!(l.detection_limit);
            out["low"] = json!(l.low);
            out["high"] = json!(l.high);
            out["assured_detection_limit"] = json!(l.assured);
            out["traced"] = json!(l.traced);
            out["simple"] = json!(l.simple);
            out["regulator_multiple"] = json!(l.regulator);
            out["reason"] = json!(first.absent.map(|a| absent_words(project, a)));
            if let Some(other) = all.get(1) {
                out["other_side"] = json!({
                    "decision_threshold_signal": other.limits.decision_threshold,
                    "detection_limit": other.limits.detection_limit,
                });
            }
        }
    }
    out
}

fn zero(evaluation: &Evaluation) -> Value {
    json!(evaluation.zeros.band.as_ref().map(|b| json!({
        "n": b.n, "mean": b.mean, "sd": b.sd, "t": b.t,
        "next_reading": {"low": b.next_reading.low, "high": b.next_reading.high},
        "mean_interval": {"low": b.mean_interval.low, "high": b.mean_interval.high},
        "lag1": b.lag1,
    })))
}

/// The figures as window and report show them.
fn printed(figures: &[Figure]) -> Value {
    Value::Object(figures.iter().map(|f| (f.key.clone(), json!(f.shown()))).collect())
}
