//! Counts that a report prints so that nothing is hidden: taken back, corrected, tried.

use crate::project::command::{Act, ColumnsCommand, Command, ReadingsCommand};
use std::collections::BTreeSet;

/// Counts over a trail.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Tally {
    /// Entries in all.
    pub entries: usize,
    /// Readings that were accepted and then taken back (and not put back again).
    pub readings_taken_back: usize,
    /// Changes of any kind taken back and not put back.
    pub taken_back: usize,
    /// Corrections of readings.
    pub corrected: usize,
    /// Heads of all columns ever shown.
    pub columns_tried: BTreeSet<String>,
    /// Changes of the plan after it was fixed.
    pub plan_changes_after_fixing: usize,
}

impl Tally {
    /// Counts the acts.
    #[must_use]
    pub fn of(acts: &[Act]) -> Self {
        let mut tally = Self { entries: acts.len(), ..Self::default() };
        // Replays only what undo touches: stacks of entry numbers.
        let (mut undo, mut redo): (Vec<usize>, Vec<usize>) = (Vec::new(), Vec::new());
        let mut fixed = false;
        for (n, act) in acts.iter().enumerate() {
            match &act.command {
                Command::TakeBack => redo.extend(undo.pop()),
                Command::PutBack => undo.extend(redo.pop()),
                other => {
                    // What was taken back and is now overtaken stays taken back for good.
                    redo.drain(..).for_each(|gone| tally.lose(&acts[gone].command));
                    undo.push(n);
                    tally.note(other, fixed);
                    fixed |= readings_in(other) > 0;
                }
            }
        }
        redo.iter().for_each(|&gone| tally.lose(&acts[gone].command));
        tally
    }

    fn lose(&mut self, command: &Command) {
        self.taken_back += 1;
        self.readings_taken_back += readings_in(command);
    }

    fn note(&mut self, command: &Command, fixed: bool) {
        match command {
            Command::Readings(ReadingsCommand::Correct { .. }) => self.corrected += 1,
            Command::Columns(ColumnsCommand::Show(columns)) => {
                self.columns_tried.extend(columns.iter().map(crate::project::columns::ColumnSpec::head));
            }
            Command::Plan(_) if fixed => self.plan_changes_after_fixing += 1,
            _ => {}
        }
    }
}

fn readings_in(command: &Command) -> usize {
    match command {
        Command::Readings(ReadingsCommand::Add(rows) | ReadingsCommand::Import(_, rows)) => rows.len(),
        _ => 0,
    }
}
