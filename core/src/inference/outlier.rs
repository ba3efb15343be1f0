//! One observation that looks unlike its neighbours.

use crate::distributions::t_quantile;
use crate::fit::Fit;

/// The observation whose residual stands out most.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Outlier {
    /// Its position in the fit's points.
    pub index: usize,
    /// Its externally studentised residual, dimensionless.
    pub studentised: f64,
    /// The limit it is held against, dimensionless.
    pub limit: f64,
    /// Its residual, output unit.
    pub residual: f64,
    /// |studentised| > limit.
    pub beyond: bool,
}

/// The largest externally studentised residual and its limit.
///
/// # Formula
/// tᵢ = eᵢ/(s₍ᵢ₎·√(vᵢ(1 − hᵢ))) against t_{1−0.025/n; ν−1}: 5 % over all n together (Bonferroni).
///
/// # Shapes and units
/// Dimensionless. `None` with ν < 2, or when no residual can be studentised.
///
/// # Source
/// R. D. Cook & S. Weisberg (1982), Residuals and Influence in Regression, 2.2; from memory.
#[must_use]
pub fn outlier(fit: &Fit) -> Option<Outlier> {
    if fit.degrees_of_freedom < 2 {
        return None;
    }
    let n = fit.points.len() as f64;
    let limit = t_quantile(1.0 - 0.025 / n, (fit.degrees_of_freedom - 1) as f64);
    let (index, studentised) = fit
        .studentised()
        .into_iter()
        .enumerate()
        .filter_map(|(i, t)| t.map(|t| (i, t)))
        .max_by(|a, b| a.1.abs().total_cmp(&b.1.abs()))?;
    Some(Outlier { index, studentised, limit, residual: fit.residuals[index], beyond: studentised.abs() > limit })
}
