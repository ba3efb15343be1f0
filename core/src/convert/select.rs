//! Which of the roots and pieces concern the calibrated branch, and the state that follows.

use super::edges::Edges;
use super::set::Piece;
use super::{Converter, State};

impl Converter<'_> {
    /// The range of the standards with a twentieth of its width on either side.
    fn extended(&self) -> (f64, f64) {
        let extra = 0.05 * (self.range.1 - self.range.0);
        (self.range.0 - extra, self.range.1 + extra)
    }

    /// The branches that touch the extended range, together: from the last turning point below it to
    /// the first above it.
    pub(super) fn branch(&self) -> (f64, f64) {
        let (low, high) = self.extended();
        let turns = &self.edges.turns;
        let below = turns.iter().copied().rfind(|t| *t <= low);
        let above = turns.iter().copied().find(|t| *t >= high);
        (below.unwrap_or(f64::NEG_INFINITY), above.unwrap_or(f64::INFINITY))
    }

    /// The values on those branches that belong to a reading.
    pub(super) fn candidates(&self, reading: f64, edges: &Edges, branch: (f64, f64)) -> Vec<f64> {
        let mut roots = edges.roots(self.fit, reading);
        roots.retain(|x| *x >= branch.0 && *x <= branch.1);
        roots
    }

    /// The one value, if one is meant: the only one in the extended range, else the only one at all.
    pub(super) fn single(&self, candidates: &[f64]) -> Option<f64> {
        let (low, high) = self.extended();
        let mut inside = candidates.iter().copied().filter(|x| *x >= low && *x <= high);
        match (inside.next(), inside.next()) {
            (Some(x), None) => Some(x),
            (None, _) if candidates.len() == 1 => Some(candidates[0]),
            _ => None,
        }
    }

    /// The pieces worth printing: those with a meant value, those that meet the extended range, and
    /// those on the branch that hold no other value (Fieller's second piece). A piece around the twin
    /// value beyond a distant turning point is not one of them.
    pub(super) fn concerning(
        &self,
        pieces: Vec<Piece>,
        edges: &Edges,
        reading: f64,
        branch: (f64, f64),
        candidates: &[f64],
    ) -> Vec<Piece> {
        if pieces.len() < 2 {
            return pieces;
        }
        let (low, high) = self.extended();
        let single = self.single(candidates);
        let meant = |x: f64| single.map_or(candidates.contains(&x), |value| value == x);
        let roots = edges.roots(self.fit, reading);
        // Far outside, the first-order variance of a curve bent in its coefficients grows without meaning.
        let first_order = self.fit.effort.is_some();
        let wanted = |piece: &Piece| {
            let mut own = roots.iter().copied().filter(|x| piece.contains(*x)).peekable();
            let other_only = own.peek().is_some() && !own.any(meant);
            let second = !first_order && piece.meets(branch.0, branch.1) && !other_only;
            piece.meets(low, high) || single.is_some_and(|x| piece.contains(x)) || second
        };
        pieces.into_iter().filter(wanted).collect()
    }

    pub(super) fn state(&self, value: Option<f64>, candidates: &[f64], own: Option<Piece>, pieces: usize) -> State {
        let Some(x) = value else {
            return if candidates.len() > 1 { State::TwoValues } else { State::NoValue };
        };
        if pieces > 1 {
            return State::TwoPieces;
        }
        if own.is_some_and(|piece| self.edges.turns.iter().any(|t| piece.contains(*t))) {
            return State::TwoValues;
        }
        if own.is_some_and(|piece| piece.low.is_none() || piece.high.is_none()) {
            return State::Unbounded;
        }
        self.place_of(x)
    }

    fn place_of(&self, x: f64) -> State {
        let (low, high) = self.range;
        if x >= low - self.margin.0 && x <= high + self.margin.1 {
            State::InRange
        } else if (low > 0.0 && x < low && x >= 0.0) || (high < 0.0 && x > high && x <= 0.0) {
            State::BetweenZeroAndLowest
        } else {
            State::Extrapolated
        }
    }
}
