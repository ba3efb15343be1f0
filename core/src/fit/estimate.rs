//! Estimation: checks first, then least squares in double-double, rounded once.

use super::{Fit, FitError, Point, Weights, variance};
use crate::model::{Curve, Family, Formula, HIGHEST_DEGREE};
use crate::numerics::Dd;
use crate::numerics::householder::fit_columns;
use crate::numerics::least_squares::{LeastSquares, ScaledWeights, SolveError};
use crate::numerics::orthogonal::fit_polynomial;
use crate::numerics::scale::{Scaled, as_f64};

/// Fits a family to observations by weighted least squares.
///
/// # Formula
///
/// β minimises Σ w_i (y_i − f(x_i; β))², w = 1/v; Cov β = s²(XᵀWX)⁻¹ with s² = Σwe²/ν, ν = N − p.
/// Polynomials by orthogonal polynomials, the logarithm by Householder reflections, both in
/// double-double up to the one rounding at the end. The points are taken in ascending order, so that the
/// same readings give the same bits in whatever order they come.
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
pub fn fit(family: &Family, points: &[Point], weights: Weights) -> Result<Fit, FitError> {
    check(family, points)?;
    let order = ascending(points);
    check_levels(family, points, &order)?;
    let (scaled, variance_ratio) = variance::prepare(points, weights)?;
    let sorted = ScaledWeights { values: order.iter().map(|i| scaled.values[*i]).collect(), exponent: scaled.exponent };
    let x: Vec<f64> = order.iter().map(|i| points[*i].x).collect();
    let y: Vec<f64> = order.iter().map(|i| points[*i].y).collect();
    let solved = match family {
        Family::Declared => return Err(FitError::NotFitted),
        Family::Polynomial(degree) => fit_polynomial(&x, &y, &sorted, usize::from(*degree)),
        Family::Log => {
            let logarithms = x.iter().map(|x| Dd::from(*x).ln()).collect();
            fit_columns(&[vec![Dd::ONE; x.len()], logarithms], &y, &sorted)
        }
    };
    let solved = solved.map_err(|error| match error {
        SolveError::Singular => FitError::TooClose { coefficients: family.coefficient_count() },
        SolveError::OutOfRange => FitError::OutOfRange,
    })?;
    assemble(family, points, weights, variance_ratio, &order, solved)
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
        Family::Polynomial(_) | Family::Log => {}
    }
    check_finite(points)?;
    if let Some(index) = points.iter().position(|p| !family.has_value_at(p.x)) {
        let x = points[index].x;
        return Err(FitError::OutsideDomain { index, x });
    }
    Ok(())
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
    family: &Family,
    points: &[Point],
    weights: Weights,
    variance_ratio: Vec<f64>,
    order: &[usize],
    solved: LeastSquares,
) -> Result<Fit, FitError> {
    let restore = |sorted: &[f64]| {
        let mut out = vec![0.0; sorted.len()];
        for (value, place) in sorted.iter().zip(order) {
            out[*place] = *value;
        }
        out
    };
    let orthonormal: Vec<Vec<f64>> = solved.orthonormal.iter().map(|c| restore(c)).collect();
    let leverage = (0..points.len()).map(|i| orthonormal.iter().map(|q| q[i] * q[i]).sum::<f64>().min(1.0)).collect();
    let curve = match (family, solved.coefficients.as_slice()) {
        (Family::Log, [a, b]) => Curve::Log([*a, *b]),
        _ => Curve::Polynomial(solved.coefficients.clone()),
    };
    let residuals = restore(&solved.residuals);
    if residuals.iter().any(|e| !e.is_finite()) {
        return Err(FitError::OutOfRange);
    }
    Ok(Fit {
        family: family.clone(),
        weights,
        curve,
        points: points.to_vec(),
        covariance: solved.covariance,
        degrees_of_freedom: points.len() - solved.coefficients.len(),
        coefficients: solved.coefficients,
        residual_ss: solved.residual_ss,
        residual_sd: solved.residual_sd,
        residuals,
        leverage,
        variance_ratio,
        uncertainties: solved.uncertainties,
        orthonormal,
        basis: Some(solved.basis),
        condition: solved.condition,
    })
}
