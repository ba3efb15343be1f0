//! A finding as one clickable line, and the verdict over a plot.

use eframe::egui::{
    self, Pos2, Response, Role, Sense, Stroke, StrokeKind, Ui, WidgetInfo,
    text::{LayoutJob, TextFormat},
    vec2,
};

use crate::theme::{MarkShape, Theme, paint_mark};

/// How much a finding matters.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// ■ Stop: what depends on it cannot go on.
    Stop,
    /// ◆ Look: somebody should look at it.
    Look,
    /// ○ Note: worth knowing.
    Note,
}

impl Severity {
    /// The mark that stands for it.
    #[must_use]
    pub fn mark(self) -> MarkShape {
        match self {
            Self::Stop => MarkShape::Stop,
            Self::Look => MarkShape::Look,
            Self::Note => MarkShape::Note,
        }
    }

    /// The word that always stands beside the mark.
    #[must_use]
    pub fn word(self) -> &'static str {
        self.mark().meaning()
    }
}

/// A finding: mark, word, message; wraps, and can be clicked or reached by Tab.
pub fn finding_line(ui: &mut Ui, severity: Severity, message: &str) -> Response {
    let theme = Theme::of(ui);
    let word = format!("{}: ", severity.word());
    let mut job = LayoutJob::default();
    let bold = TextFormat::simple(theme.semibold(theme.sizes.body), theme.ink);
    job.append(&word, 0.0, bold);
    job.append(message, 0.0, TextFormat::simple(theme.body(), theme.ink));
    let response = marked(ui, Some(severity.mark()), job, Sense::click());
    let name = format!("{word}{message}");
    response.widget_info(|| WidgetInfo::labeled(Role::Button, ui.is_enabled(), &name));
    response.on_hover_cursor(egui::CursorIcon::PointingHand)
}

/// The verdict over a plot: bold ink, never cut short, with a mark when it wants attention.
pub fn caption(ui: &mut Ui, severity: Option<Severity>, text: &str) -> Response {
    let theme = Theme::of(ui);
    let format = TextFormat::simple(theme.semibold(theme.sizes.caption), theme.ink);
    let job = LayoutJob::single_section(text.to_owned(), format);
    let mark = severity.map(Severity::mark);
    let response = marked(ui, mark, job, Sense::hover());
    let name = match severity {
        Some(severity) => format!("{}: {text}", severity.word()),
        None => text.to_owned(),
    };
    response.widget_info(|| WidgetInfo::labeled(Role::Label, ui.is_enabled(), &name));
    response
}

/// A remark below a field, in small type.
pub(super) fn caption_small(ui: &mut Ui, severity: Severity, text: &str) -> Response {
    let theme = Theme::of(ui);
    let format = TextFormat::simple(theme.small(), theme.ink);
    let job = LayoutJob::single_section(text.to_owned(), format);
    let response = marked(ui, Some(severity.mark()), job, Sense::hover());
    let name = format!("{}: {text}", severity.word());
    response.widget_info(|| WidgetInfo::labeled(Role::Label, ui.is_enabled(), &name));
    response
}

/// Text with a mark before its first line, wrapped at the width there is.
fn marked(ui: &mut Ui, mark: Option<MarkShape>, mut job: LayoutJob, sense: Sense) -> Response {
    let theme = Theme::of(ui);
    let margin = if sense.senses_click() { theme.spacing.tight } else { 0.0 };
    let size = theme.spacing.mark;
    let indent = margin + mark.map_or(0.0, |_| size + theme.spacing.item - 1.0);
    let width = ui.available_width();
    job.wrap.max_width = (width - indent - margin).max(40.0);
    let galley = ui.painter().layout_job(job);
    let height = galley.size().y + margin;
    let (rect, response) = ui.allocate_exact_size(vec2(width, height), sense);
    if !ui.is_rect_visible(rect) {
        return response;
    }
    if sense.senses_click() && response.hovered() {
        let corner = f32::from(theme.spacing.corner);
        ui.painter().rect_filled(rect, corner, theme.hover);
    }
    let top = rect.top() + margin / 2.0;
    let first_line = galley.rows.first().map_or(galley.size().y, |row| row.size.y);
    if let Some(mark) = mark {
        let centre = Pos2::new(rect.left() + margin + size / 2.0, top + first_line / 2.0);
        paint_mark(ui.painter(), mark, centre, size, theme.mark_colour(mark));
    }
    let at = Pos2::new(rect.left() + indent, top);
    ui.painter().galley(at, galley, theme.ink);
    if response.has_focus() {
        focus_ring(ui, rect);
    }
    response
}

/// The brass ring around what has the keyboard.
pub(super) fn focus_ring(ui: &Ui, rect: egui::Rect) {
    let theme = Theme::of(ui);
    let stroke = Stroke::new(theme.spacing.focus, theme.focus);
    let corner = f32::from(theme.spacing.corner);
    ui.painter().rect_stroke(rect, corner, stroke, StrokeKind::Inside);
}
