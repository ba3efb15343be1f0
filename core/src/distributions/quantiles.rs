//! Quantiles and tail probabilities of the everyday distributions.
//!
//! Tails come from statrs (10 to 13 digits for up to 1000 degrees of freedom). Its quantiles are cruder
//! (χ² at p = 0.5 and ν = 4 is off by 2e-10, far tails at small ν by much more), so every quantile is
//! solved here from the tails. Arguments outside their domain give not-a-number, never a panic.

use super::noncentral_t::noncentral_t_lower;
use crate::numerics::roots::bracketed_root;
use statrs::distribution::{ChiSquared, ContinuousCDF, Normal, StudentsT};
use statrs::function::beta::beta_reg;

/// Above these degrees of freedom the logarithms of Γ cancel too much in the incomplete beta function;
/// the integral of the noncentral distribution with δ = 0 takes over.
const INTEGRAL_ABOVE: f64 = 1000.0;

/// Beyond these degrees of freedom the incomplete gamma function of χ² takes too many terms.
const CHI2_UP_TO: f64 = 1e7;

/// P(Z ≤ z) for the standard normal.
///
/// # Formula
///
/// ½ erfc(−z/√2), which keeps its digits in the far lower tail.
///
/// # Source
///
/// Abramowitz and Stegun, Handbook of Mathematical Functions, 26.2.29. From memory.
#[must_use]
pub fn normal_lower(z: f64) -> f64 {
    0.5 * libm::erfc(-z * std::f64::consts::FRAC_1_SQRT_2)
}

/// The z with P(Z ≤ z) = p; ±∞ at p = 0 and 1.
#[must_use]
pub fn normal_quantile(p: f64) -> f64 {
    if !(0.0..=1.0).contains(&p) {
        return f64::NAN;
    }
    Normal::standard().inverse_cdf(p)
}

/// P(T ≤ t), Student with ν > 0 degrees of freedom; ν = ∞ is the normal distribution.
#[must_use]
pub fn t_lower(t: f64, nu: f64) -> f64 {
    if t.is_nan() || nu.is_nan() || nu <= 0.0 {
        return f64::NAN;
    }
    if nu > INTEGRAL_ABOVE {
        return noncentral_t_lower(t.clamp(-1e100, 1e100), nu, 0.0);
    }
    StudentsT::new(0.0, 1.0, nu).map_or(f64::NAN, |d| d.cdf(t))
}

/// P(T > t), Student with ν > 0 degrees of freedom.
#[must_use]
pub fn t_upper(t: f64, nu: f64) -> f64 {
    t_lower(-t, nu)
}

/// The t with P(T ≤ t) = p, Student with ν > 0 degrees of freedom; ν = ∞ gives the normal quantile.
///
/// # Formula
///
/// Root of ln P(T > t) − ln q in ln t for the smaller tail q, by Brent's method.
///
/// # Shapes and units
///
/// 0 < p < 1. About 12 digits of |t|, or 1e-12 absolutely next to p = ½.
///
/// # Source
///
/// Definition only; spot values against JCGM 100:2008 Table G.2.
#[must_use]
pub fn t_quantile(p: f64, nu: f64) -> f64 {
    let valid = p > 0.0 && p < 1.0 && nu > 0.0;
    if !valid {
        return f64::NAN;
    }
    if p > 0.5 {
        return -t_quantile(1.0 - p, nu);
    }
    let normal = normal_quantile(p);
    if p == 0.5 || nu.is_infinite() {
        return normal.min(0.0);
    }
    let target = libm::log(p);
    if nu > INTEGRAL_ABOVE {
        return -far_quantile(-normal, nu);
    }
    // First term of the expansion about the normal: close already for ν > 3.
    let start = -normal * (1.0 + (normal * normal + 1.0) / (4.0 * nu));
    let surplus = |log_t: f64| libm::log(t_lower(-libm::exp(log_t), nu)) - target;
    -falling_root(surplus, libm::log(start)).map_or(f64::NAN, libm::exp)
}

/// Student's quantile from the normal one for many degrees of freedom.
///
/// # Formula
///
/// t = z + g₁/ν + g₂/ν² + g₃/ν³ + g₄/ν⁴, the polynomials g of the expansion about the normal; above 1000 degrees
/// of freedom what is left out is below 1e-13 for |z| ≤ 6.
///
/// # Source
///
/// Abramowitz and Stegun, Handbook of Mathematical Functions, 26.7.5. From memory; checked against the tails.
fn far_quantile(z: f64, nu: f64) -> f64 {
    let s = z * z;
    let g1 = z * (s + 1.0) / 4.0;
    let g2 = z * (3.0 + s * (16.0 + s * 5.0)) / 96.0;
    let g3 = z * (-15.0 + s * (17.0 + s * (19.0 + s * 3.0))) / 384.0;
    let g4 = z * (-945.0 + s * (-1920.0 + s * (1482.0 + s * (776.0 + s * 79.0)))) / 92_160.0;
    z + (g1 + (g2 + (g3 + g4 / nu) / nu) / nu) / nu
}

/// P(F > f) with `d1` and `d2` > 0 degrees of freedom; `d2` = ∞ gives χ²/d1.
///
/// # Formula
///
/// I_x(d2/2, d1/2), the regularised incomplete beta function at x = d2/(d2 + d1 f).
///
/// # Source
///
/// Abramowitz and Stegun, Handbook of Mathematical Functions, 26.6.2. From memory.
#[must_use]
pub fn f_upper(f: f64, d1: f64, d2: f64) -> f64 {
    if f.is_nan() {
        return f64::NAN;
    }
    if d2.is_infinite() && d2 > 0.0 {
        return chi2_upper(f * d1, d1);
    }
    let valid = d1 > 0.0 && d1.is_finite() && d2 > 0.0;
    if !valid {
        return f64::NAN;
    }
    if f <= 0.0 {
        return 1.0;
    }
    let share = 1.0 / (1.0 + f * (d1 / d2));
    beta_reg(0.5 * d2, 0.5 * d1, share)
}

/// P(B ≤ x) for a beta distribution on [0, 1].
///
/// # Formula
///
/// I_x(a, b), the regularised incomplete beta function.
///
/// # Shapes and units
///
/// a, b > 0; 0 below the interval, 1 above it. About 10 digits up to a, b = 1e4; not a number outside.
///
/// # Source
///
/// Abramowitz and Stegun, Handbook of Mathematical Functions, 26.5.1. From memory.
#[must_use]
pub fn beta_lower(x: f64, a: f64, b: f64) -> f64 {
    let valid = a > 0.0 && b > 0.0 && a.is_finite() && b.is_finite() && !x.is_nan();
    if valid { beta_reg(a, b, x.clamp(0.0, 1.0)) } else { f64::NAN }
}

/// P(χ² > x) with 0 < ν ≤ 1e7 degrees of freedom.
#[must_use]
pub fn chi2_upper(x: f64, nu: f64) -> f64 {
    chi2_tail(x, nu, |d, x| d.sf(x))
}

/// P(χ² ≤ x) with 0 < ν ≤ 1e7 degrees of freedom.
#[must_use]
pub fn chi2_lower(x: f64, nu: f64) -> f64 {
    chi2_tail(x, nu, |d, x| d.cdf(x))
}

fn chi2_tail(x: f64, nu: f64, tail: impl Fn(&ChiSquared, f64) -> f64) -> f64 {
    if x.is_nan() || nu.is_nan() || nu > CHI2_UP_TO {
        return f64::NAN;
    }
    // Half of the smallest number is zero, which the incomplete gamma function does not take; beyond 1e9
    // the upper tail is zero for every ν taken here.
    let inside = if x > 0.0 { x.clamp(f64::MIN_POSITIVE, 1e9) } else { 0.0 };
    ChiSquared::new(nu).map_or(f64::NAN, |d| tail(&d, inside))
}

/// The x with P(χ² ≤ x) = p, ν degrees of freedom.
///
/// # Formula
///
/// Root in ln x of the logarithm of the smaller tail, by Brent's method, started at Wilson and Hilferty's
/// approximation.
///
/// # Shapes and units
///
/// 0 < p < 1, 0 < ν ≤ 1e7. About 12 digits up to ν = 1e4, 9 above.
///
/// # Source
///
/// Wilson and Hilferty, Proc. Natl. Acad. Sci. 17 (1931) 684, for the start. From memory.
#[must_use]
pub fn chi2_quantile(p: f64, nu: f64) -> f64 {
    let valid = p > 0.0 && p < 1.0 && nu > 0.0 && nu <= CHI2_UP_TO;
    if !valid {
        return f64::NAN;
    }
    let share = 2.0 / (9.0 * nu);
    let root = 1.0 - share + normal_quantile(p) * libm::sqrt(share);
    let start = libm::log(nu) + 3.0 * libm::log(root.max(0.05));
    let found = if p <= 0.5 {
        falling_root(|l| libm::log(p) - libm::log(chi2_lower(libm::exp(l), nu)), start)
    } else {
        let q = libm::log1p(-p);
        falling_root(|l| libm::log(chi2_upper(libm::exp(l), nu)) - q, start)
    };
    found.map_or(f64::NAN, libm::exp)
}

/// Root of a falling function: the bracket grows from `start` by doubling steps.
fn falling_root(surplus: impl Fn(f64) -> f64, start: f64) -> Option<f64> {
    let mut step = 0.05;
    let (mut lo, mut hi) = (start, start);
    while surplus(lo) < 0.0 && step < 1e4 {
        (lo, hi, step) = (lo - step, lo, 2.0 * step);
    }
    while surplus(hi) > 0.0 && step < 1e4 {
        (lo, hi, step) = (hi, hi + step, 2.0 * step);
    }
    bracketed_root(surplus, lo, hi).ok()
}
