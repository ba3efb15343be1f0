//! Readings and zero readings as entered.

pub mod chunked;

use crate::{
    quantity::{Moment, Text},
    standards::StandardId,
};
use serde::{Deserialize, Serialize};

pub use chunked::Chunked;

/// Number of a reading inside a project, from 1, in order of entry.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(transparent)]
pub struct ReadingId(pub u32);

/// What was applied when the reading was taken.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Applied {
    /// A standard.
    Standard(StandardId),
    /// Nothing, or the zero standard: a zero reading.
    Nothing {
        /// What was applied since the zero reading before, as typed.
        between: Option<Text>,
    },
}

/// Before any touch, after all work, or a check with points that are not fitted. Stages are never pooled.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default, Serialize, Deserialize)]
pub enum Stage {
    /// As found.
    #[default]
    AsFound,
    /// As left.
    AsLeft,
    /// Check points, never fitted.
    Check,
}

/// From which side the standard was approached.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default, Serialize, Deserialize)]
pub enum Direction {
    /// Rising.
    Rising,
    /// Falling.
    Falling,
    /// The highest or lowest point, where the direction turns.
    TurningPoint,
    /// No direction.
    #[default]
    None,
}

/// Where a reading came from.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize)]
pub enum Source {
    /// Typed at the bench.
    #[default]
    Typed,
    /// Pasted from another program.
    Pasted,
    /// A row of an imported file.
    File {
        /// Digest of the file.
        digest: Text,
        /// Line in the file, from 1.
        line: u32,
    },
    /// An instrument port.
    Port {
        /// Its name.
        name: Text,
    },
}

/// The one-key reasons for a correction.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Slip {
    /// Typed wrong.
    TypedWrong,
    /// Read wrong.
    ReadWrong,
    /// Wrong row.
    WrongRow,
    /// Not settled.
    NotSettled,
    /// Other; the entry carries the words.
    Other,
}

/// A value that was replaced; nothing entered is lost.
#[derive(Debug, Clone, PartialEq)]
pub struct Correction {
    /// The old text.
    pub raw: Text,
    /// The old value, output unit.
    pub value: f64,
    /// Why it was replaced.
    pub slip: Slip,
    /// When.
    pub at: Moment,
    /// By whom.
    pub by: Text,
}

/// One look at the instrument.
#[derive(Debug, Clone, PartialEq)]
pub struct Reading {
    /// Its number.
    pub id: ReadingId,
    /// What was applied.
    pub applied: Applied,
    /// The text as typed, pasted or read.
    pub raw: Text,
    /// The value, output unit.
    pub value: f64,
    /// Standard uncertainty of the reading where the table gave one, output unit.
    pub uncertainty: Option<f64>,
    /// Stage.
    pub stage: Stage,
    /// Run number, from 1.
    pub run: u32,
    /// Cycle number, from 1.
    pub cycle: u32,
    /// Direction.
    pub direction: Direction,
    /// Application number: looks of one application share it.
    pub application: u32,
    /// Look number inside the application, from 1.
    pub look: u32,
    /// Place in run order where it is known.
    pub order: Option<u32>,
    /// When it was taken, where known.
    pub time: Option<Moment>,
    /// Who took it.
    pub person: Text,
    /// Where it came from.
    pub source: Source,
    /// It was questioned and let stand.
    pub questioned: bool,
    /// It was taken before the settling time was over.
    pub early: bool,
    /// Why it is set aside; `None` while it counts.
    pub set_aside: Option<Text>,
    /// Values it had before, oldest first.
    pub corrections: Vec<Correction>,
}

impl Reading {
    /// Whether nothing was applied.
    #[must_use]
    pub fn is_zero(&self) -> bool {
        matches!(self.applied, Applied::Nothing { .. })
    }

    /// Whether it takes part in fits and bands.
    #[must_use]
    pub fn counts(&self) -> bool {
        self.set_aside.is_none() && self.value.is_finite()
    }
}
