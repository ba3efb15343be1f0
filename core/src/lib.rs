//! The shared core of the calibration studio.
//!
//! A [`project::Project`] holds what a person entered; `evaluate` computes all the rest.
//! Nothing here knows a window, a clock or a file: bytes and times come in as values.

pub mod convert;
pub mod distributions;
pub mod exchange;
pub mod fit;
pub mod inference;
pub mod model;
pub mod numerics;
pub mod project;
pub mod quantity;
pub mod readings;
pub mod record;
pub mod standards;
pub mod trail;
pub mod zero;
