//! Readings that are the mean of k with a known scatter of their own.

use super::edges::Width;
use super::{Conversion, Converter};
use crate::distributions::{chi2_upper, f_upper};
use crate::fit::two_sided;

/// The scatter of the k readings behind one mean.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Repeats {
    /// Sample SD of the k readings, output unit.
    pub sd: f64,
}

impl Converter<'_> {
    /// Converts the mean of k ≥ 2 readings whose own scatter is known.
    ///
    /// # Formula
    /// Pooled: s_p² = [νs² + (k − 1)s_u²]/(ν + k − 1) in both terms, t with ν + k − 1. When s_u²/s²
    /// exceeds F_{0.95; k−1, ν} the unknown scatters more than the standards did; then, for k ≥ 4, its
    /// own s_u²/k + Var f̂ with Welch's ν_eff = (a + b)²/(a²/(k − 1) + b²/ν). Weighted fits: s_u² is
    /// brought to v = 1 at the value first.
    ///
    /// # Shapes and units
    /// `reading` and `repeats.sd` in output units. With k = 1, or without degrees of freedom, this is
    /// [`Converter::convert`].
    ///
    /// # Source
    /// B. L. Welch (1947), Biometrika 34, 28–35; from memory. Pooling: common practice.
    #[must_use]
    pub fn convert_repeats(&self, reading: f64, repeats: Repeats) -> Conversion {
        let plain = self.convert(reading);
        let (Some(s), true) = (self.fit.scatter_sd(), self.k > 1 && repeats.sd.is_finite()) else {
            return plain;
        };
        let x = self.place(&plain);
        let (nu, own_nu) = (self.fit.scatter_freedom(), (self.k - 1) as f64);
        if nu.is_infinite() {
            // A scatter that is known needs no help from the repeats.
            let more = repeats.sd * repeats.sd / (s * s * self.fit.variance_at(self.place(&plain)));
            let more = chi2_upper(more * own_nu, own_nu) < 0.05;
            return Conversion { scatters_more: Some(more), ..plain };
        }
        let k = self.k as f64;
        let (s2, own) = (s * s, repeats.sd * repeats.sd / self.fit.variance_at(x));
        let more = own > s2 && f_upper(own / s2, own_nu, nu) < 0.05;
        let level = self.level;
        let width = if more && self.k >= 4 {
            let a = own / k * self.fit.variance_at(x);
            let b = self.fit.mean_variance(x);
            let freedom = (a + b) * (a + b) / (a * a / own_nu + b * b / nu);
            Width::Given { new: own / k, curve: 1.0, freedom, level, plain: two_sided(level, freedom) }
        } else {
            let pooled = (nu * s2 + own_nu * own) / (nu + own_nu);
            let curve = if s2 > 0.0 { pooled / s2 } else { 1.0 };
            let freedom = nu + own_nu;
            Width::Given { new: pooled / k, curve, freedom, level, plain: two_sided(level, freedom) }
        };
        let edges = self.edges.with_width(self.fit, width);
        Conversion { scatters_more: Some(more), ..self.by(reading, &edges) }
    }

    /// Where to judge the scatter: at the value, else in the middle of the range.
    fn place(&self, conversion: &Conversion) -> f64 {
        conversion.value.unwrap_or(0.5 * (self.range.0 + self.range.1))
    }
}
