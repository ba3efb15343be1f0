//! The noncentral t distribution: how often a test misses a signal that is there.

use super::quantiles::{normal_lower, normal_quantile};
use crate::numerics::roots::bracketed_root;

/// P(T ≤ t) for T = (Z + δ)/√(χ²_ν/ν).
///
/// # Formula
///
/// ∫ Φ(t s − δ) f_ν(s) ds with f_ν the density of √(χ²_ν/ν), in u = ln s, where the integrand is smooth
/// for every ν > 0: Gauss–Legendre with 24 nodes on pieces between the points where the integrand has
/// fallen by e⁻⁴². Each tail is integrated by itself, never taken as one minus the other.
///
/// # Shapes and units
///
/// `nu` ≥ 0.01, not necessarily whole; ∞ gives the normal distribution. |`delta`| ≤ 1e5; |`t`| ≤ 1e100 or
/// infinite. About 10 digits wherever the result exceeds 1e-12. Not a number outside these.
///
/// # Source
///
/// Definition: Johnson, Kotz and Balakrishnan, Continuous Univariate Distributions 2, chapter 31, from
/// memory. Checked against the series of the same chapter (31.21), summed with 200 digits.
#[must_use]
pub fn noncentral_t_lower(t: f64, nu: f64, delta: f64) -> f64 {
    let valid = nu >= SMALLEST_NU && !t.is_nan() && delta.abs() <= LARGEST_DELTA;
    if !valid {
        return f64::NAN;
    }
    if t.is_infinite() {
        return if t > 0.0 { 1.0 } else { 0.0 };
    }
    if t.abs() > LARGEST_T {
        return f64::NAN;
    }
    if t == 0.0 || nu > NORMAL_ABOVE {
        return normal_lower(t - delta);
    }
    Tail { t, nu, delta }.integrate()
}

/// P(T > t), integrated by itself; see [`noncentral_t_lower`].
#[must_use]
pub fn noncentral_t_upper(t: f64, nu: f64, delta: f64) -> f64 {
    noncentral_t_lower(-t, nu, -delta)
}

/// The noncentrality δ at which a test with critical value `t` misses with probability `beta`:
/// P(T ≤ t; ν, δ) = β.
///
/// # Formula
///
/// Root of ln F(δ) − ln β (of the upper tails above β = ½) by Brent's method.
///
/// # Shapes and units
///
/// 0 < `beta` < 1, `nu` ≥ 0.01 (∞: δ = t − z_β), |`t`| well below 1e5; otherwise not a number.
///
/// # Source
///
/// ISO 11843-1 and -2 use δ(ν; α; β) in this sense; from memory.
#[must_use]
pub fn noncentrality(t: f64, nu: f64, beta: f64) -> f64 {
    let valid = nu >= SMALLEST_NU && t.abs() <= LARGEST_DELTA && beta > 0.0 && beta < 1.0;
    if !valid {
        return f64::NAN;
    }
    let start = t - normal_quantile(beta);
    if nu > NORMAL_ABOVE {
        return start;
    }
    // Falling in δ on either branch.
    let surplus = |delta: f64| {
        if beta <= 0.5 {
            libm::log(noncentral_t_lower(t, nu, delta)) - libm::log(beta)
        } else {
            libm::log1p(-beta) - libm::log(noncentral_t_upper(t, nu, delta))
        }
    };
    let mut step = libm::sqrt(1.0 + t * t / (2.0 * nu));
    let (mut lo, mut hi) = (start, start);
    for _ in 0..80 {
        if surplus(lo) > 0.0 {
            break;
        }
        (lo, hi, step) = (lo - step, lo, 2.0 * step);
    }
    for _ in 0..80 {
        if surplus(hi) < 0.0 {
            break;
        }
        (lo, hi, step) = (hi, hi + step, 2.0 * step);
    }
    bracketed_root(surplus, lo, hi).unwrap_or(f64::NAN)
}

/// Below these degrees of freedom the integrand stretches over thousands of pieces.
const SMALLEST_NU: f64 = 0.01;
/// Beyond this noncentrality t·s − δ keeps too few digits.
const LARGEST_DELTA: f64 = 1e5;
/// Beyond this t the square of t·s − δ overflows before the integrand is found.
const LARGEST_T: f64 = 1e100;
/// Above these degrees of freedom s is exactly one to the digits promised.
const NORMAL_ABOVE: f64 = 1e13;
/// The integrand is followed until it has fallen by e to this power.
const DEPTH: f64 = 42.0;
/// No piece is wider than this in u …
const WIDEST: f64 = 3.0;
/// … nor than this many standard deviations of ln s.
const WIDEST_IN_SD: f64 = 5.0;

/// Positive half of the nodes and weights of 24-point Gauss–Legendre, computed with 40 digits from the
/// Legendre polynomial.
const NODES: [(f64, f64); 12] = [
    (0.995_187_219_997_021_3, 0.012_341_229_799_987_2),
    (0.974_728_555_971_309_5, 0.028_531_388_628_933_663),
    (0.938_274_552_002_732_8, 0.044_277_438_817_419_81),
    (0.886_415_527_004_401_1, 0.059_298_584_915_436_78),
    (0.820_001_985_973_903, 0.073_346_481_411_080_3),
    (0.740_124_191_578_554_4, 0.086_190_161_531_953_27),
    (0.648_093_651_936_975_5, 0.097_618_652_104_113_88),
    (0.545_421_471_388_839_6, 0.107_444_270_115_965_63),
    (0.433_793_507_626_045_1, 0.115_505_668_053_725_6),
    (0.315_042_679_696_163_4, 0.121_670_472_927_803_39),
    (0.191_118_867_473_616_3, 0.125_837_456_346_828_3),
    (0.064_056_892_862_605_63, 0.127_938_195_346_752_16),
];

/// One tail as an integral over u = ln s.
struct Tail {
    t: f64,
    nu: f64,
    delta: f64,
}

impl Tail {
    /// Logarithm of the integrand, without the constant of the density.
    fn log_integrand(&self, u: f64) -> f64 {
        let s = libm::exp(u);
        // s² − 1 − 2u without cancellation near u = 0.
        let falls = libm::expm1(2.0 * u) - 2.0 * u;
        log_normal_lower(self.t * s - self.delta) - 0.5 * self.nu * falls
    }

    /// ln of 2 a^a e^−a/Γ(a), a = ν/2.
    fn log_constant(&self) -> f64 {
        let a = 0.5 * self.nu;
        if a < 12.0 {
            let gamma = libm::lgamma(a);
            return std::f64::consts::LN_2 + a * libm::log(a) - a - gamma;
        }
        // Stirling's series, where the large terms have cancelled on paper.
        let q = 1.0 / (a * a);
        let series = (1.0 / 12.0 - q * (1.0 / 360.0 - q * (1.0 / 1260.0 - q / 1680.0))) / a;
        std::f64::consts::LN_2 + 0.5 * libm::log(a / std::f64::consts::TAU) - series
    }

    fn integrate(&self) -> f64 {
        let spread = 1.0 / libm::sqrt(2.0 * self.nu);
        let (mode, top) = self.mode(spread);
        let left = self.edge(mode, top, -spread);
        let right = self.edge(mode, top, spread);
        let mut cuts = vec![left, mode, right];
        let bend = libm::log(self.delta / self.t);
        if bend.is_finite() {
            let width = 1.0 / self.delta.abs();
            cuts.extend([-8.0, -2.5, 0.0, 2.5, 8.0].map(|k| bend + k * width));
        }
        cuts.retain(|u| (left..=right).contains(u));
        cuts.sort_by(f64::total_cmp);
        let widest = WIDEST.min(WIDEST_IN_SD * spread);
        let sum: f64 = cuts.windows(2).map(|pair| self.pieces(pair[0], pair[1], widest, top)).sum();
        (sum * libm::exp(top + self.log_constant())).min(1.0)
    }

    /// The place of the largest integrand, to a fraction of its width, and its logarithm there.
    fn mode(&self, spread: f64) -> (f64, f64) {
        let (mut at, mut top) = (0.0, self.log_integrand(0.0));
        let mut step = spread;
        if self.log_integrand(step) < self.log_integrand(-step) {
            step = -step;
        }
        // Climb in growing steps, then in shrinking ones both ways.
        while step.abs() > 0.02 * spread {
            let next = self.log_integrand(at + step);
            if next > top {
                (at, top, step) = (at + step, next, 2.0 * step);
                continue;
            }
            let back = self.log_integrand(at - step);
            if back > top {
                (at, top, step) = (at - step, back, -step);
            }
            step *= 0.4;
        }
        (at, top)
    }

    /// Where the integrand has fallen by e^−[`DEPTH`], going from the mode by growing steps.
    fn edge(&self, mode: f64, top: f64, step: f64) -> f64 {
        let low = |u: f64| self.log_integrand(u) < top - DEPTH;
        let (mut inside, mut reach) = (mode, step);
        while !low(inside + reach) {
            inside += reach;
            reach *= 2.0;
        }
        let mut outside = inside + reach;
        for _ in 0..6 {
            let middle = 0.5 * (inside + outside);
            if low(middle) {
                outside = middle;
            } else {
                inside = middle;
            }
        }
        outside
    }

    /// Integral of the integrand divided by its top, over [from, to] in equal pieces.
    fn pieces(&self, from: f64, to: f64, widest: f64, top: f64) -> f64 {
        let count = libm::ceil((to - from) / widest).max(1.0);
        let half = 0.5 * (to - from) / count;
        let mut sum = 0.0;
        let mut middle = from + half;
        while middle < to {
            for (node, weight) in NODES {
                let below = libm::exp(self.log_integrand(middle - node * half) - top);
                let above = libm::exp(self.log_integrand(middle + node * half) - top);
                sum += weight * half * (below + above);
            }
            middle += 2.0 * half;
        }
        sum
    }
}

/// ln Φ(z), also where Φ itself would underflow.
fn log_normal_lower(z: f64) -> f64 {
    if z > -30.0 {
        return libm::log(normal_lower(z));
    }
    // Asymptotic series of Mills' ratio; the next term is below 1e-12 at z = −30.
    let q = 1.0 / (z * z);
    let series = 1.0 - q * (1.0 - q * (3.0 - q * (15.0 - q * (105.0 - q * 945.0))));
    -0.5 * z * z - libm::log(-z * libm::sqrt(std::f64::consts::TAU)) + libm::log(series)
}
