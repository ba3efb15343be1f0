//! The search for the minimum: damped steps, and a second way round when the direct one fails.

use super::step::Step;
use super::{Linearised, Problem, State};
use crate::numerics::Dd;

/// Linearised problems solved before one way is given up.
const MOST_STEPS: usize = 500;

/// A step that promises less than this part of the sum (or of one) is the last: 3e-14 standard
/// uncertainties in every direction.
const SETTLED: f64 = 1e-27;

/// What may be left unsettled when rounding stops the search earlier.
const GOOD_ENOUGH: f64 = 1e-18;

/// Damping with which a step first meets resistance.
const FIRST: f64 = 1e-3;

/// Damping beyond which nothing moves any more.
const LAST: f64 = 1e20;

/// Parts of a step of the standards that are tried when the whole leaves the domain.
const SHORTER: [f64; 4] = [0.5, 0.125, 0.015_625, 0.0];

/// Sums that differ by more than this part are different minima.
const APART: f64 = 1e-6;

/// Parts of the standards' uncertainties in the second way.
const PARTS: [f64; 5] = [0.0, 0.25, 0.5, 0.75, 1.0];

/// A minimum.
#[derive(Debug, Clone)]
pub struct Minimum {
    /// Where it lies.
    pub state: State,
    /// How the coefficients hang together with the data there.
    pub linearised: Linearised,
    /// The least other local minimum that was met, if any.
    pub rival: Option<f64>,
    /// Linearised problems solved.
    pub steps: usize,
}

/// How one descent ended.
enum End {
    /// At a minimum.
    Settled(State),
    /// No linearised problem had a solution: the coefficients cannot be told apart.
    Dependent,
    /// Neither; where it ended.
    Unsettled(State),
}

/// Why no minimum was found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Failure {
    /// The function has no value at the start.
    Undefined,
    /// The coefficients cannot be told apart where the search ended.
    Dependent,
    /// The sum falls on as a standard moves to where the function ends.
    Edge {
        /// The standard.
        standard: usize,
    },
    /// The search did not settle.
    Unsettled {
        /// Linearised problems solved, both ways together.
        steps: usize,
        /// The sum reached.
        reached: f64,
    },
}

impl Problem<'_> {
    /// The minimum reached from coefficients `start` with every standard at its certified value.
    ///
    /// # Formula
    ///
    /// Gauss–Newton steps with Levenberg–Marquardt damping; a step out of the domain of the function is
    /// rejected like one that raises the sum. If that does not settle, the uncertainties of the standards
    /// are brought in by quarters, each minimum being the start of the next. Where the curve bends within
    /// the uncertainty of a standard, the search starts again from both sides of it; the least minimum counts.
    ///
    /// # Shapes and units
    ///
    /// `start` holds p coefficients. The result is settled to about 3e-14 standard uncertainties.
    ///
    /// # Errors
    ///
    /// Every variant of [`Failure`].
    ///
    /// # Source
    ///
    /// Marquardt, J. Soc. Indust. Appl. Math. 11 (1963) 431; Boggs, Byrd and Schnabel, SIAM J. Sci. Stat.
    /// Comput. 8 (1987) 1052 (the elimination). From memory.
    pub fn minimise(&self, start: &[Dd]) -> Result<Minimum, Failure> {
        let zero = vec![Dd::ZERO; self.rank()];
        let begin = self.state(start.to_vec(), zero).ok_or(Failure::Undefined)?;
        let (first, mut steps) = self.descend(begin);
        let mut best = match first {
            End::Settled(state) => state,
            End::Dependent => return Err(Failure::Dependent),
            End::Unsettled(first) => {
                let (second, more) = self.by_parts(start).unwrap_or((End::Dependent, 0));
                steps += more;
                let End::Settled(state) = second else {
                    return Err(self.failure(&first, steps));
                };
                state
            }
        };
        let mut rival = None;
        for z in self.other_starts(&best) {
            let Some(begin) = self.state(best.b.clone(), z) else { continue };
            let (end, more) = self.descend(begin);
            steps += more;
            let End::Settled(state) = end else { continue };
            let (low, high) =
                (state.cost.to_f64().min(best.cost.to_f64()), state.cost.to_f64().max(best.cost.to_f64()));
            if high - low > APART * high.max(1.0) {
                rival = Some(rival.map_or(high, |r: f64| r.min(high)));
            }
            if state.cost < best.cost {
                best = state;
            }
        }
        let linearised = self.linearised(&best).ok_or(Failure::Dependent)?;
        Ok(Minimum { state: best, linearised, rival, steps })
    }

    /// Why the search ended at a state that is no minimum.
    fn failure(&self, state: &State, steps: usize) -> Failure {
        match self.at_edge(state) {
            Some(standard) => Failure::Edge { standard },
            None => Failure::Unsettled { steps, reached: state.cost.to_f64() },
        }
    }

    /// The second way; `None` when the function has no value at some minimum on it.
    fn by_parts(&self, start: &[Dd]) -> Option<(End, usize)> {
        let (mut b, mut steps, mut out) = (start.to_vec(), 0, None);
        for part in PARTS {
            let problem = self.with_part(part);
            let begin = problem.state(b.clone(), vec![Dd::ZERO; self.rank()])?;
            let (end, more) = problem.descend(begin);
            steps += more;
            if let End::Settled(state) = &end {
                b.clone_from(&state.b);
            }
            out = Some((end, steps));
        }
        out
    }

    /// The state after a step and what it gained, unless it loses more than `loss`.
    fn lower(&self, from: &State, step: &Step, loss: f64) -> Option<(State, f64)> {
        let b: Vec<Dd> = from.b.iter().zip(&step.delta).map(|(b, d)| *b + *d).collect();
        let candidate = self.inside(from, &b, &step.z)?;
        let gained = (from.cost - candidate.cost).to_f64();
        (gained >= -loss).then_some((candidate, gained))
    }

    /// The state after a step; where the step leaves the domain of the function, the coefficients move fully
    /// and the standards as far as they can. Otherwise one standard at the edge would stop everything.
    fn inside(&self, from: &State, b: &[Dd], z: &[Dd]) -> Option<State> {
        let short = |part: &f64| {
            let cell = |(old, new): (&Dd, &Dd)| *old + (*new - *old) * *part;
            self.state(b.to_vec(), from.z.iter().zip(z).map(cell).collect())
        };
        self.state(b.to_vec(), z.to_vec()).or_else(|| SHORTER.iter().find_map(short))
    }

    /// Downhill until nothing is left to gain, and the steps taken.
    fn descend(&self, mut state: State) -> (End, usize) {
        let (mut damping, mut growth) = (0.0, 4.0);
        let mut lengths = vec![0.0; state.b.len()];
        let mut left = f64::INFINITY;
        let mut count = 0;
        while count < MOST_STEPS && damping <= LAST {
            count += 1;
            let mut gain = None;
            if let Some(step) = self.step(&state, damping, &mut lengths) {
                let tolerance = SETTLED * state.cost.to_f64().max(1.0);
                let promised = (state.cost - step.cost).to_f64();
                // Without damping the step would have promised about so much.
                left = promised * (1.0 + damping) * (1.0 + damping);
                let last = left <= tolerance;
                let loss = if last { tolerance } else { 0.0 };
                if let Some((better, gained)) = self.lower(&state, &step, loss) {
                    state = better;
                    gain = Some(gained / promised);
                }
                if last {
                    return (End::Settled(state), count);
                }
            }
            (damping, growth) = next_damping(damping, growth, gain);
        }
        let end = if left.is_infinite() {
            End::Dependent
        } else if left <= GOOD_ENOUGH * state.cost.to_f64().max(1.0) {
            End::Settled(state)
        } else {
            End::Unsettled(state)
        };
        (end, count)
    }
}

/// Damping and its next growth after a step that gained this part of what it promised, or was rejected.
fn next_damping(damping: f64, growth: f64, gain: Option<f64>) -> (f64, f64) {
    let Some(gain) = gain else {
        return ((damping * growth).max(FIRST), growth * 2.0);
    };
    let next = if gain > 0.75 {
        damping * 0.1
    } else if gain < 0.25 {
        (damping * 4.0).max(FIRST)
    } else {
        damping
    };
    (if next < 1e-9 { 0.0 } else { next }, 4.0)
}
