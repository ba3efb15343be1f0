//! Zero band, decision threshold, detection limit.
//!
//! Everything is in the net form: the uncertainty of the zero enters once, and an offset between the
//! curve and the measured zero does not leak into the limits.

pub mod asked;
pub mod band;
pub mod detection;
pub mod disagreement;
pub mod health;
mod misses;
mod net;
pub mod quantification;
pub mod smallest_change;
#[cfg(test)]
mod tests;
pub mod trial;
pub mod zeros_needed;
