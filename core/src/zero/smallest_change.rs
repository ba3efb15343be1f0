//! Where there is no state of nothing: the smallest change near the lowest standard.

use super::asked::Absent;
use super::band::ZeroBand;
use crate::distributions::{noncentral_t_lower, noncentrality, t_quantile, t_upper};
use crate::fit::Fit;

/// The smallest change that repeated readings at one standard allow to detect, away from it in
/// either direction; curve taken as straight there.
#[derive(Debug, Clone, PartialEq)]
pub struct SmallestChange {
    /// Band of the next reading around the mean at that standard.
    pub band: ZeroBand,
    /// The standard, input unit.
    pub at: f64,
    /// Local slope f̂′, output per input unit.
    pub slope: f64,
    /// Decision thresholds below and above the mean, each one-sided at α, output unit.
    pub thresholds: (f64, f64),
    /// Change at which the mean signal reaches a threshold, input unit, positive.
    pub critical_change: f64,
    /// Change missed with probability β, input unit, positive.
    pub smallest_change: f64,
    /// Range of `smallest_change` from the uncertainty of the SD, input unit.
    pub range: (f64, f64),
    root_c: f64,
    beta: f64,
}

/// One signal on trial as a threshold for a change.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ChangeTrial {
    /// (y − mean)/s, signed.
    pub distance_sd: f64,
    /// One-sided chance that no change gives a signal further out.
    pub false_alarm: f64,
    /// The change that the local slope traces it to, signed, input unit.
    pub traced: f64,
    /// The smallest change in that direction missed at most β times, signed, input unit.
    pub missed_at_most: Option<f64>,
}

impl SmallestChange {
    /// From repeated applications at the lowest (or another) standard.
    ///
    /// # Formula
    /// thresholds ȳ ± t_{1−α,n−1}·s√(1/k + 1/n); smallest change δ·s√(1/k + 1/n)/|f̂′(x)|, δ the
    /// noncentrality with F_nct(t_{1−α}; n − 1, δ) = β.
    ///
    /// # Shapes and units
    /// `means`: one mean indication an application at `at`, run order, output unit.
    ///
    /// # Errors
    /// [`Absent::TooFewZeros`] with fewer than three, [`Absent::IdenticalZeros`] without scatter,
    /// [`Absent::TurnsBack`] where the curve is flat.
    ///
    /// # Source
    /// As for the detection limit: ISO 11843-1, Clayton, Hines & Elkins (1987); from memory.
    pub fn new(
        fit: &Fit,
        at: f64,
        means: &[f64],
        (alpha, beta, k): (f64, f64, usize),
        level: f64,
    ) -> Result<Self, Absent> {
        let band = ZeroBand::new(means, level).ok_or(Absent::TooFewZeros { n: means.len() })?;
        if band.identical() {
            return Err(Absent::IdenticalZeros);
        }
        let slope = fit.curve.derivative(at);
        if !slope.is_finite() || slope == 0.0 {
            return Err(Absent::TurnsBack);
        }
        let nu = band.degrees_of_freedom;
        let t = t_quantile(1.0 - alpha, nu);
        let delta = noncentrality(t, nu, beta);
        let root_c = band.sd * libm::sqrt(1.0 / k.max(1) as f64 + 1.0 / band.n as f64);
        let smallest = delta * root_c / slope.abs();
        Ok(Self {
            at,
            slope,
            thresholds: (band.mean - t * root_c, band.mean + t * root_c),
            critical_change: t * root_c / slope.abs(),
            smallest_change: smallest,
            range: (smallest * band.sd_factors.0, smallest * band.sd_factors.1),
            band,
            root_c,
            beta,
        })
    }

    /// Reads a signal as a threshold.
    ///
    /// # Formula
    /// distance (y − ȳ)/s; false alarm P(t_ν > |y − ȳ|/√c); missed at most: the change δ·√c/f̂′ with
    /// F_nct(|y − ȳ|/√c; ν, δ) = β, c = s²(1/k + 1/n).
    ///
    /// # Shapes and units
    /// `signal`: output unit; changes in input units, signed.
    ///
    /// # Source
    /// As [`SmallestChange::new`].
    #[must_use]
    pub fn trial(&self, signal: f64) -> ChangeTrial {
        let nu = self.band.degrees_of_freedom;
        let offset = signal - self.band.mean;
        let tau = offset.abs() / self.root_c;
        let outwards = if offset < 0.0 { -1.0 } else { 1.0 };
        ChangeTrial {
            distance_sd: offset / self.band.sd,
            false_alarm: t_upper(tau, nu),
            traced: offset / self.slope,
            missed_at_most: Some(noncentrality(tau, nu, self.beta).max(0.0))
                .filter(|delta| delta.is_finite())
                .map(|delta| outwards * delta * self.root_c / self.slope),
        }
    }

    /// The probability of missing a change (input unit, signed) when `threshold` (output unit) decides.
    ///
    /// # Formula
    /// F_nct(|threshold − ȳ|/√c; ν, λ), λ the change's signal over √c, towards the threshold.
    ///
    /// # Shapes and units
    /// A probability.
    ///
    /// # Source
    /// As [`SmallestChange::new`].
    #[must_use]
    pub fn miss_probability(&self, change: f64, threshold: f64) -> f64 {
        let offset = threshold - self.band.mean;
        let outwards = if offset < 0.0 { -1.0 } else { 1.0 };
        let lambda = outwards * change * self.slope / self.root_c;
        noncentral_t_lower(offset.abs() / self.root_c, self.band.degrees_of_freedom, lambda)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::fitted;
    use crate::fit::Point;
    use crate::model::Family;

    const MEANS: [f64; 6] = [4.02, 3.97, 4.05, 3.95, 4.01, 4.00];

    fn falling() -> Fit {
        let points: Vec<Point> =
            (1..=6).map(|i| Point { x: 5.0 * f64::from(i), y: 6.0 - 2.0 * f64::from(i) }).collect();
        fitted(Family::Polynomial(1), &points)
    }

    /// n = 6, α = β = 0.05: δ = 3.870 (see the table of the detection limit).
    #[test]
    fn six_repeats_at_the_lowest_standard() {
        let change = SmallestChange::new(&falling(), 5.0, &MEANS, (0.05, 0.05, 1), 0.95).unwrap();
        let unit = change.band.sd * (7.0 / 6.0_f64).sqrt() / 0.4;
        assert!((change.smallest_change / unit - 3.870).abs() < 1e-3);
        assert!((change.critical_change / unit - 2.015).abs() < 1e-3);
        let lower = change.trial(change.thresholds.0);
        assert!((lower.false_alarm - 0.05).abs() < 1e-9);
        // The output falls: a signal below the mean is a change upwards.
        assert!((lower.missed_at_most.unwrap() - change.smallest_change).abs() < 1e-9);
        assert!((change.miss_probability(change.smallest_change, change.thresholds.0) - 0.05).abs() < 1e-9);
        let upper = change.trial(change.thresholds.1);
        assert!((upper.missed_at_most.unwrap() + change.smallest_change).abs() < 1e-9);
    }

    #[test]
    fn absences_have_reasons() {
        let of = |means: &[f64]| SmallestChange::new(&falling(), 5.0, means, (0.05, 0.05, 1), 0.95).err();
        assert_eq!(of(&[4.0, 4.1]), Some(Absent::TooFewZeros { n: 2 }));
        assert_eq!(of(&[4.0; 4]), Some(Absent::IdenticalZeros));
    }
}
