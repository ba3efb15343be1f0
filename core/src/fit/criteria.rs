//! Figures that compare whole fits.

use super::Fit;
use crate::numerics::scale::as_f64;

impl Fit {
    /// R² = 1 − Σwe²/Σw(y − ȳ_w)², about the weighted mean.
    ///
    /// # Errors
    ///
    /// `None` for declared, and when all indications are equal.
    #[must_use]
    pub fn r_squared(&self) -> Option<f64> {
        self.basis.as_ref()?;
        // Scaled, so that squares of very large or small indications stay inside the range.
        let largest = self.points.iter().fold(0.0, |top: f64, p| top.max(p.y.abs()));
        let smallest_v = self.variance_ratio.iter().copied().fold(f64::INFINITY, f64::min);
        let weight: Vec<f64> = self.variance_ratio.iter().map(|v| smallest_v / v).collect();
        let total: f64 = weight.iter().sum();
        let scaled: Vec<f64> = self.points.iter().map(|p| p.y / largest).collect();
        let mean = scaled.iter().zip(&weight).map(|(y, w)| w * y).sum::<f64>() / total;
        let spread = |y: &f64, w: &f64| w * (y - mean) * (y - mean);
        let about_mean: f64 = scaled.iter().zip(&weight).map(|(y, w)| spread(y, w)).sum();
        let left = |e: &f64, w: &f64| w * (e / largest) * (e / largest);
        let residual: f64 = self.residuals.iter().zip(&weight).map(|(e, w)| left(e, w)).sum();
        (about_mean > 0.0).then(|| 1.0 - residual / about_mean)
    }

    /// −2 ln L at the maximum: N ln(2π Σwe²/N) + N − Σ ln w, normal errors with variance σ²/w.
    fn minus_two_log_likelihood(&self) -> Option<f64> {
        let n = as_f64(self.points.len());
        let log_weights: f64 = self.variance_ratio.iter().map(|v| -libm::log(*v)).sum();
        let mean_square = std::f64::consts::TAU * self.residual_ss / n;
        (self.residual_ss > 0.0).then(|| n * libm::log(mean_square) + n - log_weights)
    }

    /// K = p + 1 (the coefficients and σ) and N, when N > K + 1.
    fn sizes(&self) -> Option<(f64, f64)> {
        let (k, n) = (self.coefficients.len() + 1, self.points.len());
        (n > k + 1).then(|| (as_f64(k), as_f64(n)))
    }

    /// Akaike's criterion for small samples, −2 ln L + 2K + 2K(K + 1)/(N − K − 1) with K = p + 1.
    /// Compare only fits of the same y with the same kind of weights.
    ///
    /// # Errors
    ///
    /// `None` when N ≤ K + 1 and for an exact fit.
    ///
    /// # Source
    ///
    /// Hurvich and Tsai, Biometrika 76 (1989) 297. From memory.
    #[must_use]
    pub fn aicc(&self) -> Option<f64> {
        let (k, n) = self.sizes()?;
        let small_sample = 2.0 * k * (k + 1.0) / (n - k - 1.0);
        Some(self.minus_two_log_likelihood()? + 2.0 * k + small_sample)
    }

    /// Schwarz's criterion, −2 ln L + K ln N with K = p + 1. Compare only fits of the same y with the same
    /// kind of weights.
    ///
    /// # Errors
    ///
    /// `None` when N ≤ K + 1 and for an exact fit.
    ///
    /// # Source
    ///
    /// Schwarz, Ann. Statist. 6 (1978) 461. From memory.
    #[must_use]
    pub fn bic(&self) -> Option<f64> {
        let (k, n) = self.sizes()?;
        Some(self.minus_two_log_likelihood()? + k * libm::log(n))
    }
}
