//! Rooms of the window, one folder each: `mod` (short), `state` (frame to frame), `model` (what to show,
//! no egui), `paint`.
//!
//! A room draws from an immutable [`View`] and answers with [`Wish`]es; only the session changes anything.

pub mod bench;
pub mod compare;
pub mod plan;
pub mod record;

use assize_core::{
    project::{
        Project,
        command::Command,
        evaluate::{Evaluation, Place},
    },
    quantity::Text,
    trail::Document,
};
use std::path::PathBuf;

/// The rooms that exist.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default)]
pub enum Room {
    /// What is fixed before the first reading.
    Plan,
    /// Standards, readings, zeros.
    Bench,
    /// Fits side by side.
    #[default]
    Compare,
    /// Trail, report, signature.
    Record,
}

impl Room {
    /// All rooms in their order.
    pub const ALL: [Self; 4] = [Self::Plan, Self::Bench, Self::Compare, Self::Record];

    /// The name on screen.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Plan => "Plan",
            Self::Bench => "Bench",
            Self::Compare => "Compare",
            Self::Record => "Record",
        }
    }
}

/// What a room sees; it changes nothing.
#[derive(Clone, Copy)]
pub struct View<'a> {
    /// The project as it stands.
    pub project: &'a Project,
    /// The project with its trail.
    pub document: &'a Document,
    /// Everything computed from it.
    pub evaluation: &'a Evaluation,
    /// Revision of the project: changes with every accepted entry.
    pub revision: u64,
    /// Name of the file.
    pub file: Option<&'a std::path::Path>,
}

/// What a room asks for.
#[derive(Debug, Clone, PartialEq)]
pub enum Wish {
    /// A change of the project.
    Enter {
        /// What.
        command: Command,
        /// Why, where it matters.
        because: Option<Text>,
    },
    /// To another room, and there to a place.
    Go(Room, Option<Place>),
    /// Opens a project, a table or a PDF.
    Open(PathBuf),
    /// Picks the columns of the comparison.
    PickColumns,
    /// Starts an empty project.
    StartOwn,
    /// A copy of the project file.
    CopyTo(PathBuf),
    /// Imports a table into the project.
    Import {
        /// Which file.
        path: PathBuf,
        /// Whether its rows are zero readings.
        zeros: bool,
    },
    /// Writes the report, signed when a key is given.
    Report {
        /// Where to.
        path: PathBuf,
        /// Key file and passphrase.
        sign: Option<SignWith>,
    },
    /// Makes a new key.
    NewKey {
        /// Printed name.
        name: String,
        /// Where to.
        path: PathBuf,
        /// Passphrase.
        passphrase: String,
    },
    /// Checks a PDF.
    Verify(PathBuf),
    /// Says whose key it is that signed a PDF.
    Know {
        /// Whose.
        name: String,
        /// Fingerprint of the key.
        fingerprint: String,
        /// The PDF, to be checked again.
        of: PathBuf,
    },
}

/// With which key a report is signed, and what the signature means.
#[derive(Debug, Clone, PartialEq)]
pub struct SignWith {
    /// Key file.
    pub key: PathBuf,
    /// Its passphrase.
    pub passphrase: String,
    /// Meaning, e.g. `performed`.
    pub meaning: String,
}
