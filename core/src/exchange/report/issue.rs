//! What an issue of a report adds to the project: number, time, kind, signature boxes.
//!
//! It travels inside the PDF, so that an auditor's machine can compose the same document again.

use crate::quantity::Moment;
use serde::{Deserialize, Serialize};

/// Version of the composition and typesetting; raised whenever the same record would print differently.
pub const RENDERER: u32 = 1;

/// An issue of a report.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Issue {
    /// [`RENDERER`] at the time of issue.
    pub renderer: u32,
    /// Version of the program.
    pub program: String,
    /// When it was issued.
    pub at: Moment,
    /// Who signs, as printed in the box; `None` for a draft.
    pub signer: Option<Signer>,
}

/// A printed signature box.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Signer {
    /// Printed name.
    pub name: String,
    /// Meaning, e.g. `performed`.
    pub meaning: String,
    /// Fingerprint of the key, in groups of four.
    pub fingerprint: String,
}
