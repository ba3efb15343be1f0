//! The demonstration projects: invented data of an invented workshop, *Skerrow Tideworks*, made from a
//! seed, and one real calibration named by its published source.
//!
//! Each demo has a lesson that holds for other seeds too; `tests/demos` checks that.

mod build;
mod data;
mod light_sensor;
mod load_cell;
mod photometer;
mod tension_link;
mod thermistor;
mod transmitter;
mod turbidity;

pub use build::{Demo, Row, Spec};

/// The seed of the shipped files.
pub const SHIPPED_SEED: u64 = 20_261_103;

/// A maker of demos: seed in, specification out.
pub type Maker = fn(u64) -> Spec;

/// All demos in the order in which they are listed.
pub const ALL: [Maker; 7] = [
    tension_link::spec,
    thermistor::spec,
    light_sensor::spec,
    photometer::spec,
    transmitter::spec,
    turbidity::spec,
    load_cell::spec,
];

/// The demo with this file name, from a seed.
#[must_use]
pub fn named(file: &str, seed: u64) -> Option<Demo> {
    ALL.iter().map(|make| make(seed)).find(|spec| spec.file == file).map(|spec| spec.build())
}
