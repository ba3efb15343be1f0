//! What a fit shows: bands, residuals, adequacy, advice.
//!
//! Pure functions over a [`crate::fit::Fit`]: numbers in, numbers out, no units and no sentences.

pub mod added;
pub mod advice;
pub mod bands;
pub mod departure;
pub mod ftest;
pub mod holm;
pub mod hysteresis;
pub mod lack_of_fit;
pub mod levels;
pub mod nonlinearity;
pub mod order;
pub mod outlier;
pub mod saturation;
pub mod shape;
pub mod spread;

#[cfg(test)]
mod tests;
