//! What the table remembers between frames: cursor, selection, edit, the half-typed entry row.

use std::ops::Range;

use eframe::egui::{Id, Ui};

use super::sheet::{ENTRY, Place, Sheet};

/// The memory of one table; the caller keeps it beside its own view state.
#[derive(Debug, Clone, Default)]
pub struct GridState {
    /// Where the keyboard works.
    pub(super) cursor: Place,
    /// The other corner of the selection.
    pub(super) anchor: Place,
    /// The cell being edited.
    pub(super) edit: Option<Edit>,
    /// Texts of the entry row, by column.
    pub(super) entry: Vec<String>,
    /// Rows a page key moves.
    pub(super) page: usize,
    /// The cursor is to be scrolled into view.
    pub(super) reveal: bool,
    /// Height in which rows were seen in the last frame, points.
    height: f32,
    /// The row last reported as selected, by index.
    reported: Option<usize>,
    /// Whether the cursor has been put anywhere yet.
    placed: bool,
    /// The table is to have the keyboard from the next frame on.
    wants_focus: bool,
    /// The cell under the cursor is to be edited from the next frame on.
    wants_edit: bool,
}

/// An edit under way.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Edit {
    pub(super) place: Place,
    /// The text so far.
    pub(super) text: String,
    /// The text before.
    pub(super) original: String,
    /// Begun by typing: then the up and down arrows finish it.
    pub(super) typed: bool,
    /// The text field has not taken over yet.
    pub(super) fresh: bool,
}

impl GridState {
    /// Row (`None` for the entry row) and column of the cursor.
    #[must_use]
    pub fn cursor(&self) -> (Option<usize>, usize) {
        let row = (self.cursor.row != ENTRY).then_some(self.cursor.row);
        (row, self.cursor.col)
    }

    /// Selected existing rows, for a table of `rows` rows; empty in the entry row.
    #[must_use]
    pub fn selected_rows(&self, rows: usize) -> Range<usize> {
        let (a, b) = (self.anchor.row.min(rows), self.cursor.row.min(rows));
        a.min(b)..(a.max(b) + 1).min(rows)
    }

    /// Whether a cell is being edited.
    #[must_use]
    pub fn is_editing(&self) -> bool {
        self.edit.is_some()
    }

    /// Whether something half-typed stands in the entry row, kept texts not counted.
    #[must_use]
    pub fn entry_texts(&self) -> &[String] {
        &self.entry
    }

    /// Puts the cursor on a cell and scrolls there.
    pub fn go_to(&mut self, row: usize, col: usize) {
        self.put(Place { row, col });
        self.placed = true;
    }

    /// Puts the cursor at the start of the entry row (if there is one) and scrolls there.
    pub fn go_to_entry(&mut self) {
        self.put(Place { row: ENTRY, col: 0 });
        self.placed = false;
    }

    /// Gives the table the keyboard in the next frame.
    pub fn focus(&mut self) {
        self.wants_focus = true;
    }

    /// Begins to edit a cell in the next frame.
    pub fn edit_cell(&mut self, row: usize, col: usize) {
        self.go_to(row, col);
        self.wants_edit = true;
    }

    /// Puts texts back into the entry row, after a new row was refused, with the cursor at `col`.
    pub fn refill_entry(&mut self, cells: &[(usize, String)], col: usize) {
        for (place, text) in cells {
            self.set_entry(*place, text.clone());
        }
        self.put(Place { row: ENTRY, col });
    }

    /// Empties the entry row, kept texts as well.
    pub fn clear_entry(&mut self) {
        self.entry.clear();
    }

    /// Moves cursor and selection to one place and scrolls there.
    pub(super) fn put(&mut self, place: Place) {
        self.cursor = place;
        self.anchor = place;
        self.reveal = true;
    }

    pub(super) fn entry_text(&self, col: usize) -> &str {
        self.entry.get(col).map_or("", String::as_str)
    }

    pub(super) fn set_entry(&mut self, col: usize, text: String) {
        if self.entry.len() <= col {
            self.entry.resize(col + 1, String::new());
        }
        self.entry[col] = text;
    }

    /// The text of a cell as it was typed.
    pub(super) fn raw(&self, sheet: &Sheet, place: Place) -> String {
        match place.row {
            ENTRY => self.entry_text(place.col).to_owned(),
            row => sheet.source.raw(row, place.col),
        }
    }

    /// Selected rows by index, the entry row included.
    pub(super) fn selected_indices(&self, sheet: &Sheet) -> Range<usize> {
        let (a, b) = (sheet.index(self.anchor.row), sheet.index(self.cursor.row));
        a.min(b)..a.max(b) + 1
    }

    pub(super) fn selected_cols(&self) -> Range<usize> {
        let (a, b) = (self.anchor.col, self.cursor.col);
        a.min(b)..a.max(b) + 1
    }

    /// Takes note of the height in which rows of height `row` are seen, in points.
    ///
    /// When it shrinks, because something else grew, the cursor must not drop out of sight.
    pub(super) fn seen(&mut self, height: f32, row: f32) {
        let rows = (height / row).max(0.0) as usize;
        self.page = rows.saturating_sub(1).max(1);
        self.reveal |= height < self.height;
        self.height = height;
    }

    /// Whether a cell belongs to a selection of more than the cell under the cursor.
    pub(super) fn selected(&self, place: Place, sheet: &Sheet) -> bool {
        self.cursor != self.anchor
            && self.selected_indices(sheet).contains(&sheet.index(place.row))
            && self.selected_cols().contains(&place.col)
    }

    /// Follows the caller's data: rows may have come or gone since the last frame.
    pub(super) fn settle(&mut self, sheet: &Sheet) {
        if !self.placed {
            let start = match sheet.entry {
                Some(_) => Place { row: ENTRY, col: sheet.entry_start(&self.entry) },
                None => Place::default(),
            };
            self.cursor = start;
            self.anchor = start;
            self.placed = true;
        }
        self.cursor = sheet.clamp(self.cursor);
        self.anchor = sheet.clamp(self.anchor);
        self.page = self.page.max(1);
        let gone = |edit: &Edit| sheet.is_empty() || sheet.clamp(edit.place) != edit.place;
        if self.edit.as_ref().is_some_and(gone) {
            self.edit = None;
        }
        if std::mem::take(&mut self.wants_edit) {
            self.begin_edit(sheet);
        }
    }

    pub(super) fn take_focus_if_asked(&mut self, ui: &Ui, grid: Id) {
        if std::mem::take(&mut self.wants_focus) && self.edit.is_none() {
            ui.memory_mut(|memory| memory.request_focus(grid));
        }
    }

    /// The row the cursor came to, once.
    pub(super) fn newly_selected(&mut self, sheet: &Sheet) -> Option<usize> {
        let row = sheet.index(self.cursor.row);
        (!sheet.is_empty() && self.reported.replace(row) != Some(row)).then_some(row)
    }

    /// What a screen reader says about the table: the cell under the cursor.
    pub(super) fn spoken(&self, sheet: &Sheet) -> String {
        if sheet.is_empty() {
            return "empty".to_owned();
        }
        format!("{}: {}", sheet.name(self.cursor), self.raw(sheet, self.cursor))
    }
}
