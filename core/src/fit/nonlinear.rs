//! Families that bend in their coefficients: start from the data, search, and the solution in printed form.

use super::variance::Prepared;
use super::{Fit, FitError, Point, Request, Weights};
use crate::model::{Family, Shape, callendar_van_dusen};
use crate::numerics::Real;
use crate::numerics::least_squares::{LeastSquares, ScaledWeights, SolveError};
use crate::numerics::nonlinear::{Function, NonlinearError, fit_nonlinear};

/// A solved search.
pub(super) struct Solved {
    /// The solution in printed coefficients.
    pub solved: LeastSquares,
    /// The function with them.
    pub shape: Shape,
    /// Iterations and evaluations, both stages together.
    pub effort: (usize, usize),
}

/// What the search minimises: indications, or for thermistors the measurand, in either set of coefficients.
struct Searched<'a> {
    shape: &'a Shape,
    count: usize,
    internal: bool,
}

impl Function for Searched<'_> {
    fn parameters(&self) -> usize {
        self.count
    }

    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        let moved;
        let b = if self.internal {
            moved = self.shape.from_internal(b);
            &moved
        } else {
            b
        };
        if self.shape.family().fitted_in_measurand() { self.shape.measurand(b, x) } else { self.shape.indication(b, x) }
    }
}

/// Searches the coefficients of a family for points in the order handed in.
///
/// # Formula
///
/// Levenberg–Marquardt from start values that the data give, first in coefficients whose logarithm keeps them
/// positive where the family needs it, then in the printed ones, in which the covariance is taken. Thermistor
/// families minimise Σ(T_i − T(R_i))².
///
/// # Errors
///
/// `Units`, `NoStart`, `NotConverged` with what was tried, `TooClose`, `OutOfRange`.
pub(super) fn search(request: &Request, points: &[Point], weights: &ScaledWeights) -> Result<Solved, FitError> {
    let family = request.family;
    check_units(request)?;
    let shape = Shape::new(family.clone(), request.units, Vec::new());
    check_cold_and_heat(request)?;
    let pairs: Vec<(f64, f64)> = points.iter().map(|p| (p.x, p.y)).collect();
    let start = shape.self_start(&pairs).ok_or_else(|| FitError::NoStart { reason: no_start(family) })?;
    let turned = family.fitted_in_measurand();
    let (x, y): (Vec<f64>, Vec<f64>) = pairs.iter().map(|&(x, y)| if turned { (y, x) } else { (x, y) }).unzip();
    let count = start.len();
    if points.len() < count {
        return Err(FitError::TooFew { needed: count, coefficients: count, found: points.len() });
    }
    let first = Searched { shape: &shape, count, internal: true };
    let begun = shape.to_internal(&start);
    let inner = fit_nonlinear(&first, &x, &y, weights, &begun).map_err(|e| told(&e, count))?;
    let printed = shape.from_internal(&inner.solved.coefficients);
    let second = Searched { shape: &shape, count, internal: false };
    let outer = fit_nonlinear(&second, &x, &y, weights, &printed).map_err(|e| told(&e, count))?;
    let shape = shape.with_coefficients(outer.solved.coefficients.clone());
    let effort = (inner.iterations + outer.iterations, inner.evaluations + outer.evaluations);
    Ok(Solved { solved: outer.solved, shape, effort })
}

/// Fits a shape once more with other weights, from its own coefficients.
///
/// # Errors
///
/// `Singular` when the search does not settle from there.
pub(super) fn again(shape: &Shape, x: &[f64], y: &[f64], weights: &ScaledWeights) -> Result<LeastSquares, SolveError> {
    let function = Searched { shape, count: shape.coefficients().len(), internal: false };
    match fit_nonlinear(&function, x, y, weights, shape.coefficients()) {
        Ok(found) => Ok(found.solved),
        Err(NonlinearError::Solve(error)) => Err(error),
        Err(NonlinearError::Lengths { .. } | NonlinearError::NotConverged(_)) => Err(SolveError::Singular),
    }
}

/// Thermometer families know only units of temperature and resistance.
fn check_units(request: &Request) -> Result<(), FitError> {
    let name = request.family.plain_name();
    if request.family.needs_units() && request.units.temperature.is_none() {
        let reason = format!("{name} needs a temperature as input; the units K, °C and °F are known");
        return Err(FitError::Units { reason });
    }
    if request.family.fitted_in_measurand() && request.units.ohm.is_none() {
        let reason = format!("{name} needs a resistance as output; the units Ω, kΩ, MΩ and mΩ are known");
        return Err(FitError::Units { reason });
    }
    Ok(())
}

/// Callendar–Van Dusen holds from −200 °C to 850 °C.
fn check_cold_and_heat(request: &Request) -> Result<(), FitError> {
    let (Family::CallendarVanDusen, Some(unit)) = (request.family, request.units.temperature) else {
        return Ok(());
    };
    let outside = |p: &Point| !callendar_van_dusen::domain(unit.to_celsius(p.x));
    match request.points.iter().position(outside) {
        None => Ok(()),
        Some(index) => {
            let what = super::estimate::what_lacks(request.family);
            Err(FitError::OutsideDomain { what, index, x: request.points[index].x })
        }
    }
}

fn no_start(family: &Family) -> String {
    let needed = family.coefficient_count();
    format!("{} needs {needed} different standards inside its domain that tell its shape", family.plain_name())
}

fn told(error: &NonlinearError, coefficients: usize) -> FitError {
    match error {
        NonlinearError::Solve(SolveError::Singular) => FitError::TooClose { coefficients },
        NonlinearError::Solve(SolveError::OutOfRange) => FitError::OutOfRange,
        other => FitError::NotConverged { tried: other.to_string() },
    }
}

/// Brings the residuals and variances of a thermistor fit from the measurand to the indication.
///
/// # Formula
///
/// e = f̂′(x)·(T(R) − T), v = f̂′(x)²·v_T: to first order the same as e = R − R(T), and whitened exactly the
/// residuals that were minimised.
///
/// # Errors
///
/// `OutOfRange` where the curve has no slope that a double can hold.
pub(super) fn to_indication(fit: &mut Fit) -> Result<(), FitError> {
    for (i, point) in fit.points.iter().enumerate() {
        let slope = fit.curve.derivative(point.x);
        fit.residuals[i] *= -slope;
        fit.variance_ratio[i] *= slope * slope;
    }
    let held = |v: &f64| v.is_finite() && *v >= f64::MIN_POSITIVE;
    let whole = fit.residuals.iter().all(|e| e.is_finite()) && fit.variance_ratio.iter().all(held);
    if whole { Ok(()) } else { Err(FitError::OutOfRange) }
}

/// Weights of a thermistor fit from typed uncertainties of the resistance: v_T = (u/f̂′)², settled with the curve.
pub(super) fn typed_in_measurand(fit: &Fit, u: &[f64]) -> Result<Prepared, FitError> {
    let sizes: Vec<f64> = fit.points.iter().zip(u).map(|(p, u)| u / fit.curve.derivative(p.x).abs()).collect();
    let mut prepared = super::variance::prepare(&fit.points, Weights::Typed, Some(u))?;
    let scaled = Prepared::power(&sizes, 2, |_| prepared.model.clone(), prepared.scatter)?;
    prepared.scaled = scaled.scaled;
    prepared.ratio = scaled.ratio;
    Ok(prepared)
}
