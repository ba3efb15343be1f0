//! Thermistors by two coefficients: R = R₀ exp[β(1/T − 1/T₀)], T₀ = 298.15 K.
//!
//! β in kelvin, R₀ the resistance at T₀ = 298.15 K (25 °C) in ohm. T in kelvin, R > 0 in ohm. As with
//! [`super::steinhart_hart`] the natural function is T(R), and a fit minimises Σ(T − T(R))² in kelvin: what other
//! families call x and y is here R and T. The fit is made in (β, ln R₀).

use super::{guide::Guide, precise::nowhere, start};
use crate::{numerics::Real, quantity::Unit};

/// Coefficient letters.
pub const NAMES: &[&str] = &["β", "R0"];

/// The printed formula.
pub const FORMULA: &str = "R = R₀ exp[β(1/T − 1/T₀)], T₀ = 298.15 K";

/// When to use it, what goes wrong.
pub const GUIDE: Guide = Guide {
    when: "A thermistor over a narrow range, up to about 30 K, or when only two temperatures are at hand and the \
           device accepts no more than β and the resistance at 25 °C.",
    wrong: "β itself changes with temperature: over 50 K the curve is off by some tenths of a kelvin, most in the \
            middle and beyond the ends. A β from a data sheet holds for the pair of temperatures printed with it, \
            such as 25/85.",
};

/// Unit of a coefficient: K and Ω, whatever the units of the readings.
#[must_use]
pub fn unit(index: usize, _y: &Unit, _x: &Unit) -> String {
    if index == 0 { "K" } else { "Ω" }.to_owned()
}

/// Whether the family can have a value at a resistance, in ohm: R > 0 and finite.
#[must_use]
pub fn domain(r: f64) -> bool {
    r > 0.0 && r.is_finite()
}

/// 1/T₀ in K⁻¹, T₀ = 298.15 K.
fn inverse_reference<T: Real>() -> T {
    T::of(100.0) / T::of(29_815.0)
}

/// The temperature at resistance R.
///
/// # Formula
///
/// 1/T = 1/T₀ + ln(R/R₀)/β.
///
/// # Shapes and units
///
/// `b` = (β, R₀): kelvin, ohm; R in ohm; T in kelvin.
///
/// # Errors
///
/// None; not a number unless R > 0, R₀ > 0 and 1/T > 0.
///
/// # Source
///
/// Common practice.
pub fn temperature<T: Real>(b: &[T], r: T) -> T {
    if !(domain(r.to_f64()) && domain(b[1].to_f64())) {
        return nowhere(r);
    }
    let inverse = inverse_reference::<T>() + (r / b[1]).ln() / b[0];
    if inverse.to_f64() > 0.0 { T::one() / inverse } else { nowhere(r) }
}

/// The resistance at a temperature.
///
/// # Formula
///
/// R = R₀ exp[β(1/T − 1/T₀)].
///
/// # Shapes and units
///
/// `b` = (β, R₀): kelvin, ohm; T > 0 in kelvin; R in ohm.
///
/// # Errors
///
/// None; not a number unless T > 0.
///
/// # Source
///
/// Common practice.
pub fn resistance<T: Real>(b: &[T], kelvin: T) -> T {
    if kelvin.to_f64() > 0.0 && kelvin.is_finite() {
        b[1] * (b[0] * (T::one() / kelvin - inverse_reference::<T>())).exp()
    } else {
        nowhere(kelvin)
    }
}

/// The resistance in ohm at a temperature in kelvin; `None` unless T > 0 and β ≠ 0.
#[must_use]
pub fn solve(b: &[f64], kelvin: f64) -> Option<f64> {
    Some(resistance(b, kelvin)).filter(|r| domain(*r) && b[0] != 0.0)
}

/// Limits of T towards R = 0 and towards large R: zero on the side where 1/T grows.
#[must_use]
pub fn asymptotes(b: &[f64]) -> (Option<f64>, Option<f64>) {
    if b[0] > 0.0 { (None, Some(0.0)) } else { (Some(0.0), None) }
}

/// (β, ln R₀) from (β, R₀).
pub fn to_internal<T: Real>(b: &[T]) -> Vec<T> {
    vec![b[0], b[1].ln()]
}

/// (β, R₀) from (β, ln R₀).
pub fn from_internal<T: Real>(p: &[T]) -> Vec<T> {
    vec![p[0], p[1].exp()]
}

/// Start values (β, R₀) from points (R in ohm, T in kelvin), `None` with fewer than two levels.
///
/// 1/T regressed on ln R, with weights T⁴: errors of 1/T are errors of T divided by T².
#[must_use]
pub fn self_start(points: &[(f64, f64)]) -> Option<Vec<f64>> {
    let levels = start::Levels::of(points, domain, 2)?.moved(libm::log);
    let m = levels.middle().0;
    let (p, _) = levels.inverted()?.fit(&[&|_| 1.0, &|log| log - m])?;
    let beta = 1.0 / p[1];
    let found = vec![beta, libm::exp(m + beta * (inverse_reference::<f64>() - p[0]))];
    found.iter().all(|b| b.is_finite() && *b != 0.0).then_some(found)
}
