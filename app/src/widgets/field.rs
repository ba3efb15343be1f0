//! A labelled place to type a text or a number.

use eframe::egui::{Align2, Label, Response, RichText, TextEdit, TextWrapMode, Ui, vec2};

use super::finding::{Severity, caption_small};
use crate::theme::Theme;

/// A field with its label above it; the typed text stays with the caller, as it was typed.
///
/// The text is final when the response says `lost_focus()`: by Enter, Tab, or a click elsewhere.
pub struct Field<'a> {
    label: &'a str,
    unit: &'a str,
    hint: &'a str,
    problem: Option<&'a str>,
    width: f32,
    number: bool,
    secret: bool,
}

impl<'a> Field<'a> {
    /// A field for words.
    #[must_use]
    pub fn text(label: &'a str) -> Self {
        Self { label, unit: "", hint: "", problem: None, width: 240.0, number: false, secret: false }
    }

    /// A field for a number in `unit` (empty for a pure number); reading it is the caller's job.
    #[must_use]
    pub fn number(label: &'a str, unit: &'a str) -> Self {
        Self { unit, width: 120.0, number: true, ..Self::text(label) }
    }

    /// A field whose characters are not shown.
    #[must_use]
    pub fn secret(label: &'a str) -> Self {
        Self { secret: true, ..Self::text(label) }
    }

    /// An example, in soft ink while the field is empty.
    #[must_use]
    pub fn hint(mut self, hint: &'a str) -> Self {
        self.hint = hint;
        self
    }

    /// What is wrong with the text, shown below with a mark.
    #[must_use]
    pub fn problem(mut self, problem: Option<&'a str>) -> Self {
        self.problem = problem;
        self
    }

    /// Width of the field in points; at most what there is.
    #[must_use]
    pub fn width(mut self, points: f32) -> Self {
        self.width = points;
        self
    }

    /// Shows the field.
    pub fn show(self, ui: &mut Ui, text: &mut String) -> Response {
        let theme = Theme::of(ui);
        let width = self.width.min(ui.available_width());
        let column = ui.vertical(|ui| {
            ui.set_max_width(width);
            ui.spacing_mut().item_spacing.y = 2.0;
            let label = label(ui, self.label);
            let align = if self.number { Align2::RIGHT_CENTER } else { Align2::LEFT_CENTER };
            let mut edit = TextEdit::singleline(text)
                .desired_width(width)
                .min_size(vec2(0.0, theme.spacing.control))
                .align(align)
                .password(self.secret);
            if !self.hint.is_empty() {
                edit = edit.hint_text(self.hint);
            }
            if !self.unit.is_empty() {
                edit = edit.suffix(RichText::new(self.unit).color(theme.soft_ink));
            }
            let response = ui.add(edit).labelled_by(label.id);
            if let Some(problem) = self.problem {
                caption_small(ui, Severity::Look, problem);
            }
            response
        });
        column.inner
    }
}

/// The name above a field or a choice; on one line, so that neighbours line up.
pub(super) fn label(ui: &mut Ui, text: &str) -> Response {
    let theme = Theme::of(ui);
    let text = RichText::new(text).font(theme.small()).color(theme.soft_ink);
    ui.add(Label::new(text).wrap_mode(TextWrapMode::Extend).selectable(false))
}
