//! The exact distribution of a ratio of quadratic forms in normal residuals.
//!
//! Durbin and Watson's d, a lag-one correlation, any eᵀAe/eᵀe: whatever the coefficients and the SD were,
//! the residuals point in a uniformly random direction of the residual space, so the ratio is
//! Σλᵢuᵢ² with u uniform on the unit sphere and λ the eigenvalues of A seen in that space.

use crate::numerics::roots::bracketed_root;
use crate::numerics::scale::as_f64;
use nalgebra::DMatrix;

/// Both tails of a distribution at one place; each computed so that a small one keeps its digits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tails {
    /// P(D ≤ d).
    pub lower: f64,
    /// P(D ≥ d).
    pub upper: f64,
}

/// The eigenvalues of a symmetric matrix as the residuals see it.
///
/// # Formula
///
/// The N − p eigenvalues of M A M that belong to the residual space, M = I − QQᵀ. A is shifted by more
/// than its norm first, so that the p zeros of M itself are the ones left behind.
///
/// # Shapes and units
///
/// `times`: v ↦ Av for vectors of length `n`, A symmetric; `columns`: p orthonormal columns of length `n`.
/// Returns n − p eigenvalues, ascending, in the unit of A. Cost n³: meant for n ≤ 500.
///
/// # Errors
///
/// Empty when p ≥ n.
///
/// # Source
///
/// Durbin and Watson, Biometrika 37 (1950) 409, section 2. From memory.
#[must_use]
pub fn residual_eigenvalues(n: usize, times: impl Fn(&[f64]) -> Vec<f64>, columns: &[Vec<f64>]) -> Vec<f64> {
    let project = |v: &mut [f64]| {
        for q in columns {
            let share: f64 = q.iter().zip(v.iter()).map(|(q, v)| q * v).sum();
            v.iter_mut().zip(q).for_each(|(v, q)| *v -= share * q);
        }
    };
    let mut matrix = DMatrix::<f64>::zeros(n, n);
    let mut norm = 0.0_f64;
    let mut unit = vec![0.0; n];
    for j in 0..n {
        unit.fill(0.0);
        unit[j] = 1.0;
        norm = norm.max(times(&unit).iter().map(|a| a.abs()).sum());
        project(&mut unit);
        let mut column = times(&unit);
        project(&mut column);
        matrix.column_mut(j).copy_from_slice(&column);
    }
    let shift = 2.0 * norm;
    for j in 0..n {
        unit.fill(0.0);
        unit[j] = shift;
        project(&mut unit);
        for (i, m) in unit.iter().enumerate() {
            matrix[(i, j)] += m;
        }
    }
    // Rounding leaves it a little lopsided.
    let symmetric = 0.5 * (&matrix + matrix.transpose());
    let mut values: Vec<f64> = symmetric.symmetric_eigenvalues().iter().map(|l| l - shift).collect();
    values.sort_by(f64::total_cmp);
    values.drain(..columns.len().min(n));
    values
}

/// P(D ≤ d) and P(D ≥ d) of D = Σλᵢzᵢ²/Σzᵢ², z standard normal.
///
/// # Formula
///
/// With aᵢ = λᵢ − d and M(t) = Π(1 − 2aᵢt)^−½ the moment generating function of Q = Σaᵢzᵢ²:
/// P(Q < 0) = −(1/2πi)∫M(t)/t dt along Re t = c < 0. Imhof's integral is the same one with c → 0; here c
/// is the saddle point, where the integrand does not oscillate and a tail of 1e-30 keeps its digits.
/// Trapezoidal rule in v, t = c + i·r·sinh v, halved until two sums agree.
///
/// # Shapes and units
///
/// λ and d in one unit; any number of eigenvalues, also one or two. About 12 digits of the smaller tail.
///
/// # Errors
///
/// Not a number for anything not finite and without eigenvalues. Where D cannot vary and equals d, both
/// tails are 1.
///
/// # Source
///
/// J. P. Imhof, Biometrika 48 (1961) 419; R. W. Farebrother, Appl. Statist. 29 (1980) 224 for the ratio;
/// S. O. Rice, SIAM J. Sci. Stat. Comput. 1 (1980) 438 for the path. From memory.
#[must_use]
pub fn ratio_tails(eigenvalues: &[f64], d: f64) -> Tails {
    if eigenvalues.is_empty() || !d.is_finite() || eigenvalues.iter().any(|l| !l.is_finite()) {
        return Tails { lower: f64::NAN, upper: f64::NAN };
    }
    let apart: Vec<f64> = eigenvalues.iter().map(|l| l - d).collect();
    let largest = apart.iter().fold(0.0, |top: f64, a| top.max(a.abs()));
    if largest == 0.0 {
        return Tails { lower: 1.0, upper: 1.0 };
    }
    let scaled: Vec<f64> = apart.iter().map(|a| a / largest).collect();
    if scaled.iter().all(|a| *a >= 0.0) {
        return Tails { lower: 0.0, upper: 1.0 };
    }
    if scaled.iter().all(|a| *a <= 0.0) {
        return Tails { lower: 1.0, upper: 0.0 };
    }
    if scaled.iter().sum::<f64>() >= 0.0 {
        let lower = negative(&scaled);
        Tails { lower, upper: 1.0 - lower }
    } else {
        let mirrored: Vec<f64> = scaled.iter().map(|a| -a).collect();
        let upper = negative(&mirrored);
        Tails { lower: 1.0 - upper, upper }
    }
}

/// Two sums of the trapezoidal rule agree to this: the finer one is then good to about its square.
const AGREE: f64 = 1e-11;
/// What the integrand may still hold where it is left.
const LEFT_OVER: f64 = 1e-17;
/// Never reached: even two eigenvalues sixteen orders apart are spent at v = 120. Keeps squares finite.
const FURTHEST: f64 = 300.0;

/// P(Σaᵢzᵢ² < 0) for a of both signs, the largest |a| being 1.
fn negative(a: &[f64]) -> f64 {
    let smallest = a.iter().copied().fold(0.0, f64::min);
    // The generating function exists between here and some positive place.
    let wall = 0.5 / smallest;
    let c = saddle(a, wall);
    let rate: Vec<f64> = a.iter().map(|a| 2.0 * a / (1.0 - 2.0 * a * c)).collect();
    let log_height: f64 = a.iter().map(|a| -0.5 * libm::log1p(-2.0 * a * c)).sum();
    let path = Path { c, reach: (c - wall).min(-c), rate };
    let mut step = 0.5;
    let mut sum = path.sum(step);
    for _ in 0..12 {
        step *= 0.5;
        let finer = path.sum(step);
        let settled = (finer - sum).abs() <= AGREE * finer.abs();
        sum = finer;
        if settled {
            break;
        }
    }
    (sum * libm::exp(log_height) / std::f64::consts::PI).clamp(0.0, 1.0)
}

/// Where ln|M(t)/t| is least between the wall and zero: it is convex there.
fn saddle(a: &[f64], wall: f64) -> f64 {
    // In w = t/wall, from 0 to 1; rising in t becomes falling in w.
    let slope = |w: f64| {
        let t = wall * w;
        let sum: f64 = a.iter().map(|a| a / (1.0 - 2.0 * a * t)).sum();
        sum * t - 1.0
    };
    // At w = 0 the product is −1, at the wall it is +∞.
    let end = 1.0 - f64::EPSILON;
    wall * bracketed_root(slope, 0.0, end).unwrap_or(0.5).clamp(f64::MIN_POSITIVE, end)
}

/// The vertical path through the saddle point.
struct Path {
    /// The saddle point, negative.
    c: f64,
    /// Distance to the nearest singularity.
    reach: f64,
    /// 2a/(1 − 2ac).
    rate: Vec<f64>,
}

impl Path {
    /// The trapezoidal rule from v = 0 until nothing is left, without the height at the saddle point.
    fn sum(&self, step: f64) -> f64 {
        let mut total = 0.5 * self.integrand(0.0).0;
        let mut count = 0_u32;
        loop {
            count += 1;
            let v = f64::from(count) * step;
            let (value, envelope) = self.integrand(v);
            total += value;
            if envelope <= LEFT_OVER * total.abs() || v > FURTHEST {
                return total * step;
            }
        }
    }

    /// The integrand at v, and what it is at most.
    fn integrand(&self, v: f64) -> (f64, f64) {
        let y = self.reach * libm::sinh(v);
        let (mut log_size, mut turn) = (0.0, 0.0);
        for rate in &self.rate {
            let along = rate * y;
            log_size -= 0.25 * libm::log1p(along * along);
            turn += 0.5 * libm::atan(along);
        }
        let distance = libm::hypot(self.c, y);
        let envelope = libm::exp(log_size) * self.reach * libm::cosh(v) / distance;
        let direction = (-self.c * libm::cos(turn) - y * libm::sin(turn)) / distance;
        (envelope * direction, envelope)
    }
}

/// Mean and variance of D = eᵀAe/eᵀe from two traces.
///
/// # Formula
///
/// mean = tr(MA)/ν; variance = 2[ν·tr((MA)²) − tr(MA)²]/(ν²(ν + 2)).
///
/// # Shapes and units
///
/// `trace` = tr(MA), `trace2` = tr((MA)²); ν ≥ 1. Unit of A and its square.
///
/// # Source
///
/// Durbin and Watson, Biometrika 37 (1950) 409, section 4. From memory.
#[must_use]
pub fn ratio_moments(trace: f64, trace2: f64, nu: usize) -> (f64, f64) {
    let nu = as_f64(nu);
    (trace / nu, 2.0 * (nu * trace2 - trace * trace) / (nu * nu * (nu + 2.0)))
}
