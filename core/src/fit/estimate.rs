//! Estimation: checks first, then least squares in double-double, rounded once.

use super::variance::{Prepared, VarianceModel};
use super::{Fit, FitError, Point, Scatter, Weights, nonlinear, power, repeats, variance};
use crate::model::{Centred, Curve, Family, Formula, HIGHEST_DEGREE, Units};
use crate::numerics::Dd;
use crate::numerics::householder::fit_columns;
use crate::numerics::least_squares::{LeastSquares, ScaledWeights, SolveError};
use crate::numerics::orthogonal::{CentredPolynomial, fit_centred};
use crate::numerics::scale::{Scaled, as_f64};

/// Everything a fit is made from.
#[derive(Debug, Clone, Copy)]
pub struct Request<'a> {
    /// The family.
    pub family: &'a Family,
    /// The observations.
    pub points: &'a [Point],
    /// The weights.
    pub weights: Weights,
    /// Standard uncertainty of every observation, output unit, for the weights `typed`; not a number where
    /// one has none.
    pub reading_uncertainty: Option<&'a [f64]>,
    /// What thermometer families need to know about the units.
    pub units: Units,
}

impl<'a> Request<'a> {
    /// Kelvin and ohm, no uncertainties of the readings.
    #[must_use]
    pub fn new(family: &'a Family, points: &'a [Point], weights: Weights) -> Self {
        Self { family, points, weights, reading_uncertainty: None, units: Units::default() }
    }
}

/// [`estimate`] for weights that need nothing but the points.
///
/// # Errors
///
/// As [`estimate`].
pub fn fit(family: &Family, points: &[Point], weights: Weights) -> Result<Fit, FitError> {
    estimate(&Request::new(family, points, weights))
}

/// Fits a family to observations by weighted least squares.
///
/// # Formula
///
/// β minimises Σ w_i (y_i − f(x_i; β))², w = 1/v; Cov β = σ²(XᵀWX)⁻¹. With relative weights σ² is
/// s² = Σwe²/ν, ν = N − p; with weights from repeats the pooled variance of all repeats; with absolute
/// weights 1. Polynomials by orthogonal polynomials, other linear families by Householder reflections, all
/// in double-double up to the one rounding at the end. The points are taken in ascending order, so that
/// the same readings give the same bits in whatever order they come.
///
/// # Shapes and units
///
/// N points in the input and output unit; results in the order of the points.
///
/// # Errors
///
/// Every variant of [`FitError`] except `Undefined`. With ν = 0 there is a fit without s.
///
/// # Source
///
/// Any text on linear regression; checked against the linear sets of the NIST/ITL Statistical Reference
/// Datasets and JCGM 100:2008 H.3.
pub fn estimate(request: &Request) -> Result<Fit, FitError> {
    let Request { family, points, weights, .. } = *request;
    check(family, points)?;
    let order = ascending(points);
    check_levels(family, points, &order)?;
    let prepared = variance::prepare(points, weights, request.reading_uncertainty)?;
    let fit = weighted(request, &order, prepared)?;
    match (weights, request.reading_uncertainty) {
        (Weights::Fitted, _) => power::follow(request, &order, fit),
        (Weights::Typed, Some(u)) if family.fitted_in_measurand() => {
            let mut fit = fit;
            // The slope that carries u to the measurand hardly changes with the weights.
            for _ in 0..ROUNDS_OF_SLOPE {
                fit = weighted(request, &order, nonlinear::typed_in_measurand(&fit, u)?)?;
            }
            Ok(fit)
        }
        _ => Ok(fit),
    }
}

/// Rounds in which typed uncertainties of a resistance become those of a temperature.
const ROUNDS_OF_SLOPE: usize = 3;

/// One weighted fit with the variances settled.
pub(super) fn weighted(request: &Request, order: &[usize], prepared: Prepared) -> Result<Fit, FitError> {
    let Request { family, points, units, .. } = *request;
    let scaled = &prepared.scaled;
    let sorted = ScaledWeights { values: order.iter().map(|i| scaled.values[*i]).collect(), exponent: scaled.exponent };
    let ascending: Vec<Point> = order.iter().map(|i| points[*i]).collect();
    let x: Vec<f64> = ascending.iter().map(|p| p.x).collect();
    let y: Vec<f64> = ascending.iter().map(|p| p.y).collect();
    let columns = |columns: Vec<Vec<Dd>>| fit_columns(&columns, &y, &sorted);
    let solved = match family {
        Family::Declared => return Err(FitError::NotFitted),
        Family::Polynomial(degree) => {
            let solved = fit_centred(&x, &y, &sorted, usize::from(*degree));
            let (solved, centred) = solved.map_err(|e| unsolved(family, e))?;
            let curve = polynomial(&solved, centred);
            return assemble(request, prepared, order, solved, curve);
        }
        Family::LineThroughZero | Family::OnePoint => columns(vec![x.iter().map(|x| Dd::from(*x)).collect()]),
        Family::Log => columns(vec![vec![Dd::ONE; x.len()], x.iter().map(|x| Dd::from(*x).ln()).collect()]),
        _ => {
            let found = nonlinear::search(request, &ascending, &sorted)?;
            let mut fit = assemble(request, prepared, order, found.solved, Curve::Shape(found.shape))?;
            fit.effort = Some(found.effort);
            if family.fitted_in_measurand() {
                nonlinear::to_indication(&mut fit)?;
            }
            return Ok(fit);
        }
    };
    let solved = solved.map_err(|e| unsolved(family, e))?;
    let curve = Curve::new(family, units, solved.coefficients.clone());
    assemble(request, prepared, order, solved, curve)
}

fn unsolved(family: &Family, error: SolveError) -> FitError {
    match error {
        SolveError::Singular => FitError::TooClose { coefficients: family.coefficient_count() },
        SolveError::OutOfRange => FitError::OutOfRange,
    }
}

/// Condition of the powers of x above which they lose digits that a converted value needs.
const POWERS_CANCEL: f64 = 1e6;

/// The polynomial, evaluated about its centre when powers of x would cancel.
fn polynomial(solved: &LeastSquares, centred: CentredPolynomial) -> Curve {
    let powers = solved.coefficients.clone();
    if solved.condition <= POWERS_CANCEL {
        return Curve::Polynomial(powers);
    }
    let CentredPolynomial { centre, scale, coefficients } = centred;
    Curve::Centred(Centred { powers, centre, scale, coefficients })
}

/// Compares observations with a declared function: the residuals are the errors of the instrument.
///
/// # Formula
///
/// e = y − f(x), ν = N, s = √(Σe²/N) about zero.
///
/// # Errors
///
/// `NotFinite`, and `Undefined` where the formula has no value; `OutOfRange` when Σe² overflows. Without
/// points there is no s.
pub fn declared(formula: &Formula, points: &[Point]) -> Result<Fit, FitError> {
    check_finite(points)?;
    let error = |(index, p): (usize, &Point)| {
        let value = formula.value(p.x);
        if value.is_nan() { Err(FitError::Undefined { index, x: p.x }) } else { Ok(p.y - value) }
    };
    let errors = points.iter().enumerate().map(error).collect::<Result<Vec<f64>, _>>()?;
    let scaled = Scaled::new(&errors);
    let sum: Dd = scaled.values.iter().map(|e| Dd::from_product(*e, *e)).sum();
    let n = points.len();
    let mean_square = sum / Dd::from(as_f64(n));
    let residual_ss = libm::scalbn(sum.to_f64(), 2 * scaled.exponent);
    let residual_sd = libm::scalbn(mean_square.sqrt().to_f64(), scaled.exponent);
    if !residual_ss.is_finite() || errors.iter().any(|e| !e.is_finite()) {
        return Err(FitError::OutOfRange);
    }
    Ok(Fit {
        family: Family::Declared,
        weights: Weights::Equal,
        curve: Curve::Formula(formula.clone()),
        points: points.to_vec(),
        coefficients: Vec::new(),
        covariance: Vec::new(),
        degrees_of_freedom: n,
        residual_ss,
        residual_sd: (n > 0).then_some(residual_sd),
        residuals: errors,
        leverage: vec![0.0; n],
        variance_ratio: vec![1.0; n],
        scatter: Scatter::Residuals,
        variance_model: VarianceModel::Constant,
        fitted_power: None,
        effort: None,
        both_axes: None,
        standards: None,
        repeats_alone: None,
        uncertainties: Vec::new(),
        orthonormal: Vec::new(),
        basis: None,
        condition: 1.0,
    })
}

/// Edge cases in the order in which a person would name them.
fn check(family: &Family, points: &[Point]) -> Result<(), FitError> {
    match family {
        Family::Declared => return Err(FitError::NotFitted),
        Family::Polynomial(degree) if *degree > HIGHEST_DEGREE => {
            return Err(FitError::DegreeTooHigh { degree: *degree });
        }
        _ => {}
    }
    check_finite(points)?;
    if let Some(index) = points.iter().position(|p| !family.has_value_at(p.x)) {
        let x = points[index].x;
        return Err(FitError::OutsideDomain { what: what_lacks(family), index, x });
    }
    Ok(())
}

/// What a family lacks outside its domain, in words.
pub(super) fn what_lacks(family: &Family) -> &'static str {
    if *family == Family::Log { "the logarithm of" } else { "a value of this function at" }
}

/// Positions of the points by x, then by y; adding zero turns −0 into 0.
fn ascending(points: &[Point]) -> Vec<usize> {
    let mut order: Vec<usize> = (0..points.len()).collect();
    order.sort_by(|a, b| {
        let (a, b) = (points[*a], points[*b]);
        (a.x + 0.0).total_cmp(&(b.x + 0.0)).then((a.y + 0.0).total_cmp(&(b.y + 0.0)))
    });
    order
}

/// As many distinct standards as coefficients.
fn check_levels(family: &Family, points: &[Point], order: &[usize]) -> Result<(), FitError> {
    let steps = order.windows(2).filter(|pair| points[pair[0]].x < points[pair[1]].x).count();
    let found = if order.is_empty() { 0 } else { steps + 1 };
    let needed = family.coefficient_count();
    if found < needed {
        return Err(FitError::TooFew { needed, coefficients: needed, found });
    }
    Ok(())
}

fn check_finite(points: &[Point]) -> Result<(), FitError> {
    let bad = |p: &Point| !(p.x.is_finite() && p.y.is_finite());
    points.iter().position(bad).map_or(Ok(()), |index| Err(FitError::NotFinite { index }))
}

/// Puts a solution for the ordered points together with the points as they came.
fn assemble(
    request: &Request,
    prepared: Prepared,
    order: &[usize],
    solved: LeastSquares,
    curve: Curve,
) -> Result<Fit, FitError> {
    let Request { family, points, weights, .. } = *request;
    let restore = |sorted: &[f64]| {
        let mut out = vec![0.0; sorted.len()];
        for (value, place) in sorted.iter().zip(order) {
            out[*place] = *value;
        }
        out
    };
    let orthonormal: Vec<Vec<f64>> = solved.orthonormal.iter().map(|c| restore(c)).collect();
    let leverage = (0..points.len()).map(|i| orthonormal.iter().map(|q| q[i] * q[i]).sum::<f64>().min(1.0)).collect();
    let residuals = restore(&solved.residuals);
    if residuals.iter().any(|e| !e.is_finite()) {
        return Err(FitError::OutOfRange);
    }
    let levels = super::levels::levels(points).len();
    let scatter = match weights {
        Weights::Raw => repeats::of_means(&solved, points.len(), levels),
        _ => prepared.scatter,
    };
    let (covariance, uncertainties) = spread_of_coefficients(&solved, scatter)?;
    Ok(Fit {
        family: family.clone(),
        weights,
        curve,
        points: points.to_vec(),
        covariance,
        degrees_of_freedom: points.len() - solved.coefficients.len(),
        coefficients: solved.coefficients,
        residual_ss: solved.residual_ss,
        residual_sd: solved.residual_sd,
        residuals,
        leverage,
        variance_ratio: prepared.ratio,
        scatter,
        variance_model: prepared.model,
        fitted_power: None,
        effort: None,
        both_axes: None,
        standards: None,
        repeats_alone: None,
        uncertainties,
        orthonormal,
        basis: Some(solved.basis),
        condition: solved.condition,
    })
}

/// Covariance and standard uncertainties of the coefficients, σ known as the kind of weights says.
fn spread_of_coefficients(solved: &LeastSquares, scatter: Scatter) -> Result<(Vec<Vec<f64>>, Vec<f64>), FitError> {
    let variance = match scatter {
        // Already there, rounded once.
        Scatter::Residuals => return Ok((solved.covariance.clone(), solved.uncertainties.clone())),
        Scatter::Repeats { variance, .. } | Scatter::Means { variance, .. } => variance,
        Scatter::Known => 1.0,
    };
    let scaled: Vec<Vec<f64>> =
        solved.unit_covariance.iter().map(|row| row.iter().map(|c| c * variance).collect()).collect();
    let uncertainties: Vec<f64> = scaled.iter().enumerate().map(|(j, row)| libm::sqrt(row[j])).collect();
    if uncertainties.iter().all(|u| u.is_finite()) { Ok((scaled, uncertainties)) } else { Err(FitError::OutOfRange) }
}
