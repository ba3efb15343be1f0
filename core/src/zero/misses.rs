//! The noncentral t for one number of degrees of freedom, fast enough to follow a moving threshold.

use crate::distributions::{noncentral_t_lower, noncentrality, normal_lower, normal_quantile};

/// Thresholds up to this many SDs are answered from the table.
const TABLE_REACH: f64 = 20.0;

/// The distribution of the SD in use, laid down once: what a threshold asks of it depends on the
/// threshold, the distribution does not.
#[derive(Debug, Clone)]
pub(super) struct Misses {
    nu: f64,
    /// (s, weight) with weights that sum to 1: the law of √(χ²_ν/ν).
    nodes: Vec<(f64, f64)>,
}

impl Misses {
    /// Tabulates √(χ²_ν/ν).
    ///
    /// # Formula
    /// Trapezoidal rule in v with s = ln(1 + e^v), which makes the density fall exponentially at both
    /// ends, so that the rule converges faster than any power; ends where it has fallen by e⁻⁴⁰.
    ///
    /// # Source
    /// L. N. Trefethen & J. A. C. Weideman (2014), SIAM Review 56, 385–458; from memory.
    pub(super) fn new(nu: f64) -> Self {
        // Beyond this Student's distribution is the normal one to all digits that matter.
        let nu = nu.min(1e7);
        let step = (0.35 / libm::sqrt(2.0 * nu)).min(0.06);
        let log_density = |v: f64| {
            let s = libm::log1p(libm::exp(v));
            // ds/dv = 1/(1 + e^−v).
            (nu - 1.0) * libm::log(s) - 0.5 * nu * s * s - libm::log1p(libm::exp(-v))
        };
        // s = 1 is near the top of the density.
        let top = log_density(libm::log(libm::expm1(1.0)));
        let node = |v: f64| {
            let log = log_density(v) - top;
            (log > -40.0).then(|| (libm::log1p(libm::exp(v)), libm::exp(log)))
        };
        let start = libm::log(libm::expm1(1.0));
        let walk = |sign: f64, from: i32| (from..).map(move |i| start + sign * step * f64::from(i)).map_while(node);
        let mut nodes: Vec<(f64, f64)> = walk(1.0, 0).chain(walk(-1.0, 1)).collect();
        let total: f64 = nodes.iter().map(|(_, weight)| weight).sum();
        for (_, weight) in &mut nodes {
            *weight /= total;
        }
        Self { nu, nodes }
    }

    /// P(T ≤ t; ν, δ).
    ///
    /// # Formula
    /// Σ wⱼ·Φ(t·sⱼ − δ).
    pub(super) fn lower(&self, t: f64, delta: f64) -> f64 {
        if t.abs() > TABLE_REACH {
            return noncentral_t_lower(t, self.nu, delta);
        }
        self.nodes.iter().map(|(s, weight)| weight * normal_lower(t * s - delta)).sum()
    }

    /// The δ with P(T ≤ t; ν, δ) = β.
    ///
    /// # Formula
    /// Newton on ln F(δ) − ln β. ln F falls and is concave in δ, so after one step the iterates come
    /// down to the root from above.
    pub(super) fn noncentrality(&self, t: f64, beta: f64) -> f64 {
        if t.abs() > TABLE_REACH {
            return noncentrality(t, self.nu, beta);
        }
        let spread = libm::sqrt(1.0 + t * t / (2.0 * self.nu));
        let mut delta = t - normal_quantile(beta) * spread;
        for _ in 0..60 {
            let (mut value, mut slope) = (0.0, 0.0);
            for (s, weight) in &self.nodes {
                let z = t * s - delta;
                value += weight * normal_lower(z);
                slope += weight * libm::exp(-0.5 * z * z);
            }
            slope /= libm::sqrt(std::f64::consts::TAU);
            let step = value / slope * (libm::log(value) - libm::log(beta));
            delta += step;
            if step.abs() <= 1e-13 * delta.abs().max(1.0) {
                break;
            }
        }
        delta
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Against the adaptive integral of the distributions layer.
    #[test]
    fn the_table_agrees_with_the_integral() {
        for nu in [1.0, 2.0, 3.0, 5.0, 9.0, 30.0, 400.0, 20_000.0] {
            let misses = Misses::new(nu);
            for t in [-1.5, 0.0, 0.3, 1.7, 2.9, 6.3, 12.0, 19.9] {
                for delta in [0.0, 0.5, 2.0, 4.0, 9.0, 20.0] {
                    let (fast, exact) = (misses.lower(t, delta), noncentral_t_lower(t, nu, delta));
                    assert!((fast - exact).abs() < 1e-11, "{nu} {t} {delta}: {fast} {exact}");
                }
            }
        }
    }

    #[test]
    fn the_noncentrality_gives_back_its_rate() {
        for nu in [2.0, 5.0, 19.0, 38.0] {
            let misses = Misses::new(nu);
            for t in [0.4, 1.9, 2.9, 8.0, 19.0, 25.0] {
                for beta in [0.01, 0.05, 0.2] {
                    let delta = misses.noncentrality(t, beta);
                    let back = noncentral_t_lower(t, nu, delta);
                    assert!((back / beta - 1.0).abs() < 1e-9, "{nu} {t} {beta}: {back}");
                }
            }
        }
    }
}
