//! How often intervals that say 95 % hold the truth, by simulation.
//!
//! A [`Scenario`] invents data of a known truth and asks some questions of every fit; [`simulate`] counts
//! the answers that hold. A further scenario is one entry in `list.rs`; the table in `tests/README.md` and
//! the check in `tests/coverage` take it from there.

mod list;
mod marked;
mod question;
mod run;
mod scenario;
mod table;

pub use list::scenarios;
pub use marked::replaced;
pub use question::{Question, Row};
pub(crate) use run::hash;
pub use run::{Outcome, simulate};
pub use scenario::{Common, Design, Scatter, Scenario, Truth, line, line_through_zero, logarithm, quadratic};
pub use table::table;

/// The level that every interval is asked for.
pub const LEVEL: f64 = 0.95;

/// Seed of all simulations.
pub const SEED: u64 = 20_261_201;
