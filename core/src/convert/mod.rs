//! Readings to values: the inverted calibration function and its interval.

pub mod digits;
#[cfg(test)]
mod edge_tests;
mod edges;
#[cfg(test)]
mod families_tests;
pub mod flipped;
#[cfg(test)]
mod kinds_tests;
#[cfg(test)]
pub(crate) mod reference;
mod repeats;
mod root;
mod select;
mod set;
#[cfg(test)]
mod tests;

pub use repeats::Repeats;
pub use root::root_near;
pub use set::{EndState, Piece};

use crate::fit::{Fit, two_sided};
use edges::{Edges, Width};
use flipped::Flipped;

/// Where a converted value lies, or why there is none.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum State {
    /// Inside the range of the standards, to within one reading's scatter.
    InRange,
    /// Between zero and the lowest standard (or, all standards negative, the highest).
    BetweenZeroAndLowest,
    /// Outside the range of the standards.
    Extrapolated,
    /// The curve does not take this reading where it was calibrated.
    NoValue,
    /// Two values belong to this reading, or its interval reaches a turning point.
    TwoValues,
    /// One value, but the data set no limit on one side at least.
    Unbounded,
    /// One value, but the interval falls into two pieces.
    TwoPieces,
}

/// One reading converted.
#[derive(Debug, Clone, PartialEq)]
pub struct Conversion {
    /// The reading, or the mean of k, output unit.
    pub reading: f64,
    /// The value, input unit.
    pub value: Option<f64>,
    /// First-order standard uncertainty, input unit; `None` without a value, without degrees of
    /// freedom, or with an unbounded end.
    pub standard_uncertainty: Option<f64>,
    /// Lower end of the interval around the value, input unit.
    pub low: Option<f64>,
    /// Upper end, input unit.
    pub high: Option<f64>,
    /// What `low` is.
    pub low_state: EndState,
    /// What `high` is.
    pub high_state: EndState,
    /// All pieces of the set that concern the calibrated branch; more than one only when printed so.
    pub pieces: Vec<Piece>,
    /// Every value that belongs to the reading on that branch, ascending, input unit.
    pub candidates: Vec<f64>,
    /// Degrees of freedom of the factor used.
    pub degrees_of_freedom: Option<f64>,
    /// Coverage factor used.
    pub coverage_factor: Option<f64>,
    /// Where the value lies, or why there is none.
    pub state: State,
    /// The value by the flipped fit, input unit.
    pub flipped_value: Option<f64>,
    /// Whether the repeats of this reading scatter more than the standards did (F test, 5 %);
    /// `None` when they were not handed in.
    pub scatters_more: Option<bool>,
}

/// A fit prepared for converting readings.
#[derive(Debug, Clone)]
pub struct Converter<'a> {
    fit: &'a Fit,
    level: f64,
    k: usize,
    range: (f64, f64),
    /// How far outside the range still counts as in range: (below, above), input unit.
    margin: (f64, f64),
    edges: Edges,
    flipped: Option<Flipped>,
}

impl<'a> Converter<'a> {
    /// Prepares a fit; `None` when it has no points, or its curve no value in their middle.
    ///
    /// # Formula
    /// The interval is {x : |y₀ − f̂(x)| ≤ q·√(σ²·v(x)/k + Var f̂(x) + v_std(x))}, taken whole: all
    /// variances at the candidate x, not cut at the range. For a line this is Fieller's interval. The three
    /// parts are those of [`Fit::variances`]; q is Student's factor with the effective degrees of freedom
    /// ν·(total)²/(part from the scatter)², the normal one where the scatter is known.
    /// u(x₀) = √(total)/|f̂′(x₀)|.
    ///
    /// # Shapes and units
    /// `k` ≥ 1: how many readings each number handed in is the mean of. `level`: e.g. 0.95.
    ///
    /// # Source
    /// E. C. Fieller (1954), J. R. Statist. Soc. B 16, 175–185; C. Eisenhart (1939), Ann. Math.
    /// Statist. 10, 162–186; from memory.
    #[must_use]
    pub fn new(fit: &'a Fit, k: usize, level: f64) -> Option<Self> {
        if fit.points.is_empty() || k == 0 {
            return None;
        }
        let xs = || fit.points.iter().map(|p| p.x);
        let range = (xs().fold(f64::INFINITY, f64::min), xs().fold(f64::NEG_INFINITY, f64::max));
        let width = if fit.scatter_sd().is_some() {
            Width::Own { k, level, plain: fit.coverage_factor(level) }
        } else {
            Width::Unknown
        };
        let edges = Edges::new(fit, range, width);
        if edges.nodes.is_empty() {
            return None;
        }
        let margin = |x: f64| {
            let d = width.variances(fit, x).map_or(0.0, |v| two_sided(level, v.freedom) * libm::sqrt(v.new));
            let d = d / fit.curve.derivative(x).abs();
            if d.is_finite() { d } else { 0.0 }
        };
        Some(Self {
            fit,
            level,
            k,
            range,
            margin: (margin(range.0), margin(range.1)),
            edges,
            flipped: Flipped::new(fit),
        })
    }

    /// Converts one reading (or mean of k), output unit.
    ///
    /// # Formula
    /// As [`Converter::new`].
    ///
    /// # Shapes and units
    /// A reading that is not a number has no value and no interval.
    ///
    /// # Source
    /// As [`Converter::new`].
    #[must_use]
    pub fn convert(&self, reading: f64) -> Conversion {
        self.by(reading, &self.edges)
    }

    /// u(x), input unit, without the coverage factor.
    fn uncertainty(&self, x: f64, width: Width) -> Option<f64> {
        let u = libm::sqrt(width.variances(self.fit, x)?.total()) / self.fit.curve.derivative(x).abs();
        u.is_finite().then_some(u)
    }

    fn by(&self, reading: f64, edges: &Edges) -> Conversion {
        let branch = self.branch();
        let candidates = self.candidates(reading, edges, branch);
        let value = self.single(&candidates);
        let known = edges.width != Width::Unknown;
        let pieces = if known {
            self.concerning(set::pieces(edges, self.fit, reading), edges, reading, branch, &candidates)
        } else {
            Vec::new()
        };
        let own = match value {
            Some(x) => pieces.iter().find(|piece| piece.contains(x)).copied(),
            None => pieces.first().copied().filter(|_| pieces.len() == 1),
        };
        let middle = 0.5 * (self.range.0 + self.range.1);
        let factor = edges.width.factor(self.fit, value.unwrap_or(middle));
        let end = |bound: Option<f64>| bound.map_or(EndState::Unbounded, |_| EndState::Finite);
        let bounded = own.is_some_and(|piece| piece.low.is_some() && piece.high.is_some());
        Conversion {
            reading,
            value,
            standard_uncertainty: value.filter(|_| bounded).and_then(|x| self.uncertainty(x, edges.width)),
            low: own.and_then(|piece| piece.low),
            high: own.and_then(|piece| piece.high),
            low_state: own.map_or(EndState::None, |piece| end(piece.low)),
            high_state: own.map_or(EndState::None, |piece| end(piece.high)),
            state: self.state(value, &candidates, own, pieces.len()),
            pieces,
            candidates,
            degrees_of_freedom: factor.map(|(_, freedom)| freedom),
            coverage_factor: factor.map(|(q, _)| q),
            flipped_value: self.flipped.as_ref().and_then(|flipped| flipped.value(reading)),
            scatters_more: None,
        }
    }
}

/// How far the flipped fit lies from the inverted one.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FlippedDifference {
    /// Largest |flipped − inverted|/u(x), dimensionless.
    pub relative: f64,
    /// The difference there, input unit.
    pub difference: f64,
    /// Where, input unit.
    pub at: f64,
}

/// Largest |flipped − inverted| over the range of the standards, one new reading.
///
/// # Formula
/// max |g(f̂(x)) − x|/u(x) at 65 places even over the range, g the flipped fit, u(x) = √(variances)/|f̂′(x)|.
///
/// # Shapes and units
/// As [`FlippedDifference`]; `None` without a flipped fit or a known scatter.
///
/// # Source
/// Definition of this program.
#[must_use]
pub fn flipped_difference(fit: &Fit) -> Option<FlippedDifference> {
    const STEPS: u32 = 64;
    let flipped = Flipped::new(fit)?;
    let low = fit.points.iter().map(|p| p.x).fold(f64::INFINITY, f64::min);
    let high = fit.points.iter().map(|p| p.x).fold(f64::NEG_INFINITY, f64::max);
    let at = |x: f64| {
        let difference = flipped.value(fit.curve.value(x))? - x;
        let u = libm::sqrt(fit.variances(x, 1)?.total()) / fit.curve.derivative(x).abs();
        let relative = (difference / u).abs();
        relative.is_finite().then_some(FlippedDifference { relative, difference, at: x })
    };
    let places = (0..=STEPS).map(|i| low + (high - low) * f64::from(i) / f64::from(STEPS));
    places.filter_map(at).max_by(|a, b| a.relative.total_cmp(&b.relative))
}
