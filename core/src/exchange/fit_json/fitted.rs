//! One column of the comparison: its fit and everything inferred from it.

use super::{characteristics, near_zero, printed, residual_tests};
use crate::{
    convert::digits::{Form, PrintedCoefficients},
    distributions::chi2_upper,
    fit::{
        Fit,
        robust::{RobustError, RobustFit, huber, theil_sen},
    },
    inference::{bands::Bands, departure::Departure, ftest::FTest, levels::levels},
    project::{
        Project,
        columns::Axes,
        evaluate::{ColumnEvaluation, Evaluation, FitEvaluation},
    },
};
use serde_json::{Map, Value, json};

pub(super) fn fit(project: &Project, evaluation: &Evaluation, column: &ColumnEvaluation) -> Value {
    let mut out = Map::new();
    out.insert("family".into(), json!(column.spec.family.to_string()));
    out.insert("weights".into(), json!(column.spec.weights.to_string()));
    out.insert("both_axes".into(), json!(column.spec.axes == Axes::Both));
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
    Value::Object(out)
}

fn fitted(out: &mut Map<String, Value>, project: &Project, evaluation: &Evaluation, e: &FitEvaluation) {
    let fit = &e.fit;
    let coefficients = coefficients(project, e);
    let covariance = (!fit.covariance.is_empty()).then_some(&fit.covariance);
    let entries = [
        ("n_used", json!(fit.points.len())),
        ("not_used", json!(not_used(project, evaluation, e))),
        ("zeros_fitted", json!(e.zeros_fitted)),
        ("coefficients", coefficients),
        ("covariance", json!(covariance)),
        ("residual_sd", json!(fit.residual_sd)),
        ("residual_sd_input", json!(e.residual_sd_input)),
        ("degrees_of_freedom", json!(fit.degrees_of_freedom)),
        ("weights_kind", json!(fit.scatter.word())),
        ("scatter_sd", json!(fit.scatter_sd())),
        ("scatter_degrees_of_freedom", finite(fit.scatter_freedom())),
        ("reading_sd", reading_sd(fit)),
        ("chi_square", chi_square(fit)),
        ("fitted_power", json!(fit.fitted_power)),
        ("condition", json!(fit.condition())),
        ("residual_ss", json!(fit.residual_ss)),
        ("r_squared", json!(fit.r_squared())),
        ("r_squared_uncentred", json!(fit.family.through_zero())),
        ("direction", json!(if inverse(fit) { "inverse" } else { "forward" })),
        ("iterations", json!(fit.effort.map(|(iterations, _)| iterations))),
        ("evaluations", json!(fit.effort.map(|(_, evaluations)| evaluations))),
        ("aicc", json!(fit.aicc())),
        ("bic", json!(fit.bic())),
        ("press_rmse", json!(fit.press_rmse())),
        ("level_out_rmse", json!(e.level_out_rmse)),
        ("shape_p", json!(e.shape.p)),
        ("lack_of_fit", json!(e.lack_of_fit.as_ref().map(f_test))),
        ("residuals", per_reading(project, evaluation, e, residuals(fit))),
        ("standardised", per_reading(project, evaluation, e, values(fit.standardised()))),
        ("studentised", per_reading(project, evaluation, e, values(fit.studentised()))),
        ("leverage", per_reading(project, evaluation, e, |i| Some(fit.leverage[i]))),
        ("level_leverage", level_leverage(fit)),
        ("cooks_distance", per_reading(project, evaluation, e, values(fit.cooks_distance()))),
        ("worst_read_back", worst(&e.departure)),
        ("sensitivity", sensitivity(e)),
        (
            "flipped",
            json!(
                e.flipped
                    .map(|f| json!({"largest_difference_in_u": f.relative, "difference": f.difference, "at": f.at}))
            ),
        ),
        ("robust", robust(fit)),
        ("bands", bands(project, fit)),
        ("printed_coefficients", json!(e.printed.as_ref().map(handed_on))),
        ("detection", near_zero::detection(project, e)),
    ];
    out.extend(entries.into_iter().map(|(k, v)| (k.to_owned(), v)));
    out.extend(residual_tests::tests(evaluation, e));
    out.extend(characteristics::characteristics(evaluation, e));
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

/// The coefficients with their doubt; one that the family keeps fixed says so.
fn coefficients(project: &Project, e: &FitEvaluation) -> Value {
    let mut all: Vec<Value> = e
        .coefficients
        .iter()
        .map(|c| {
            json!({
                "name": c.name,
                "unit": c.unit,
                "value": c.value,
                "standard_uncertainty": c.standard_uncertainty,
                "low": c.interval.map(|i| i.0),
                "high": c.interval.map(|i| i.1),
            })
        })
        .collect();
    if let Some((index, value)) = e.fit.family.fixed_coefficient().filter(|(index, _)| *index == all.len()) {
        let (y, x) = (&project.plan.output.unit, &project.plan.input.unit);
        let name = e.fit.family.coefficient_names().get(index).cloned();
        let unit = e.fit.family.coefficient_unit(index, y, x);
        all.push(json!({"name": name, "unit": unit, "value": value, "fixed": true,
            "standard_uncertainty": null, "low": null, "high": null}));
    }
    all.into()
}

/// Whether errors of the measurand were minimised, as for thermistors.
fn inverse(fit: &Fit) -> bool {
    fit.family.fitted_in_measurand() && fit.both_axes.is_none()
}

/// Residuals in the quantity whose errors are minimised: the output, for thermistors the temperature.
fn residuals(fit: &Fit) -> impl Fn(usize) -> Option<f64> {
    let inverse = inverse(fit);
    move |i| {
        let e = fit.residuals.get(i).copied()?;
        // −e/f̂′ is certified minus converted temperature, as every residual is observed minus fitted.
        if inverse { Some(-e / fit.curve.derivative(fit.points[i].x)) } else { Some(e) }
    }
}

/// Robust curves beside least squares: where they differ most, and which readings count less.
fn robust(fit: &Fit) -> Value {
    let one = |found: Result<RobustFit, RobustError>| match found {
        Err(reason) => json!({"reason": reason.to_string()}),
        Ok(r) => json!({
            "coefficients": r.coefficients, "scale": r.scale, "weights": r.weights,
            "largest_difference": {"x": r.largest_difference.x, "output": r.largest_difference.difference},
            "reason": null,
        }),
    };
    json!({"huber": one(huber(fit)), "theil_sen": one(theil_sen(fit))})
}

/// A number, or `null` where it is infinite.
fn finite(value: f64) -> Value {
    json!(Some(value).filter(|v| v.is_finite()))
}

/// The SD of one reading at each standard, output unit.
fn reading_sd(fit: &Fit) -> Value {
    let at = |x: f64| fit.scatter_sd().map(|s| s * libm::sqrt(fit.variance_at(x))).filter(|s| s.is_finite());
    levels(&fit.points).iter().map(|l| json!({"x": l.x, "value": at(l.x)})).collect()
}

/// The three bands at each standard, half-widths in the output unit; `null` while the scatter is not known.
fn bands(project: &Project, fit: &Fit) -> Value {
    let Some(bands) = Bands::new(fit, project.plan.level, project.plan.detection.k as usize) else {
        return Value::Null;
    };
    let at = |x: f64| {
        bands.at(x).map(|b| json!({"x": x, "value": b.value, "mean": b.mean, "prediction": b.prediction, "simultaneous": b.simultaneous}))
    };
    levels(&fit.points).iter().map(|l| json!(at(l.x))).collect()
}

/// χ² of absolute weights, with its upper-tail p.
fn chi_square(fit: &Fit) -> Value {
    json!(fit.chi_square().map(|(value, nu)| {
        let p = (nu > 0).then(|| chi2_upper(value, nu as f64));
        json!({"value": value, "degrees_of_freedom": nu, "p": p})
    }))
}

fn level_leverage(fit: &Fit) -> Value {
    let both = fit.levels().into_iter().zip(fit.level_leverage());
    both.map(|(level, h)| json!({"x": level.x, "value": h})).collect()
}

/// The coefficients as texts to hand on, with the proof that they are good enough.
fn handed_on(p: &PrintedCoefficients) -> Value {
    let form = match p.form {
        Form::Plain => Value::Null,
        Form::Shifted { centre, scale } => json!({"centre": centre, "scale": scale}),
    };
    json!({"digits": p.digits, "texts": p.texts, "shifted": form, "largest_shift_in_u": p.worst, "at": p.at})
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
