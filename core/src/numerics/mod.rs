//! Double-double arithmetic, least squares, roots, seeded streams.
//!
//! Everything here sees plain numbers: no units, no standards, no readings.

pub mod dd;
mod dd_functions;
pub mod householder;
pub mod least_squares;
pub mod orthogonal;
pub mod roots;
pub mod scale;
pub mod streams;

pub use dd::Dd;
pub use least_squares::{Basis, LeastSquares, SolveError};

#[cfg(test)]
mod dd_tests;
#[cfg(test)]
mod least_squares_tests;
#[cfg(test)]
mod roots_tests;
#[cfg(test)]
mod streams_tests;
