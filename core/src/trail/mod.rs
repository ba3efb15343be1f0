//! The append-only, hash-chained list of entries: at once undo, crash recovery and audit trail.
//!
//! One project is one text file: a header line and one RON entry a line. Each line ends with a digest
//! over everything before it, so a changed byte anywhere is found; nothing is ever rewritten.

pub mod chain;
pub mod document;
pub mod sentences;
pub mod tally;

#[cfg(test)]
mod tests;

pub use chain::{Digest, FileProblem, Loaded};
pub use document::Document;
pub use tally::Tally;
