//! Quantities, units, moments in time, and the one formatter.

pub mod as_text;
pub mod format;
pub mod moment;
pub mod number;
pub mod unit;

pub use moment::Moment;
pub use unit::Unit;

/// Shared, cheaply cloned text as a person entered it.
pub type Text = std::sync::Arc<str>;
