//! The quantification limit: from where on a value is known to a stated relative uncertainty.

use crate::fit::{Fit, Variances};
use crate::numerics::roots::bracketed_root;

/// Where u(x)/x stays at or below the target.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Quantification {
    /// From here to the top of the range, input unit.
    From(f64),
    /// Already at the lowest standard; the root below it is extrapolated, input unit.
    AtLowestStandard {
        /// Lowest standard above zero, input unit.
        lowest: f64,
        /// Where the target would be met by the curve continued, input unit; `None` when even the
        /// smallest value scanned meets it.
        extrapolated: Option<f64>,
    },
    /// From here, but only up to a second crossing inside the range.
    UpTo {
        /// Start, input unit.
        from: f64,
        /// End, input unit.
        until: f64,
    },
    /// Nowhere in the range.
    NotReached {
        /// The smallest u(x)/x, dimensionless.
        smallest: f64,
        /// Where, input unit.
        at: f64,
    },
}

/// The quantification limit of a fit; `None` without standards above zero or without a residual SD.
///
/// # Formula
/// u(x) = √(σ²v(x)/k + Var f̂(x) + v_std(x))/|f̂′(x)|; the smallest x in (0, x_max] with u/x ≤ target from there
/// to the next crossing: 512 places even in ln x over three decades below the lowest standard up to
/// x_max, crossings refined.
///
/// # Shapes and units
/// `target`: relative standard uncertainty, e.g. 0.1. Only for quantities with a true zero.
///
/// # Source
/// IUPAC (Currie 1995), Pure Appl. Chem. 67, 1699 (L_Q, relative SD of 10 %); from memory.
#[must_use]
pub fn quantification(fit: &Fit, k: usize, target: f64) -> Option<Quantification> {
    const PLACES: i32 = 512;
    fit.scatter_sd()?;
    let positive = || fit.points.iter().map(|p| p.x).filter(|x| *x > 0.0);
    let lowest = positive().reduce(f64::min)?;
    let top = positive().fold(lowest, f64::max);
    let relative = |x: f64| {
        let variance = fit.variances(x, k.max(1)).map_or(f64::NAN, Variances::total);
        let ratio = libm::sqrt(variance) / (fit.curve.derivative(x).abs() * x);
        // A flat place tells nothing: infinitely uncertain.
        if ratio.is_nan() { f64::INFINITY } else { ratio }
    };
    let (start, end) = (libm::log(lowest * 1e-3), libm::log(top));
    let scanned: Vec<(f64, f64)> = (0..PLACES)
        .map(|i| libm::exp(start + (end - start) * f64::from(i) / f64::from(PLACES - 1)).min(top))
        .map(|x| (x, relative(x)))
        .collect();
    let excess = |x: f64| (relative(x) - target).min(1e300);
    let crossing = |i: usize| bracketed_root(excess, scanned[i - 1].0, scanned[i].0).ok();
    let Some(first) = scanned.iter().position(|(_, ratio)| *ratio <= target) else {
        let best = scanned.iter().copied().min_by(|a, b| a.1.total_cmp(&b.1))?;
        return Some(Quantification::NotReached { smallest: best.1, at: best.0 });
    };
    let from = (first > 0).then(|| crossing(first)).flatten();
    let end = (first..scanned.len()).find(|&i| scanned[i].1 > target).and_then(crossing);
    Some(match (from, end) {
        (from, Some(until)) => Quantification::UpTo { from: from.unwrap_or(scanned[0].0), until },
        (Some(from), None) if from > lowest => Quantification::From(from),
        (extrapolated, None) => Quantification::AtLowestStandard { lowest, extrapolated },
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fit::{self, Point, Weights};
    use crate::model::Family;

    /// Seven points 1…10 on f with residual SD exactly `s`.
    fn with_sd(degree: u8, f: impl Fn(f64) -> f64, s: f64) -> Fit {
        let wobble = [0.3, -1.1, 0.9, 0.4, -0.8, 0.7, -0.4];
        let family = Family::Polynomial(degree);
        let at = |i: usize| 1.0 + 1.5 * i as f64;
        let fit_to = |y: &dyn Fn(usize) -> f64| {
            let points: Vec<Point> = (0..7).map(|i| Point { x: at(i), y: y(i) }).collect();
            fit::fit(&family, &points, Weights::Equal).unwrap()
        };
        let pattern = fit_to(&|i| wobble[i]);
        let factor = s / pattern.residual_sd.unwrap();
        fit_to(&|i| f(at(i)) + factor * pattern.residuals[i])
    }

    /// 2x − 0.09x² with SD 0.1, 0.3, 0.6 at a target of 10 %: crossings 0.7459; 2.1467 and 8.9458;
    /// none (0.1247 at best). Own calculation with another program.
    #[test]
    fn a_curve_that_flattens() {
        let of = |s: f64| quantification(&with_sd(2, |x| 2.0 * x - 0.09 * x * x, s), 1, 0.1).unwrap();
        let Quantification::AtLowestStandard { lowest, extrapolated: Some(x) } = of(0.1) else {
            panic!("{:?}", of(0.1));
        };
        assert!(lowest == 1.0 && (x - 0.7459).abs() < 5e-5, "{x}");
        let Quantification::UpTo { from, until } = of(0.3) else {
            panic!("{:?}", of(0.3));
        };
        assert!((from - 2.1467).abs() < 5e-5 && (until - 8.9458).abs() < 5e-5, "{from} {until}");
        assert!(matches!(of(0.6), Quantification::NotReached { smallest, .. } if (smallest - 0.1247).abs() < 5e-5));
    }

    #[test]
    fn a_line_has_one_crossing_that_more_readings_lower() {
        let fit = with_sd(1, |x| 2.0 * x, 0.5);
        let Quantification::From(one) = quantification(&fit, 1, 0.1).unwrap() else {
            panic!("a crossing inside the range is due");
        };
        let u = |x: f64, k: f64| ((0.25 / k + fit.mean_variance(x)).sqrt() / 2.0) / x;
        assert!((u(one, 1.0) - 0.1).abs() < 1e-9);
        let Quantification::From(four) = quantification(&fit, 4, 0.1).unwrap() else {
            panic!("a crossing inside the range is due");
        };
        assert!(four < one);
    }
}
