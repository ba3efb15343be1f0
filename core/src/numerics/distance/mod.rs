//! Generalised distance regression: a curve through points uncertain in both directions.
//!
//! The true places ξ of the standards are unknowns beside the coefficients. Written as ξ = x − L z with
//! U_x = L Lᵀ, the z are uncorrelated with unit variance whatever the rank of U_x, and they can be
//! eliminated from every linearised step: what remains has as many unknowns as the curve has
//! coefficients. This is why the search here is its own: a general minimiser would carry m unknowns more.

mod rivals;
mod search;
mod step;

pub use search::{Failure, Minimum};
pub use step::Linearised;

use super::dd::Dd;
use super::dual::Dual;
use super::real::Real;
use super::semidefinite::SemidefiniteFactor;

/// A calibration function written once for every kind of number.
pub trait Function {
    /// Number of coefficients p.
    fn coefficient_count(&self) -> usize;

    /// f(x; b) with `b` of length p; not finite outside the domain, never a panic.
    fn value<T: Real>(&self, b: &[T], x: T) -> T;
}

/// A function at one place.
#[derive(Debug, Clone, PartialEq)]
pub struct Place {
    /// f.
    pub value: Dd,
    /// ∂f/∂x; zero where the place is known exactly.
    pub slope: Dd,
    /// ∂f/∂b, p entries.
    pub gradient: Vec<Dd>,
}

/// Value and exact derivatives of a function, in double-double.
///
/// # Formula
///
/// One evaluation in dual numbers along x, one along each coefficient.
///
/// # Shapes and units
///
/// `b` of length p. With `movable` false the place is exact and its slope, which need not exist there
/// (√x at zero), is not asked for.
///
/// # Errors
///
/// `None` where anything asked for is not finite.
#[must_use]
pub fn place<F: Function>(function: &F, b: &[Dd], x: Dd, movable: bool) -> Option<Place> {
    let constants: Vec<Dual<Dd>> = b.iter().map(|v| Dual::constant(*v)).collect();
    let along = if movable { Dual::variable(x) } else { Dual::constant(x) };
    let value = function.value(&constants, along);
    let mut gradient = Vec::with_capacity(b.len());
    let mut varied = constants;
    for (j, v) in b.iter().enumerate() {
        varied[j] = Dual::variable(*v);
        gradient.push(function.value(&varied, Dual::constant(x)).slope);
        varied[j] = Dual::constant(*v);
    }
    let finite = value.value.is_finite() && value.slope.is_finite() && gradient.iter().all(|g| g.is_finite());
    finite.then_some(Place { value: value.value, slope: value.slope, gradient })
}

/// [`place`] of some function.
pub type At<'a> = dyn Fn(&[Dd], Dd, bool) -> Option<Place> + 'a;

/// All readings of one standard together: they share its place, so their weighted mean says all.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Observed {
    /// Which standard.
    pub standard: usize,
    /// Σ(y/u²)/Σ(1/u²), output unit.
    pub mean: Dd,
    /// 1/Σ(1/u²), output unit².
    pub variance: Dd,
}

/// What is minimised: zᵀz + Σ (ȳ − f(ξ))²/v over b and z, with ξ = x − L z.
pub struct Problem<'a> {
    at: &'a At<'a>,
    /// Certified values of the m standards, input unit.
    x: Vec<Dd>,
    /// L, m rows.
    factor: SemidefiniteFactor,
    observed: Vec<Observed>,
    /// L Lᵀ between the observed standards, lower triangle.
    kernel: Vec<Vec<Dd>>,
    /// Column of the first entry of each row of `kernel` that is not zero.
    first: Vec<usize>,
}

/// A point of the search with everything that is known there.
#[derive(Debug, Clone)]
pub struct State {
    /// Coefficients.
    pub b: Vec<Dd>,
    /// Standardised displacements of the standards.
    pub z: Vec<Dd>,
    /// The function at the latent place of every observed standard.
    places: Vec<Place>,
    /// The sum that is minimised.
    pub cost: Dd,
}

impl<'a> Problem<'a> {
    /// Puts a problem together.
    ///
    /// # Shapes and units
    ///
    /// `x` of length m, `factor` with m rows in the input unit, `observed` with standards below m, each at
    /// most once, and positive variances.
    #[must_use]
    pub fn new(at: &'a At<'a>, x: &[f64], factor: SemidefiniteFactor, observed: Vec<Observed>) -> Self {
        let rows = || observed.iter().map(|o| &factor.rows[o.standard]);
        let product = |a: &[Dd], b: &[Dd]| a.iter().zip(b).map(|(a, b)| *a * *b).sum::<Dd>();
        let kernel: Vec<Vec<Dd>> =
            rows().enumerate().map(|(i, a)| rows().take(i + 1).map(|b| product(a, b)).collect()).collect();
        let start = |(i, row): (usize, &Vec<Dd>)| row.iter().position(|v| *v != Dd::ZERO).unwrap_or(i);
        let first = kernel.iter().enumerate().map(start).collect();
        let x = x.iter().map(|v| Dd::from(*v)).collect();
        Self { at, x, factor, observed, kernel, first }
    }

    /// Rank of U_x: length of z.
    #[must_use]
    pub fn rank(&self) -> usize {
        self.factor.rank
    }

    /// ξ = x − L z for all m standards, input unit.
    #[must_use]
    pub fn latent(&self, z: &[Dd]) -> Vec<Dd> {
        self.x.iter().zip(&self.factor.rows).map(|(x, row)| *x - product(row, z)).collect()
    }

    /// The same problem with L multiplied by `part`.
    #[must_use]
    pub fn with_part(&self, part: f64) -> Self {
        let times = |rows: &[Vec<Dd>], by: f64| rows.iter().map(|r| r.iter().map(|v| *v * by).collect()).collect();
        Self {
            at: self.at,
            x: self.x.clone(),
            factor: SemidefiniteFactor { rows: times(&self.factor.rows, part), rank: self.factor.rank },
            observed: self.observed.clone(),
            kernel: times(&self.kernel, part * part),
            first: self.first.clone(),
        }
    }

    /// Position in `observed` of the first standard at which the function has no value for `b`.
    #[must_use]
    pub fn undefined_at(&self, b: &[Dd]) -> Option<usize> {
        let missing = |o: &Observed| (self.at)(b, self.x[o.standard], self.movable(o.standard)).is_none();
        self.observed.iter().find(|o| missing(o)).map(|o| o.standard)
    }

    fn movable(&self, standard: usize) -> bool {
        self.factor.rows[standard].iter().any(|v| *v != Dd::ZERO)
    }

    /// `None` where the function has no value.
    fn state(&self, b: Vec<Dd>, z: Vec<Dd>) -> Option<State> {
        let mut cost = product(&z, &z);
        let mut places = Vec::with_capacity(self.observed.len());
        for o in &self.observed {
            let xi = self.x[o.standard] - product(&self.factor.rows[o.standard], &z);
            let place = (self.at)(&b, xi, self.movable(o.standard))?;
            cost += (o.mean - place.value).square() / o.variance;
            places.push(place);
        }
        cost.is_finite().then_some(State { b, z, places, cost })
    }
}

/// Σ aᵢbᵢ, zeros skipped: a diagonal U_x leaves one entry in each row of L.
fn product(a: &[Dd], b: &[Dd]) -> Dd {
    let terms = a.iter().zip(b).filter(|(a, _)| **a != Dd::ZERO);
    terms.map(|(a, b)| *a * *b).sum()
}
