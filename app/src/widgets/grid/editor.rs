//! The text field over the cell that is being edited.

use eframe::egui::{
    Align2, EventFilter, Frame, Margin, Rect, TextEdit, Ui, UiBuilder,
    text::{CCursor, CCursorRange},
    text_edit::TextEditState,
};

use super::{ColumnAlign, Turn};
use crate::theme::Theme;

/// Gives the keyboard to the text field when an edit has just begun, its cursor at the end.
pub(super) fn take_over(ui: &Ui, turn: &mut Turn) {
    let Some(edit) = &mut turn.state.edit else {
        return;
    };
    if !std::mem::take(&mut edit.fresh) {
        return;
    }
    let mut field = TextEditState::default();
    let end = CCursor::new(edit.text.chars().count());
    field.cursor.set_char_range(Some(CCursorRange::one(end)));
    TextEdit::store_state(ui, turn.ids.editor, field);
    ui.memory_mut(|memory| memory.request_focus(turn.ids.editor));
}

/// Shows the text field in the cell's `rect`; takes the text when the keyboard went elsewhere.
pub(super) fn show(ui: &mut Ui, rect: Rect, turn: &mut Turn) {
    take_over(ui, turn);
    let Some(edit) = &mut turn.state.edit else {
        return;
    };
    let theme = Theme::of(ui);
    let right = turn.sheet.columns().get(edit.place.col).is_some_and(|column| column.align == ColumnAlign::Right);
    let align = if right { Align2::RIGHT_CENTER } else { Align2::LEFT_CENTER };
    let name = format!("Edit {}", turn.sheet.name(edit.place));
    ui.painter().rect_filled(rect, 0.0, theme.field);
    let mut inner = ui.new_child(UiBuilder::new().max_rect(rect));
    let field = TextEdit::singleline(&mut edit.text)
        .id(turn.ids.editor)
        .frame(Frame::NONE.inner_margin(Margin::symmetric(8, 3)))
        .align(align)
        .min_size(rect.size())
        .desired_width(rect.width())
        // Tab, Escape and the vertical arrows end the edit; the table sees to that.
        .event_filter(EventFilter { tab: true, horizontal_arrows: true, vertical_arrows: true, escape: true });
    inner.add(field).accessible_name(name);
    if !ui.memory(|memory| memory.has_focus(turn.ids.editor)) {
        turn.commit();
    }
}
