//! What the bench remembers from frame to frame.

use super::{
    entry::Beside,
    model::{Row, standard_rows, zero_rows},
    papers::{PaperField, Whose},
    table::Import,
};
use crate::widgets::{PathField, QuestionState, grid::GridState};
use assize_core::{
    project::{Project, evaluate::Place},
    readings::ReadingId,
};
use std::collections::BTreeMap;

/// The part that has the room in a small window.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Part {
    /// Readings of standards.
    #[default]
    Readings,
    /// Zero readings.
    Zeros,
    /// The papers of the standards.
    Papers,
}

/// A correction that waits for its reason.
#[derive(Debug, Clone)]
pub struct Correcting {
    /// Which reading.
    pub id: ReadingId,
    /// What stood there.
    pub old: String,
    /// The new text.
    pub raw: String,
    /// The new value, output unit.
    pub value: f64,
    /// The question.
    pub question: QuestionState,
}

/// The memory of the bench.
#[derive(Default)]
pub struct State {
    pub(super) part: Part,
    pub(super) grid: GridState,
    pub(super) zero_grid: GridState,
    pub(super) beside: Beside,
    /// What was applied since the zero before, for the next zero reading.
    pub(super) between: String,
    /// What is wrong with the last step, and whether it was one of the zeros.
    pub(super) problem: Option<(bool, String)>,
    pub(super) correcting: Option<Correcting>,
    pub(super) import: Option<Import>,
    pub(super) path: Option<PathField>,
    pub(super) whose: Whose,
    pub(super) drafts: BTreeMap<PaperField, String>,
    pub(super) value_draft: Option<String>,
    pub(super) paper_problem: Option<(PaperField, String)>,
    /// A row of the entry line that was handed over and is not entered yet.
    pub(super) handed: Option<(bool, Vec<(usize, String)>)>,
    /// A finding's place, to be shown in the next frame.
    pub(super) wanted: Option<Place>,
    /// Whether one of the tables has the keyboard.
    pub(super) has_keyboard: bool,
    /// The table worked in last is the one of the zeros.
    pub(super) in_zeros: bool,
    rows: Option<Rows>,
}

/// Rows of both tables, made once for each revision.
struct Rows {
    revision: u64,
    standards: Vec<Row>,
    zeros: Vec<Row>,
}

impl State {
    /// Shows a place: a reading, the zeros, the data.
    pub fn go_to(&mut self, place: &Place) {
        self.wanted = Some(place.clone());
    }

    /// Asks for the path of a table.
    pub fn ask_for_table(&mut self) {
        self.path = Some(PathField::default().focused());
    }

    /// Shows how a table is understood.
    pub fn read_table(&mut self, name: String, bytes: Vec<u8>, zeros: bool) {
        self.path = None;
        self.import = Some(Import::new(name, bytes, zeros));
    }

    /// Whether a table has the keyboard: single letters are its own then.
    #[must_use]
    pub fn has_keyboard(&self) -> bool {
        self.has_keyboard
    }

    /// Gives the keyboard to the table worked in last.
    pub fn take_keyboard(&mut self) {
        let grid = if self.in_zeros { &mut self.zero_grid } else { &mut self.grid };
        grid.focus();
    }

    /// Puts a typed row back that was not entered after all.
    pub fn give_back(&mut self) {
        match self.handed.take() {
            Some((true, cells)) => self.zero_grid.refill_entry(&cells, super::grids::ZERO),
            Some((false, cells)) => self.grid.refill_entry(&cells, super::grids::READING),
            None => {}
        }
    }

    /// Puts the plan's next standard into the entry row.
    pub(super) fn advance(&mut self, typed: &str, next: &str) {
        if next != typed.trim() {
            let cells = [(super::grids::STANDARD, next.to_owned())];
            self.grid.refill_entry(&cells, super::grids::READING);
        }
    }

    /// Makes the rows anew when the project changed.
    pub(super) fn refresh(&mut self, project: &Project, revision: u64) {
        if self.rows.as_ref().is_some_and(|r| r.revision == revision) {
            return;
        }
        self.rows = Some(Rows { revision, standards: standard_rows(project), zeros: zero_rows(project) });
        self.handed = None;
    }

    pub(super) fn take_rows(&mut self) -> (Vec<Row>, Vec<Row>) {
        match &mut self.rows {
            Some(rows) => (std::mem::take(&mut rows.standards), std::mem::take(&mut rows.zeros)),
            None => (Vec::new(), Vec::new()),
        }
    }

    pub(super) fn put_rows(&mut self, (standards, zeros): (Vec<Row>, Vec<Row>)) {
        if let Some(rows) = &mut self.rows {
            rows.standards = standards;
            rows.zeros = zeros;
        }
    }
}
