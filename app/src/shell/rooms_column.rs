//! The slim column of rooms at the left, in words, each with a line about its state.

use super::{Asked, Extent, status::status};
use crate::{
    command::{Does, entry},
    rooms::{Room, View},
    theme::Theme,
};
use eframe::egui::{
    Align2, Frame, Margin, Panel, Rect, Response, Role, Sense, Stroke, StrokeKind, Ui, WidgetInfo, pos2, vec2,
};

/// Shows the column.
pub fn rooms_column(ui: &mut Ui, view: &View<'_>, here: Room, asked: &mut Asked) {
    let theme = Theme::of(ui);
    let extent = Extent::of(ui);
    let width = if extent == Extent::Full { 112.0 } else { 96.0 };
    let frame = Frame::new().fill(theme.panel).inner_margin(Margin::symmetric(0, 8));
    let panel = Panel::left("rooms").frame(frame).resizable(false).show_separator_line(false);
    let shown = panel.exact_size(width).show(ui, |ui| {
        ui.spacing_mut().item_spacing.y = if extent == Extent::Full { 6.0 } else { 2.0 };
        for room in Room::ALL {
            let line = status(room, view.project, view.evaluation);
            let response = word(ui, room, &line, room == here, extent);
            if response.on_hover_text(entry(Does::Show(room)).tooltip()).clicked() {
                asked.does.push(Does::Show(room));
            }
        }
    });
    let rect = shown.response.rect;
    let rule = Stroke::new(theme.spacing.hair, theme.rule);
    ui.painter().vline(rect.right(), rect.y_range(), rule);
}

fn word(ui: &mut Ui, room: Room, line: &str, here: bool, extent: Extent) -> Response {
    let theme = Theme::of(ui);
    let height = if extent == Extent::Full { 50.0 } else { 44.0 };
    let size = vec2(ui.available_width(), height);
    let (rect, response) = ui.allocate_exact_size(size, Sense::click());
    let name = format!("{}, {line}", room.name());
    response.widget_info(|| WidgetInfo::selected(Role::Tab, true, here, &name));
    if !ui.is_rect_visible(rect) {
        return response;
    }
    let painter = ui.painter_at(rect);
    if here {
        painter.rect_filled(rect, 0.0, theme.ground);
        let bar = Rect::from_min_size(rect.min, vec2(4.0, rect.height()));
        painter.rect_filled(bar, 0.0, theme.brass);
    } else if response.hovered() {
        painter.rect_filled(rect, 0.0, theme.hover);
    }
    let left = rect.left() + if extent == Extent::Full { 20.0 } else { 14.0 };
    let font = if here { theme.semibold(theme.sizes.heading) } else { heading(theme) };
    let middle = rect.center().y;
    painter.text(pos2(left, middle - 1.0), Align2::LEFT_BOTTOM, room.name(), font, theme.ink);
    painter.text(pos2(left, middle + 2.0), Align2::LEFT_TOP, line, theme.small(), theme.soft_ink);
    if response.has_focus() {
        let ring = Stroke::new(theme.spacing.focus, theme.focus);
        ui.painter().rect_stroke(rect, 0.0, ring, StrokeKind::Inside);
    }
    response
}

fn heading(theme: &Theme) -> eframe::egui::FontId {
    eframe::egui::FontId::new(theme.sizes.heading, eframe::egui::FontFamily::Proportional)
}
