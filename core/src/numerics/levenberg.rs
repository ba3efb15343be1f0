//! Least squares for models that are not linear in their parameters, to the last bit of a double.
//!
//! A Levenberg–Marquardt search in doubles finds the valley, Newton steps in double-double reach its
//! floor, and what is handed back is proved: no part of the residuals is left along the tangent space,
//! and the second derivatives are those of a minimum.

use super::dd::Dd;
use super::levenberg_place::{Place, scaled_residuals};
use super::levenberg_polish::polish;
use super::levenberg_trust::{Progress, Trust};
use super::real::Real;
use super::scale::exponent_of;

/// A sum of squares to be minimised: n residuals of p parameters.
pub trait Problem {
    /// Number of parameters p.
    fn parameters(&self) -> usize;

    /// Number of residuals n.
    fn observations(&self) -> usize;

    /// Length of the whitened data, ‖√W y‖: against it residuals count as zero or not.
    fn size(&self) -> f64;

    /// The n whitened residuals, data minus model, not finite outside the domain.
    fn residuals<T: Real>(&self, b: &[T]) -> Vec<T>;

    /// ∂r/∂b: p columns of length n.
    fn jacobian<T: Real>(&self, b: &[T]) -> Vec<Vec<T>>;
}

/// A proved minimum.
#[derive(Debug, Clone, PartialEq)]
pub struct Minimum {
    /// The p parameters.
    pub parameters: Vec<Dd>,
    /// The n whitened residuals there, all zero when the fit is exact to the last bit of double-double.
    pub residuals: Vec<Dd>,
    /// ∂r/∂b there: p columns of length n.
    pub jacobian: Vec<Vec<Dd>>,
    /// Iterations, in doubles and double-double together.
    pub iterations: usize,
    /// Evaluations of all residuals or of the whole Jacobian.
    pub evaluations: usize,
    /// Relative offset that is left.
    pub relative_offset: f64,
}

/// What was tried before giving up.
#[derive(Debug, Clone, PartialEq)]
pub struct Tried {
    /// Iterations.
    pub iterations: usize,
    /// Evaluations of all residuals or of the whole Jacobian.
    pub evaluations: usize,
    /// Relative offset at the best place found; converged is 1e-18.
    pub relative_offset: f64,
    /// Root of the whitened sum of squares there.
    pub residual_length: f64,
    /// The parameters there.
    pub parameters: Vec<f64>,
}

/// Why there is no minimum to hand back.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum NotConverged {
    /// Fewer observations than parameters, or no parameter at all.
    #[error("{observations} observations cannot determine {parameters} parameters")]
    TooFew {
        /// n.
        observations: usize,
        /// p.
        parameters: usize,
    },
    /// The start has another number of entries than there are parameters, or one that is not finite.
    #[error("the start has {found} finite entries where {expected} are needed")]
    Start {
        /// Finite entries found.
        found: usize,
        /// Parameters.
        expected: usize,
    },
    /// A residual or a derivative at the start is not finite.
    #[error("the function or a derivative is not finite at the start (first at observation {}, counting from 1)", observation + 1)]
    NotFiniteAtStart {
        /// First observation, from 0.
        observation: usize,
    },
    /// Residuals or derivatives leave the range in which double-double can multiply, about 1e±290.
    #[error("the residuals or their derivatives are too large for double-double arithmetic")]
    OutOfRange,
    /// A parameter has no influence of its own beside those before it, or loses it while it runs away.
    #[error("parameter {} has no influence of its own ({remains:.1e} of it is left) after {} iterations", parameter + 1, tried.iterations)]
    Singular {
        /// Which parameter, from 0.
        parameter: usize,
        /// Part of its influence that is its own.
        remains: f64,
        /// What was tried.
        tried: Tried,
    },
    /// No smaller sum of squares was found, yet the residuals are not perpendicular to the tangent space.
    #[error("no way further down after {} iterations and {} evaluations; relative offset {:.1e}", tried.iterations, tried.evaluations, tried.relative_offset)]
    Stalled {
        /// What was tried.
        tried: Tried,
    },
    /// The evaluations are used up.
    #[error("not there after {} iterations and {} evaluations; relative offset {:.1e}", tried.iterations, tried.evaluations, tried.relative_offset)]
    Exhausted {
        /// What was tried.
        tried: Tried,
    },
    /// The slopes are zero, but a way leads further down: a saddle or a maximum.
    #[error("a saddle, not a minimum, after {} iterations: least curvature {curvature:.2e}", tried.iterations)]
    Saddle {
        /// Least eigenvalue of the relative curvature; 1 in a linear problem.
        curvature: f64,
        /// What was tried.
        tried: Tried,
    },
}

/// Iterations and evaluations so far.
#[derive(Debug, Clone, Copy)]
pub(super) struct Budget {
    pub iterations: usize,
    pub evaluations: usize,
    pub limit: usize,
}

impl Budget {
    pub(super) fn is_spent(&self) -> bool {
        self.evaluations >= self.limit
    }
}

/// Most evaluations in all before a minimum is found.
pub const EVALUATION_LIMIT: usize = 5000;

/// Sizes of the first trust region against that of the start, tried in turn until a minimum is proved, and
/// the evaluations each may use.
const FIRST_REGIONS: [(f64, usize); 3] = [(100.0, 2500), (1.0, 1200), (0.01, 1200)];

/// Minimises a sum of squares from a start.
///
/// # Formula
///
/// Levenberg–Marquardt in doubles inside a trust region scaled by running maxima of the columns of the
/// Jacobian, from up to three sizes of the first region; then Newton steps in double-double with exact
/// second derivatives (a trust-region step where they do not help). Converged means: relative offset
/// ≤ 1e-18, or what the parameters could still take away is below 1e-29 of the data; no parameter would
/// move by more than 1e-13 of itself or of its uncertainty; the second derivatives are those of a minimum.
///
/// # Shapes and units
///
/// `start`: p finite numbers in the units of the parameters, of any magnitude.
///
/// # Errors
///
/// [`NotConverged`] says what was tried. At most [`EVALUATION_LIMIT`] evaluations are made, and the p
/// that prove a minimum.
///
/// # Source
///
/// Moré (1978), Lect. Notes Math. 630, 105; Bates and Watts, Technometrics 23 (1981) 179, for the
/// relative offset. From memory.
pub fn minimise<P: Problem>(problem: &P, start: &[f64]) -> Result<Minimum, NotConverged> {
    let mut budget = Budget { iterations: 0, evaluations: 2, limit: EVALUATION_LIMIT };
    let data = check_start(problem, start)?;
    let mut failure: Option<NotConverged> = None;
    for (region, share) in FIRST_REGIONS {
        // Most of each share for the search in doubles, the rest for what follows in double-double.
        budget.limit = budget.evaluations + share / 5 * 4;
        let place = search(problem, start, &data, region, &mut budget);
        budget.limit = budget.evaluations + share / 5;
        let Some((place, progress)) = place else {
            continue;
        };
        match polish(problem, place, progress, data.size, &mut budget) {
            Ok(minimum) => return Ok(minimum),
            Err(error) if failure.as_ref().is_none_or(|f| error.is_better_than(f)) => failure = Some(error),
            Err(_) => {}
        }
    }
    // Without a single place in double-double nothing failed: there was nothing.
    Err(failure.unwrap_or(NotConverged::OutOfRange).after(&budget))
}

/// The scale of the data.
struct Data {
    /// Length of the whitened data; of the residuals at the start when all data are zero.
    size: f64,
    /// Power of two by which the search divides residuals: none is larger than 1 at the start.
    exponent: i32,
}

/// Checks shapes and values at the start, in doubles.
fn check_start<P: Problem>(problem: &P, start: &[f64]) -> Result<Data, NotConverged> {
    let (n, p) = (problem.observations(), problem.parameters());
    if p == 0 || n < p {
        return Err(NotConverged::TooFew { observations: n, parameters: p });
    }
    let finite = start.iter().filter(|b| b.is_finite()).count();
    if finite != p || start.len() != p {
        return Err(NotConverged::Start { found: finite, expected: p });
    }
    let residuals = problem.residuals(start);
    let jacobian = problem.jacobian(start);
    let columns = std::iter::once(&residuals).chain(&jacobian);
    let wrong = columns.filter_map(|c| (0..n).find(|i| !c.get(*i).is_some_and(|v| v.is_finite()))).min();
    if let Some(observation) = wrong {
        return Err(NotConverged::NotFiniteAtStart { observation });
    }
    let size = problem.size();
    let largest = residuals.iter().fold(0.0, |top: f64, r| top.max(r.abs()));
    let size = if size > 0.0 && size.is_finite() { size } else { largest };
    Ok(Data { size, exponent: exponent_of(size.max(largest)) })
}

/// The search in doubles, as far as they go; the place found comes in double-double, divided by the size
/// of the data.
fn search<P: Problem>(
    problem: &P,
    start: &[f64],
    data: &Data,
    region: f64,
    budget: &mut Budget,
) -> Option<(Place<Dd>, Progress)> {
    let residuals = scaled_residuals(problem, start, data.exponent)?;
    let mut place = Place::new(problem, start.to_vec(), residuals, data.exponent)?;
    let mut trust = Trust::new(&place, region, f64::EPSILON);
    let mut progress = Progress::Moved;
    while progress == Progress::Moved {
        progress = trust.advance(problem, &mut place, budget);
    }
    let largest = place.residuals.iter().fold(0.0, |top: f64, r| top.max(r.abs()));
    let exponent = exponent_of(data.size.max(libm::scalbn(largest, data.exponent)));
    let b: Vec<Dd> = place.b.iter().map(|b| Dd::from(*b)).collect();
    budget.evaluations += 2;
    let residuals = scaled_residuals(problem, &b, exponent)?;
    Some((Place::new(problem, b, residuals, exponent)?, progress))
}

impl NotConverged {
    fn tried_mut(&mut self) -> Option<&mut Tried> {
        match self {
            Self::Singular { tried, .. }
            | Self::Stalled { tried }
            | Self::Exhausted { tried }
            | Self::Saddle { tried, .. } => Some(tried),
            Self::TooFew { .. } | Self::Start { .. } | Self::NotFiniteAtStart { .. } | Self::OutOfRange => None,
        }
    }

    /// What was tried, if anything was.
    #[must_use]
    pub fn tried(&self) -> Option<&Tried> {
        match self {
            Self::Singular { tried, .. }
            | Self::Stalled { tried }
            | Self::Exhausted { tried }
            | Self::Saddle { tried, .. } => Some(tried),
            Self::TooFew { .. } | Self::Start { .. } | Self::NotFiniteAtStart { .. } | Self::OutOfRange => None,
        }
    }

    /// Whether this attempt came further down.
    fn is_better_than(&self, other: &Self) -> bool {
        let length = |e: &Self| e.tried().map_or(f64::INFINITY, |t| t.residual_length);
        length(self) < length(other)
    }

    /// With all that was spent.
    fn after(mut self, budget: &Budget) -> Self {
        if let Some(tried) = self.tried_mut() {
            tried.iterations = budget.iterations;
            tried.evaluations = budget.evaluations;
        }
        self
    }
}
