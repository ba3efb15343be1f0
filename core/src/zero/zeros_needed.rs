//! How many zeros a wanted detection limit takes.

use crate::distributions::{chi2_quantile, noncentrality, t_quantile};

/// The number of zeros for a wanted limit, and what the uncertainty of the SD makes of it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ZerosNeeded {
    /// With the SD as found; `None` when no number of zeros is enough.
    pub as_found: Option<usize>,
    /// With the SD at the lower end of its interval.
    pub at_best: Option<usize>,
    /// With the SD at the upper end of its interval.
    pub at_worst: Option<usize>,
}

/// How many zero applications bring the detection limit to a wanted net signal.
///
/// # Formula
/// Smallest n ≥ 3 with δ(t_{1−α,n−1}; n − 1, β)·s√(1/k + 1/n) ≤ signal; the range puts s·√(ν/χ²) at the
/// two ends of the SD's 95 % interval for s. The left side falls with n.
///
/// # Shapes and units
/// `sd` and `signal` (the net signal f̂(x) − f̂(0) at the wanted limit) in output units; `nu`: degrees of
/// freedom of `sd`; searched up to 10 000 zeros.
///
/// # Source
/// As the detection limit: ISO 11843-1, Clayton, Hines & Elkins (1987); from memory.
#[must_use]
pub fn zeros_needed(sd: f64, nu: f64, signal: f64, (alpha, beta, k): (f64, f64, usize)) -> ZerosNeeded {
    let enough = |n: usize, sd: f64| {
        let nu = (n - 1) as f64;
        let delta = noncentrality(t_quantile(1.0 - alpha, nu), nu, beta);
        delta * sd * libm::sqrt(1.0 / k.max(1) as f64 + 1.0 / n as f64) <= signal
    };
    let smallest = |sd: f64| {
        let (mut short, mut long) = (2, 10_000);
        if !enough(long, sd) {
            return None;
        }
        while long - short > 1 {
            let middle = usize::midpoint(short, long);
            if enough(middle, sd) {
                long = middle;
            } else {
                short = middle;
            }
        }
        Some(long)
    };
    let factor = |p: f64| libm::sqrt(nu / chi2_quantile(p, nu));
    ZerosNeeded {
        as_found: smallest(sd),
        at_best: smallest(sd * factor(0.975)),
        at_worst: smallest(sd * factor(0.025)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// δ√(1 + 1/n) at α = β = 0.05: n = 6 3.870·1.0801 = 4.180, n = 10 3.575·1.0488 = 3.749 (δ as in the
    /// tests of the detection limit).
    #[test]
    fn the_number_falls_between_its_neighbours() {
        let asked = (0.05, 0.05, 1);
        assert_eq!(zeros_needed(1.0, 5.0, 4.181, asked).as_found, Some(6));
        assert_eq!(zeros_needed(2.0, 9.0, 2.0 * 3.75, asked).as_found, Some(10));
        let found = zeros_needed(1.0, 5.0, 4.181, asked);
        assert!(found.at_best < found.as_found && found.at_worst.is_none());
    }

    /// With k = 1 the limit never falls below 3.29 SD, however many zeros.
    #[test]
    fn no_number_of_zeros_replaces_a_quieter_reading() {
        assert_eq!(zeros_needed(1.0, 9.0, 3.28, (0.05, 0.05, 1)).as_found, None);
        assert!(zeros_needed(1.0, 9.0, 3.28, (0.05, 0.05, 4)).as_found.is_some());
    }
}
