//! The trust region: how far a step may go, and what is learnt from taking it.

use super::levenberg::{Budget, Problem};
use super::levenberg_place::{Place, scaled_residuals};
use super::levenberg_step::{Step, scaled_length, step_inside};
use super::real::Real;

/// The least part of the predicted reduction that makes a step worth taking.
const WORTH_IT: f64 = 1e-4;

/// What came of an attempt to go down.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Progress {
    /// A step was taken.
    Moved,
    /// Nothing is left to gain in this precision (a last step may have been taken).
    Settled,
    /// The evaluations are used up.
    Exhausted,
}

/// Radius, damping and scale of a Levenberg–Marquardt search.
#[derive(Debug, Clone)]
pub(super) struct Trust {
    /// Running maxima of the lengths of the columns, in the units of the parameters.
    d: Vec<f64>,
    /// Largest ‖D·step‖.
    radius: f64,
    lambda: f64,
    /// Relative rounding of the numbers used.
    pub rounding: f64,
    first: bool,
}

impl Trust {
    /// A region of `factor` times the size of the start.
    pub(super) fn new<T: Real>(place: &Place<T>, factor: f64, rounding: f64) -> Self {
        let columns = place.lengths.iter().zip(&place.exponents).zip(&place.b);
        let d: Vec<f64> = columns
            .map(|((length, e), b)| {
                let b = b.to_f64().abs();
                // A column without influence here counts by the size of its parameter.
                if *length > 0.0 { libm::scalbn(*length, *e) } else { 1.0 / if b > 0.0 { b } else { 1.0 } }
            })
            .collect();
        let size = scaled_length(&doubles(&place.b), &d);
        Self { d, radius: factor * if size > 0.0 { size } else { 1.0 }, lambda: 0.0, rounding, first: true }
    }

    /// Makes one step down, shrinking the region until there is one.
    ///
    /// # Source
    ///
    /// Moré (1978), sections 4 and 6, with the constants of Moré, Garbow and Hillstrom, User Guide for
    /// MINPACK-1 (1980). From memory.
    pub(super) fn advance<P: Problem, T: Real>(
        &mut self,
        problem: &P,
        place: &mut Place<T>,
        budget: &mut Budget,
    ) -> Progress {
        for ((d, length), e) in self.d.iter_mut().zip(&place.lengths).zip(&place.exponents) {
            *d = d.max(libm::scalbn(*length, *e));
        }
        let d: Vec<f64> = self.d.iter().zip(&place.exponents).map(|(d, e)| libm::scalbn(*d, -e)).collect();
        budget.iterations += 1;
        while !budget.is_spent() && place.ss.to_f64() > 0.0 {
            let step = step_inside(place, &d, self.radius, self.lambda, self.rounding);
            if self.first {
                self.radius = self.radius.min(step.length);
                self.first = false;
            }
            let (next, actual) = attempt(problem, place, &step, budget);
            let ratio = if step.predicted > 0.0 { actual / step.predicted } else { 0.0 };
            self.learn(&step, actual, ratio);
            let moved = ratio >= WORTH_IT && next.is_some();
            if let (true, Some(next)) = (moved, next) {
                *place = next;
            }
            let nothing_left = actual.abs() <= self.rounding && step.predicted <= self.rounding && ratio <= 2.0;
            let size = scaled_length(&doubles(&place.b), &self.d);
            // A radius that is not a number ends here too.
            let room = self.radius > self.rounding * size && self.radius > 0.0;
            if nothing_left || !room {
                return Progress::Settled;
            }
            if moved {
                return Progress::Moved;
            }
        }
        if budget.is_spent() { Progress::Exhausted } else { Progress::Settled }
    }

    /// Radius and damping for the next step.
    fn learn<T>(&mut self, step: &Step<T>, actual: f64, ratio: f64) {
        if ratio > 0.25 {
            if step.lambda == 0.0 || ratio >= 0.75 {
                self.radius = 2.0 * step.length;
                self.lambda = 0.5 * step.lambda;
            } else {
                self.lambda = step.lambda;
            }
            return;
        }
        // The minimum of the parabola through the slope and the value found.
        let parabola = if actual >= 0.0 { 0.5 } else { 0.5 * step.slope / (step.slope + 0.5 * actual) };
        let shrink = if parabola >= 0.1 && actual > -99.0 { parabola } else { 0.1 };
        self.radius = shrink * self.radius.min(step.length / 0.1);
        self.lambda = step.lambda / shrink;
    }
}

/// The place after a step and the relative reduction of the sum of squares; a place without a finite
/// value counts as much worse.
fn attempt<P: Problem, T: Real>(
    problem: &P,
    place: &Place<T>,
    step: &Step<T>,
    budget: &mut Budget,
) -> (Option<Place<T>>, f64) {
    let much_worse = (None, -100.0);
    let b = place.moved(&step.s);
    if b.iter().any(|b| !b.is_finite()) {
        return much_worse;
    }
    budget.evaluations += 1;
    let Some(residuals) = scaled_residuals(problem, &b, place.data_exponent) else {
        return much_worse;
    };
    let ss = residuals.iter().fold(T::zero(), |sum, r| sum + r.square());
    let actual = ((place.ss - ss) / place.ss).to_f64().max(-100.0);
    if actual.is_nan() {
        return much_worse;
    }
    if actual < WORTH_IT * step.predicted {
        return (None, actual);
    }
    budget.evaluations += 1;
    match Place::new(problem, b, residuals, place.data_exponent) {
        Some(next) => (Some(next), actual),
        None => much_worse,
    }
}

fn doubles<T: Real>(b: &[T]) -> Vec<f64> {
    b.iter().map(|b| b.to_f64()).collect()
}
