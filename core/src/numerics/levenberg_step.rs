//! The step of least predicted sum of squares inside a trust region.

use super::householder_factor::{Factor, dot};
use super::levenberg_place::Place;
use super::real::Real;

/// A step and what it promises.
pub(super) struct Step<T> {
    /// In scaled units.
    pub s: Vec<T>,
    /// ‖D s‖.
    pub length: f64,
    /// The multiplier λ of ‖D s‖².
    pub lambda: f64,
    /// Predicted relative reduction of the sum of squares, (‖X s‖² + 2λ‖D s‖²)/‖r‖².
    pub predicted: f64,
    /// Half the slope of the relative sum of squares along the step, −(‖X s‖² + λ‖D s‖²)/‖r‖².
    pub slope: f64,
}

/// How far ‖D s‖ may be from the radius, as a part of it.
const SLACK: f64 = 0.1;
/// Trials of λ.
const TRIALS: usize = 10;

/// What the trials of λ share.
struct Search<'a, T> {
    place: &'a Place<T>,
    /// D in scaled units, positive.
    d: &'a [f64],
    radius: f64,
}

/// The minimum of ‖r − X s‖² over ‖D s‖ ≤ radius, to a tenth of the radius.
///
/// # Formula
///
/// s = R⁻¹Q₁ᵀr if that is short enough and R is regular to `least`; otherwise s(λ) from the QR of R over √λ·D
/// with ‖D s(λ)‖ = radius, by Newton's method on 1/‖D s(λ)‖ inside safeguarding bounds.
///
/// # Source
///
/// Moré, The Levenberg–Marquardt algorithm: implementation and theory, Lect. Notes Math. 630
/// (1978) 105, section 5. From memory.
pub(super) fn step_inside<T: Real>(place: &Place<T>, d: &[f64], radius: f64, lambda: f64, least: f64) -> Step<T> {
    let search = Search { place, d, radius };
    let mut low = 0.0;
    if place.factor.is_regular(least) {
        let s = place.factor.back_substitute(&place.projected);
        let length = search.length(&s);
        if length <= (1.0 + SLACK) * radius {
            return search.step(s, length, 0.0);
        }
        low = (length - radius) / radius / search.newton_weight(&place.factor, &s, length);
    }
    let high = search.gradient_length() / radius;
    let high = if high > 0.0 { high } else { f64::MIN_POSITIVE / radius.min(SLACK) };
    search.damped(low, high, lambda)
}

impl<T: Real> Search<'_, T> {
    fn length(&self, s: &[T]) -> f64 {
        libm::sqrt(s.iter().zip(self.d).map(|(s, d)| (s.to_f64() * d) * (s.to_f64() * d)).sum())
    }

    /// ‖D⁻¹Xᵀr‖.
    fn gradient_length(&self) -> f64 {
        let p = self.d.len();
        let entry = |j: usize| {
            let sum: f64 = (0..=j).map(|i| (self.place.factor.r(i, j) * self.place.projected[i]).to_f64()).sum();
            sum / self.d[j]
        };
        libm::sqrt((0..p).map(|j| entry(j) * entry(j)).sum())
    }

    /// ‖R⁻ᵀD²s‖²/‖D s‖²: minus the derivative of ‖D s‖ by λ, over ‖D s‖.
    fn newton_weight(&self, factor: &Factor<T>, s: &[T], length: f64) -> f64 {
        let right: Vec<T> = s.iter().zip(self.d).map(|(s, d)| *s * T::of(d * (d / length))).collect();
        let z = factor.forward_substitute(&right);
        dot(&z, &z, 0).to_f64()
    }

    /// Newton's trials of λ between `low` and `high`.
    fn damped(&self, mut low: f64, mut high: f64, lambda: f64) -> Step<T> {
        let mut lambda = lambda.max(low).min(high.max(low));
        let mut before = f64::INFINITY;
        let mut trial = 1;
        loop {
            if lambda == 0.0 {
                lambda = (0.001 * high).max(f64::MIN_POSITIVE);
            }
            let (factor, s) = self.solve(lambda);
            let length = self.length(&s);
            let excess = length - self.radius;
            let flat = low == 0.0 && excess <= before && before < 0.0;
            if excess.abs() <= SLACK * self.radius || flat || trial == TRIALS || !length.is_finite() {
                return self.step(s, length, lambda);
            }
            if excess > 0.0 {
                low = low.max(lambda);
            } else {
                high = high.min(lambda);
            }
            let change = excess / self.radius / self.newton_weight(&factor, &s, length);
            lambda = (lambda + change).max(low).min(high.max(low));
            before = excess;
            trial += 1;
        }
    }

    /// s(λ) from the QR of R over √λ·D.
    fn solve(&self, lambda: f64) -> (Factor<T>, Vec<T>) {
        let p = self.d.len();
        let root = libm::sqrt(lambda);
        let column = |j: usize| {
            let mut c = vec![T::zero(); 2 * p];
            for (i, cell) in c.iter_mut().enumerate().take(j + 1) {
                *cell = self.place.factor.r(i, j);
            }
            c[p + j] = T::of(root * self.d[j]);
            c
        };
        let factor = Factor::new((0..p).map(column).collect());
        let mut right = self.place.projected.clone();
        right.resize(2 * p, T::zero());
        let s = factor.back_substitute(&factor.transform(right));
        (factor, s)
    }

    /// A parameter without influence here stays where it is: what the solution says of it is rounding.
    fn step(&self, mut s: Vec<T>, length: f64, lambda: f64) -> Step<T> {
        for (s, column) in s.iter_mut().zip(&self.place.lengths) {
            if *column == 0.0 {
                *s = T::zero();
            }
        }
        let along = self.place.factor.triangle_times(&s);
        let ss = self.place.ss.to_f64();
        let fitted = dot(&along, &along, 0).to_f64() / ss;
        let damping = lambda * length * length / ss;
        Step { s, length, lambda, predicted: fitted + 2.0 * damping, slope: -(fitted + damping) }
    }
}

/// Euclidean length of D b.
pub(super) fn scaled_length(b: &[f64], d: &[f64]) -> f64 {
    let sum: f64 = b.iter().zip(d).map(|(b, d)| (b * d) * (b * d)).sum();
    libm::sqrt(sum)
}
