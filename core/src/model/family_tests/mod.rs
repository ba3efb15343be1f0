//! All function families against values computed elsewhere, rules derived by hand, their own inverses, and fits.

mod by_hand;
mod inverses;
mod limits;
mod published;
mod starts;

use super::{
    beta, callendar_van_dusen, exponential, hyperbola, line_zero, logistic4, logistic5, power, rational, steinhart_hart,
};
use crate::numerics::{Dual, streams::Stream};

/// A function over dual numbers, of coefficients and place.
type Function = fn(&[Dual<f64>], Dual<f64>) -> Dual<f64>;

/// What the tests of all families have in common.
struct Tested {
    name: &'static str,
    function: Function,
    /// f⁻¹, where `function` has one.
    solve: fn(&[f64], f64) -> Option<f64>,
    domain: fn(f64) -> bool,
    names: &'static [&'static str],
}

macro_rules! tested {
    ($family:ident, $function:ident) => {
        Tested {
            name: stringify!($family),
            function: $family::$function,
            solve: $family::solve,
            domain: $family::domain,
            names: $family::NAMES,
        }
    };
}

/// The thermistors as T(R), their natural function.
const FAMILIES: [Tested; 10] = [
    tested!(line_zero, value),
    tested!(power, value),
    tested!(exponential, value),
    tested!(hyperbola, value),
    tested!(rational, value),
    tested!(logistic4, value),
    tested!(logistic5, value),
    tested!(steinhart_hart, temperature),
    tested!(beta, temperature),
    tested!(callendar_van_dusen, value),
];

/// Value and [slope by x, slopes by each coefficient].
fn slopes(function: Function, b: &[f64], x: f64) -> (f64, Vec<f64>) {
    let constants: Vec<Dual<f64>> = b.iter().map(|v| Dual::constant(*v)).collect();
    let by_x = function(&constants, Dual::variable(x));
    let by = |k: usize| {
        let mut b = constants.clone();
        b[k] = Dual::variable(b[k].value);
        function(&b, Dual::constant(x)).slope
    };
    (by_x.value, std::iter::once(by_x.slope).chain((0..b.len()).map(by)).collect())
}

/// How far a value can be off when every number in it is off by one part: |y| + |x f′| + Σ|b ∂f/∂b|.
fn reach(b: &[f64], x: f64, value: f64, slopes: &[f64]) -> f64 {
    let terms = std::iter::once(&x).chain(b).zip(slopes).map(|(v, s)| (v * s).abs());
    value.abs() + terms.sum::<f64>()
}

fn between(stream: &mut Stream, lo: f64, hi: f64) -> f64 {
    lo + (hi - lo) * stream.uniform()
}

/// 10 to a random power.
fn size(stream: &mut Stream, lo: f64, hi: f64) -> f64 {
    libm::pow(10.0, between(stream, lo, hi))
}

fn either(stream: &mut Stream, value: f64) -> f64 {
    if stream.below(2) == 0 { value } else { -value }
}

/// Random coefficients and place of a family, at odd scales of x and y.
fn draw(name: &str, s: &mut Stream) -> (Vec<f64>, f64) {
    let (x, y) = (size(s, -12.0, 12.0), size(s, -12.0, 12.0));
    match name {
        "line_zero" => (vec![either(s, y)], either(s, x)),
        "power" => {
            let exponent = between(s, 0.1, 3.0);
            (vec![either(s, y), either(s, exponent)], x)
        }
        "exponential" => {
            let (a, b) = (y * size(s, -1.0, 1.0), between(s, 0.01, 8.0) / x);
            (vec![either(s, y), either(s, a), either(s, b)], x * between(s, -1.0, 1.0))
        }
        "hyperbola" => {
            let (a, b) = (y * x * size(s, -1.0, 1.0), x * size(s, -2.0, 1.0));
            (vec![either(s, y), either(s, a), b], x * s.uniform())
        }
        "rational" => (vec![-y * size(s, -1.0, 1.0), y / x, size(s, -2.0, 1.0) / x], x * s.uniform()),
        "logistic4" | "logistic5" => {
            let (d, steep, c) = (y * size(s, -1.0, 1.0), between(s, 0.3, 4.0), x * size(s, -3.0, 3.0));
            let mut b = vec![either(s, y), steep, c, either(s, d)];
            if name == "logistic5" {
                b.push(size(s, -1.0, 1.0));
            }
            (b, x)
        }
        "steinhart_hart" => {
            let b = vec![size(s, -3.2, -2.8), between(s, 2e-4, 3e-4), size(s, -7.5, -6.7)];
            (b, size(s, 1.0, 6.0))
        }
        "beta" => (vec![between(s, 2500.0, 4500.0), size(s, 2.0, 6.0)], size(s, 2.0, 6.0)),
        _ => {
            let b = vec![
                size(s, 1.0, 3.2),
                between(s, 3.8e-3, 4e-3),
                between(s, -6e-7, -5.5e-7),
                between(s, -5e-12, -4e-12),
            ];
            let lo = if s.below(2) == 0 { 0.0 } else { -200.0 };
            (b, between(s, lo, if lo < 0.0 { 0.0 } else { 850.0 }))
        }
    }
}
