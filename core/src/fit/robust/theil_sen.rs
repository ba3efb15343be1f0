//! The line through the median of the slopes between all pairs of different levels.

use super::{Found, Method, RobustError, RobustFit, beside};
use crate::fit::Fit;
use crate::model::Family;

/// Most observations that are compared pair by pair: two million slopes.
pub const THEIL_SEN_UP_TO: usize = 2000;

/// The Theil–Sen line beside a least-squares line.
///
/// # Formula
///
/// b = median of (y_j − y_i)/(x_j − x_i) over all pairs with x_i ≠ x_j; a = median of y − b·x. Weights of
/// the least-squares fit are not used: medians need none. Up to 29 % of the readings may be wild.
///
/// # Shapes and units
///
/// Results in the units and the order of `fit`.
///
/// # Errors
///
/// `NotALine` for other families, `TooMany` above [`THEIL_SEN_UP_TO`] observations, `Unsolvable` when a
/// slope overflows.
///
/// # Source
///
/// Sen, J. Am. Statist. Assoc. 63 (1968) 1379, from memory; checked against scipy.stats.theilslopes
/// (tests/published/robust).
pub fn theil_sen(fit: &Fit) -> Result<RobustFit, RobustError> {
    if fit.family != Family::Polynomial(1) {
        return Err(RobustError::NotALine);
    }
    let n = fit.points.len();
    if n > THEIL_SEN_UP_TO {
        return Err(RobustError::TooMany { observations: n, limit: THEIL_SEN_UP_TO });
    }
    let mut slopes = Vec::with_capacity(n * n.saturating_sub(1) / 2);
    for (i, a) in fit.points.iter().enumerate() {
        for b in &fit.points[i + 1..] {
            let run = b.x - a.x;
            if run != 0.0 {
                slopes.push((b.y - a.y) / run);
            }
        }
    }
    let slope = median(&mut slopes).ok_or(RobustError::Unsolvable)?;
    let mut intercepts: Vec<f64> = fit.points.iter().map(|p| p.y - slope * p.x).collect();
    let intercept = median(&mut intercepts).ok_or(RobustError::Unsolvable)?;
    let residuals = fit.points.iter().map(|p| p.y - (intercept + slope * p.x)).collect();
    let coefficients = vec![intercept, slope];
    Ok(beside(fit, Found { method: Method::TheilSen, coefficients, residuals, weights: vec![1.0; n], scale: None }))
}

/// The middle value, or the mean of the two middle ones; `None` for nothing or for numbers not finite.
fn median(values: &mut [f64]) -> Option<f64> {
    if values.is_empty() || values.iter().any(|v| !v.is_finite()) {
        return None;
    }
    let half = values.len() / 2;
    let odd = values.len() % 2 == 1;
    let (below, upper, _) = values.select_nth_unstable_by(half, f64::total_cmp);
    let upper = *upper;
    if odd {
        return Some(upper);
    }
    let lower = below.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    Some(0.5 * lower + 0.5 * upper)
}
