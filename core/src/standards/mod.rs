//! Measurement standards as entered: frozen copies of what the certificate says.

use crate::quantity::Text;
use serde::{Deserialize, Serialize};

/// Number of a standard inside a project, from 1.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(transparent)]
pub struct StandardId(pub u32);

/// How a certificate states its doubt; a bare U without k cannot be expressed.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub enum StatedUncertainty {
    /// A standard uncertainty u, input unit.
    Standard(f64),
    /// An expanded uncertainty with its coverage factor.
    Expanded {
        /// U, input unit.
        expanded: f64,
        /// k.
        factor: f64,
    },
    /// Limits ±a of a rectangular distribution, input unit.
    Limits(f64),
}

impl StatedUncertainty {
    /// The standard uncertainty: U/k, a/√3, or as typed (JCGM 100:2008, 4.3.3 and 4.3.7), input unit.
    #[must_use]
    pub fn standard(self) -> f64 {
        match self {
            Self::Standard(u) => u,
            Self::Expanded { expanded, factor } => expanded / factor,
            Self::Limits(a) => a / libm::sqrt(3.0),
        }
    }

    /// Whether the numbers can be used: finite, not negative, a positive factor.
    #[must_use]
    pub fn is_usable(self) -> bool {
        let u = self.standard();
        u.is_finite() && u >= 0.0
    }
}

/// What stands on paper about a standard; every field may stay empty.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(default)]
pub struct StandardPapers {
    /// Name or identity mark, e.g. `PR-2`.
    pub identity: Option<Text>,
    /// Certificate number.
    pub certificate: Option<Text>,
    /// Who issued the certificate.
    pub issuer: Option<Text>,
    /// Date of the certificate.
    pub dated: Option<Text>,
    /// Date when the next calibration is due.
    pub due: Option<Text>,
    /// Standards with the same group share a cause of error (one parent, stacked weights).
    pub group: Option<Text>,
    /// Entry of the register it was copied from.
    pub register: Option<Text>,
    /// Digest of that register entry.
    pub register_digest: Option<Text>,
    /// What the certificate says about the doubt.
    pub uncertainty: Option<StatedUncertainty>,
    /// The part of that doubt which the group shares; without it the group shares all of it.
    pub shared: Option<StatedUncertainty>,
}

/// One standard value that is applied to the item.
#[derive(Debug, Clone, PartialEq)]
pub struct Standard {
    /// Its number.
    pub id: StandardId,
    /// The value as typed.
    pub raw: Text,
    /// Certified value, input unit.
    pub value: f64,
    /// What stands on paper.
    pub papers: StandardPapers,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn kinds_of_statement() {
        // JCGM 100:2008, 4.3.3 (U/k) and 4.3.7 (a/√3).
        assert!((StatedUncertainty::Expanded { expanded: 0.04, factor: 2.0 }.standard() - 0.02).abs() < 1e-15);
        assert!((StatedUncertainty::Limits(3.0).standard() - 3f64.sqrt()).abs() < 1e-15);
        assert!(!StatedUncertainty::Expanded { expanded: 0.04, factor: 0.0 }.is_usable());
        assert!(!StatedUncertainty::Standard(-1.0).is_usable());
    }
}
