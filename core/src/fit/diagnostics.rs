//! Residuals made comparable, and what single observations do to the fit.

use super::Fit;
use crate::numerics::scale::as_f64;

/// Below this, 1 − leverage is rounding: the observation determines its own fitted value.
const OWN_FIT: f64 = 1e-12;

impl Fit {
    /// Internally standardised residuals r_i = e_i√w_i/(s√(1 − h_i)), in the order of the points.
    ///
    /// # Errors
    ///
    /// `None` for an observation that determines its own fitted value (h = 1), and for all of them with
    /// ν = 0 or s = 0.
    ///
    /// # Source
    ///
    /// Cook and Weisberg, Residuals and Influence in Regression (1982), 2.1.1. From memory.
    #[must_use]
    pub fn standardised(&self) -> Vec<Option<f64>> {
        let sd = self.residual_sd.filter(|s| *s > 0.0);
        let one = |i: usize| {
            let rest = 1.0 - self.leverage[i];
            let scale = sd? * libm::sqrt(self.variance_ratio[i] * rest);
            (rest > OWN_FIT).then(|| self.residuals[i] / scale)
        };
        (0..self.points.len()).map(one).collect()
    }

    /// Externally studentised residuals: as standardised, with s from all other observations; Student with
    /// ν − 1 degrees of freedom under a correct model.
    ///
    /// # Formula
    ///
    /// t_i = r_i √((ν − 1)/(ν − r_i²)).
    ///
    /// # Errors
    ///
    /// `None` where [`Fit::standardised`] is, with ν ≤ 1, and where all others fit exactly.
    ///
    /// # Source
    ///
    /// Cook and Weisberg (1982), 2.1.2. From memory.
    #[must_use]
    pub fn studentised(&self) -> Vec<Option<f64>> {
        let nu = as_f64(self.degrees_of_freedom);
        let external = |r: f64| {
            let rest = nu - r * r;
            (nu > 1.0 && rest > nu * OWN_FIT).then(|| r * libm::sqrt((nu - 1.0) / rest))
        };
        self.standardised().into_iter().map(|r| r.and_then(external)).collect()
    }

    /// Cook's distance of every observation: D_i = r_i² h_i/(p(1 − h_i)), of √w-scaled rows.
    ///
    /// # Errors
    ///
    /// `None` where [`Fit::standardised`] is, and for declared (p = 0).
    ///
    /// # Source
    ///
    /// Cook, Technometrics 19 (1977) 15. From memory.
    #[must_use]
    pub fn cooks_distance(&self) -> Vec<Option<f64>> {
        let p = self.coefficients.len();
        let distance = |(r, h): (Option<f64>, &f64)| {
            let r = r.filter(|_| p > 0)?;
            Some(r * r * h / (as_f64(p) * (1.0 - h)))
        };
        self.standardised().into_iter().zip(&self.leverage).map(distance).collect()
    }

    /// Root mean square error of prediction, each single observation left out in turn; output unit.
    ///
    /// # Formula
    ///
    /// √(Σ (e_i/(1 − h_i))²/N).
    ///
    /// # Errors
    ///
    /// `None` when an observation cannot be left out (h = 1) or there is none.
    ///
    /// # Source
    ///
    /// Allen, Technometrics 16 (1974) 125. From memory.
    #[must_use]
    pub fn press_rmse(&self) -> Option<f64> {
        let mut sum = 0.0;
        for (e, h) in self.residuals.iter().zip(&self.leverage) {
            let rest = 1.0 - h;
            if rest <= OWN_FIT {
                return None;
            }
            sum += (e / rest) * (e / rest);
        }
        let rmse = libm::sqrt(sum / as_f64(self.points.len()));
        rmse.is_finite().then_some(rmse)
    }

    /// Standard uncertainties of the coefficients, in their units; `None` while σ is not known, empty
    /// for declared.
    #[must_use]
    pub fn standard_uncertainties(&self) -> Option<&[f64]> {
        self.scatter_sd().map(|_| self.uncertainties.as_slice())
    }

    /// Condition of the design in powers of the user's x (or 1, ln x), its columns brought to length one:
    /// ‖X‖·‖X⁺‖ in Frobenius norms, p at best. Large values mean that coefficients need all their digits;
    /// the fit itself is carried in twice the digits of a double and does not suffer.
    #[must_use]
    pub const fn condition(&self) -> f64 {
        self.condition
    }

    /// Fitted values ŷ = y − e, in the order of the points, output unit.
    #[must_use]
    pub fn fitted(&self) -> Vec<f64> {
        self.points.iter().zip(&self.residuals).map(|(p, e)| p.y - e).collect()
    }
}
