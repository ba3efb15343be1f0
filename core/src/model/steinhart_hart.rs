//! Thermistors by Steinhart and Hart: 1/T = A + B ln R + C (ln R)³.
//!
//! T in kelvin, R in ohm (ln R is taken of the number of ohms), A, B and C in K⁻¹. For R > 0 as far as 1/T > 0.
//! The natural function is T(R): a fit minimises Σ(T − T(R))² in kelvin, and residuals are kelvin. What other families
//! call x and y is here R and T; the indication R(T) is the exact inverse, [`resistance`].
//! The fit is made about a middle value m of ln R: 1/T = α + β l + γ (l³ + 3 m l²), l = ln R − m.

use super::{guide::Guide, precise::nowhere, start};
use crate::{
    numerics::{Real, roots::bracketed_root},
    quantity::Unit,
};

/// Coefficient letters in printed order.
pub const NAMES: &[&str] = &["A", "B", "C"];

/// The printed formula.
pub const FORMULA: &str = "1/T = A + B ln R + C (ln R)³";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "Negative-temperature-coefficient thermistors over 50 K to 150 K, within some millikelvin. Four levels or \
           more, spread over the range of use; three give coefficients but no idea of their error.",
    wrong: "Temperatures in °C or resistances in kΩ in somebody else's coefficients give nonsense: here T is kelvin \
            and R is ohm. A negative C, or A far from 0.001, points to a bad point or crossed wires. Beyond the \
            standards it drifts off by degrees.",
};

/// Largest |ln R| that is looked at: beyond it a double overflows.
const WIDEST: f64 = 700.0;

/// Unit of a coefficient: K⁻¹ for all, whatever the units of the readings.
#[must_use]
pub fn unit(_index: usize, _y: &Unit, _x: &Unit) -> String {
    "K⁻¹".to_owned()
}

/// Whether the family can have a value at a resistance, in ohm: R > 0 and finite.
#[must_use]
pub fn domain(r: f64) -> bool {
    r > 0.0 && r.is_finite()
}

/// The temperature at resistance R.
///
/// # Formula
///
/// T = 1/(A + B ln R + C (ln R)³).
///
/// # Shapes and units
///
/// `b` = (A, B, C) in K⁻¹; R in ohm; T in kelvin.
///
/// # Errors
///
/// None; not a number unless R > 0 and 1/T > 0.
///
/// # Source
///
/// Steinhart and Hart, Deep-Sea Research 15 (1968) 497; from memory.
pub fn temperature<T: Real>(b: &[T], r: T) -> T {
    if !domain(r.to_f64()) {
        return nowhere(r);
    }
    let inverse = inverse_temperature(b, r.ln());
    if inverse.to_f64() > 0.0 { T::one() / inverse } else { nowhere(r) }
}

fn inverse_temperature<T: Real>(b: &[T], log: T) -> T {
    b[0] + log * (b[1] + b[2] * log.square())
}

/// B + 3 C (ln R)², the derivative of 1/T by ln R.
fn steepness<T: Real>(b: &[T], log: T) -> T {
    b[1] + T::of(3.0) * b[2] * log.square()
}

/// The resistance at a temperature: the exact inverse on the branch where T falls with R.
///
/// # Formula
///
/// The root ln R of A + B ln R + C (ln R)³ = 1/T, bracketed and then improved by two steps of Newton's method, which
/// also carry the derivatives by T and by every coefficient. No closed form: it cancels for C towards 0.
///
/// # Shapes and units
///
/// `b` = (A, B, C) in K⁻¹; T in kelvin; R in ohm. dR/dT = 1/(dT/dR).
///
/// # Errors
///
/// None; not a number unless T > 0 and a branch with B + 3 C (ln R)² > 0 reaches T.
///
/// # Source
///
/// As [`temperature`].
pub fn resistance<T: Real>(b: &[T], kelvin: T) -> T {
    let plain: Vec<f64> = b.iter().map(|v| v.to_f64()).collect();
    let Some(root) = log_resistance(&plain, kelvin.to_f64()) else { return nowhere(kelvin) };
    let mut log = T::of(root);
    for _ in 0..2 {
        log = log - (inverse_temperature(b, log) - T::one() / kelvin) / steepness(b, log);
    }
    log.exp()
}

/// The resistance in ohm at a temperature in kelvin, `None` where [`resistance`] has no value.
#[must_use]
pub fn solve(b: &[f64], kelvin: f64) -> Option<f64> {
    Some(resistance(b, kelvin)).filter(|r| domain(*r))
}

/// ln R at a temperature, inside the stretch of ln R on which 1/T rises.
fn log_resistance(b: &[f64], kelvin: f64) -> Option<f64> {
    if !(kelvin > 0.0 && kelvin.is_finite()) {
        return None;
    }
    let turn = libm::sqrt(-b[1] / (3.0 * b[2]));
    let (lo, hi) = if b[1] > 0.0 {
        // Without C, or with both positive, 1/T rises everywhere.
        let end = if b[2] < 0.0 { turn.min(WIDEST) } else { WIDEST };
        (-end, end)
    } else if b[2] > 0.0 {
        (turn, WIDEST)
    } else {
        return None;
    };
    let root = bracketed_root(|log| inverse_temperature(b, log) - 1.0 / kelvin, lo, hi).ok()?;
    // At the turn itself there is no slope to divide by.
    (steepness(b, root) > 0.0).then_some(root)
}

/// The resistances in ohm, ascending, at which T(R) turns round: where B + 3 C (ln R)² = 0.
#[must_use]
pub fn turning_points(b: &[f64]) -> Vec<f64> {
    let square = -b[1] / (3.0 * b[2]);
    if !(square > 0.0 && square.is_finite()) {
        return Vec::new();
    }
    let log = libm::sqrt(square);
    [libm::exp(-log), libm::exp(log)].into_iter().filter(|r| domain(*r)).collect()
}

/// Whether T falls all the way from one resistance to the other, in ohm: B + 3 C (ln R)² > 0 throughout.
#[must_use]
pub fn is_monotone(b: &[f64], r_lo: f64, r_hi: f64) -> bool {
    let (lo, hi) = (libm::log(r_lo), libm::log(r_hi));
    // (ln R)² is smallest at ln R = 0, if that lies between.
    [lo, hi, 0.0_f64.clamp(lo.min(hi), lo.max(hi))].iter().all(|log| steepness(b, *log) > 0.0)
}

/// Limits of T towards R = 0 and towards large R: none, and zero.
#[must_use]
pub fn asymptotes(_b: &[f64]) -> (Option<f64>, Option<f64>) {
    (None, Some(0.0))
}

/// (α, β, γ) about ln R = m from (A, B, C).
pub fn to_internal<T: Real>(b: &[T], m: T) -> Vec<T> {
    let beta = b[1] + T::of(3.0) * b[2] * m.square();
    vec![b[0] + beta * m - T::of(2.0) * b[2] * m * m.square(), beta, b[2]]
}

/// (A, B, C) from (α, β, γ) about ln R = m.
pub fn from_internal<T: Real>(p: &[T], m: T) -> Vec<T> {
    let twice = T::of(2.0) * p[2] * m * m.square();
    vec![p[0] - p[1] * m + twice, p[1] - T::of(3.0) * p[2] * m.square(), p[2]]
}

/// The middle of ln R that the fit is made about; `None` without points or with one outside the domain.
#[must_use]
pub fn centre(points: &[(f64, f64)]) -> Option<f64> {
    Some(start::Levels::of(points, domain, 1)?.moved(libm::log).middle().0)
}

/// Start values (A, B, C) from points (R in ohm, T in kelvin), `None` with fewer than three levels.
///
/// 1/T regressed on the centred columns with weights T⁴: errors of 1/T are errors of T divided by T².
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = start::Levels::of(points, domain, 3)?.moved(libm::log);
    let m = levels.middle().0;
    let cubic = |log: f64| (log - m) * (log - m) * (log + 2.0 * m);
    let (p, _) = levels.inverted()?.fit(&[&|_| 1.0, &|log| log - m, &cubic])?;
    Some(from_internal(&p, m))
}
