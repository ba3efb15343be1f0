//! The root of a curve near a known value, and extremes.

use crate::model::Curve;
use crate::numerics::roots::bracketed_root;

/// The x nearest to `start` at which the curve takes the value `y`, by damped Newton steps.
///
/// # Formula
/// x ← x − (f(x) − y)/f′(x), halved until |f(x) − y| shrinks.
///
/// # Shapes and units
/// `y` output unit, `start` and result input unit. `None` when the steps do not settle, e.g. because
/// the curve turns back before it reaches `y`.
///
/// # Source
/// Newton's method, common practice.
#[must_use]
pub fn root_near(curve: &Curve, y: f64, start: f64) -> Option<f64> {
    let mut x = start;
    let mut gap = curve.value(x) - y;
    for _ in 0..60 {
        if gap == 0.0 {
            return Some(x);
        }
        let full = gap / curve.derivative(x);
        if !full.is_finite() {
            return None;
        }
        let damped = (0..40).map(|halvings| full * libm::ldexp(1.0, -halvings)).find_map(|step| {
            let next_gap = curve.value(x - step) - y;
            (next_gap.abs() < gap.abs()).then_some((x - step, next_gap))
        });
        match damped {
            Some(next) => (x, gap) = next,
            // Rounding stops the steps: settled when the full step is no longer worth taking.
            None => return (full.abs() <= 1e-9 * x.abs().max((x - start).abs())).then_some(x),
        }
    }
    None
}

/// The root between two neighbouring places of a table, where `f` (value and nearly its slope) changes
/// sign: a few Newton steps from the straight line through the ends, else bracketing.
pub(super) fn refined(f: impl Fn(f64) -> (f64, f64), [low, high]: [(f64, f64); 2]) -> f64 {
    let (a, b) = (low.0, high.0);
    let mut x = a - low.1 * (b - a) / (high.1 - low.1);
    let mut before = f64::INFINITY;
    for _ in 0..12 {
        let (value, slope) = f(x);
        let step = value / slope;
        if !(a..=b).contains(&(x - step)) {
            break;
        }
        x -= step;
        let size = step.abs();
        // Settled: a step that changes nothing, or one that rounding keeps from shrinking.
        let stalled = size <= 1e-10 * (b - a) && size > 0.5 * before;
        if size <= 2.0 * f64::EPSILON * x.abs() || stalled {
            return x;
        }
        before = size;
    }
    // Rounding can undo a change of sign at an end that is itself the root.
    let nearer = if low.1.abs() < high.1.abs() { a } else { b };
    bracketed_root(|x| f(x).0, a, b).unwrap_or(nearer)
}

/// The place of the extreme of `f` between `a` and `b`; `sign` 1 for a maximum, −1 for a minimum.
pub(crate) fn extreme(f: impl Fn(f64) -> f64, a: f64, b: f64, sign: f64) -> f64 {
    const GOLDEN: f64 = 0.618_033_988_749_894_8;
    let (mut a, mut b) = (a, b);
    let (mut p, mut q) = (b - GOLDEN * (b - a), a + GOLDEN * (b - a));
    let (mut fp, mut fq) = (sign * f(p), sign * f(q));
    for _ in 0..60 {
        if fp >= fq {
            (b, q, fq) = (q, p, fp);
            p = b - GOLDEN * (b - a);
            fp = sign * f(p);
        } else {
            (a, p, fp) = (p, q, fq);
            q = a + GOLDEN * (b - a);
            fq = sign * f(q);
        }
    }
    0.5 * (a + b)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn newton_takes_the_near_branch_and_refuses_beyond_the_vertex() {
        let parabola = Curve::Polynomial(vec![0.0, 4.0, -1.0]);
        assert!((root_near(&parabola, 3.0, 0.5).unwrap() - 1.0).abs() < 1e-14);
        assert!((root_near(&parabola, 3.0, 3.5).unwrap() - 3.0).abs() < 1e-14);
        assert_eq!(root_near(&parabola, 4.5, 1.0), None);
        let log = Curve::Log([1.0, 2.0]);
        assert!((root_near(&log, 1.0 + 2.0 * 3f64.ln(), 0.1).unwrap() - 3.0).abs() < 1e-14);
    }
}
