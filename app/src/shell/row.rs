//! A line of a list that can be chosen: a name, what there is to say about it, and what stands at its right end.

use crate::theme::Theme;
use eframe::egui::{
    Align2, Response, Role, Sense, Stroke, StrokeKind, Ui, WidgetInfo, pos2,
    text::{LayoutJob, TextWrapping},
    vec2,
};

/// A line over the whole width; it is as wide as its list and never wider.
pub fn row(ui: &mut Ui, name: &str, detail: &str, end: &str, marked: bool) -> Response {
    let theme = Theme::of(ui);
    let size = vec2(ui.available_width(), theme.spacing.control);
    let (rect, response) = ui.allocate_exact_size(size, Sense::click());
    response.widget_info(|| WidgetInfo::selected(Role::Button, true, marked, name));
    if !ui.is_rect_visible(rect) {
        return response;
    }
    let corner = f32::from(theme.spacing.corner);
    if marked || response.hovered() {
        let fill = if marked { theme.selected } else { theme.hover };
        ui.painter().rect_filled(rect, corner, fill);
    }
    let pad = theme.spacing.item;
    let (middle, mut right) = (rect.center().y, rect.right() - pad);
    if !end.is_empty() {
        let at = pos2(right, middle);
        let shown = ui.painter().text(at, Align2::RIGHT_CENTER, end, theme.small(), theme.soft_ink);
        right = shown.left() - pad;
    }
    let left = rect.left() + pad;
    let place = |job: LayoutJob, from: f32| {
        let mut job = job;
        job.wrap = TextWrapping::truncate_at_width((right - from).max(0.0));
        let galley = ui.painter().layout_job(job);
        let width = galley.size().x;
        ui.painter().galley(pos2(from, middle - galley.size().y / 2.0), galley, theme.ink);
        from + width
    };
    let bold = theme.semibold(theme.sizes.body);
    let after = place(LayoutJob::simple_singleline(name.to_owned(), bold, theme.ink), left);
    if !detail.is_empty() {
        place(LayoutJob::simple_singleline(detail.to_owned(), theme.body(), theme.soft_ink), after + pad);
    }
    if response.has_focus() {
        let ring = Stroke::new(theme.spacing.focus, theme.focus);
        ui.painter().rect_stroke(rect, corner, ring, StrokeKind::Inside);
    }
    response
}
