//! Mouse and touch on the table: click, Shift+click, double click, drag, row numbers.

use eframe::egui::{Pos2, Rect, Response, Sense, Ui};

use super::Turn;
use super::paint::Layout;
use super::sheet::Place;

/// Lets the pointer work on one cell.
pub(super) fn cell(ui: &Ui, response: &Response, place: Place, turn: &mut Turn) {
    let pressed = response.is_pointer_button_down_on() && ui.input(|i| i.pointer.primary_pressed());
    // A click without a press before it comes from assistive technology.
    if pressed || response.clicked() {
        let state = &mut *turn.state;
        state.cursor = place;
        if !ui.input(|i| i.modifiers.shift) {
            state.anchor = place;
        }
        state.reveal = true;
        ui.memory_mut(|memory| memory.request_focus(turn.ids.grid));
    }
    if response.double_clicked() {
        turn.commit();
        turn.state.begin_edit(turn.sheet);
    }
}

/// Extends the selection while the pointer is dragged from a cell; `origin` is the screen
/// position of the first cell's corner.
pub(super) fn drag(response: &Response, layout: &Layout, origin: Pos2, turn: &mut Turn) {
    if !response.dragged() {
        return;
    }
    if let Some(pointer) = response.interact_pointer_pos() {
        let place = layout.place_at(pointer, origin, turn.sheet);
        if place != turn.state.cursor {
            turn.state.cursor = place;
            turn.state.reveal = true;
        }
    }
}

/// Selects whole rows by their numbers; `top` is the screen position of the first row's top.
pub(super) fn row_numbers(ui: &Ui, gutter: Rect, top: f32, layout: &Layout, turn: &mut Turn) {
    let id = turn.ids.grid.with("row numbers");
    let response = ui.interact(gutter, id, Sense::CLICK);
    let Some(pointer) = response.interact_pointer_pos() else {
        return;
    };
    if !response.clicked() || turn.sheet.is_empty() {
        return;
    }
    turn.commit();
    let origin = Pos2::new(layout.body.left(), top);
    let row = layout.place_at(pointer, origin, turn.sheet).row;
    if !ui.input(|i| i.modifiers.shift) {
        turn.state.anchor = Place { row, col: turn.sheet.last_col() };
    }
    turn.state.cursor = Place { row, col: 0 };
    ui.memory_mut(|memory| memory.request_focus(turn.ids.grid));
}
