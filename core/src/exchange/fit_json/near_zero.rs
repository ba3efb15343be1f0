//! The zero band and what each curve makes of it.

use crate::{
    project::{
        Project,
        evaluate::{Evaluation, FitEvaluation, NearZeroOutcome, near_zero::absent_words},
        plan::DetectionBasis,
    },
    zero::quantification::Quantification,
};
use serde_json::{Value, json};

pub(super) fn detection(project: &Project, e: &FitEvaluation) -> Value {
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
    quantified(&mut out, e);
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

/// The quantification limit with its state in words; its own reason where there is none.
fn quantified(out: &mut Value, e: &FitEvaluation) {
    let (value, state) = match e.quantification {
        None => (None, "a relative uncertainty has no meaning without a true zero, standards above it and a scatter"),
        Some(Quantification::From(x)) => (Some(x), "from here to the highest standard"),
        Some(Quantification::AtLowestStandard { lowest, extrapolated }) => {
            out["quantification_extrapolated"] = json!(extrapolated);
            (Some(lowest), "already met at the lowest standard")
        }
        Some(Quantification::UpTo { from, until }) => {
            out["quantification_until"] = json!(until);
            (Some(from), "met only up to the end given")
        }
        Some(Quantification::NotReached { smallest, at }) => {
            out["quantification_smallest"] = json!({"relative": smallest, "at": at});
            (None, "not reached in the range of the standards")
        }
    };
    out["quantification_limit"] = json!(value);
    out["quantification_state"] = json!(state);
}

pub(super) fn zero(evaluation: &Evaluation) -> Value {
    json!(evaluation.zeros.band.as_ref().map(|b| json!({
        "n": b.n, "mean": b.mean, "sd": b.sd, "t": b.t,
        "next_reading": {"low": b.next_reading.low, "high": b.next_reading.high},
        "mean_interval": {"low": b.mean_interval.low, "high": b.mean_interval.high},
        "lag1": b.lag1,
    })))
}
