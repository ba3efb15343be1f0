//! Pieces of the window that know nothing of projects.
//!
//! Each has an accessible name, shows when it has the keyboard, and takes its look from the theme.

mod choice;
mod field;
mod finding;
pub mod grid;
mod path_field;
mod question;

#[cfg(test)]
mod tests;

pub use choice::segmented;
pub use field::Field;
pub use finding::{Severity, caption, finding_line};
pub use path_field::PathField;
pub use question::{Question, QuestionState, ReasonKey, Reply};
