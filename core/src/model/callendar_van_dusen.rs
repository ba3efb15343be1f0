//! Platinum resistance thermometers: R = R₀[1 + A t + B t² + C (t − 100) t³], the last term below 0 °C only.
//!
//! t in °C (ITS-90), from −200 to 850; R₀ the resistance at 0 °C in the output unit, A in °C⁻¹, B in °C⁻²,
//! C in °C⁻⁴. C shows only in the cold: without two levels below −50 °C it is fixed at the value of the standard,
//! and a curve then has three coefficients instead of four.

use super::{guide::Guide, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters in printed order; a curve with C fixed has the first three.
pub const NAMES: &[&str] = &["R0", "A", "B", "C"];

/// The printed formula.
pub const FORMULA: &str = "R = R₀[1 + A t + B t² + C (t − 100) t³ (t < 0)]";

/// C where the data cannot tell it, °C⁻⁴ (IEC 60751, the reference function).
pub const FIXED_C: f64 = -4.183e-12;

/// Lowest and highest temperature of the reference function, °C (IEC 60751).
pub const RANGE: (f64, f64) = (-200.0, 850.0);

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "Industrial platinum thermometers, Pt100 and the like, from −200 °C to 850 °C. Transmitters accept its \
           coefficients as they are. Calibrate at 0 °C and at two or more levels over the range of use.",
    wrong: "Over a short range A and B trade against each other and mean nothing beyond it. Below 0 °C the fourth \
            coefficient is taken from the standard unless two levels lie below −50 °C. Lead resistance and \
            self-heating look like a change of R₀.",
};

/// Unit of a coefficient.
#[must_use]
pub fn unit(index: usize, y: &Unit, _x: &Unit) -> String {
    match index {
        0 => y.to_string(),
        1 => "°C⁻¹".to_owned(),
        2 => "°C⁻²".to_owned(),
        _ => "°C⁻⁴".to_owned(),
    }
}

/// Whether the family has a value at a temperature: −200 °C to 850 °C.
#[must_use]
pub fn domain(t: f64) -> bool {
    (RANGE.0..=RANGE.1).contains(&t)
}

/// (t − 100) t³ below zero, otherwise nothing.
fn cold_term<T: Real>(t: T) -> T {
    if t.to_f64() < 0.0 { (t - T::of(100.0)) * t * t.square() } else { T::zero() }
}

fn coefficient_c<T: Real>(b: &[T]) -> T {
    b.get(3).copied().unwrap_or_else(|| T::of(FIXED_C))
}

/// The resistance at t.
///
/// # Formula
///
/// R = R₀[1 + A t + B t² + C (t − 100) t³], the last term below 0 °C only.
///
/// # Shapes and units
///
/// `b` = (R₀, A, B) with C fixed, or (R₀, A, B, C): output unit, °C⁻¹, °C⁻², °C⁻⁴; t in °C; R in the output unit.
///
/// # Errors
///
/// None; not a number outside −200 °C to 850 °C.
///
/// # Source
///
/// IEC 60751, the reference function; seen in print.
pub fn value<T: Real>(b: &[T], t: T) -> T {
    if !domain(t.to_f64()) {
        return nowhere(t);
    }
    b[0] * (T::one() + t * (b[1] + b[2] * t) + coefficient_c(b) * cold_term(t))
}

/// Whether the temperatures, in °C, can tell C: two distinct ones or more below −50, and four in all for as many
/// coefficients.
#[must_use]
pub fn tells_c(temperatures: &[f64]) -> bool {
    let mut distinct = temperatures.to_vec();
    distinct.sort_by(f64::total_cmp);
    distinct.dedup();
    distinct.len() >= 4 && distinct[1] < -50.0
}

/// The columns of the linear fit at t in °C: of (R₀, R₀A, R₀B), or of (R₀, R₀A, R₀B, R₀C) with `with_c`.
///
/// With C fixed its term belongs to R₀. Outside the domain not a number.
#[must_use]
pub fn regressors(t: f64, with_c: bool) -> Vec<f64> {
    let t = if domain(t) { t } else { f64::NAN };
    let cold = cold_term(t);
    if with_c { vec![1.0, t, t * t, cold] } else { vec![1.0 + FIXED_C * cold, t, t * t] }
}

/// (R₀, A, B[, C]) from the coefficients (R₀, R₀A, R₀B[, R₀C]) of the linear fit.
pub fn from_linear<T: Real>(p: &[T]) -> Vec<T> {
    p.iter().enumerate().map(|(i, v)| if i == 0 { *v } else { *v / p[0] }).collect()
}

/// The coefficients (R₀, R₀A, R₀B[, R₀C]) of the linear fit from (R₀, A, B[, C]).
pub fn to_linear<T: Real>(b: &[T]) -> Vec<T> {
    b.iter().enumerate().map(|(i, v)| if i == 0 { *v } else { *v * b[0] }).collect()
}

/// Coefficients from the data alone by linear least squares, points (t in °C, R): three, or four where the levels
/// can tell C. `None` with fewer than three levels, or a level outside the domain.
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = start::Levels::of(points, domain, 3)?;
    let with_c = tells_c(&levels.x);
    let column = |k: usize| move |t: f64| regressors(t, with_c)[k];
    let all: [&dyn Fn(f64) -> f64; 4] = [&column(0), &column(1), &column(2), &column(3)];
    let (p, _) = levels.fit(if with_c { &all } else { &all[..3] })?;
    let found = from_linear(&p);
    found.iter().all(|b| b.is_finite()).then_some(found)
}

/// The t in °C with R(t) = r; `None` outside −200 °C to 850 °C.
///
/// From 0 °C up t = 2(W − 1)/(A + √(A² + 4B(W − 1))), W = r/R₀, which does not cancel near 0 °C as the usual form does;
/// below, Newton's method from that value.
#[must_use]
pub fn solve(b: &[f64], r: f64) -> Option<f64> {
    let excess = (r - b[0]) / b[0];
    let root = libm::sqrt(b[1] * b[1] + 4.0 * b[2] * excess);
    let warm = 2.0 * excess / (b[1] + libm::copysign(root, b[1]));
    let start = if warm.is_finite() { warm } else { excess / b[1] };
    let t = if start < 0.0 { cold(b, excess, start)? } else { warm };
    // The ends themselves, missed by the last bits.
    let nearest = t.clamp(RANGE.0, RANGE.1);
    (libm::fabs(t - nearest) <= 1e-13 * libm::fabs(nearest)).then_some(nearest)
}

/// Newton's method for A t + B t² + C (t − 100) t³ = W − 1 below zero.
fn cold(b: &[f64], excess: f64, start: f64) -> Option<f64> {
    let c = coefficient_c(b);
    let mut t = start;
    let mut last = f64::INFINITY;
    for _ in 0..50 {
        let misfit = t * (b[1] + t * (b[2] + c * (t - 100.0) * t)) - excess;
        let slope = b[1] + t * (2.0 * b[2] + c * t * (4.0 * t - 300.0));
        let step = misfit / slope;
        // Done when the steps are as small as the last bits, or no longer shrink there.
        let small = 1e-12 * libm::fabs(t);
        if step == 0.0 || (libm::fabs(step) <= small && libm::fabs(step) >= last) {
            return Some(t);
        }
        t -= step;
        last = libm::fabs(step);
        if !(t.is_finite() && t >= 2.0 * RANGE.0) {
            return None;
        }
    }
    (last <= 1e-12 * libm::fabs(t)).then_some(t)
}

/// Limits of y beyond the ends: the domain ends at finite values, so there are none.
#[must_use]
pub fn asymptotes(_b: &[f64]) -> (Option<f64>, Option<f64>) {
    (None, None)
}
