//! The two edges of the prediction band, tabulated once for a fit.
//!
//! The set of values that a reading y admits is {x : L(x) ≤ y ≤ U(x)} with L, U = f̂ ∓ w. Neither f̂
//! nor w depends on the reading, so both are laid down at places dense over the standards, thinning
//! outwards over nine decades, with every turning point of f̂, L and U among them: between two
//! neighbours each is then monotone, and a reading needs comparisons and a few refined roots only.

use super::root::{extreme, refined};
use crate::fit::{Fit, Variances, two_sided};

/// Half-width of the band as a function of x.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) enum Width {
    /// Nothing is known of the scatter: no width.
    Unknown,
    /// As the fit knows it, for the mean of k new readings, at this level.
    Own {
        /// How many new readings are averaged.
        k: usize,
        /// E.g. 0.95.
        level: f64,
        /// The factor where the standards add nothing.
        plain: f64,
    },
    /// The new readings bring a scatter of their own: q·√(a·v(x) + b·Var f̂(x) + standards' part).
    Given {
        /// Variance of the mean of the new readings where v = 1, output unit squared.
        new: f64,
        /// Factor on the scatter's part of Var f̂(x).
        curve: f64,
        /// Degrees of freedom of the scatter.
        freedom: f64,
        /// E.g. 0.95.
        level: f64,
        /// The factor where the standards add nothing.
        plain: f64,
    },
}

impl Width {
    /// The variances at x; `None` when nothing is known.
    pub(crate) fn variances(self, fit: &Fit, x: f64) -> Option<Variances> {
        match self {
            Self::Unknown => None,
            Self::Own { k, .. } => fit.variances(x, k),
            Self::Given { new, curve, freedom, .. } => {
                let own = fit.variances(x, 1)?;
                Some(Variances { new: new * fit.variance_at(x), curve: curve * own.curve, freedom, ..own })
            }
        }
    }

    /// w(x), output unit.
    pub(crate) fn at(self, fit: &Fit, x: f64) -> f64 {
        self.variances(fit, x).map_or(0.0, |v| self.factor_of(v) * libm::sqrt(v.total()))
    }

    /// The coverage factor for these variances. Student's quantile is dear: it is found anew only where the
    /// standards have a part.
    fn factor_of(self, v: Variances) -> f64 {
        match self {
            Self::Unknown => 0.0,
            Self::Own { plain, .. } | Self::Given { plain, .. } if v.standards == 0.0 => plain,
            Self::Own { level, .. } | Self::Given { level, .. } => two_sided(level, v.effective_freedom()),
        }
    }

    /// The coverage factor at x and the degrees of freedom behind it.
    pub(crate) fn factor(self, fit: &Fit, x: f64) -> Option<(f64, f64)> {
        let v = self.variances(fit, x)?;
        Some((self.factor_of(v), v.effective_freedom()))
    }
}

/// One place of the table.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Node {
    /// Input unit.
    pub x: f64,
    /// f̂(x), output unit.
    pub value: f64,
    /// f̂ − w, output unit.
    pub lower: f64,
    /// f̂ + w, output unit.
    pub upper: f64,
}

/// The table.
#[derive(Debug, Clone)]
pub(crate) struct Edges {
    /// Ascending in x; only where everything is finite.
    pub nodes: Vec<Node>,
    /// Turning points of f̂, ascending, input unit.
    pub turns: Vec<f64>,
    /// The width that the table was made with.
    pub width: Width,
}

impl Edges {
    /// Tabulates the edges of a fit around the range of its standards.
    pub(crate) fn new(fit: &Fit, range: (f64, f64), width: Width) -> Self {
        let node = |x: f64| {
            let value = fit.curve.value(x);
            let w = width.at(fit, x);
            Node { x, value, lower: value - w, upper: value + w }
        };
        let mut nodes = finite_run(places(fit, range).into_iter().map(node).collect(), range);
        let turns = turning_points(&nodes, |n| n.value, |x| fit.curve.value(x));
        let lower = turning_points(&nodes, |n| n.lower, |x| node(x).lower);
        let upper = turning_points(&nodes, |n| n.upper, |x| node(x).upper);
        nodes.extend(turns.iter().chain(&lower).chain(&upper).map(|&x| node(x)));
        nodes.sort_by(|a, b| a.x.total_cmp(&b.x));
        nodes.dedup_by(|a, b| a.x == b.x);
        Self { nodes, turns, width }
    }

    /// Whether the table begins at zero because the family has no value below.
    pub(crate) fn begins_at_zero(&self, fit: &Fit) -> bool {
        fit.family.logarithmic() && self.nodes.first().is_some_and(|n| n.x == 0.0)
    }

    /// The same places with another width.
    pub(crate) fn with_width(&self, fit: &Fit, width: Width) -> Self {
        let nodes = self.nodes.iter().map(|node| {
            let w = width.at(fit, node.x);
            Node { lower: node.value - w, upper: node.value + w, ..*node }
        });
        Self { nodes: nodes.collect(), turns: self.turns.clone(), width }
    }

    /// All x of the table's span with f̂(x) = y, ascending.
    pub(crate) fn roots(&self, fit: &Fit, y: f64) -> Vec<f64> {
        let mut found = Vec::new();
        for pair in self.nodes.windows(2) {
            let (a, b) = (pair[0].value - y, pair[1].value - y);
            if a == 0.0 {
                found.push(pair[0].x);
            } else if b != 0.0 && (a < 0.0) != (b < 0.0) {
                let curve = |x: f64| (fit.curve.value(x) - y, fit.curve.derivative(x));
                found.push(refined(curve, [(pair[0].x, a), (pair[1].x, b)]));
            }
        }
        found.extend(self.nodes.last().filter(|n| n.value == y).map(|n| n.x));
        found
    }
}

/// Where to tabulate, ascending: dense over the range and a tenth beyond, then geometric; even in ln x for
/// families whose domain begins at zero.
fn places(fit: &Fit, (low, high): (f64, f64)) -> Vec<f64> {
    const DENSE: i32 = 64;
    const SPARSE: i32 = 48;
    const REACH: f64 = 1.1;
    let lowest_above_zero = fit.points.iter().map(|p| p.x).filter(|x| *x > 0.0).fold(f64::INFINITY, f64::min);
    let logarithmic = fit.family.logarithmic() && lowest_above_zero.is_finite();
    let (a, b) = if logarithmic { (libm::log(lowest_above_zero), libm::log(high)) } else { (low, high) };
    let centre = 0.5 * (a + b);
    let half = if b > a { 0.5 * (b - a) } else { centre.abs().max(1.0) };
    let inner = (-DENSE..=DENSE).map(|i| REACH * f64::from(i) / f64::from(DENSE));
    let outer = (1..=SPARSE).map(|i| REACH * libm::pow(10.0, 9.0 * f64::from(i) / f64::from(SPARSE)));
    let mut steps: Vec<f64> = inner.chain(outer.flat_map(|u| [u, -u])).collect();
    steps.sort_by(f64::total_cmp);
    let place = |u: f64| {
        let abscissa = centre + half * u;
        if logarithmic { libm::exp(abscissa) } else { abscissa }
    };
    let mut places: Vec<f64> = steps.into_iter().map(place).filter(|x| x.is_finite()).collect();
    if logarithmic {
        // exp underflows to 0, where a curve may have a value or not: one place for it.
        places.retain(|x| *x > 0.0);
        if fit.curve.has_value_at(0.0) {
            places.insert(0, 0.0);
        }
    }
    places.dedup();
    between_poles(fit, places, (low, high))
}

/// The places on the stretch around the range that no pole interrupts.
fn between_poles(fit: &Fit, mut places: Vec<f64>, (low, high): (f64, f64)) -> Vec<f64> {
    let middle = 0.5 * (low + high);
    for pole in fit.curve.poles() {
        places.retain(|x| (*x < pole) == (middle < pole) && *x != pole);
    }
    places
}

/// The run of nodes around the range where everything is finite.
fn finite_run(nodes: Vec<Node>, (low, high): (f64, f64)) -> Vec<Node> {
    let good = |n: &Node| n.value.is_finite() && n.lower.is_finite() && n.upper.is_finite();
    let centre = nodes.iter().position(|n| n.x >= 0.5 * (low + high)).unwrap_or(0);
    let start = nodes[..centre].iter().rposition(|n| !good(n)).map_or(0, |i| i + 1);
    let end = nodes[centre..].iter().position(|n| !good(n)).map_or(nodes.len(), |i| centre + i);
    nodes[start..end].to_vec()
}

/// Places between the nodes where a tabulated function turns.
fn turning_points(nodes: &[Node], of: impl Fn(&Node) -> f64, f: impl Fn(f64) -> f64) -> Vec<f64> {
    let mut found: Vec<f64> = Vec::new();
    for three in nodes.windows(3) {
        let [a, b, c] = [of(&three[0]), of(&three[1]), of(&three[2])];
        let sign = match ((b - a) > 0.0, (c - b) > 0.0) {
            (true, false) if c < b => 1.0,
            (false, true) if b < a => -1.0,
            _ => continue,
        };
        found.push(extreme(&f, three[0].x, three[2].x, sign));
    }
    found
}
