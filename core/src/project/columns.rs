//! Columns of the comparison, and the choice among them.

use super::plan::ZerosPart;
use crate::{
    fit::Weights,
    model::Family,
    quantity::{Moment, Text, as_text},
};
use serde::{Deserialize, Serialize};

/// Which axes carry the errors that are minimised.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Default, Serialize, Deserialize)]
pub enum Axes {
    /// Only the readings.
    #[default]
    ReadingsOnly,
    /// Readings and standards.
    Both,
}

/// A column: family + weights + axes + the zeros' part.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
pub struct ColumnSpec {
    /// Family.
    #[serde(with = "as_text")]
    pub family: Family,
    /// Weights.
    #[serde(with = "as_text")]
    pub weights: Weights,
    /// Axes.
    #[serde(default)]
    pub axes: Axes,
    /// Zeros' part; `None` = as the plan says.
    #[serde(default)]
    pub zeros: Option<ZerosPart>,
}

impl ColumnSpec {
    /// A column with equal weights, errors in the readings only, zeros as planned.
    #[must_use]
    pub fn plain(family: Family) -> Self {
        Self { family, weights: Weights::Equal, axes: Axes::ReadingsOnly, zeros: None }
    }

    /// What stands in the head of the column: `Line`, `Line · 1/x²`.
    #[must_use]
    pub fn head(&self) -> String {
        let mut head = self.family.plain_name();
        if self.weights != Weights::Equal {
            head.push_str(" · ");
            head.push_str(self.weights.plain_name());
        }
        if self.axes == Axes::Both {
            head.push_str(" · both axes");
        }
        if self.zeros == Some(ZerosPart::CheckOnly) {
            head.push_str(" · zeros only check");
        }
        head
    }
}

/// Line, quadratic and logarithm: what a project shows before anybody picks columns.
#[must_use]
pub fn first_columns() -> Vec<ColumnSpec> {
    [Family::Polynomial(1), Family::Polynomial(2), Family::Log].into_iter().map(ColumnSpec::plain).collect()
}

/// The declared function with its source.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Declared {
    /// The formula in `x` as typed.
    pub formula: Text,
    /// Where it comes from: nominal, last record, device.
    pub origin: Text,
}

/// The function a person chose, with the reason.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Choice {
    /// The column.
    pub column: ColumnSpec,
    /// Why.
    pub because: Text,
    /// By whom.
    pub by: Text,
    /// When.
    pub at: Moment,
}
