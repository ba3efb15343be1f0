//! Distributions that statrs lacks, and quantiles brought to full double precision.

pub mod noncentral_t;
pub mod quadratic_form;
pub mod quantiles;
pub mod shapiro_wilk;

pub use noncentral_t::{noncentral_t_lower, noncentral_t_upper, noncentrality};
pub use quadratic_form::{Tails, ratio_tails, residual_eigenvalues};
pub use quantiles::{
    beta_lower, chi2_lower, chi2_quantile, chi2_upper, f_upper, normal_lower, normal_quantile, t_lower, t_quantile,
    t_upper,
};
pub use shapiro_wilk::{ShapiroWilk, shapiro_wilk};

#[cfg(test)]
mod quadratic_form_tests;
#[cfg(test)]
mod shapiro_wilk_tests;
#[cfg(test)]
mod tests;
