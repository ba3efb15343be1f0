//! Figures that compare whole fits.

use super::Fit;
use crate::numerics::scale::as_f64;
use crate::numerics::sums::determination;

impl Fit {
    /// R² = 1 − Σwe²/Σw(y − ȳ_w)², about the weighted mean where the function has a constant term, and
    /// 1 − Σwe²/Σwy² where it has none ([`Fit::has_constant`] tells which).
    ///
    /// # Errors
    ///
    /// `None` for declared, and when all indications are equal (without a constant term: zero).
    ///
    /// # Source
    ///
    /// As [`determination`].
    #[must_use]
    pub fn r_squared(&self) -> Option<f64> {
        self.basis.as_ref()?;
        let y: Vec<f64> = self.points.iter().map(|p| p.y).collect();
        determination(&y, &self.residuals, &self.variance_ratio, self.has_constant())
    }

    /// Whether adding a constant to all indications only moves the coefficients: not so for a line through
    /// zero, whose R² is then about zero and not comparable with the others'.
    ///
    /// # Formula
    ///
    /// √w, the constant in whitened rows, lies in the span of the orthonormal columns: its part outside is
    /// below a billionth of its square.
    #[must_use]
    pub fn has_constant(&self) -> bool {
        let roots: Vec<f64> = self.variance_ratio.iter().map(|v| 1.0 / libm::sqrt(*v)).collect();
        // Scaled, so that squares of very large or small weights stay inside the range.
        let largest = roots.iter().copied().fold(0.0, f64::max);
        let whole: f64 = roots.iter().map(|r| (r / largest) * (r / largest)).sum();
        let along = |column: &Vec<f64>| -> f64 { column.iter().zip(&roots).map(|(q, r)| q * (r / largest)).sum() };
        let inside: f64 = self.orthonormal.iter().map(|column| along(column) * along(column)).sum();
        whole - inside < 1e-9 * whole
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
