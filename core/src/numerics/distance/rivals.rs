//! Other minima: where a curve bends within the uncertainty of a standard, there may be several.

use super::{Observed, Problem, State, product};
use crate::numerics::Dd;

/// Standards, the most bent ones, that are tried elsewhere.
const MOST_TRIED: usize = 3;

/// So many standard uncertainties to each side the curve is compared with its tangent.
const REACH: f64 = 2.0;

/// A start on either side lies so many standard uncertainties from the certified value.
const AWAY: f64 = 1.5;

/// So near to the end of the domain, in standard uncertainties, a standard is at the edge.
const NEXT_TO: f64 = 1e-3;

/// Departure from the tangent that counts, in standard deviations of a reading about the curve.
const BENT: f64 = 0.5;

impl Problem<'_> {
    /// Displacements to start from once more after a minimum: the most bent standards put to either side.
    ///
    /// # Formula
    ///
    /// z = ±1.5 L_a/‖L_a‖ displaces standard a by 1.5 standard uncertainties, and those that share its error
    /// by as much as they then should be. Nothing to try where the curve is as good as straight within two
    /// standard uncertainties of every standard.
    pub(super) fn other_starts(&self, state: &State) -> Vec<Vec<Dd>> {
        let mut bent: Vec<(f64, usize)> =
            (0..self.observed.len()).map(|i| (self.bend(state, i), i)).filter(|(bend, _)| *bend > BENT).collect();
        bent.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
        let mut out = Vec::new();
        for (_, i) in bent.into_iter().take(MOST_TRIED) {
            let row = &self.factor.rows[self.observed[i].standard];
            let length = product(row, row).sqrt();
            for side in [AWAY, -AWAY] {
                out.push(row.iter().map(|l| *l / length * side).collect());
            }
        }
        out
    }

    /// The first standard that lies next to where the function ends, within a thousandth of its uncertainty.
    pub(super) fn at_edge(&self, state: &State) -> Option<usize> {
        let at_end = |o: &&Observed| {
            let row = &self.factor.rows[o.standard];
            let xi = self.x[o.standard] - product(row, &state.z);
            let step = product(row, row).sqrt() * NEXT_TO;
            [xi + step, xi - step].into_iter().any(|there| (self.at)(&state.b, there, true).is_none())
        };
        self.observed.iter().find(at_end).map(|o| o.standard)
    }

    /// Largest departure of the curve from its tangent within reach of a standard, in standard deviations;
    /// zero for an exact standard, and where the curve ends.
    fn bend(&self, state: &State, i: usize) -> f64 {
        let (o, place) = (self.observed[i], &state.places[i]);
        let row = &self.factor.rows[o.standard];
        let u = product(row, row).sqrt();
        if u == Dd::ZERO {
            return 0.0;
        }
        let xi = self.x[o.standard] - product(row, &state.z);
        let deviation = (o.variance + (place.slope * u).square()).sqrt();
        let side = |reach: f64| {
            let shift = u * reach;
            let there = (self.at)(&state.b, xi + shift, true)?;
            Some(((there.value - place.value - place.slope * shift) / deviation).to_f64().abs())
        };
        [REACH, -REACH].into_iter().filter_map(side).fold(0.0, f64::max)
    }
}
