//! Does the scatter grow with the level?
//!
//! The rank correlation of the size of the residuals with the fitted value, held against what the
//! same design gives when the scatter is the same everywhere.

use super::added::dot;
use crate::fit::Fit;
use crate::numerics::streams::Stream;

/// How many draws the reference distribution holds.
pub const DRAWS: usize = 9_999;

/// What the spread of the residuals shows.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spread {
    /// Spearman's correlation of |standardised residual| with f̂, in [−1, 1].
    pub correlation: f64,
    /// Two-sided p from the residual-sphere reference.
    pub p: f64,
    /// Fitted residual size at the end with the larger f̂ over that at the other end: the funnel.
    pub end_ratio: f64,
}

/// The distribution of the correlation for one design when the spread is even.
///
/// It depends on the standards, the weights and the family, not on the readings: keep it while only
/// readings change.
#[derive(Debug, Clone, PartialEq)]
pub struct SpreadReference {
    /// |correlation| of each draw, ascending.
    sizes: Vec<f64>,
}

impl SpreadReference {
    /// Draws the reference of a fit's design.
    ///
    /// # Formula
    /// Under an adequate model with even normal scatter the whitened residual vector, scaled to
    /// length 1, is uniform on the unit sphere of the residual space: draws (I − H)z/‖(I − H)z‖ with z
    /// standard normal, whatever the coefficients and the SD.
    ///
    /// # Shapes and units
    /// `draws` values; the same seed gives the same draws. `None` with ν < 3.
    ///
    /// # Source
    /// Theil's residual sphere; rotation tests, e.g. Ø. Langsrud (2005), Stat. Comput. 15, 53–60;
    /// from memory.
    #[must_use]
    pub fn new(fit: &Fit, draws: usize, seed: u64) -> Option<Self> {
        if fit.degrees_of_freedom < 3 {
            return None;
        }
        let sampler = Sampler::new(fit);
        let mut stream = Stream::new(seed, 0);
        let mut sizes: Vec<f64> =
            (0..draws).map(|_| correlation(&sampler.draw(&mut stream), &sampler.fitted_ranks).abs()).collect();
        sizes.sort_by(f64::total_cmp);
        Some(Self { sizes })
    }

    /// p = (1 + number of draws at least as large)/(draws + 1).
    #[must_use]
    pub fn p(&self, correlation: f64) -> f64 {
        // Draws that equal the observed value up to rounding count as reaching it.
        let reached = correlation.abs() - 1e-12;
        let below = self.sizes.partition_point(|s| *s < reached);
        (1 + self.sizes.len() - below) as f64 / (self.sizes.len() + 1) as f64
    }
}

/// Tests the spread of a fit against its reference; `None` with ν < 3 or without any scatter.
///
/// # Formula
/// ρ = Pearson correlation of the mid-ranks of |rᵢ| and of f̂(xᵢ), rᵢ = eᵢ√wᵢ/√(1 − hᵢ).
/// End ratio: |r| regressed on f̂, the value at the largest over that at the smallest f̂, each at
/// least a tenth of the mean.
///
/// # Shapes and units
/// Dimensionless.
///
/// # Source
/// C. Spearman (1904); the t approximation of its p is not used: on residuals of few points it
/// rejects up to 8.5 times in 100 instead of 5.
#[must_use]
pub fn spread(fit: &Fit, reference: &SpreadReference) -> Option<Spread> {
    if fit.degrees_of_freedom < 3 {
        return None;
    }
    let sampler = Sampler::new(fit);
    let sizes = sampler.standardise(&whitened(fit));
    if sizes.iter().all(|size| *size == 0.0) {
        return None;
    }
    let correlation = correlation(&sizes, &sampler.fitted_ranks);
    Some(Spread { correlation, p: reference.p(correlation), end_ratio: end_ratio(&sizes, &fitted(fit)) })
}

fn whitened(fit: &Fit) -> Vec<f64> {
    let pairs = fit.residuals.iter().zip(&fit.variance_ratio);
    pairs.map(|(e, v)| e / libm::sqrt(*v)).collect()
}

/// f̂ at every observation; repeats of a standard have the very same value, so their ranks tie.
fn fitted(fit: &Fit) -> Vec<f64> {
    fit.points.iter().map(|p| fit.curve.value(p.x)).collect()
}

/// Draws residual sizes of one design.
struct Sampler<'a> {
    /// Orthonormal columns that span the whitened design.
    columns: &'a [Vec<f64>],
    /// 1/√(1 − h) of each observation; 0 where h = 1.
    stretch: Vec<f64>,
    /// Mid-ranks of f̂, centred.
    fitted_ranks: Vec<f64>,
}

impl<'a> Sampler<'a> {
    fn new(fit: &'a Fit) -> Self {
        let stretch = |h: &f64| {
            if *h < 1.0 - 1e-12 { 1.0 / libm::sqrt(1.0 - h) } else { 0.0 }
        };
        Self {
            columns: fit.orthonormal_columns(),
            stretch: fit.leverage.iter().map(stretch).collect(),
            fitted_ranks: centred_ranks(&fitted(fit)),
        }
    }

    /// |residual| sizes of one draw.
    fn draw(&self, stream: &mut Stream) -> Vec<f64> {
        let mut residual: Vec<f64> = self.stretch.iter().map(|_| stream.normal()).collect();
        for column in self.columns {
            let share = dot(column, &residual);
            for (e, q) in residual.iter_mut().zip(column) {
                *e -= share * q;
            }
        }
        self.standardise(&residual)
    }

    fn standardise(&self, whitened: &[f64]) -> Vec<f64> {
        whitened.iter().zip(&self.stretch).map(|(e, s)| (e * s).abs()).collect()
    }
}

/// Correlation of the ranks of `sizes` with ranks already centred.
fn correlation(sizes: &[f64], other: &[f64]) -> f64 {
    let own = centred_ranks(sizes);
    let scale = libm::sqrt(dot(&own, &own) * dot(other, other));
    if scale > 0.0 { dot(&own, other) / scale } else { 0.0 }
}

/// Mid-ranks minus their mean.
pub(crate) fn centred_ranks(values: &[f64]) -> Vec<f64> {
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_unstable_by(|&a, &b| values[a].total_cmp(&values[b]));
    let mean = (values.len() as f64 - 1.0) / 2.0;
    let mut ranks = vec![0.0; values.len()];
    let mut start = 0;
    while start < order.len() {
        let value = values[order[start]];
        let tied = order[start..].iter().take_while(|&&i| values[i] == value).count();
        let rank = start as f64 + (tied as f64 - 1.0) / 2.0 - mean;
        for &index in &order[start..start + tied] {
            ranks[index] = rank;
        }
        start += tied;
    }
    ranks
}

/// Ratio of the fitted sizes at the two ends of f̂.
fn end_ratio(sizes: &[f64], fitted: &[f64]) -> f64 {
    let n = sizes.len() as f64;
    let (ms, mf) = (sizes.iter().sum::<f64>() / n, fitted.iter().sum::<f64>() / n);
    let sff: f64 = fitted.iter().map(|f| (f - mf).powi(2)).sum();
    let sfs: f64 = fitted.iter().zip(sizes).map(|(f, s)| (f - mf) * (s - ms)).sum();
    if sff == 0.0 || ms == 0.0 {
        return 1.0;
    }
    let at = |f: f64| (ms + sfs / sff * (f - mf)).max(0.1 * ms);
    let high = fitted.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let low = fitted.iter().copied().fold(f64::INFINITY, f64::min);
    at(high) / at(low)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::model::Family;

    #[test]
    fn a_funnel_is_seen_with_its_size() {
        let points = simulated(&mut Stream::new(101, 0), (11, 6), |x| 2.0 * x, |x| 0.02 * x);
        let fit = fitted(Family::Polynomial(1), &points);
        let reference = SpreadReference::new(&fit, 1999, 1).unwrap();
        let found = spread(&fit, &reference).unwrap();
        assert!(found.correlation > 0.3 && found.p < 0.01 && found.end_ratio > 3.0, "{found:?}");
    }

    #[test]
    fn a_falling_curve_turns_the_sign() {
        let points = simulated(&mut Stream::new(102, 0), (11, 3), |x| -2.0 * x, |x| 0.02 * x);
        let fit = fitted(Family::Polynomial(1), &points);
        let found = spread(&fit, &SpreadReference::new(&fit, 999, 1).unwrap()).unwrap();
        assert!(found.correlation < -0.4 && found.p < 0.01 && found.end_ratio < 0.4);
    }

    /// Even scatter: p ≤ 0.05 in 5 % of runs, a little less where ranks are few.
    #[test]
    fn even_scatter_is_suspected_one_time_in_twenty() {
        const RUNS: usize = 1500;
        for design in [(11, 1), (5, 3)] {
            let mut stream = Stream::new(103, 0);
            let first = fitted(Family::Polynomial(1), &simulated(&mut stream, design, |x| x, |_| 1.0));
            let reference = SpreadReference::new(&first, 3999, 2).unwrap();
            let hits = (0..RUNS)
                .filter(|_| {
                    let points = simulated(&mut stream, design, |x| 100.0 * x, |_| 1.0);
                    let fit = fitted(Family::Polynomial(1), &points);
                    spread(&fit, &reference).unwrap().p <= 0.05
                })
                .count();
            assert_rate(hits, RUNS, 0.048);
        }
    }

    #[test]
    fn few_points_or_perfect_fits_tell_nothing() {
        let points = simulated(&mut Stream::new(104, 0), (4, 1), |x| x, |_| 1.0);
        assert_eq!(SpreadReference::new(&fitted(Family::Polynomial(1), &points), 99, 1), None);
    }

    #[test]
    fn ranks_share_ties() {
        assert_eq!(centred_ranks(&[3.0, 1.0, 3.0, 2.0]), [1.0, -1.5, 1.0, -0.5]);
    }
}
