//! Can the residuals be normal? Shapiro and Wilk's test.

use super::sphere::whitened;
use crate::distributions::{ShapiroWilk, shapiro_wilk};
use crate::fit::Fit;

/// The method's name for results.
pub const METHOD: &str = "Shapiro-Wilk on raw residuals, p by Royston 1995 (AS R94)";

/// What the test says.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Normality {
    /// W, 0 to 1; small speaks against normal residuals.
    pub w: f64,
    /// P(W ≤ w) for a normal sample; one-sided by nature.
    pub p: f64,
    /// Residuals tested.
    pub n: usize,
    /// n < p + 5: the fit has made the residuals look alike whatever the errors were (a quadratic through
    /// six points rejects 7 times in 1000 at 5 %), so a large p means nothing.
    pub uninformative: bool,
}

/// Tests the residuals of a fit.
///
/// # Formula
/// W of the raw residuals, √w·e where weighted ([`shapiro_wilk`]). Studentised ones gain nothing.
///
/// # Shapes and units
/// Dimensionless. `None` with fewer than 3 or more than 5000 residuals, or without scatter beyond rounding.
///
/// # Source
/// As [`shapiro_wilk`].
#[must_use]
pub fn normality(fit: &Fit) -> Option<Normality> {
    let residuals = whitened(fit)?;
    let n = residuals.len();
    let ShapiroWilk { w, p } = shapiro_wilk(&residuals)?;
    Some(Normality { w, p, n, uninformative: n < fit.coefficients.len() + 5 })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    /// Own simulation with another program at 5 in 100: line through 6 points 0.048, 7 0.050, 11 0.050,
    /// 5 × 3 0.049, 11 × 3 0.050; quadratic through 6 points 0.007, hence "uninformative".
    #[test]
    fn sizes_are_those_expected() {
        const RUNS: usize = 4000;
        let cases = [
            ((6, 1), 1, 0.048),
            ((6, 1), 2, 0.007),
            ((7, 1), 1, 0.050),
            ((11, 1), 1, 0.050),
            ((5, 3), 1, 0.049),
            ((11, 3), 1, 0.050),
        ];
        for (number, (design, degree, size)) in (0..).zip(cases) {
            let mut stream = Stream::new(71, number);
            let mut one = || {
                let fit = fitted(Family::Polynomial(degree), &simulated(&mut stream, design, |x| x, |_| 1.0));
                normality(&fit).unwrap()
            };
            assert_eq!(one().uninformative, design.0 * design.1 < usize::from(degree) + 6);
            let hits = (0..RUNS).filter(|_| one().p <= 0.05).count();
            println!("{design:?} degree {degree}: {}", hits as f64 / RUNS as f64);
            assert_rate(hits, RUNS, size);
        }
    }

    #[test]
    fn a_heavy_tail_is_seen() {
        let mut stream = Stream::new(72, 0);
        let mut points = simulated(&mut stream, (11, 3), |x| x, |_| 0.1);
        points[7].y += 2.0;
        let found = normality(&fitted(Family::Polynomial(1), &points)).unwrap();
        assert!(found.p < 1e-6 && !found.uninformative && found.n == 33);
    }

    #[test]
    fn too_few_or_perfect() {
        let points: Vec<_> = (1..6).map(|i| crate::fit::Point { x: f64::from(i), y: f64::from(i) }).collect();
        assert_eq!(normality(&fitted(Family::Polynomial(1), &points)), None);
        assert_eq!(normality(&fitted(Family::Polynomial(1), &points[..2])), None);
    }
}
