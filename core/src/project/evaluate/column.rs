//! One column: its fit, what was inferred, its figures and its captions.

use super::{
    doubt::doubt,
    near_zero::{self, ZeroFacts},
    numbers,
    observe::{Observation, fitted},
    types::{Caption, Captions, Coefficient, ColumnEvaluation, FitEvaluation},
    words::{self, ResidualFacts},
};
use crate::{
    convert::{digits::printed, flipped_difference},
    fit::{self, Fit, FitError, Point, Request, StandardsDoubt},
    inference::{bands::Bands, departure::departure, lack_of_fit::lack_of_fit, shape::shape},
    model::{Family, Units, formula::Formula},
    project::{
        Project,
        columns::{Axes, ColumnSpec},
        plan::ZeroState,
    },
    zero::quantification::quantification,
};

/// Fits one column and says what it shows.
#[must_use]
pub fn evaluate(
    project: &Project,
    observations: &[Observation],
    spec: &ColumnSpec,
    zeros: &ZeroFacts,
) -> ColumnEvaluation {
    let used = used(project, observations, spec);
    let points: Vec<Point> = used.iter().map(|&i| observations[i].point()).collect();
    let allowed = project.plan.allows(&spec.family);
    let formula = match (&spec.family, &project.declared) {
        (Family::Declared, Some(declared)) => format!("y = {}", declared.formula),
        (family, _) => family.printed_formula(),
    };
    let mut column = ColumnEvaluation {
        spec: spec.clone(),
        head: spec.head(),
        formula,
        captions: Captions::default(),
        figures: Vec::new(),
        findings: Vec::new(),
        outcome: Err(String::new()),
        allowed,
    };
    let stated: Vec<f64> = used.iter().map(|&i| observations[i].uncertainty.unwrap_or(f64::NAN)).collect();
    let doubt = doubt(project, observations, &used);
    match fit_column(project, spec, &points, &stated, doubt.as_ref()) {
        Err(reason) => {
            let reason = place(&reason, project, observations, &used);
            column.captions.curve = Caption::plain(reason.clone());
            column.outcome = Err(reason);
        }
        Ok(fit) => {
            // A fit in both axes holds the doubt of the standards already.
            let fit = match doubt {
                Some(doubt) if spec.axes == Axes::ReadingsOnly => fit.with_standards(doubt),
                _ => fit,
            };
            let zeros_fitted = used.iter().any(|&i| observations[i].is_zero());
            let evaluation = infer(project, fit, used, zeros_fitted, zeros);
            column.captions = captions(project, &evaluation, zeros);
            column.figures = numbers::figures(project, &evaluation, zeros);
            column.outcome = Ok(Box::new(evaluation));
        }
    }
    column
}

/// Observations that a column fits: one point takes the highest standard alone; the zeros take part where the plan lets them and the family has a value at 0.
fn used(project: &Project, observations: &[Observation], spec: &ColumnSpec) -> Vec<usize> {
    let zero_is_value = matches!(project.plan.zero_state, ZeroState::Zero | ZeroState::LiveZero);
    let has_value = spec.family.has_value_at(0.0);
    if spec.family == Family::OnePoint {
        let top = observations.iter().filter(|o| !o.is_zero()).map(|o| o.x).fold(f64::NEG_INFINITY, f64::max);
        return (0..observations.len()).filter(|&i| !observations[i].is_zero() && observations[i].x >= top).collect();
    }
    fitted(observations, spec.zeros.unwrap_or(project.plan.zeros_part), zero_is_value && has_value)
}

enum NoFit {
    Undeclared,
    StandardsExact,
    Formula(String),
    Fit(FitError),
}

fn fit_column(
    project: &Project,
    spec: &ColumnSpec,
    points: &[Point],
    stated: &[f64],
    doubt: Option<&StandardsDoubt>,
) -> Result<Fit, NoFit> {
    if spec.family != Family::Declared {
        let any = stated.iter().any(|u| u.is_finite());
        let reading_uncertainty = any.then_some(stated);
        let units = Units::of(&project.plan.input.unit, &project.plan.output.unit);
        let request = Request { reading_uncertainty, units, ..Request::new(&spec.family, points, spec.weights) };
        return match (spec.axes, doubt) {
            (Axes::ReadingsOnly, _) => fit::estimate(&request).map_err(NoFit::Fit),
            (Axes::Both, Some(doubt)) => fit::fit_both_axes(&request, doubt).map_err(NoFit::Fit),
            (Axes::Both, None) => Err(NoFit::StandardsExact),
        };
    }
    let declared = project.declared.as_ref().ok_or(NoFit::Undeclared)?;
    let formula: Formula = declared.formula.parse().map_err(|e| NoFit::Formula(format!("{e}")))?;
    fit::declared(&formula, points).map_err(NoFit::Fit)
}

/// The reason in words, with the reading it concerns.
fn place(reason: &NoFit, project: &Project, observations: &[Observation], used: &[usize]) -> String {
    let reading = |index: &usize| {
        let o = &observations[*used.get(*index)?];
        let id = o.readings.first()?;
        let raw = project.reading(*id).map(|r| r.raw.to_string()).unwrap_or_default();
        Some(format!("reading {} ({raw} at {})", id.0, words::plain(o.x)))
    };
    match reason {
        NoFit::StandardsExact => {
            "a fit in both axes needs the uncertainty of the standards; none of them states any".to_owned()
        }
        NoFit::Undeclared => "no function is declared".to_owned(),
        NoFit::Formula(e) => format!("the declared function cannot be read: {e}"),
        NoFit::Fit(e) => {
            let at = match e {
                FitError::OutsideDomain { index, .. }
                | FitError::Undefined { index, .. }
                | FitError::NotFinite { index }
                | FitError::BadWeight { index, .. } => reading(index),
                FitError::TooFew { .. }
                | FitError::OutOfRange
                | FitError::TooClose { .. }
                | FitError::DegreeTooHigh { .. }
                | FitError::NoUncertainty
                | FitError::NoRepeats
                | FitError::IdenticalRepeats
                | FitError::NotConverged { .. }
                | FitError::NoStart { .. }
                | FitError::BothAxes { .. }
                | FitError::Units { .. }
                | FitError::Formula { .. }
                | FitError::NotFitted => None,
            };
            match at {
                Some(at) => format!("{at}: {}", words::fit_error(e)),
                None => words::fit_error(e),
            }
        }
    }
}

fn infer(project: &Project, fit: Fit, used: Vec<usize>, zeros_fitted: bool, zeros: &ZeroFacts) -> FitEvaluation {
    let shape = shape(&fit);
    let departure = departure(&fit, &shape);
    let near_zero = near_zero::detection(project, &fit, zeros);
    let plan = &project.plan;
    let true_zero = matches!(plan.zero_state, ZeroState::Zero | ZeroState::LiveZero);
    let quantified = || quantification(&fit, plan.detection.k as usize, plan.detection.target);
    FitEvaluation {
        printed: printed(&fit),
        flipped: flipped_difference(&fit),
        quantification: if true_zero { quantified() } else { None },
        coefficients: coefficients(project, &fit),
        lack_of_fit: lack_of_fit(&fit),
        residual_sd_input: input_size(&fit, fit.residual_sd),
        level_out_rmse: departure.left_out.map(|l| l.output),
        shape,
        departure,
        near_zero,
        zeros_fitted,
        used,
        fit,
    }
}

/// A size in the output unit as one in the input unit, by the mean slope over the standards.
fn input_size(fit: &Fit, size: Option<f64>) -> Option<f64> {
    let (low, high) = ends(fit)?;
    let slope = (fit.curve.value(high) - fit.curve.value(low)) / (high - low);
    size.map(|s| s / slope.abs()).filter(|s| s.is_finite())
}

/// Lowest and highest standard of a fit, input unit; `None` with one level.
#[must_use]
pub fn ends(fit: &Fit) -> Option<(f64, f64)> {
    let low = fit.points.iter().map(|p| p.x).fold(f64::INFINITY, f64::min);
    let high = fit.points.iter().map(|p| p.x).fold(f64::NEG_INFINITY, f64::max);
    (low < high).then_some((low, high))
}

fn coefficients(project: &Project, fit: &Fit) -> Vec<Coefficient> {
    let (y, x) = (&project.plan.output.unit, &project.plan.input.unit);
    let u = fit.standard_uncertainties();
    let t = fit.coverage_factor(project.plan.level);
    fit.family
        .coefficient_names()
        .into_iter()
        .zip(&fit.coefficients)
        .enumerate()
        .map(|(i, (name, value))| {
            let value = *value;
            let standard_uncertainty = u.as_ref().and_then(|u| u.get(i).copied());
            Coefficient {
                printed: fit.family.printed_coefficient(i),
                unit: fit.family.coefficient_unit(i, y, x),
                interval: standard_uncertainty.map(|u| (value - t * u, value + t * u)),
                name,
                value,
                standard_uncertainty,
            }
        })
        .collect()
}

fn captions(project: &Project, e: &FitEvaluation, zeros: &ZeroFacts) -> Captions {
    let span = ends(&e.fit).map_or(0.0, |(low, high)| high - low);
    let facts = ResidualFacts {
        plan: &project.plan,
        family: &e.fit.family,
        departure: &e.departure,
        rejected: e.shape.rejected(),
        too_few: e.shape.too_few.is_some(),
        degrees_of_freedom: e.fit.degrees_of_freedom,
        expanded: words::worst(&e.departure).and_then(|w| expanded_at(project, &e.fit, w.x)),
        span,
    };
    Captions {
        curve: Caption::plain(curve_caption(project, e)),
        residuals: words::residuals(&facts),
        near_zero: near_zero::caption(project, e, zeros),
    }
}

/// Half the prediction interval of one new reading at x as an input value: the size that matters there.
#[must_use]
pub fn expanded_at(project: &Project, fit: &Fit, x: f64) -> Option<f64> {
    let at = Bands::new(fit, project.plan.level, 1)?.at(x)?;
    Some(at.prediction / fit.curve.derivative(x).abs()).filter(|u| u.is_finite())
}

fn curve_caption(project: &Project, e: &FitEvaluation) -> String {
    let unit = project.plan.input.unit.as_str();
    match words::worst(&e.departure).and_then(|w| w.read_back_error) {
        Some(error) => {
            let size = crate::quantity::format::significant(error.abs(), 2);
            format!("within {} of every standard", crate::quantity::format::with_unit(&size, unit))
        }
        None => "some standards cannot be read back".to_owned(),
    }
}
