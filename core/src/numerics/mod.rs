//! Double-double arithmetic, least squares, roots, seeded streams.
//!
//! Everything here sees plain numbers: no units, no standards, no readings.

pub mod dd;
mod dd_constants;
mod dd_functions;
mod dd_power;
mod dd_real;
mod dd_trigonometry;
pub mod distance;
pub mod dual;
pub mod householder;
mod householder_factor;
pub mod least_squares;
pub mod levenberg;
mod levenberg_curvature;
mod levenberg_place;
mod levenberg_polish;
mod levenberg_step;
mod levenberg_trust;
pub mod nonlinear;
pub mod orthogonal;
pub mod real;
pub mod roots;
pub mod scale;
pub mod semidefinite;
pub mod streams;
pub mod sums;

pub use dd::Dd;
pub use dual::Dual;
pub use least_squares::{Basis, LeastSquares, SolveError};
pub use levenberg::{Minimum, NotConverged, Problem, Tried, minimise};
pub use nonlinear::{Function, Model, NonlinearError, NonlinearSolution, fit_model, fit_nonlinear};
pub use real::Real;

#[cfg(test)]
mod dd_functions_tests;
#[cfg(test)]
mod dd_tests;
#[cfg(test)]
mod least_squares_tests;
#[cfg(test)]
mod levenberg_tests;
#[cfg(test)]
mod nonlinear_tests;
#[cfg(test)]
mod refit_tests;
#[cfg(test)]
mod roots_tests;
#[cfg(test)]
mod streams_tests;
