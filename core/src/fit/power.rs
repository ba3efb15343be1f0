//! Weights that follow the signal: Var = s²·f̂(x)^θ, θ estimated together with the curve.

use super::estimate::{Request, weighted};
use super::variance::{Prepared, VarianceModel};
use super::{Fit, FitError, Scatter};
use crate::numerics::scale::as_f64;

/// The largest power: SD proportional to the square of the signal.
const LARGEST: f64 = 4.0;

/// Rounds of refitting; the power settles in a few.
const ROUNDS: usize = 30;

/// Below this share of the largest signal the scatter falls no further.
const FLOOR: f64 = 1e-3;

/// Follows the signal from an unweighted fit on.
///
/// # Formula
///
/// In turn θ minimises the pseudo-deviance N ln Σ(e²/f̂^θ) + θ Σ ln f̂ at the residuals in hand, and the
/// curve is fitted with the weights f̂^−θ, until θ stands still. 0 ≤ θ ≤ 4; f̂ is floored at a thousandth
/// of its largest size and brought to a geometric mean of one.
///
/// # Errors
///
/// As any weighted fit; `NotConverged` when θ does not settle in 30 rounds.
///
/// # Source
///
/// Carroll and Ruppert, Transformation and Weighting in Regression (1988), 2.4 and 3.2. From memory.
pub(super) fn follow(request: &Request, order: &[usize], unweighted: Fit) -> Result<Fit, FitError> {
    let mut fit = unweighted;
    let mut before = f64::NAN;
    for _ in 0..ROUNDS {
        let sizes = sizes(&fit)?;
        let theta = best_power(&fit, &sizes);
        let v: Vec<f64> = sizes.iter().map(|s| libm::pow(*s, theta)).collect();
        let unit = libm::pow(unit(&fit), theta);
        let model = |floor| VarianceModel::Output { power: theta, unit, floor };
        let prepared = Prepared::power(&v, 1, model, Scatter::Residuals)?;
        fit = weighted(request, order, prepared)?;
        fit.fitted_power = Some(theta);
        if (theta - before).abs() < 1e-7 {
            return Ok(fit);
        }
        before = theta;
    }
    Err(FitError::NotConverged { tried: format!("the power of the signal did not settle in {ROUNDS} rounds") })
}

/// |f̂| at every observation, floored, with a geometric mean of one.
fn sizes(fit: &Fit) -> Result<Vec<f64>, FitError> {
    let raw = raw_sizes(fit);
    let mean = geometric_mean(&raw);
    let usable = mean.is_finite() && mean > 0.0;
    if usable { Ok(raw.iter().map(|s| s / mean).collect()) } else { Err(FitError::OutOfRange) }
}

fn raw_sizes(fit: &Fit) -> Vec<f64> {
    let plain: Vec<f64> = fit.points.iter().map(|p| fit.curve.value(p.x).abs()).collect();
    let top = plain.iter().copied().fold(0.0, f64::max);
    plain.iter().map(|s| s.max(FLOOR * top)).collect()
}

fn geometric_mean(sizes: &[f64]) -> f64 {
    libm::exp(sizes.iter().map(|s| libm::log(*s)).sum::<f64>() / as_f64(sizes.len()))
}

/// The signal that counts as one.
fn unit(fit: &Fit) -> f64 {
    geometric_mean(&raw_sizes(fit))
}

/// θ with the smallest pseudo-deviance; the sizes have a geometric mean of one, so Σ ln f̂ = 0.
fn best_power(fit: &Fit, sizes: &[f64]) -> f64 {
    let largest = fit.residuals.iter().fold(0.0, |top: f64, e| top.max(e.abs()));
    if largest == 0.0 {
        return 0.0;
    }
    let deviance = |theta: f64| -> f64 {
        let each = |(e, s): (&f64, &f64)| (e / largest) * (e / largest) / libm::pow(*s, theta);
        fit.residuals.iter().zip(sizes).map(each).sum()
    };
    golden(deviance, 0.0, LARGEST)
}

/// Place of the minimum of a function with one valley, by golden section.
fn golden(f: impl Fn(f64) -> f64, low: f64, high: f64) -> f64 {
    const SHARE: f64 = 0.618_033_988_749_894_8;
    let (mut a, mut b) = (low, high);
    let (mut p, mut q) = (b - SHARE * (b - a), a + SHARE * (b - a));
    let (mut fp, mut fq) = (f(p), f(q));
    while b - a > 1e-10 {
        if fp <= fq {
            (b, q, fq) = (q, p, fp);
            p = b - SHARE * (b - a);
            fp = f(p);
        } else {
            (a, p, fp) = (p, q, fq);
            q = a + SHARE * (b - a);
            fq = f(q);
        }
    }
    // An end of the interval is exact when the valley lies there.
    [low, high, 0.5 * (a + b)].into_iter().min_by(|s, t| f(*s).total_cmp(&f(*t))).unwrap_or(low)
}
