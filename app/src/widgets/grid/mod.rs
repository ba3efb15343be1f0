//! An editable table that owns no data.
//!
//! The caller lends a `GridSource` each frame and gets back what the person did as `GridEvent`s;
//! nothing in the table changes until the caller changes its own data. One widget has the
//! keyboard for the whole table, cells are only painted, and only visible rows are looked at.
//!
//! Keys: digits, sign and decimal mark start typing; Enter takes the text and goes down; Tab goes
//! right; in the entry row both walk through the columns and the last one adds the row. F2 edits,
//! Escape gives up an edit (and, without one, leaves the table), Delete clears, arrows, Home, End
//! and the page keys move, Shift extends. Other letters are passed on as requests.

mod actions;
mod cells;
mod editor;
mod keys;
mod paint;
mod pointer;
mod sheet;
mod state;
mod types;

#[cfg(test)]
mod block_tests;
#[cfg(test)]
mod model_tests;
#[cfg(test)]
mod window_tests;

use eframe::egui::{self, FocusDirection, Id, Response, Sense, Ui, WidgetInfo, vec2};

use crate::theme::Theme;

pub use state::GridState;
pub use types::{CellStyle, CellView, Column, ColumnAlign, EntryRow, GridEvent, GridSource};

use actions::{Act, Leave, Outcome};
use sheet::Sheet;

/// What a table gives back each frame.
pub struct GridOutput {
    /// What the person did, oldest first.
    pub events: Vec<GridEvent>,
    /// The table as one widget.
    pub response: Response,
}

/// The table, to be shown once per frame.
pub struct Grid<'a> {
    name: &'a str,
    entry: Option<&'a EntryRow>,
    max_height: Option<f32>,
}

impl<'a> Grid<'a> {
    /// A table; `name` is said by a screen reader and must be unique within the `Ui`.
    #[must_use]
    pub fn new(name: &'a str) -> Self {
        Self { name, entry: None, max_height: None }
    }

    /// With an entry row.
    #[must_use]
    pub fn entry(mut self, entry: &'a EntryRow) -> Self {
        self.entry = Some(entry);
        self
    }

    /// As high as its rows, at most `points`; otherwise it fills the height there is.
    #[must_use]
    pub fn max_height(mut self, points: f32) -> Self {
        self.max_height = Some(points);
        self
    }

    /// Shows the table and reports what the person did.
    pub fn show(self, ui: &mut Ui, state: &mut GridState, source: &dyn GridSource) -> GridOutput {
        let theme = Theme::of(ui);
        let sheet = Sheet::new(source, self.entry);
        let ids = Ids::new(ui.make_persistent_id(self.name));
        state.settle(&sheet);
        let mut turn = Turn { ids: &ids, state, sheet: &sheet, out: Outcome::default() };
        let pending = keys::before_painting(ui, &mut turn);
        if turn.out.leave == Some(Leave::Backwards) {
            leave(ui, ids.grid, FocusDirection::Previous);
        }

        let size = vec2(ui.available_width(), self.height(ui, theme, &sheet));
        let (rect, _) = ui.allocate_exact_size(size, Sense::hover());
        let response = ui.interact(rect, ids.grid, Sense::focusable_noninteractive());
        if turn.out.leave == Some(Leave::Forwards) {
            leave(ui, ids.grid, FocusDirection::Next);
        }
        turn.state.take_focus_if_asked(ui, ids.grid);

        let layout = paint::Layout::new(ui, theme, rect, &sheet);
        paint::table(ui, &layout, &mut turn);
        keys::after_painting(ui, pending, &mut turn);
        let Turn { state, out, .. } = turn;
        let mut events = out.events;
        if let Some(text) = out.copied {
            ui.copy_text(text);
        }
        if let Some(row) = state.newly_selected(&sheet) {
            events.push(GridEvent::Selected { row });
        }
        let value = state.spoken(&sheet);
        response.widget_info(|| WidgetInfo {
            current_text_value: Some(value.clone()),
            ..WidgetInfo::labeled(egui::Role::Grid, true, self.name)
        });
        GridOutput { events, response }
    }

    fn height(&self, ui: &Ui, theme: &Theme, sheet: &Sheet) -> f32 {
        let bar = ui.spacing().scroll.allocated_width();
        let rows = paint::rows_height(theme, sheet.total_rows());
        let needed = paint::header_height(theme) + rows + bar;
        match self.max_height {
            Some(max) => needed.min(max),
            // Within something that scrolls there is no end to the height.
            None if !ui.available_height().is_finite() => needed,
            None => ui.available_height(),
        }
    }
}

/// Ids of the parts that take part in the keyboard's business.
struct Ids {
    /// Has the keyboard for the whole table.
    grid: Id,
    /// Has it while a cell is edited.
    editor: Id,
}

impl Ids {
    fn new(grid: Id) -> Self {
        Self { grid, editor: grid.with("editor") }
    }
}

/// What one frame works with.
struct Turn<'t> {
    ids: &'t Ids,
    state: &'t mut GridState,
    sheet: &'t Sheet<'t>,
    out: Outcome,
}

impl Turn<'_> {
    /// Does one step of the keyboard.
    fn act(&mut self, act: Act) {
        self.state.act(act, self.sheet, &mut self.out);
    }

    /// Takes the text of the edit under way, if there is one.
    fn commit(&mut self) {
        self.state.commit(self.sheet, &mut self.out);
    }
}

/// Hands the keyboard to the neighbour in `direction`.
fn leave(ui: &Ui, grid: Id, direction: FocusDirection) {
    ui.memory_mut(|memory| {
        memory.surrender_focus(grid);
        memory.move_focus(direction);
    });
}
