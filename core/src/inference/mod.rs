//! What a fit shows: bands, residuals, adequacy, advice.
//!
//! Pure functions over a [`crate::fit::Fit`]: numbers in, numbers out, no units and no sentences.

pub mod added;
pub mod advice;
pub mod applications;
pub mod bands;
pub mod breusch_pagan;
pub mod cochran;
pub mod departure;
pub mod durbin_watson;
pub mod forced_zero;
pub mod ftest;
pub mod grubbs;
pub mod holm;
pub mod hysteresis;
pub mod joint;
pub mod lack_of_fit;
pub mod levels;
pub mod leverage;
pub mod line_up;
pub mod nonlinearity;
pub mod normality;
pub mod order;
pub mod outlier;
pub mod runs;
pub mod saturation;
pub mod shape;
pub mod sphere;
pub mod spread;
pub mod top_term;

#[cfg(test)]
mod law_tests;
#[cfg(test)]
mod reference_tests;
#[cfg(test)]
mod tests;
#[cfg(test)]
mod worked_examples;
