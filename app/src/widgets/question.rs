//! A question that waits for an answer: what is asked, why, and a reason where one is wanted.

use eframe::egui::{
    self, Align, Button, Event, Frame, Id, Key, Label, Layout, Margin, Modal, Response, RichText, Role, TextStyle, Ui,
};

use super::field::Field;
use crate::theme::{TITLE, Theme};

/// A reason that one key gives.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ReasonKey<'a> {
    /// The key; unique among the reasons of a question.
    pub key: char,
    /// The reason as it will be recorded.
    pub text: &'a str,
}

/// A question over the window.
#[derive(Debug, Clone, Copy)]
pub struct Question<'a> {
    /// What is asked, e.g. "Set reading 14 aside?".
    pub title: &'a str,
    /// What follows from it; empty for nothing to add.
    pub body: &'a str,
    /// Reasons at one key; one of them answers the question at once.
    pub reasons: &'a [ReasonKey<'a>],
    /// Label of the field for a typed reason; `None` when no reason is wanted.
    pub reason_label: Option<&'a str>,
    /// Word on the button that says yes.
    pub confirm: &'a str,
    /// Word on the button that says no.
    pub cancel: &'a str,
}

/// What a question remembers while it is open; start each question with a new one.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct QuestionState {
    /// The reason typed so far; may be prefilled.
    pub reason: String,
    asked: bool,
}

impl QuestionState {
    /// A question whose reason is prefilled.
    #[must_use]
    pub fn with_reason(reason: impl Into<String>) -> Self {
        Self { reason: reason.into(), asked: false }
    }
}

/// The answer to a question.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Reply {
    /// No: the button, Escape, or a click beside the question.
    Cancelled,
    /// Yes; the reason is empty only where none is wanted.
    Confirmed {
        /// Reason, trimmed.
        reason: String,
    },
}

impl Question<'_> {
    /// Shows the question; gives the answer in the frame in which it comes.
    pub fn show(&self, ctx: &egui::Context, state: &mut QuestionState) -> Option<Reply> {
        let theme = Theme::of(ctx);
        let frame = Frame::from(theme).inner_margin(Margin::same(20)).shadow(ctx.global_style().visuals.window_shadow);
        let modal = Modal::new(Id::unique(("question", self.title)))
            .backdrop_color(theme.backdrop)
            .frame(frame)
            .show(ctx, |ui| self.contents(ui, state));
        ctx.accesskit_node_builder(modal.response.id, |node| {
            node.set_role(Role::Dialog);
            node.set_label(self.title);
        });
        let reply = modal.inner.clone();
        reply.or_else(|| modal.should_close().then_some(Reply::Cancelled))
    }

    fn contents(&self, ui: &mut Ui, state: &mut QuestionState) -> Option<Reply> {
        let theme = Theme::of(ui);
        ui.set_width(460.0_f32.min(ui.ctx().content_rect().width() - 80.0));
        let title = RichText::new(self.title).text_style(TextStyle::Name(TITLE.into()));
        ui.add(Label::new(title).wrap());
        if !self.body.is_empty() {
            ui.add(Label::new(RichText::new(self.body).color(theme.soft_ink)).wrap());
        }
        ui.add_space(theme.spacing.item);
        let mut reply = self.one_key(ui);
        let mut first = self.reason_buttons(ui, &mut reply);
        if let Some(label) = self.reason_label {
            let width = ui.available_width();
            let field = Field::text(label).width(width).show(ui, &mut state.reason);
            let entered = field.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter));
            if entered && self.answerable(state) {
                reply = Some(confirmed(&state.reason));
            } else if entered {
                // Nothing was typed yet: stay where it is to be typed.
                field.request_focus();
            }
            first = first.or(Some(field));
        }
        ui.add_space(theme.spacing.item);
        let cancel = self.buttons(ui, state, &mut reply);
        if !std::mem::replace(&mut state.asked, true) {
            first.unwrap_or(cancel).request_focus();
        }
        reply
    }

    /// Whether saying yes is possible: a wanted reason must be there.
    fn answerable(&self, state: &QuestionState) -> bool {
        self.reason_label.is_none() || !state.reason.trim().is_empty()
    }

    /// The reason whose key was pressed, unless somebody is typing.
    fn one_key(&self, ui: &Ui) -> Option<Reply> {
        if ui.ctx().text_edit_focused() {
            return None;
        }
        ui.input_mut(|input| {
            let pressed = |event: &Event| match event {
                Event::Text(text) => self.reasons.iter().find(|reason| text.chars().eq([reason.key])),
                _ => None,
            };
            let (place, reason) =
                input.events.iter().enumerate().find_map(|(place, event)| Some((place, pressed(event)?)))?;
            input.events.remove(place);
            Some(confirmed(reason.text))
        })
    }

    /// The reasons at one key as buttons; returns the first.
    fn reason_buttons(&self, ui: &mut Ui, reply: &mut Option<Reply>) -> Option<Response> {
        let theme = Theme::of(ui);
        let mut first = None;
        ui.horizontal_wrapped(|ui| {
            for reason in self.reasons {
                let key =
                    RichText::new(reason.key.to_string()).font(theme.semibold(theme.sizes.body)).color(theme.brass);
                let button = ui
                    .add(Button::new((key, reason.text)))
                    .accessible_name(format!("{} ({})", reason.text, reason.key));
                if button.clicked() {
                    *reply = Some(confirmed(reason.text));
                }
                first.get_or_insert(button);
            }
        });
        first
    }

    /// Yes and no; returns the button that says no.
    fn buttons(&self, ui: &mut Ui, state: &QuestionState, reply: &mut Option<Reply>) -> Response {
        ui.with_layout(Layout::right_to_left(Align::Center), |ui| {
            let yes = ui.add_enabled(self.answerable(state), Button::new(self.confirm));
            if yes.clicked() {
                *reply = Some(confirmed(&state.reason));
            }
            let no = ui.button(self.cancel);
            if no.clicked() {
                *reply = Some(Reply::Cancelled);
            }
            no
        })
        .inner
    }
}

fn confirmed(reason: &str) -> Reply {
    Reply::Confirmed { reason: reason.trim().to_owned() }
}
