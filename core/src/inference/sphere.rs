//! One reference for every scale-free statistic of the residuals.
//!
//! When the model is right and the errors are normal, the whitened residual vector points in a uniformly
//! random direction of the residual space, whatever the coefficients and the SD. Directions drawn from
//! there give any statistic that does not depend on the size of the residuals its exact distribution:
//! every design, every number of points, leverage included.

use super::added::{Added, dot};
use super::joint::Joint;
use crate::fit::Fit;
use crate::numerics::streams::Stream;

/// How many draws a reference distribution holds.
pub const DRAWS: usize = 9_999;

/// More observations than this: the classical approximations are as good and far cheaper.
pub const MOST: usize = 500;

/// How p-values from here are called in results.
pub const METHOD: &str = "residual sphere, 9999 draws";

/// A seeded set of directions in the residual space of a fit.
///
/// Nothing is kept but the design: the directions are drawn anew, and equal, for each question.
/// They depend on the standards, the weights' v, the family, `draws` and `seed`. A result may therefore
/// be kept under exactly these while readings change; where v follows the readings (1/y, 1/y²), or the
/// family is not linear in its coefficients (tangent plane), the readings belong to the key as well.
#[derive(Debug, Clone, Copy)]
pub struct Sphere<'a> {
    /// p orthonormal columns that span the whitened design.
    columns: &'a [Vec<f64>],
    /// Leverage of each observation.
    leverage: &'a [f64],
    draws: usize,
    seed: u64,
}

impl<'a> Sphere<'a> {
    /// The residual space of a fit; `None` with ν < 1.
    ///
    /// # Formula
    /// (I − QQᵀ)z/‖(I − QQᵀ)z‖ with z standard normal, Q the p orthonormal columns of √W·X.
    ///
    /// # Shapes and units
    /// `draws` directions of length N; the same seed gives the same directions.
    ///
    /// # Source
    /// Theil's residual sphere; rotation tests, e.g. Ø. Langsrud (2005), Stat. Comput. 15, 53–60; from memory.
    #[must_use]
    pub fn new(fit: &'a Fit, draws: usize, seed: u64) -> Option<Self> {
        (fit.degrees_of_freedom >= 1).then(|| Self {
            columns: fit.orthonormal_columns(),
            leverage: &fit.leverage,
            draws,
            seed,
        })
    }

    /// Shows every direction in turn: whitened residuals of length 1, in the order of the points.
    pub fn each(&self, mut look: impl FnMut(&[f64])) {
        let mut stream = Stream::new(self.seed, 0);
        let mut direction = vec![0.0; self.leverage.len()];
        for _ in 0..self.draws {
            self.draw(&mut stream, &mut direction);
            look(&direction);
        }
    }

    /// One direction, written over `direction`.
    fn draw(&self, stream: &mut Stream, direction: &mut [f64]) {
        for e in direction.iter_mut() {
            *e = stream.normal();
        }
        for column in self.columns {
            let share = dot(column, direction);
            for (e, q) in direction.iter_mut().zip(column) {
                *e -= share * q;
            }
        }
        let length = libm::sqrt(dot(direction, direction));
        for e in direction.iter_mut() {
            *e /= length;
        }
    }

    /// The distribution of one scale-free statistic of the whitened residuals.
    pub fn reference(&self, mut statistic: impl FnMut(&[f64]) -> f64) -> Reference {
        let mut values = Vec::with_capacity(self.draws);
        self.each(|direction| values.push(statistic(direction)));
        Reference::new(values)
    }

    /// The joint distribution of `count` scale-free statistics, for their smallest p.
    ///
    /// `statistics` writes its `count` values over the second argument.
    pub fn joint(&self, count: usize, mut statistics: impl FnMut(&[f64], &mut [f64])) -> Joint {
        let mut values = vec![0.0; count * self.draws];
        let mut rows = values.chunks_exact_mut(count.max(1));
        self.each(|direction| {
            if let Some(row) = rows.next() {
                statistics(direction, row);
            }
        });
        Joint::new(count, values)
    }

    /// 1/√(1 − h) of each observation, which makes whitened residuals comparable; 0 where h = 1.
    #[must_use]
    pub fn stretch(&self) -> Vec<f64> {
        let one = |h: &f64| {
            if *h < 1.0 - 1e-12 { 1.0 / libm::sqrt(1.0 - h) } else { 0.0 }
        };
        self.leverage.iter().map(one).collect()
    }
}

/// The values a statistic takes under the model, ascending.
#[derive(Debug, Clone, PartialEq)]
pub struct Reference {
    values: Vec<f64>,
}

impl Reference {
    /// From draws in any order.
    pub(crate) fn new(mut values: Vec<f64>) -> Self {
        values.sort_by(f64::total_cmp);
        Self { values }
    }

    /// One-sided p for large values.
    ///
    /// # Formula
    /// p = (1 + number of draws ≥ t)/(draws + 1). A draw equal up to rounding counts as reaching t.
    #[must_use]
    pub fn p(&self, t: f64) -> f64 {
        (1 + self.reaching(t)) as f64 / (self.values.len() + 1) as f64
    }

    /// How many draws reach `t`.
    pub(crate) fn reaching(&self, t: f64) -> usize {
        let reached = reach(t);
        self.values.len() - self.values.partition_point(|v| *v < reached)
    }
}

/// What a draw must come to in order to count as reaching `t`, rounding aside.
pub(crate) fn reach(t: f64) -> f64 {
    t - 1e-12 * t.abs()
}

/// The whitened residuals √w·e of a fit, in the order of its points; `None` when there is no scatter
/// beyond what rounding of the readings leaves, so that nothing about it can be tested.
#[must_use]
pub fn whitened(fit: &Fit) -> Option<Vec<f64>> {
    let added = Added::new(fit);
    if added.residual_ss() <= added.floor() {
        return None;
    }
    let pairs = fit.residuals.iter().zip(&fit.variance_ratio);
    Some(pairs.map(|(e, v)| e / libm::sqrt(*v)).collect())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::model::Family;

    fn example() -> Fit {
        fitted(Family::Polynomial(2), &simulated(&mut Stream::new(41, 0), (7, 1), |x| x * x, |_| 1.0))
    }

    #[test]
    fn directions_have_length_one_and_lie_in_the_residual_space() {
        let fit = example();
        let mut seen = 0;
        Sphere::new(&fit, 100, 1).unwrap().each(|u| {
            seen += 1;
            assert!((dot(u, u) - 1.0).abs() < 1e-14);
            for q in fit.orthonormal_columns() {
                assert!(dot(q, u).abs() < 1e-15);
            }
        });
        assert_eq!(seen, 100);
    }

    /// E uᵢ² = (1 − hᵢ)/ν and E uᵢ⁴ = 3(1 − hᵢ)²/(ν(ν + 2)) on the sphere of the residual space.
    #[test]
    fn directions_are_uniform() {
        let fit = example();
        let (n, nu) = (fit.points.len(), fit.degrees_of_freedom as f64);
        let (mut second, mut fourth) = (vec![0.0; n], vec![0.0; n]);
        const RUNS: usize = 40_000;
        Sphere::new(&fit, RUNS, 2).unwrap().each(|u| {
            for i in 0..n {
                second[i] += u[i] * u[i] / RUNS as f64;
                fourth[i] += u[i].powi(4) / RUNS as f64;
            }
        });
        for i in 0..n {
            let share = (1.0 - fit.leverage[i]) / nu;
            let expected4 = 3.0 * share * share * nu / (nu + 2.0);
            let sd2 = ((expected4 - share * share) / RUNS as f64).sqrt();
            assert!((second[i] - share).abs() < 5.0 * sd2, "{i}: {} {share}", second[i]);
            assert!((fourth[i] / expected4 - 1.0).abs() < 0.06, "{i}: {} {expected4}", fourth[i]);
        }
    }

    /// The largest standardised residual: 5 and 1 in 100 by the reference.
    #[test]
    fn a_reference_is_exact() {
        const RUNS: usize = 4000;
        let mut stream = Stream::new(42, 0);
        let statistic = |u: &[f64]| u.iter().fold(0.0_f64, |m, e| m.max(e.abs()));
        let first = fitted(Family::Polynomial(1), &simulated(&mut stream, (6, 1), |x| x, |_| 1.0));
        let reference = Sphere::new(&first, DRAWS, 3).unwrap().reference(statistic);
        let mut hits = [0, 0];
        for _ in 0..RUNS {
            let fit = fitted(Family::Polynomial(1), &simulated(&mut stream, (6, 1), |x| 7.0 - x, |_| 30.0));
            let e = whitened(&fit).unwrap();
            let t = statistic(&e) / dot(&e, &e).sqrt();
            let p = reference.p(t);
            hits[0] += usize::from(p <= 0.05);
            hits[1] += usize::from(p <= 0.01);
        }
        assert_rate(hits[0], RUNS, 0.05);
        assert_rate(hits[1], RUNS, 0.01);
    }

    #[test]
    fn p_counts_the_draws_that_reach() {
        let reference = Reference::new(vec![3.0, 1.0, 2.0]);
        assert_eq!(reference.p(2.0), 0.75);
        assert_eq!(reference.p(2.0 + 1e-13), 0.75);
        assert_eq!((reference.p(9.0), reference.p(0.0)), (0.25, 1.0));
    }

    #[test]
    fn nothing_left_over_or_nothing_scattered() {
        let exact: Vec<_> = (1..6).map(|i| crate::fit::Point { x: f64::from(i), y: 0.1 * f64::from(i) }).collect();
        assert!(Sphere::new(&fitted(Family::Polynomial(1), &exact[..2]), 9, 1).is_none());
        assert_eq!(whitened(&fitted(Family::Polynomial(1), &exact)), None);
    }
}
