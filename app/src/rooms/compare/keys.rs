//! The keys of the room, while it has the keyboard.

use super::{
    choose,
    near_facts::NearFacts,
    rows::Row,
    state::{Against, State},
};
use crate::rooms::View;
use eframe::egui::{Event, EventFilter, Id, Key, Modifiers, Ui};

/// Id of the handle of the cursor, which can have the keyboard.
pub(super) fn handle_id(ui: &Ui) -> Id {
    ui.scope_id().with("cursor handle")
}

/// Whether letters and marks belong to the room: nothing is being typed into and nothing is asked.
fn listening(ui: &Ui) -> bool {
    !ui.ctx().text_edit_focused() && ui.memory(|m| m.top_modal_layer().is_none())
}

/// Whether arrows and Enter belong to the room: nothing else has the keyboard, where arrows would go
/// to the next widget and Enter would press it.
fn has_keyboard(ui: &Ui) -> bool {
    let handle = handle_id(ui);
    ui.memory(|m| m.focused().is_none_or(|id| id == handle))
}

/// Reads the keys of this frame.
pub(super) fn handle(ui: &Ui, view: &View<'_>, state: &mut State) {
    if !listening(ui) {
        return;
    }
    let handle = handle_id(ui);
    let filter = EventFilter { vertical_arrows: true, ..EventFilter::default() };
    ui.memory_mut(|m| m.set_focus_lock_filter(handle, filter));
    letters(ui, state);
    rows(ui, state);
    if state.near().is_some() {
        marks(ui, state);
    }
    if !has_keyboard(ui) {
        return;
    }
    arrows(ui, state);
    if pressed(ui, Modifiers::NONE, Key::Escape) > 0 {
        state.probe = None;
        state.open = None;
    }
    if view.evaluation.chosen.is_none()
        && let Some(advised) = &view.evaluation.advice.column
        && pressed(ui, Modifiers::NONE, Key::Enter) > 0
    {
        state.choosing = Some(choose::about(view, advised));
    }
}

fn pressed(ui: &Ui, modifiers: Modifiers, key: Key) -> usize {
    ui.input_mut(|i| i.count_and_consume_key(modifiers, key))
}

/// A letter typed without Ctrl or Alt, whatever the layout of the keyboard.
fn letter(ui: &Ui, wanted: &str) -> bool {
    ui.input_mut(|i| {
        let before = i.events.len();
        i.events.retain(|e| !matches!(e, Event::Text(text) if text == wanted));
        i.events.len() < before
    })
}

fn letters(ui: &Ui, state: &mut State) {
    if letter(ui, "u") {
        state.measure = state.measure.next();
        state.windows.residual = None;
    }
    if letter(ui, "o") {
        state.against = match state.against {
            Against::Value => Against::Order,
            Against::Order => Against::Value,
        };
    }
    if letter(ui, "s") {
        state.one_scale = !state.one_scale;
        state.windows.residual = None;
    }
}

fn rows(ui: &Ui, state: &mut State) {
    for (digit, row) in ["1", "2", "3", "4"].into_iter().zip(Row::ALL) {
        if letter(ui, digit) {
            ask(state, row);
        }
    }
}

/// Opens a row alone; asked again, all rows stand again. A row that folds by itself first joins them.
pub(super) fn ask(state: &mut State, row: Row) {
    let joins = row == Row::NearZero && state.near().is_some_and(|f| f.folded) && !state.near_zero_asked;
    if row == Row::NearZero {
        state.near_zero_asked = true;
    }
    if joins && state.open.is_none() && !state.alone {
        return;
    }
    state.open = if state.open == Some(row) { None } else { Some(row) };
}

/// Arrow keys: 0.1 SD, with Shift 0.01 SD.
fn arrows(ui: &Ui, state: &mut State) {
    let Some(step) = state.near().map(NearFacts::step) else { return };
    let both = |modifiers: Modifiers| {
        let count = |key: Key| pressed(ui, modifiers, key) as f64;
        count(Key::ArrowUp) - count(Key::ArrowDown)
    };
    // Shift first: a plain arrow matches with Shift held as well.
    let fine = both(Modifiers::SHIFT);
    let moved = step * both(Modifiers::NONE) + 0.1 * step * fine;
    if moved != 0.0 {
        state.move_cursor(state.cursor + moved);
    }
}

/// PageUp and PageDown to the next mark, Home to the decision threshold.
fn marks(ui: &Ui, state: &mut State) {
    for (key, up) in [(Key::PageUp, true), (Key::PageDown, false)] {
        for _ in 0..pressed(ui, Modifiers::NONE, key) {
            let next = state.near().map(|f| f.next_stop(state.cursor, up));
            state.move_cursor(next.unwrap_or(state.cursor));
        }
    }
    let home = state.near().and_then(|f| f.thresholds.first().copied());
    if let Some(home) = home.filter(|_| pressed(ui, Modifiers::NONE, Key::Home) > 0) {
        state.move_cursor(home);
    }
}
