//! What a column can mean, under its name in a header and in `--columns`.

use serde::{Deserialize, Serialize};
use std::fmt;

/// What a column of a table holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Role {
    /// Value of the standard, in input units.
    Standard,
    /// Settled reading, in output units.
    Reading,
    /// Standard uncertainty of the standard, in input units.
    UStandard,
    /// Standard uncertainty of the reading, in output units.
    UReading,
    /// What the row is for: a standard, a zero reading, or a reading for the limit.
    Kind,
    /// As found, as left, or check.
    Stage,
    /// Number of the run.
    Run,
    /// Number of the cycle within a run.
    Cycle,
    /// Rising, falling, or at the turning point.
    Direction,
    /// Number of the application of the standard: rows that share it are looks at one application.
    Application,
    /// Number of the look within an application.
    Look,
    /// Place in the order of measurement.
    Order,
    /// Time of the reading, as written.
    Time,
}

impl Role {
    /// Every role, in the order of the contract.
    pub const ALL: [Self; 13] = [
        Self::Standard,
        Self::Reading,
        Self::UStandard,
        Self::UReading,
        Self::Kind,
        Self::Stage,
        Self::Run,
        Self::Cycle,
        Self::Direction,
        Self::Application,
        Self::Look,
        Self::Order,
        Self::Time,
    ];

    /// Columns whose cells carry a decimal mark.
    pub(super) const NUMERIC: [Self; 4] = [Self::Standard, Self::Reading, Self::UStandard, Self::UReading];

    /// The name in headers and options, such as `u_standard`.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Standard => "standard",
            Self::Reading => "reading",
            Self::UStandard => "u_standard",
            Self::UReading => "u_reading",
            Self::Kind => "kind",
            Self::Stage => "stage",
            Self::Run => "run",
            Self::Cycle => "cycle",
            Self::Direction => "direction",
            Self::Application => "application",
            Self::Look => "look",
            Self::Order => "order",
            Self::Time => "time",
        }
    }

    /// The role of that name; capitals do not matter, a space or hyphen stands for `_`, and `u(standard)` is
    /// `u_standard`.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        let name = name.trim();
        if name.len() > 16 {
            return None;
        }
        let name = name.to_lowercase().replace([' ', '-', '('], "_").replace(')', "");
        Self::ALL.into_iter().find(|role| role.name() == name)
    }

    /// All names, for a message.
    pub(super) fn all_names() -> String {
        Self::ALL.map(Self::name).join(", ")
    }
}

impl fmt::Display for Role {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.name())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_lead_to_their_role_and_back() {
        for role in Role::ALL {
            assert_eq!(Role::from_name(role.name()), Some(role));
            assert_eq!(serde_json::to_string(&role).unwrap(), format!("{:?}", role.name()));
        }
        assert_eq!(Role::from_name(" U(Standard) "), Some(Role::UStandard));
        assert_eq!(Role::from_name("u-reading"), Some(Role::UReading));
        assert_eq!(Role::from_name("signal"), None);
        assert_eq!(Role::from_name(""), None);
    }
}
