//! Fits with uncertainty in both axes: generalised distance regression.
//!
//! Uncertainties are absolute: the covariance is never scaled by χ², whose size is a finding instead.

mod error;
mod families;
mod variance;

pub use crate::numerics::distance::Function;
pub use error::DistanceError;
pub use variance::Influence;

use crate::distributions::chi2_upper;
use crate::numerics::Dd;
use crate::numerics::distance::{Failure, Linearised, Minimum, Observed, Problem, place};
use crate::numerics::scale::as_f64;
use crate::numerics::semidefinite::{SemidefiniteFactor, semidefinite_cholesky};

/// What is known of m standards and N readings.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BothAxes<'a> {
    /// Certified values of the m standards, input unit.
    pub x: &'a [f64],
    /// U_x, m rows of m, input unit²: own and common parts of the standards' errors together. It may be
    /// singular: a row of zeros is a standard taken as exact.
    pub x_covariance: &'a [Vec<f64>],
    /// N readings, each of one application, output unit.
    pub y: &'a [f64],
    /// Their standard uncertainties, independent of each other, output unit.
    pub y_uncertainty: &'a [f64],
    /// Which standard each reading belongs to, 0 to m − 1. Readings of one standard share its error.
    pub standard_of: &'a [usize],
}

/// A curve fitted with uncertainty in both axes: m standards, N readings, p coefficients.
#[derive(Debug, Clone, PartialEq)]
pub struct DistanceFit {
    /// The p coefficients.
    pub coefficients: Vec<f64>,
    /// Cov(β), p rows of p: the inverse normal matrix of the problem in (ξ, β), its β block. Absolute.
    pub covariance: Vec<Vec<f64>>,
    /// The part of [`Self::covariance`] that the scatter of the readings causes.
    pub from_readings: Vec<Vec<f64>>,
    /// The part of [`Self::covariance`] that the standards cause. Both parts add up to the whole.
    pub from_standards: Vec<Vec<f64>>,
    /// ξ̂: where the standards most plausibly are, m values, input unit.
    pub latent: Vec<f64>,
    /// x − ξ̂, m values, input unit, without cancellation.
    pub x_residuals: Vec<f64>,
    /// y − f(ξ̂), N values, output unit.
    pub residuals: Vec<f64>,
    /// The least sum: (x − ξ̂)ᵀU_x⁻¹(x − ξ̂) + Σ(y − f(ξ̂))²/u².
    pub chi_square: f64,
    /// ν = N − p: every observed place adds one datum and one unknown.
    pub degrees_of_freedom: usize,
    /// P(χ²_ν > χ²). Small: the stated uncertainties are too small or the curve is wrong; next to 1: they
    /// are too large. `None` with ν = 0.
    pub chi_square_p: Option<f64>,
    /// The least sum of another minimum that the search met, without the scatter within standards: the data
    /// allow another curve almost as well. Looked for only where the curve bends within the uncertainty of a
    /// standard.
    pub rival: Option<f64>,
    /// Linearised problems solved on the way.
    pub steps: usize,
    /// Links between the estimate and the data, for variances and influences anywhere.
    links: Linearised,
    /// Coefficients before rounding.
    exact: Vec<Dd>,
    /// Position of each reading among the observed standards, and its share in their mean.
    shares: Vec<(usize, f64)>,
    /// Standard and variance of the mean of each observed standard.
    observed: Vec<Observed>,
}

/// Fits a function to standards and readings that are both uncertain.
///
/// # Formula
///
/// (x − ξ)ᵀU_x⁻¹(x − ξ) + Σ_i (y_i − f(ξ_{s(i)}; β))²/u_i² → min over (ξ, β), with x − ξ = L z and
/// U_x = L Lᵀ where U_x is singular. Exact derivatives and double-double throughout; everything is rounded
/// once at the end. Cov(β) from the normal matrix, that is to first order at the minimum.
///
/// # Shapes and units
///
/// As in [`BothAxes`]; `start` holds p coefficients, those of the ordinary fit. m up to some hundreds: the
/// work of a step grows with m³ when errors are shared, with m when they are not. Magnitudes between
/// 1e-60 and 1e60.
///
/// # Errors
///
/// Every variant of [`DistanceError`].
///
/// # Source
///
/// ISO/TS 28037:2010 clauses 7 and 10 (line), ISO 6143:2001 annex A (other functions); the first checked
/// against its printed example (tests/published/iso-ts-28037), the other from memory.
pub fn distance_fit<F: Function>(
    function: &F,
    data: &BothAxes<'_>,
    start: &[f64],
) -> Result<DistanceFit, DistanceError> {
    let p = function.coefficient_count();
    error::check(data, start, p)?;
    let factor = semidefinite_cholesky(data.x_covariance)?;
    let observed = means(data);
    error::check_levels(data, &observed, p)?;
    let at = |b: &[Dd], x: Dd, movable: bool| place(function, b, x, movable);
    let problem = Problem::new(&at, data.x, factor.clone(), observed.clone());
    let start: Vec<Dd> = start.iter().map(|v| Dd::from(*v)).collect();
    let found = problem.minimise(&start).map_err(|failure| match failure {
        Failure::Undefined => {
            let standard = problem.undefined_at(&start).unwrap_or(0);
            DistanceError::Undefined { standard, x: data.x[standard] }
        }
        Failure::Dependent => DistanceError::Undetermined { coefficients: p },
        Failure::Edge { standard } => DistanceError::Edge { standard, x: data.x[standard] },
        Failure::Unsettled { steps, reached } => DistanceError::NotConverged { steps, reached },
    })?;
    let latent = problem.latent(&found.state.z);
    let mut residuals = Vec::with_capacity(data.y.len());
    for (y, standard) in data.y.iter().zip(data.standard_of) {
        let curve = function.value(&found.state.b, latent[*standard]);
        residuals.push(Dd::from(*y) - curve);
    }
    assemble(data, &factor, observed, found, &latent, &residuals)
}

/// The observed standards with their weighted mean readings, in the order of the standards.
fn means(data: &BothAxes<'_>) -> Vec<Observed> {
    let mut sums = vec![(Dd::ZERO, Dd::ZERO); data.x.len()];
    for ((y, u), standard) in data.y.iter().zip(data.y_uncertainty).zip(data.standard_of) {
        let weight = Dd::ONE / Dd::from_product(*u, *u);
        let (total, product) = &mut sums[*standard];
        *total += weight;
        *product += weight * *y;
    }
    let seen = sums.into_iter().enumerate().filter(|(_, (total, _))| *total != Dd::ZERO);
    seen.map(|(standard, (total, sum))| Observed { standard, mean: sum / total, variance: Dd::ONE / total }).collect()
}

fn assemble(
    data: &BothAxes<'_>,
    factor: &SemidefiniteFactor,
    observed: Vec<Observed>,
    found: Minimum,
    latent: &[Dd],
    residuals: &[Dd],
) -> Result<DistanceFit, DistanceError> {
    let z = &found.state.z;
    let mut chi_square: Dd = z.iter().map(|z| z.square()).sum();
    for (e, u) in residuals.iter().zip(data.y_uncertainty) {
        chi_square += (*e / Dd::from(*u)).square();
    }
    let place_of = |standard: usize| observed.iter().position(|o| o.standard == standard).unwrap_or(0);
    let share = |(u, standard): (&f64, &usize)| {
        let place = place_of(*standard);
        (place, (observed[place].variance / Dd::from_product(*u, *u)).to_f64())
    };
    let displaced = |row: &Vec<Dd>| row.iter().zip(z).map(|(l, z)| *l * *z).sum::<Dd>().to_f64();
    let nu = data.y.len() - found.state.b.len();
    let parts = variance::parts(&found.linearised, &observed);
    let chi_square = chi_square.to_f64();
    let out = DistanceFit {
        coefficients: rounded(&found.state.b),
        covariance: parts.whole,
        from_readings: parts.readings,
        from_standards: parts.standards,
        latent: rounded(latent),
        x_residuals: factor.rows.iter().map(displaced).collect(),
        residuals: rounded(residuals),
        chi_square,
        degrees_of_freedom: nu,
        chi_square_p: (nu > 0).then(|| chi2_upper(chi_square, as_f64(nu))),
        rival: found.rival,
        steps: found.steps,
        links: found.linearised,
        exact: found.state.b,
        shares: data.y_uncertainty.iter().zip(data.standard_of).map(share).collect(),
        observed,
    };
    let finite = out.coefficients.iter().chain(out.covariance.iter().flatten()).all(|v| v.is_finite());
    if finite { Ok(out) } else { Err(DistanceError::OutOfRange) }
}

fn rounded(values: &[Dd]) -> Vec<f64> {
    values.iter().map(|v| v.to_f64()).collect()
}

#[cfg(test)]
mod coverage_tests;
#[cfg(test)]
mod published_tests;
#[cfg(test)]
mod reference_tests;
#[cfg(test)]
mod shapes;
#[cfg(test)]
mod tests;
