//! The set of values that one reading admits, as pieces with finite or unbounded ends.

use super::edges::{Edges, Node};
use super::root::refined;
use crate::fit::Fit;

/// What one end of an interval is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum EndState {
    /// A number.
    Finite,
    /// The data set no limit on this side.
    Unbounded,
    /// There is no interval.
    None,
}

/// One connected piece of the set.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece {
    /// Lower end, input unit; `None` when unbounded.
    pub low: Option<f64>,
    /// Upper end, input unit; `None` when unbounded.
    pub high: Option<f64>,
}

impl Piece {
    /// Whether x belongs to the piece.
    #[must_use]
    pub fn contains(&self, x: f64) -> bool {
        self.low.is_none_or(|low| low <= x) && self.high.is_none_or(|high| x <= high)
    }

    /// Whether the piece has a point in common with [low, high].
    #[must_use]
    pub fn meets(&self, low: f64, high: f64) -> bool {
        self.low.is_none_or(|own| own <= high) && self.high.is_none_or(|own| low <= own)
    }
}

/// Where a reading lies at a node: below the band, in it, above it.
fn side(node: &Node, y: f64) -> i8 {
    if y < node.lower { -1 } else { i8::from(y > node.upper) }
}

/// {x : L(x) ≤ y ≤ U(x)} over the table's span, ascending pieces.
pub(crate) fn pieces(edges: &Edges, fit: &Fit, y: f64) -> Vec<Piece> {
    let mut found = Vec::new();
    let mut open: Option<Option<f64>> = None;
    let Some(first) = edges.nodes.first().filter(|_| y.is_finite()) else {
        return found;
    };
    let mut before = side(first, y);
    if before == 0 {
        // Where the domain itself begins, the set ends there.
        open = Some(edges.begins_at_zero(fit).then_some(0.0));
    }
    for pair in edges.nodes.windows(2) {
        let after = side(&pair[1], y);
        if after == before {
            continue;
        }
        if before != 0 {
            open = Some(Some(crossing(edges, fit, pair, y, before)));
        }
        if after != 0 {
            let high = crossing(edges, fit, pair, y, after);
            if let Some(low) = open.take() {
                found.push(Piece { low, high: Some(high) });
            }
        }
        before = after;
    }
    if let Some(low) = open {
        found.push(Piece { low, high: None });
    }
    found
}

/// Where the edge that faces `side` crosses y between two nodes.
fn crossing(edges: &Edges, fit: &Fit, pair: &[Node], y: f64, side: i8) -> f64 {
    let sign = f64::from(side);
    let at = |node: &Node| if side < 0 { node.lower } else { node.upper };
    let ends = [0, 1].map(|i| (pair[i].x, at(&pair[i]) - y));
    // The width hardly bends between neighbours: its slope there is that of the straight line.
    let width = |node: &Node| at(node) - node.value;
    let widening = (width(&pair[1]) - width(&pair[0])) / (pair[1].x - pair[0].x);
    let edge = |x: f64| {
        let value = fit.curve.value(x) + sign * edges.width.at(fit, x) - y;
        (value, fit.curve.derivative(x) + widening)
    };
    refined(edge, ends)
}
