//! Are the zeros independent, free of drift, clipping and slips?

use super::band::ZeroBand;
use crate::distributions::{t_quantile, t_upper};
use crate::numerics::streams::Stream;

/// How many zeros there are, as a judgement.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Count {
    /// Fewer than 3: no band.
    None,
    /// 3 to 6: worth a look.
    Look,
    /// 7 to 9: worth a note.
    Note,
    /// 10 or more.
    Enough,
}

/// What the zeros show about themselves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Health {
    /// How many.
    pub count: Count,
    /// Fewer than eight: too few to see drift.
    pub too_few_to_see_drift: bool,
    /// First autocorrelation and its one-sided permutation p; `None` below 4 or when identical.
    pub lag1: Option<Lag1>,
    /// Slope over run order; `None` below 4 or when identical.
    pub drift: Option<ZeroDrift>,
    /// Share of the zeros that equal the smallest one; 0.3 or more looks clipped.
    pub share_at_minimum: f64,
    /// Every zero is the same number.
    pub identical: bool,
    /// The zero furthest from the mean against Grubbs' two-sided 5 % point.
    pub outlier: Option<Grubbs>,
}

/// First autocorrelation.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Lag1 {
    /// r₁.
    pub r: f64,
    /// Share of all orders with at least this r₁.
    pub p: f64,
}

/// Drift of the zeros.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ZeroDrift {
    /// Change per application, output unit.
    pub per_step: f64,
    /// Change from first to last, output unit.
    pub over_run: f64,
    /// Two-sided p, t with n − 2.
    pub p: f64,
}

/// Grubbs' test.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Grubbs {
    /// Position of the zero.
    pub index: usize,
    /// |z − z̄|/s.
    pub g: f64,
    /// Two-sided 5 % point.
    pub limit: f64,
    /// g > limit.
    pub beyond: bool,
}

/// Looks at the zeros in run order; `None` when there is no band.
///
/// # Formula
/// r₁ against the n! orders of the same numbers for n ≤ 7, against 20 000 seeded shuffles above,
/// one-sided. Drift: t of the slope with n − 2. Grubbs: G = max|z − z̄|/s against
/// (n − 1)/√n·√(t²/(n − 2 + t²)), t = t_{1−0.025/n, n−2}.
///
/// # Shapes and units
/// `zeros`: as for [`ZeroBand::new`].
///
/// # Source
/// F. E. Grubbs (1969), Technometrics 11, 1–21; permutation test: common practice. From memory.
#[must_use]
pub fn health(zeros: &[f64], seed: u64) -> Option<Health> {
    let band = ZeroBand::new(zeros, 0.95)?;
    let n = zeros.len();
    let minimum = zeros.iter().copied().fold(f64::INFINITY, f64::min);
    let usable = n >= 4 && !band.identical();
    Some(Health {
        count: count(n),
        too_few_to_see_drift: n < 8,
        lag1: band.lag1.filter(|_| usable).map(|r| Lag1 { r, p: lag1_p(zeros, band.mean, seed) }),
        drift: usable.then(|| drift(zeros, band.mean)),
        share_at_minimum: zeros.iter().filter(|z| **z == minimum).count() as f64 / n as f64,
        identical: band.identical(),
        outlier: (!band.identical()).then(|| grubbs(zeros, &band)).flatten(),
    })
}

/// The judgement of a number of zeros.
#[must_use]
pub fn count(n: usize) -> Count {
    match n {
        0..=2 => Count::None,
        3..=6 => Count::Look,
        7..=9 => Count::Note,
        _ => Count::Enough,
    }
}

/// Share of the orders whose sum of neighbour products is at least the observed one.
///
/// Stops as soon as 50 orders have reached it: then p is large and known well enough (sequential Monte-Carlo
/// test, Besag & Clifford 1991, Biometrika 78, 301; from memory).
fn lag1_p(zeros: &[f64], mean: f64, seed: u64) -> f64 {
    const SHUFFLES: u32 = 20_000;
    const ENOUGH: u32 = 50;
    let mut values: Vec<f64> = zeros.iter().map(|z| z - mean).collect();
    let products = |v: &[f64]| v.windows(2).map(|w| w[0] * w[1]).sum::<f64>();
    let squares: f64 = values.iter().map(|v| v * v).sum();
    let reached = products(&values) - 1e-12 * squares;
    let (mut hits, mut all) = (0_u32, 0_u32);
    let mut look = |v: &[f64]| {
        all += 1;
        hits += u32::from(products(v) >= reached);
        hits
    };
    if values.len() <= 7 {
        every_order(&mut values, &mut look);
        return f64::from(hits) / f64::from(all);
    }
    let mut stream = Stream::new(seed, 1);
    for _ in 0..SHUFFLES {
        for i in (1..values.len()).rev() {
            values.swap(i, stream.below(i as u64 + 1) as usize);
        }
        if look(&values) >= ENOUGH {
            return f64::from(hits) / f64::from(all);
        }
    }
    f64::from(hits + 1) / f64::from(all + 1)
}

/// Calls `look` with every order of the values (Heap's algorithm, without recursion).
fn every_order(values: &mut [f64], look: &mut impl FnMut(&[f64]) -> u32) {
    let n = values.len();
    let mut counters = vec![0; n];
    look(values);
    let mut i = 1;
    while i < n {
        if counters[i] < i {
            let other = if i % 2 == 0 { 0 } else { counters[i] };
            values.swap(other, i);
            look(values);
            counters[i] += 1;
            i = 1;
        } else {
            counters[i] = 0;
            i += 1;
        }
    }
}

fn drift(zeros: &[f64], mean: f64) -> ZeroDrift {
    let n = zeros.len() as f64;
    let centre = (n - 1.0) / 2.0;
    let sxx: f64 = (0..zeros.len()).map(|i| (i as f64 - centre).powi(2)).sum();
    let sxy: f64 = zeros.iter().enumerate().map(|(i, z)| (i as f64 - centre) * (z - mean)).sum();
    let per_step = sxy / sxx;
    let rest: f64 = zeros.iter().enumerate().map(|(i, z)| (z - mean - per_step * (i as f64 - centre)).powi(2)).sum();
    let nu = n - 2.0;
    let se = libm::sqrt(rest / nu / sxx);
    ZeroDrift {
        per_step,
        over_run: per_step * (n - 1.0),
        p: if se > 0.0 { 2.0 * t_upper((per_step / se).abs(), nu) } else { 0.0 },
    }
}

fn grubbs(zeros: &[f64], band: &ZeroBand) -> Option<Grubbs> {
    let n = zeros.len() as f64;
    let (index, far) = zeros.iter().map(|z| (z - band.mean).abs()).enumerate().max_by(|a, b| a.1.total_cmp(&b.1))?;
    let t = t_quantile(1.0 - 0.025 / n, n - 2.0);
    let limit = (n - 1.0) / libm::sqrt(n) * libm::sqrt(t * t / (n - 2.0 + t * t));
    let g = far / band.sd;
    Some(Grubbs { index, g, limit, beyond: g > limit })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Exact 95 % points of r₁ of n independent zeros, one-sided: n = 4 0.23, 6 0.34, 10 0.34, 20 0.29
    /// (own simulation): about 5 % of independent sets reach p ≤ 0.05.
    #[test]
    fn independent_zeros_are_suspected_one_time_in_twenty() {
        const RUNS: usize = 1000;
        let mut stream = Stream::new(71, 0);
        let hits = (0..RUNS)
            .filter(|_| {
                let zeros: Vec<f64> = (0..6).map(|_| stream.normal()).collect();
                health(&zeros, 1).unwrap().lag1.unwrap().p <= 0.05
            })
            .count();
        crate::convert::reference::assert_rate(hits, RUNS, 0.05);
    }

    #[test]
    fn a_wandering_zero_is_seen() {
        let zeros: Vec<f64> = (0..12).map(|i| libm::sin(0.5 * f64::from(i))).collect();
        let found = health(&zeros, 1).unwrap();
        assert!(found.lag1.unwrap().p < 0.01);
        let rising: Vec<f64> = (0..9).map(|i| 0.1 * f64::from(i) + 0.01 * f64::from(i % 2)).collect();
        let drift = health(&rising, 1).unwrap().drift.unwrap();
        assert!(drift.p < 1e-6 && (drift.over_run - 0.8).abs() < 0.02);
    }

    #[test]
    fn every_order_is_seen_once() {
        let mut seen = Vec::new();
        every_order(&mut [1.0, 2.0, 3.0, 4.0], &mut |v: &[f64]| {
            seen.push(v.iter().fold(0.0, |a, b| 10.0 * a + b));
            0
        });
        seen.sort_by(f64::total_cmp);
        seen.dedup();
        assert_eq!(seen.len(), 24);
    }

    /// NIST/SEMATECH e-Handbook 1.3.5.17.1 (Tietjen & Moore's mass-spectrometer data): G = 2.4687 for
    /// 245.57, one-sided critical value 2.032 at 5 %; the two-sided one for n = 8 is 2.126 (Grubbs).
    #[test]
    fn grubbs_example() {
        let data = [199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57];
        let found = health(&data, 1).unwrap().outlier.unwrap();
        assert!((found.g - 2.4687).abs() < 1e-4);
        assert!((found.limit - 2.126).abs() < 1e-3 && found.beyond);
        assert_eq!(found.index, 7);
    }

    #[test]
    fn coarse_and_clipped_zeros() {
        let clipped = health(&[0.0, 0.0, 0.0, 0.2, 0.1, 0.0], 1).unwrap();
        assert!((clipped.share_at_minimum - 4.0 / 6.0).abs() < 1e-15 && !clipped.identical);
        let same = health(&[0.3; 5], 1).unwrap();
        assert!(same.identical && same.lag1.is_none() && same.outlier.is_none() && same.drift.is_none());
        assert_eq!(
            [2, 3, 6, 7, 9, 10].map(count),
            [Count::None, Count::Look, Count::Look, Count::Note, Count::Note, Count::Enough]
        );
    }
}
