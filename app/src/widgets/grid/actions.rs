//! What each key does to the table; knows nothing of windows.

use super::GridEvent;
use super::sheet::{ENTRY, Place, Sheet};
use super::state::{Edit, GridState};

/// One step of the keyboard.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Act {
    /// Cursor keys; `extend` with Shift.
    Move { step: Step, extend: bool },
    /// Typed characters.
    Text(String),
    /// Backspace key.
    Backspace,
    /// Enter; `back` with Shift.
    Enter { back: bool },
    /// Tab; `back` with Shift.
    Tab { back: bool },
    /// Escape key.
    Escape,
    /// F2, or a double click: edit what is there.
    Edit,
    /// Delete key.
    Clear,
    /// Clipboard text.
    Paste(String),
    /// Copy the selection.
    Copy,
    /// Copy the selection, then empty it.
    Cut,
    /// Select every existing row.
    SelectAll,
}

/// Where a cursor key leads.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Step {
    Up,
    Down,
    Left,
    Right,
    RowStart,
    RowEnd,
    PageUp,
    PageDown,
    Top,
    Bottom,
}

/// What came of the keys of one frame.
#[derive(Debug, Default)]
pub(super) struct Outcome {
    pub(super) events: Vec<GridEvent>,
    /// Text for the clipboard.
    pub(super) copied: Option<String>,
    /// The keyboard goes to a neighbour of the table.
    pub(super) leave: Option<Leave>,
}

/// Direction in which the keyboard leaves.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Leave {
    Forwards,
    Backwards,
}

impl GridState {
    /// Does one step.
    pub(super) fn act(&mut self, act: Act, sheet: &Sheet, out: &mut Outcome) {
        if sheet.is_empty() {
            out.leave = match act {
                Act::Tab { back: false } => Some(Leave::Forwards),
                Act::Tab { back: true } => Some(Leave::Backwards),
                _ => out.leave,
            };
            return;
        }
        match act {
            Act::Text(text) => self.type_text(&text, sheet, out),
            Act::Backspace => match &mut self.edit {
                Some(edit) => drop(edit.text.pop()),
                None => self.clear(sheet, out),
            },
            Act::Escape => self.edit = None,
            Act::Edit => self.begin_edit(sheet),
            Act::Paste(text) => self.paste(&text, sheet, out),
            Act::Move { step, extend } => {
                self.commit(sheet, out);
                self.step(step, extend, sheet);
            }
            Act::Enter { back } => {
                self.commit(sheet, out);
                self.enter(back, sheet, out);
            }
            Act::Tab { back } => {
                self.commit(sheet, out);
                self.tab(back, sheet, out);
            }
            Act::Clear => self.clear(sheet, out),
            Act::Copy => out.copied = Some(self.selected_text(sheet)),
            Act::Cut => {
                out.copied = Some(self.selected_text(sheet));
                self.clear(sheet, out);
            }
            Act::SelectAll => {
                self.anchor = sheet.clamp(Place::default());
                self.cursor = Place { row: sheet.rows().saturating_sub(1), col: sheet.last_col() };
                self.cursor = sheet.clamp(self.cursor);
            }
        }
    }

    /// Takes the text of the edit under way, if there is one.
    pub(super) fn commit(&mut self, sheet: &Sheet, out: &mut Outcome) {
        let Some(edit) = self.edit.take() else { return };
        let text = edit.text.trim().to_owned();
        let Place { row, col } = edit.place;
        if row == ENTRY {
            self.set_entry(col, text);
        } else if row < sheet.rows() && text != edit.original.trim() {
            out.events.push(GridEvent::Edit { row, col, text });
        }
    }

    /// Begins to edit the cell under the cursor with the text it has.
    pub(super) fn begin_edit(&mut self, sheet: &Sheet) {
        let text = self.raw(sheet, self.cursor);
        self.begin(text, false, sheet);
    }

    fn begin(&mut self, text: String, typed: bool, sheet: &Sheet) {
        if sheet.is_empty() || !sheet.editable(self.cursor.col) {
            return;
        }
        let place = self.cursor;
        self.put(place);
        self.edit = Some(Edit { place, text, original: self.raw(sheet, place), typed, fresh: true });
    }

    fn type_text(&mut self, text: &str, sheet: &Sheet, out: &mut Outcome) {
        if let Some(edit) = &mut self.edit {
            edit.text.push_str(text);
            return;
        }
        let letters = sheet.columns().get(self.cursor.col).is_some_and(|column| column.letters && column.editable);
        if letters || text.starts_with(starts_a_number) {
            self.begin(text.to_owned(), true, sheet);
            return;
        }
        let row = sheet.index(self.cursor.row);
        let requests = text.chars().map(|key| GridEvent::Request { row, key });
        out.events.extend(requests);
    }

    fn step(&mut self, step: Step, extend: bool, sheet: &Sheet) {
        let Place { row, col } = self.cursor;
        let index = sheet.index(row);
        let last = sheet.total_rows() - 1;
        let (index, col) = match step {
            Step::Up => (index.saturating_sub(1), col),
            Step::Down => (index + 1, col),
            Step::Left => (index, col.saturating_sub(1)),
            Step::Right => (index, col + 1),
            Step::RowStart => (index, 0),
            Step::RowEnd => (index, sheet.last_col()),
            Step::PageUp => (index.saturating_sub(self.page), col),
            Step::PageDown => (index.saturating_add(self.page), col),
            Step::Top => (0, col),
            Step::Bottom => (last, col),
        };
        self.cursor = sheet.clamp(Place { row: sheet.row_at(index.min(last)), col });
        if !extend {
            self.anchor = self.cursor;
        }
        self.reveal = true;
    }

    fn enter(&mut self, back: bool, sheet: &Sheet, out: &mut Outcome) {
        if back {
            self.step(Step::Up, false, sheet);
        } else if self.cursor.row != ENTRY {
            self.step(Step::Down, false, sheet);
        } else if self.cursor.col >= sheet.finishing_col() {
            self.finish_row(sheet, out);
        } else if let Some(col) = sheet.editable_after(self.cursor.col) {
            self.put(Place { row: ENTRY, col });
        } else {
            self.finish_row(sheet, out);
        }
    }

    fn tab(&mut self, back: bool, sheet: &Sheet, out: &mut Outcome) {
        let Place { row, col } = self.cursor;
        let index = sheet.index(row);
        if back {
            match sheet.editable_before(col) {
                Some(col) => self.put(Place { row, col }),
                None if index > 0 => self.put(Place { row: index - 1, col: sheet.last_editable() }),
                None => out.leave = Some(Leave::Backwards),
            }
        } else if let Some(col) = sheet.editable_after(col) {
            self.put(Place { row, col });
        } else if row == ENTRY {
            if !self.finish_row(sheet, out) {
                out.leave = Some(Leave::Forwards);
            }
        } else if index + 1 < sheet.total_rows() {
            let row = sheet.row_at(index + 1);
            let col = sheet.first_editable();
            self.put(Place { row, col });
        } else {
            out.leave = Some(Leave::Forwards);
        }
    }

    /// Reports the entry row as a new row, if anything besides kept texts was typed.
    fn finish_row(&mut self, sheet: &Sheet, out: &mut Outcome) -> bool {
        let typed = |col: usize| !self.entry_text(col).is_empty();
        let cols = 0..sheet.columns().len();
        if !cols.clone().any(|col| typed(col) && !sheet.repeats(col)) {
            return false;
        }
        let cells = cols.filter(|col| typed(*col)).map(|col| (col, self.entry_text(col).to_owned())).collect();
        out.events.push(GridEvent::NewRow { cells });
        for (col, text) in self.entry.iter_mut().enumerate() {
            if !sheet.repeats(col) {
                text.clear();
            }
        }
        let col = sheet.entry_start(&self.entry);
        self.put(Place { row: ENTRY, col });
        true
    }

    fn clear(&mut self, sheet: &Sheet, out: &mut Outcome) {
        let (rows, cols) = (self.selected_indices(sheet), self.selected_cols());
        if rows.end > sheet.rows() {
            for col in cols.clone() {
                self.set_entry(col, String::new());
            }
        }
        let rows = rows.start..rows.end.min(sheet.rows());
        if !rows.is_empty() {
            out.events.push(GridEvent::Clear { rows, cols });
        }
    }

    fn paste(&mut self, text: &str, sheet: &Sheet, out: &mut Outcome) {
        let cells = block(text);
        let single = matches!(cells.as_slice(), [row] if row.len() == 1);
        if let (Some(edit), true) = (&mut self.edit, single) {
            edit.text.push_str(cells[0][0].as_str());
            return;
        }
        // A block replaces what was being typed.
        self.edit = None;
        let row = self.selected_indices(sheet).start;
        let col = self.selected_cols().start;
        if cells.is_empty() {
            return;
        }
        if single && row >= sheet.rows() && sheet.editable(col) {
            self.set_entry(col, cells[0][0].clone());
            return;
        }
        out.events.push(GridEvent::Paste { row, col, cells });
    }

    /// The selection as lines of texts between tabs.
    fn selected_text(&self, sheet: &Sheet) -> String {
        let mut lines = Vec::new();
        for index in self.selected_indices(sheet) {
            let row = sheet.row_at(index);
            let line: Vec<String> = self.selected_cols().map(|col| self.raw(sheet, Place { row, col })).collect();
            lines.push(line.join("\t"));
        }
        lines.join("\n")
    }
}

/// Whether a number can start with this character.
fn starts_a_number(c: char) -> bool {
    c.is_ascii_digit() || matches!(c, '+' | '-' | '−' | '.' | ',')
}

/// Whether a text to paste is more than one cell.
pub(super) fn is_block(text: &str) -> bool {
    let cells = block(text);
    cells.len() > 1 || cells.first().is_some_and(|row| row.len() > 1)
}

/// Splits clipboard text into rows and cells; the line end after the last row starts no row.
fn block(text: &str) -> Vec<Vec<String>> {
    let lines = text.replace("\r\n", "\n").replace('\r', "\n");
    let lines = lines.strip_suffix('\n').unwrap_or(&lines);
    if lines.is_empty() {
        return Vec::new();
    }
    lines.split('\n').map(|line| line.split('\t').map(|cell| cell.trim().to_owned()).collect()).collect()
}
