//! Distributions that statrs lacks, and quantiles brought to full double precision.

pub mod noncentral_t;
pub mod quantiles;

pub use noncentral_t::{noncentral_t_lower, noncentral_t_upper, noncentrality};
pub use quantiles::{
    chi2_lower, chi2_quantile, chi2_upper, f_upper, normal_lower, normal_quantile, t_lower, t_quantile, t_upper,
};

#[cfg(test)]
mod tests;
