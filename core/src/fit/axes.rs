//! A fit in both axes in the form of any other fit.

use super::both::AxesSplit;
use super::both_axes::{BothAxes, DistanceError, DistanceFit, distance_fit};
use super::variance::{VarianceModel, by_level, prepare};
use super::{Fit, FitError, Point, Request, Scatter, StandardsDoubt, Weights, estimate};
use crate::model::{Curve, Shape};
use crate::numerics::Basis;
use crate::numerics::Dd;
use crate::numerics::householder::fit_columns;
use crate::numerics::least_squares::ScaledWeights;
use crate::numerics::scale::as_f64;

/// Fits a family to readings and standards that are both uncertain.
///
/// # Formula
///
/// As [`distance_fit`], from the coefficients of the ordinary fit. The uncertainties of the readings are those
/// stated with them; without any, the scatter of all repeats together. Coefficients, covariance and conversion
/// come from the search in both axes. The residuals are y − f(x) at the certified values, with variances
/// u² + f′(x)²·u²(x): they are what plots and tests of the shape see.
///
/// # Shapes and units
///
/// As [`super::fit`]; `doubt` in the order of the points.
///
/// # Errors
///
/// As [`super::estimate`]; `NoUncertainty` when the readings state none and nothing was repeated; `BothAxes`.
pub fn both_axes(request: &Request, doubt: &StandardsDoubt) -> Result<Fit, FitError> {
    let (u, scatter) = reading_uncertainties(request)?;
    let ordinary = estimate(&Request { weights: Weights::Equal, reading_uncertainty: None, ..*request })?;
    let shape = Shape::new(request.family.clone(), request.units, ordinary.coefficients.clone());
    let (x, covariance, standard_of) = standards(request.points, doubt);
    let y: Vec<f64> = request.points.iter().map(|p| p.y).collect();
    let data = BothAxes { x: &x, x_covariance: &covariance, y: &y, y_uncertainty: &u, standard_of: &standard_of };
    let found = distance_fit(&shape, &data, &ordinary.coefficients).map_err(|e| told(&e))?;
    let shape = shape.with_coefficients(found.coefficients.clone());
    let own: Vec<f64> = standard_of.iter().map(|s| covariance[*s][*s]).collect();
    assemble(request, &u, scatter, &own, AxesSplit::new(shape, found))
}

/// Standard uncertainty of every reading, and whether it is known or pooled from repeats.
fn reading_uncertainties(request: &Request) -> Result<(Vec<f64>, Scatter), FitError> {
    if let Some(u) = request.reading_uncertainty.filter(|u| u.iter().all(|u| u.is_finite())) {
        let prepared = prepare(request.points, Weights::Typed, Some(u))?;
        return Ok((u.to_vec(), prepared.scatter));
    }
    let from_repeats = match request.weights {
        kind @ (Weights::Replicates | Weights::ReplicatesProportional) => kind,
        _ => Weights::ReplicatesConstant,
    };
    let prepared = prepare(request.points, from_repeats, None).map_err(|e| match e {
        FitError::NoRepeats => FitError::NoUncertainty,
        other => other,
    })?;
    let Scatter::Repeats { variance, degrees_of_freedom } = prepared.scatter else {
        return Err(FitError::NoUncertainty);
    };
    let u = prepared.ratio.iter().map(|v| libm::sqrt(v * variance)).collect();
    Ok((u, Scatter::Repeats { variance: 1.0, degrees_of_freedom }))
}

/// Values and covariance of the standards, an exact one added for every value without papers, and which of
/// them each observation belongs to.
fn standards(points: &[Point], doubt: &StandardsDoubt) -> (Vec<f64>, Vec<Vec<f64>>, Vec<usize>) {
    let mut x = doubt.values.clone();
    let mut exact: Vec<(f64, usize)> = Vec::new();
    let mut standard_of = Vec::with_capacity(points.len());
    for (point, standard) in points.iter().zip(&doubt.standard_of) {
        let place =
            standard.or_else(|| exact.iter().find(|(value, _)| value.total_cmp(&point.x).is_eq()).map(|(_, i)| *i));
        let place = place.unwrap_or_else(|| {
            x.push(point.x);
            exact.push((point.x, x.len() - 1));
            x.len() - 1
        });
        standard_of.push(place);
    }
    let mut covariance = doubt.covariance();
    for row in &mut covariance {
        row.resize(x.len(), 0.0);
    }
    covariance.resize(x.len(), vec![0.0; x.len()]);
    (x, covariance, standard_of)
}

fn told(error: &DistanceError) -> FitError {
    match error {
        DistanceError::NotConverged { .. } => FitError::NotConverged { tried: error.to_string() },
        other => FitError::BothAxes { reason: other.to_string() },
    }
}

fn assemble(request: &Request, u: &[f64], scatter: Scatter, own: &[f64], split: AxesSplit) -> Result<Fit, FitError> {
    let found: &DistanceFit = split.distance();
    let (points, coefficients) = (request.points, found.coefficients.clone());
    let curve = Curve::new(request.family, request.units, coefficients.clone());
    let residuals: Vec<f64> = points.iter().map(|p| p.y - curve.value(p.x)).collect();
    let spread = |i: usize| {
        let slope = curve.derivative(points[i].x);
        // An exact standard needs no slope, which may not exist there.
        u[i] * u[i] + if own[i] == 0.0 { 0.0 } else { slope * slope * own[i] }
    };
    let variance_ratio: Vec<f64> = (0..points.len()).map(spread).collect();
    let orthonormal = orthonormal(&curve, points, &residuals, &variance_ratio)?;
    let leverage = (0..points.len()).map(|i| orthonormal.iter().map(|q| q[i] * q[i]).sum::<f64>().min(1.0)).collect();
    let residual_ss: f64 = residuals.iter().zip(&variance_ratio).map(|(e, v)| e * e / v).sum();
    let freedom = points.len() - coefficients.len();
    let new_reading =
        by_level(points, |members| members.iter().map(|i| u[*i] * u[*i]).sum::<f64>() / as_f64(members.len()));
    Ok(Fit {
        family: request.family.clone(),
        weights: request.weights,
        curve,
        points: points.to_vec(),
        covariance: found.covariance.clone(),
        degrees_of_freedom: freedom,
        residual_ss,
        residual_sd: (freedom > 0).then(|| libm::sqrt(residual_ss / as_f64(freedom))),
        residuals,
        leverage,
        variance_ratio,
        scatter,
        variance_model: VarianceModel::Levels(new_reading),
        fitted_power: None,
        effort: Some((found.steps, found.steps)),
        standards: None,
        repeats_alone: None,
        uncertainties: found.standard_uncertainties(),
        orthonormal,
        basis: Some(Basis::Triangular(found.triangle())),
        condition: 1.0,
        coefficients,
        both_axes: Some(Box::new(split)),
    })
}

/// p orthonormal columns that span the whitened gradients at the observations.
fn orthonormal(curve: &Curve, points: &[Point], e: &[f64], v: &[f64]) -> Result<Vec<Vec<f64>>, FitError> {
    let gradients: Vec<Vec<f64>> = points.iter().map(|p| curve.gradient(p.x)).collect();
    let count = curve.coefficients().len();
    let columns: Vec<Vec<Dd>> = (0..count).map(|j| gradients.iter().map(|g| Dd::from(g[j])).collect()).collect();
    let weights = ScaledWeights::inverse_power(v, 1).map_err(|_| FitError::OutOfRange)?;
    let solved = fit_columns(&columns, e, &weights).map_err(|_| FitError::TooClose { coefficients: count })?;
    Ok(solved.orthonormal)
}
