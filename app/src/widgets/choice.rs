//! One of a few words, all visible.

use eframe::egui::{Align2, Rect, Response, Role, Sense, Stroke, StrokeKind, Ui, WidgetInfo, pos2, vec2};

use super::field::label;
use super::finding::focus_ring;
use crate::theme::Theme;

/// A choice of one among `options`; `name` stands above it (empty for none, where it is clear).
///
/// Tab and the arrow keys reach each word, Space or Enter takes it. The response is `changed()`
/// when another word was taken.
pub fn segmented<T: PartialEq + Clone>(ui: &mut Ui, name: &str, value: &mut T, options: &[(T, &str)]) -> Response {
    let mut changed = false;
    let mut response = ui
        .vertical(|ui| {
            ui.spacing_mut().item_spacing = vec2(0.0, 2.0);
            if !name.is_empty() {
                label(ui, name);
            }
            ui.horizontal_wrapped(|ui| {
                for (option, word) in options {
                    let taken = *value == *option;
                    let spoken = if name.is_empty() { (*word).to_owned() } else { format!("{name}: {word}") };
                    if segment(ui, word, &spoken, taken).clicked() && !taken {
                        *value = option.clone();
                        changed = true;
                    }
                }
            });
        })
        .response;
    if changed {
        response.mark_changed();
    }
    response
}

fn segment(ui: &mut Ui, word: &str, spoken: &str, taken: bool) -> Response {
    let theme = Theme::of(ui);
    // As wide as the semibold word, so that nothing shifts when another one is taken.
    let bold = theme.semibold(theme.sizes.body);
    let layout = |font| ui.painter().layout_no_wrap(word.to_owned(), font, theme.ink);
    let width = layout(bold.clone()).size().x + 2.0 * theme.spacing.panel;
    let size = vec2(width, theme.spacing.control);
    let (rect, response) = ui.allocate_exact_size(size, Sense::click());
    response.widget_info(|| WidgetInfo::selected(Role::RadioButton, ui.is_enabled(), taken, spoken));
    if !ui.is_rect_visible(rect) {
        return response;
    }
    let fill = if taken {
        theme.selected
    } else if response.hovered() {
        theme.hover
    } else {
        theme.panel
    };
    // Neighbours share the line between them.
    let shape = Rect::from_min_max(rect.min, rect.max + vec2(theme.spacing.hair, 0.0));
    let edge = Stroke::new(theme.spacing.hair, theme.edge);
    ui.painter().rect(shape, 0.0, fill, edge, StrokeKind::Inside);
    if taken {
        let line = Stroke::new(theme.spacing.focus, theme.brass);
        ui.painter().hline(shape.x_range(), shape.bottom() - 1.0, line);
    }
    let font = if taken { bold } else { theme.body() };
    let middle = pos2(rect.center().x, rect.center().y);
    ui.painter().text(middle, Align2::CENTER_CENTER, word, font, theme.ink);
    if response.has_focus() {
        focus_ring(ui, shape);
    }
    response
}
