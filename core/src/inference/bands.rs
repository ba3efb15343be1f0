//! The three bands around a fitted curve, each under its own name.
//!
//! *Mean band*: where the curve itself lies at one x. *Prediction band*: where the mean of k further
//! readings at one x will lie. *Simultaneous band*: where the whole curve lies, at every x at once.

use crate::distributions::f_upper;
use crate::fit::Fit;
use crate::numerics::roots::bracketed_root;

/// Factors of the bands of one fit, computed once.
#[derive(Debug, Clone)]
pub struct Bands<'a> {
    fit: &'a Fit,
    level: f64,
    k: usize,
    /// s², the variance of one new reading where v = 1.
    s2: f64,
    /// Two-sided Student factor.
    t: f64,
    /// √(p·F), the Working–Hotelling factor; 0 for a declared function.
    simultaneous: f64,
}

/// The curve and its bands at one place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BandsAt {
    /// f̂(x), output unit.
    pub value: f64,
    /// Half-width of the mean band, output unit.
    pub mean: f64,
    /// Half-width of the prediction band for the mean of k further readings, output unit.
    pub prediction: f64,
    /// Half-width of the simultaneous band, output unit.
    pub simultaneous: f64,
}

impl<'a> Bands<'a> {
    /// Prepares the bands of a fit; `None` while its scatter is not known (ν = 0) or `k` is 0.
    ///
    /// # Formula
    /// mean: t·√(Var f̂(x)); prediction: t·√(s²·v(x)/k + Var f̂(x)); simultaneous:
    /// √(p·F_{level; p, ν})·√(Var f̂(x)), with t = t_{(1+level)/2, ν}; s is the scatter where v = 1
    /// and ν its degrees of freedom, by the kind of weights (the normal factor where it is known).
    ///
    /// # Shapes and units
    /// `level` in (0, 1), e.g. 0.95; `k`: how many further readings are averaged. Output unit.
    ///
    /// # Source
    /// Draper & Smith, Applied Regression Analysis, 3rd ed., 3.1 and 5.4; H. Working & H. Hotelling
    /// (1929), J. Amer. Statist. Assoc. 24, 73–85. Both from memory.
    #[must_use]
    pub fn new(fit: &'a Fit, level: f64, k: usize) -> Option<Self> {
        let s = fit.scatter_sd()?;
        if k == 0 || !(level > 0.0 && level < 1.0) {
            return None;
        }
        let nu = fit.scatter_freedom();
        let p = fit.coefficients.len() as f64;
        Some(Self {
            fit,
            level,
            k,
            s2: s * s,
            t: fit.coverage_factor(level),
            simultaneous: if p > 0.0 { libm::sqrt(p * f_quantile(level, p, nu)?) } else { 0.0 },
        })
    }

    /// The level of all three bands.
    #[must_use]
    pub fn level(&self) -> f64 {
        self.level
    }

    /// How many further readings the prediction band averages.
    #[must_use]
    pub fn k(&self) -> usize {
        self.k
    }

    /// The bands at x (input unit); `None` where the curve has no value.
    #[must_use]
    pub fn at(&self, x: f64) -> Option<BandsAt> {
        let value = self.fit.curve.value(x);
        let mean_variance = self.fit.mean_variance(x);
        let new = self.s2 * self.fit.variance_at(x) / self.k as f64;
        let spread = libm::sqrt(mean_variance);
        let at = BandsAt {
            value,
            mean: self.t * spread,
            prediction: self.t * libm::sqrt(new + mean_variance),
            simultaneous: self.simultaneous * spread,
        };
        (at.value.is_finite() && at.prediction.is_finite()).then_some(at)
    }
}

/// The F with P(F(d1, d2) > F) = 1 − level.
fn f_quantile(level: f64, d1: f64, d2: f64) -> Option<f64> {
    // Logarithms make the tail straight, and keep small degrees of freedom within the bracket.
    let gap = |log_f: f64| f_upper(libm::exp(log_f), d1, d2) - (1.0 - level);
    bracketed_root(gap, -60.0, 60.0).ok().map(libm::exp)
}
