//! A threshold on trial: what a horizontal line across the near-zero plot would mean.

use super::detection::Detection;
use crate::distributions::t_upper;

/// One signal taken as threshold.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Trial {
    /// Distance from the zero in SDs of one reading, positive in the direction of the curve.
    pub distance_sd: f64,
    /// One-sided chance that nothing gives a signal beyond it.
    pub false_alarm: f64,
    /// The value that the curve traces it to, input unit; `None` beyond the standards.
    pub traced: Option<f64>,
    /// The smallest value missed with probability at most β when it decides, input unit; on the
    /// decision threshold this is the detection limit.
    pub missed_at_most: Option<f64>,
}

impl Detection<'_> {
    /// Reads a signal as a threshold.
    ///
    /// # Formula
    /// distance ±(y − μ̂₀)/σ_new(0); false alarm P(t_ν > ±(y − μ̂₀)/√c₀); traced f̂⁻¹(y); missed at
    /// most: the smallest x with F_nct(τ/ρ; ν, λ) ≤ β.
    ///
    /// # Shapes and units
    /// `signal`: output unit, the mean of the k asked for.
    ///
    /// # Source
    /// As [`Detection::new`].
    #[must_use]
    pub fn trial(&self, signal: f64) -> Trial {
        let tau = self.net.standardised(signal);
        Trial {
            distance_sd: self.net.sense * (signal - self.net.zero) / self.net.one_reading_sd(self.asked.k),
            false_alarm: t_upper(tau, self.net.nu),
            traced: self.net.trace(signal),
            missed_at_most: self.net.signed(self.missed_at(tau)),
        }
    }
}
