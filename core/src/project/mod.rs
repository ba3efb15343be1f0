//! What a person entered, the commands that change it, and its evaluation.

pub mod about;
pub mod cautions;
pub mod columns;
pub mod command;
pub mod evaluate;
pub mod figures;
pub mod plan;

use crate::{
    quantity::Text,
    readings::{Chunked, Reading, ReadingId, Stage},
    standards::{Standard, StandardId},
};
use about::{Adjustment, Conditions, EarlierRecord, Import, Item, Kind, Person, Signed, UnitConversion};
use columns::{Choice, ColumnSpec, Declared};
use plan::Plan;
use std::{collections::BTreeMap, sync::Arc};

/// Everything a person entered; nothing that can be computed. Cloning is cheap.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Project {
    /// Practice or record.
    pub kind: Kind,
    /// Number of the report, unique.
    pub number: Option<Text>,
    /// Notes on the story behind the data, one paragraph each.
    pub story: Option<Text>,
    /// The item.
    pub item: Item,
    /// The plan.
    pub plan: Plan,
    /// People in order of appearance; the last one at the bench is `at_bench`.
    pub persons: Vec<Person>,
    /// Who is at the bench.
    pub at_bench: Option<Text>,
    /// Standards in order of entry.
    pub standards: Arc<Vec<Standard>>,
    /// Readings and zero readings in order of entry.
    pub readings: Chunked<Reading>,
    /// Conditions.
    pub conditions: Conditions,
    /// Columns of the comparison; empty = the first three.
    pub columns: Vec<ColumnSpec>,
    /// The stage looked at; `None`: as left once there is such a reading, else as found.
    pub stage: Option<Stage>,
    /// Declared function.
    pub declared: Option<Declared>,
    /// The choice, if one was made.
    pub choice: Option<Choice>,
    /// Unit conversions used.
    pub conversions: Vec<UnitConversion>,
    /// Adjustment between the stages.
    pub adjustment: Option<Adjustment>,
    /// Report rows marked not applicable, with reason.
    pub not_applicable: BTreeMap<Text, Text>,
    /// Findings marked as read.
    pub marked_read: Vec<Text>,
    /// Earlier record of the same instrument.
    pub earlier: Option<EarlierRecord>,
    /// Imported files.
    pub imports: Vec<Arc<Import>>,
    /// Signatures given.
    pub signatures: Vec<Signed>,
}

impl Project {
    /// A standard by its number.
    #[must_use]
    pub fn standard(&self, id: StandardId) -> Option<&Standard> {
        self.standards.get((id.0 as usize).checked_sub(1)?)
    }

    /// A reading by its number.
    #[must_use]
    pub fn reading(&self, id: ReadingId) -> Option<&Reading> {
        self.readings.get((id.0 as usize).checked_sub(1)?)
    }

    /// The columns to show, never none; *declared* last when a function is declared and no column holds it.
    #[must_use]
    pub fn shown_columns(&self) -> Vec<ColumnSpec> {
        let mut shown = if self.columns.is_empty() { columns::first_columns() } else { self.columns.clone() };
        let declared = ColumnSpec::plain(crate::model::Family::Declared);
        if self.columns.is_empty() && self.declared.is_some() && !shown.contains(&declared) {
            shown.push(declared);
        }
        shown
    }
}
