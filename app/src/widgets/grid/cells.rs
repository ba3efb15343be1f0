//! How heads and single cells look.

use eframe::egui::{
    Align2, Color32, Pos2, Rect, Shape, Stroke, StrokeKind, Ui,
    text::{LayoutJob, TextFormat, TextWrapping},
};

use super::sheet::{Place, Sheet};
use super::state::GridState;
use super::{CellStyle, CellView, ColumnAlign};
use crate::theme::{MarkShape, Theme, paint_mark};

/// A cell and where it lies.
pub(super) struct Spot {
    pub(super) place: Place,
    pub(super) rect: Rect,
}

/// Paints the hint of an untouched entry row, right of the cell in which it starts.
pub(super) fn hint(ui: &Ui, start: Rect, state: &GridState, sheet: &Sheet) {
    let theme = Theme::of(ui);
    let untouched = state.edit.is_none() && state.entry.iter().all(String::is_empty);
    // The cursor would cross the hint anywhere else in the row.
    let (row, col) = state.cursor();
    let clear = row.is_some() || col == sheet.entry_start(&state.entry);
    if let (Some(entry), true) = (sheet.entry, untouched && clear) {
        let at = Pos2::new(start.right() + theme.spacing.item, start.center().y);
        let font = theme.small();
        ui.painter().text(at, Align2::LEFT_CENTER, &entry.hint, font, theme.soft_ink);
    }
}

/// Paints text and marks of a cell; says whether the text had to be cut short.
pub(super) fn paint(ui: &Ui, spot: &Spot, view: &CellView, selected: bool, sheet: &Sheet) -> bool {
    let theme = Theme::of(ui);
    let rect = spot.rect;
    if selected {
        ui.painter().rect_filled(rect, 0.0, theme.selected);
    }
    let pad = theme.spacing.item;
    let mut left = rect.left() + pad;
    let middle = rect.center().y;
    if let Some(mark) = view.mark {
        let size = theme.spacing.mark;
        let centre = Pos2::new(left + size / 2.0, middle);
        paint_mark(ui.painter(), mark, centre, size, theme.mark_colour(mark));
        left += size + theme.spacing.tight;
    }
    if view.style == CellStyle::Questioned {
        let font = theme.semibold(theme.sizes.body);
        let at = Pos2::new(left, middle);
        let sign = ui.painter().text(at, Align2::LEFT_CENTER, "?", font, theme.alert);
        left = sign.right() + theme.spacing.tight;
    }
    let room = (rect.right() - pad - left).max(0.0);
    let job = cell_job(theme, view, room);
    let galley = ui.painter().layout_job(job);
    let right = sheet.columns().get(spot.place.col).is_some_and(|column| column.align == ColumnAlign::Right);
    let x = if right { rect.right() - pad - galley.size().x } else { left };
    let at = Pos2::new(x, middle - galley.size().y / 2.0);
    let (text, elided) = (Rect::from_min_size(at, galley.size()), galley.elided);
    let painter = ui.painter_at(rect.intersect(ui.clip_rect()));
    painter.galley(at, galley, theme.ink);
    if view.style == CellStyle::Questioned && !view.text.is_empty() {
        let ends = [text.left_bottom(), text.right_bottom()];
        painter.extend(Shape::dotted_line(&ends, theme.alert, 3.0, 0.75));
    }
    elided
}

fn cell_job(theme: &Theme, view: &CellView, room: f32) -> LayoutJob {
    let colour = match view.style {
        CellStyle::Normal | CellStyle::Questioned => theme.ink,
        CellStyle::Soft | CellStyle::Struck => theme.soft_ink,
    };
    let mut format = TextFormat::simple(theme.body(), colour);
    if view.style == CellStyle::Struck {
        format.strikethrough = Stroke::new(1.0, colour);
    }
    let mut job = LayoutJob::single_section(view.text.clone(), format);
    job.wrap = TextWrapping::truncate_at_width(room);
    job.break_on_newline = false;
    job
}

/// What a cell shows besides its text, in words for a screen reader.
pub(super) fn description(view: &CellView) -> String {
    let mark = view.mark.map_or("", MarkShape::meaning);
    let style = match view.style {
        CellStyle::Normal | CellStyle::Soft => "",
        CellStyle::Struck => "struck through",
        CellStyle::Questioned => "questioned",
    };
    let words: Vec<&str> = [mark, style, view.hover.as_str()].into_iter().filter(|word| !word.is_empty()).collect();
    words.join(", ")
}

/// The ring around the cell under the cursor: brass when the table has the keyboard.
pub(super) fn cursor(ui: &Ui, rect: Rect, keyboard: bool) {
    let theme = Theme::of(ui);
    let stroke = if keyboard {
        Stroke::new(theme.spacing.focus, theme.focus)
    } else {
        Stroke::new(theme.spacing.hair, theme.edge)
    };
    ui.painter().rect_stroke(rect, 0.0, stroke, StrokeKind::Inside);
}

/// The hairline under a row; the entry row has a rule over it.
pub(super) fn below_row(ui: &Ui, first_cell: Rect, width: f32, entry: bool) {
    let theme = Theme::of(ui);
    let xs = first_cell.left()..=first_cell.left() + width.max(first_cell.width());
    let line = |y: f32, colour: Color32| {
        let stroke = Stroke::new(theme.spacing.hair, colour);
        ui.painter().hline(xs.clone(), y, stroke);
    };
    line(first_cell.bottom(), theme.hair);
    if entry {
        line(first_cell.top(), theme.rule);
    }
}

/// The heads; `offset` is how far the cells are scrolled sideways.
pub(super) fn header(ui: &Ui, rect: Rect, offset: f32, theme: &Theme, edges: &[f32], sheet: &Sheet) {
    let painter = ui.painter_at(rect);
    let pad = theme.spacing.item;
    let middle = rect.center().y;
    for (col, column) in sheet.columns().iter().enumerate() {
        let left = rect.left() - offset + edges[col] + pad;
        let right = rect.left() - offset + edges[col + 1] - pad;
        let head = painter.layout_no_wrap(column.header.clone(), theme.semibold(theme.sizes.small), theme.ink);
        let unit = painter.layout_no_wrap(column.unit.clone(), theme.small(), theme.soft_ink);
        let gap = if column.unit.is_empty() { 0.0 } else { theme.spacing.tight };
        let width = head.size().x + gap + unit.size().x;
        let x = match column.align {
            ColumnAlign::Left => left,
            ColumnAlign::Right => (right - width).max(left),
        };
        let y = middle - head.size().y / 2.0;
        let unit_x = x + head.size().x + gap;
        painter.galley(Pos2::new(x, y), head, theme.ink);
        painter.galley(Pos2::new(unit_x, y), unit, theme.soft_ink);
    }
}
