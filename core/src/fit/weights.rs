//! Names of weights as people type and read them.

use super::Weights;
use std::{fmt, str::FromStr};

/// All weights with their typed and their shown name.
pub const NAMES: [(Weights, &str, &str); 11] = [
    (Weights::Equal, "equal", "equal weights"),
    (Weights::InverseX, "1/x", "1/x"),
    (Weights::InverseX2, "1/x2", "1/x²"),
    (Weights::InverseY, "1/y", "1/y"),
    (Weights::InverseY2, "1/y2", "1/y²"),
    (Weights::Replicates, "replicates", "from repeats"),
    (Weights::ReplicatesConstant, "replicates:constant", "from repeats, one SD"),
    (Weights::ReplicatesProportional, "replicates:proportional", "from repeats, one relative SD"),
    (Weights::Raw, "1/s2", "1/s² of each level"),
    (Weights::Typed, "typed", "1/u²"),
    (Weights::Fitted, "fitted", "power of the signal"),
];

/// A text that names no weights.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error(
    "{found:?} names no weights; accepted: equal, replicates, replicates:constant, replicates:proportional, typed, \
     1/x, 1/x2, 1/y, 1/y2, 1/s2, fitted"
)]
pub struct NoSuchWeights {
    /// What was found.
    pub found: String,
}

impl Weights {
    /// The name on screens and reports, e.g. `1/x²`.
    #[must_use]
    pub fn plain_name(self) -> &'static str {
        NAMES.iter().find(|(w, ..)| *w == self).map_or("", |(.., shown)| shown)
    }
}

impl fmt::Display for Weights {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(NAMES.iter().find(|(w, ..)| w == self).map_or("", |(_, typed, _)| typed))
    }
}

impl FromStr for Weights {
    type Err = NoSuchWeights;
    fn from_str(text: &str) -> Result<Self, NoSuchWeights> {
        let named = NAMES.iter().find(|(_, typed, shown)| *typed == text || *shown == text);
        named.map(|(w, ..)| *w).ok_or_else(|| NoSuchWeights { found: text.to_owned() })
    }
}
