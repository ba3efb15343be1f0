//! From the window's key events to steps of the table, in the order they came.
//!
//! Several keys can arrive in one frame: a fast typist on a slow machine, a scanner, a display
//! that types its reading. None may be lost and none may go to the wrong cell. While a text field
//! edits a cell, the events up to the one that ends the edit are its own; the rest wait until it
//! has read them.

use eframe::egui::{Event, FocusDirection, Key, Modifiers, Ui};

use super::actions::{Act, Step, is_block};
use super::state::GridState;
use super::{Ids, Turn, editor};

/// Events that wait until the text field has read those before them.
pub(super) struct Pending(Vec<Event>);

/// Reads the keys before the table is painted; returns what has to wait until after.
pub(super) fn before_painting(ui: &Ui, turn: &mut Turn) -> Pending {
    let ids = turn.ids;
    let focused = ui.memory(|memory| memory.focused());
    if turn.state.edit.is_some() {
        if focused == Some(ids.editor) || escaped(ui, ids) {
            ui.memory_mut(|memory| {
                if memory.focused().is_none() {
                    memory.request_focus(ids.editor);
                }
                memory.move_focus(FocusDirection::None);
            });
            return Pending(take_from_end_of_edit(ui, turn.state));
        }
    } else if focused == Some(ids.editor) {
        // The cell went away while it was edited.
        ui.memory_mut(|memory| memory.request_focus(ids.grid));
    } else if focused == Some(ids.grid) {
        // The arrows and Tab are the table's own; egui has already read them as moves of focus.
        ui.memory_mut(|memory| memory.move_focus(FocusDirection::None));
        let events = ui.input_mut(|input| take_if(&mut input.events, |e| act_for(e).is_some()));
        perform(&events, turn);
        editor::take_over(ui, turn);
    }
    Pending(Vec::new())
}

/// Does what waited for the text field.
pub(super) fn after_painting(ui: &Ui, pending: Pending, turn: &mut Turn) {
    let Pending(events) = pending;
    if events.is_empty() {
        return;
    }
    perform(&events, turn);
    if turn.state.edit.is_none() {
        ui.memory_mut(|memory| memory.request_focus(turn.ids.grid));
    }
    editor::take_over(ui, turn);
    ui.request_repaint();
}

fn perform(events: &[Event], turn: &mut Turn) {
    for act in events.iter().filter_map(act_for) {
        turn.act(act);
    }
}

/// Whether Escape took the keyboard from the text field before it could say that it wants it.
fn escaped(ui: &Ui, ids: &Ids) -> bool {
    ui.memory(|memory| memory.focused().is_none() && memory.had_focus_last_frame(ids.editor))
        && ui.input(|input| input.key_pressed(Key::Escape))
}

/// Takes the events from the one that ends the edit, leaving those before it to the text field.
fn take_from_end_of_edit(ui: &Ui, state: &GridState) -> Vec<Event> {
    let typed = state.edit.as_ref().is_some_and(|edit| edit.typed);
    ui.input_mut(|input| {
        let events = &mut input.events;
        match events.iter().position(|event| ends_edit(event, typed)) {
            Some(end) => {
                let mut rest = events.split_off(end);
                let ours = take_if(&mut rest, |event| act_for(event).is_some());
                events.append(&mut rest);
                ours
            }
            None => Vec::new(),
        }
    })
}

/// Removes and returns the events for which `test` holds.
fn take_if(events: &mut Vec<Event>, test: impl Fn(&Event) -> bool) -> Vec<Event> {
    let (taken, left) = std::mem::take(events).into_iter().partition(|e| test(e));
    *events = left;
    taken
}

fn ends_edit(event: &Event, typed: bool) -> bool {
    match act_for(event) {
        Some(Act::Enter { .. } | Act::Tab { .. } | Act::Escape) => true,
        Some(Act::Move { step, .. }) => {
            matches!(step, Step::PageUp | Step::PageDown) || (typed && matches!(step, Step::Up | Step::Down))
        }
        Some(Act::Paste(text)) => is_block(&text),
        _ => false,
    }
}

/// The step an event asks for, if it asks for one.
fn act_for(event: &Event) -> Option<Act> {
    match event {
        Event::Copy => Some(Act::Copy),
        Event::Cut => Some(Act::Cut),
        Event::Paste(text) => Some(Act::Paste(text.clone())),
        Event::Text(text) => {
            let text: String = text.chars().filter(|c| !c.is_control()).collect();
            (!text.is_empty()).then_some(Act::Text(text))
        }
        Event::Key { key, pressed: true, modifiers, .. } => act_for_key(*key, *modifiers),
        _ => None,
    }
}

fn act_for_key(key: Key, modifiers: Modifiers) -> Option<Act> {
    if modifiers.alt {
        return None;
    }
    if key == Key::A && modifiers.command {
        return Some(Act::SelectAll);
    }
    let back = modifiers.shift;
    let jump = modifiers.command;
    let step = |near, far| Some(Act::Move { step: if jump { far } else { near }, extend: back });
    match key {
        Key::ArrowUp => step(Step::Up, Step::Top),
        Key::ArrowDown => step(Step::Down, Step::Bottom),
        Key::ArrowLeft => step(Step::Left, Step::RowStart),
        Key::ArrowRight => step(Step::Right, Step::RowEnd),
        Key::Home => step(Step::RowStart, Step::Top),
        Key::End => step(Step::RowEnd, Step::Bottom),
        // Other programs' shortcuts, such as Ctrl+Enter and Ctrl+PageUp, stay theirs.
        _ if jump => None,
        Key::PageUp => step(Step::PageUp, Step::PageUp),
        Key::PageDown => step(Step::PageDown, Step::PageDown),
        Key::Enter => Some(Act::Enter { back }),
        Key::Tab => Some(Act::Tab { back }),
        Key::Escape => Some(Act::Escape),
        Key::F2 => Some(Act::Edit),
        Key::Delete => Some(Act::Clear),
        Key::Backspace => Some(Act::Backspace),
        _ => None,
    }
}
