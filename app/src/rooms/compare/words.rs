//! Words on the screen that a screen reader finds too.

use super::layout::Layout;
use crate::{
    rooms::View,
    theme::{MarkShape, Theme, paint_mark},
};
use assize_core::project::evaluate::{Caption, Severity};
use eframe::egui::{
    Align2, Color32, FontId, Galley, Id, Pos2, Rect, Response, Role, Sense, Ui, WidgetInfo, pos2, text::LayoutJob,
};
use std::sync::Arc;

/// What every part of the room draws from.
#[derive(Clone, Copy)]
pub(super) struct Scene<'a> {
    /// Project and evaluation.
    pub(super) view: View<'a>,
    /// Where everything stands.
    pub(super) layout: &'a Layout,
    /// Colours and sizes.
    pub(super) theme: &'static Theme,
}

impl Scene<'_> {
    /// How far words of a column may reach into the space between columns, points: not over the frame
    /// of the chosen one.
    pub(super) fn beyond(&self, column: usize) -> f32 {
        if self.view.evaluation.chosen == Some(column) { 2.0 } else { 16.0 }
    }
}

/// One line of text, shortened with … to a width.
pub(super) fn shortened(ui: &Ui, text: &str, (font, colour): (FontId, Color32), width: f32) -> Arc<Galley> {
    let mut job = LayoutJob::simple_singleline(text.to_owned(), font, colour);
    job.wrap.max_width = width.max(0.0);
    job.wrap.max_rows = 1;
    job.wrap.break_anywhere = true;
    ui.painter().layout_job(job)
}

/// The same text shortened with … to a width.
pub(super) fn narrowed(ui: &Ui, galley: &Galley, width: f32) -> Arc<Galley> {
    let mut job = (*galley.job).clone();
    job.wrap.max_width = width.max(0.0);
    job.wrap.max_rows = 1;
    job.wrap.break_anywhere = true;
    ui.painter().layout_job(job)
}

/// Text at a place of a rectangle; where it came to stand.
pub(super) fn text(ui: &Ui, at: Pos2, anchor: Align2, galley: Arc<Galley>) -> Rect {
    let rect = anchor.anchor_size(at, galley.size());
    ui.painter().galley(rect.min, galley, Color32::PLACEHOLDER);
    rect
}

/// A label for screen readers and tests over something painted.
pub(super) fn label(ui: &Ui, id: Id, rect: Rect, words: &str) -> Response {
    let response = ui.interact(rect, id, Sense::hover());
    response.widget_info(|| WidgetInfo::labeled(Role::Label, true, words));
    response
}

/// A named value for screen readers and tests: `Line traces to` = `3.3 N`.
pub(super) fn value(ui: &Ui, id: Id, rect: Rect, (name, value): (&str, &str)) {
    let response = ui.interact(rect, id, Sense::hover());
    response.widget_info(|| WidgetInfo {
        current_text_value: Some(value.to_owned()),
        ..WidgetInfo::labeled(Role::Status, true, name)
    });
}

/// The mark of a severity.
pub(super) fn mark_of(severity: Severity) -> MarkShape {
    match severity {
        Severity::Stop => MarkShape::Stop,
        Severity::Look => MarkShape::Look,
        Severity::Note => MarkShape::Note,
    }
}

/// A caption as a sentence, its severity as a word before it.
pub(super) fn spoken(caption: &Caption) -> String {
    match caption.severity {
        Some(severity) => format!("{severity}: {}", caption.text),
        None => caption.text.clone(),
    }
}

/// Width of a verdict on one line, its shape included, points.
pub(super) fn caption_width(ui: &Ui, caption: &Caption, theme: &Theme) -> f32 {
    let font = theme.semibold(theme.sizes.caption);
    let text = ui.painter().layout_no_wrap(caption.text.clone(), font, theme.ink);
    text.size().x + caption.severity.map_or(0.0, |_| theme.spacing.mark + 6.0)
}

/// The verdict over a plot, its shape before it, on as many lines as the height takes; what is cut
/// short all the same is whole in the tooltip.
pub(super) fn caption(ui: &Ui, id: Id, rect: Rect, caption: &Caption, theme: &Theme) {
    if caption.text.is_empty() {
        return;
    }
    let size = theme.spacing.mark;
    let indent = caption.severity.map_or(0.0, |_| size + 6.0);
    let mut job = LayoutJob::simple_singleline(caption.text.clone(), theme.semibold(theme.sizes.caption), theme.ink);
    job.wrap.max_width = rect.width() - indent;
    job.wrap.max_rows = if rect.height() > 32.0 { 2 } else { 1 };
    job.wrap.break_anywhere = job.wrap.max_rows == 1;
    let galley = ui.painter().layout_job(job);
    let cut = galley.elided;
    let first = galley.rows.first().map_or(0.0, |row| row.size.y);
    let at = pos2(rect.left() + indent, rect.center().y);
    let shown = text(ui, at, Align2::LEFT_CENTER, galley);
    if let Some(severity) = caption.severity {
        let shape = mark_of(severity);
        let centre = pos2(rect.left() + size / 2.0, shown.top() + first / 2.0);
        paint_mark(ui.painter(), shape, centre, size, theme.mark_colour(shape));
    }
    let response = label(ui, id, rect, &spoken(caption));
    if cut {
        response.on_hover_text(&caption.text);
    }
}

/// `the line`, `the quadratic · 1/x²`: a column in the middle of a sentence.
pub(super) fn in_a_sentence(head: &str) -> String {
    let mut letters = head.chars();
    let first = letters.next().map(|c| c.to_lowercase().collect::<String>()).unwrap_or_default();
    format!("the {first}{}", letters.as_str())
}
