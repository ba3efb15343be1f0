//! Shared pieces of the checks: the invented demonstration projects, and simulations of known truth.

pub mod advice;
pub mod coverage;
pub mod demos;
