//! A text field of the plan: shown, typed into, and entered when it is left.

use super::{
    State,
    model::{self, Field},
};
use crate::{
    rooms::{View, Wish},
    theme::Theme,
    widgets,
};
use eframe::egui::{Align, Key, Layout, Modifiers, Ui, vec2};

/// What fields need besides the window.
pub struct Form<'a, 'b> {
    /// The project.
    pub view: &'a View<'b>,
    /// Texts being typed.
    pub state: &'a mut State,
    /// What comes of them.
    pub wishes: &'a mut Vec<Wish>,
}

impl Form<'_, '_> {
    /// One field over the whole width.
    pub fn one(&mut self, ui: &mut Ui, field: Field) {
        let width = ui.available_width();
        self.field(ui, field, width);
    }

    /// Fields side by side, their widths in parts.
    pub fn row(&mut self, ui: &mut Ui, fields: &[(Field, f32)]) {
        let gap = Theme::of(ui).spacing.panel;
        let parts: f32 = fields.iter().map(|(_, part)| part).sum();
        // A row has at most four fields.
        #[expect(clippy::cast_precision_loss, reason = "a handful of gaps")]
        let gaps = gap * (fields.len() - 1) as f32;
        let room = ui.available_width() - gaps;
        ui.with_layout(Layout::left_to_right(Align::Min), |ui| {
            ui.spacing_mut().item_spacing.x = gap;
            for (field, part) in fields {
                let width = room * part / parts;
                ui.allocate_ui_with_layout(vec2(width, 0.0), Layout::top_down(Align::Min), |ui| {
                    ui.set_width(width);
                    self.field(ui, *field, width);
                });
            }
        });
    }

    fn field(&mut self, ui: &mut Ui, field: Field, width: f32) {
        let project = self.view.project;
        let now = model::text(field, project);
        let mut text = self.state.drafts.get(&field).cloned().unwrap_or(now);
        let missing = self.missing(field);
        let problem = self.state.problem.as_ref().filter(|(f, _)| *f == field).map(|(_, why)| why.clone());
        // In an empty field the hint says what is missing, so that nothing moves when it is filled.
        let problem = problem.or_else(|| missing.clone().filter(|_| !text.is_empty()));
        let hint = missing.as_deref().unwrap_or_else(|| field.hint()).to_owned();
        let unit = match field {
            Field::Interval | Field::Levels => project.plan.input.unit.as_str(),
            Field::LimitSize => super::paint::limit_unit(project),
            _ => "",
        };
        let label = if unit.is_empty() { field.label().to_owned() } else { format!("{}, {unit}", field.label()) };
        let response =
            widgets::Field::text(&label).hint(&hint).problem(problem.as_deref()).width(width).show(ui, &mut text);
        if missing.is_some() && std::mem::take(&mut self.state.go_to_missing) {
            response.request_focus();
            response.scroll_to_me(None);
        }
        if response.changed() {
            self.state.drafts.insert(field, text.clone());
        }
        if !response.lost_focus() {
            return;
        }
        // Escape gives the draft up.
        let escaped = ui.input_mut(|i| i.consume_key(Modifiers::NONE, Key::Escape));
        let draft = self.state.drafts.contains_key(&field);
        if escaped {
            self.state.drafts.remove(&field);
            self.state.problem = None;
        } else if draft {
            self.enter(field, &text);
        }
    }

    /// What a finding says is missing here.
    fn missing(&self, field: Field) -> Option<String> {
        let mut findings = self.view.evaluation.findings.iter();
        findings.find(|f| model::field_of(f.code) == Some(field)).map(|f| f.message.clone())
    }

    fn enter(&mut self, field: Field, text: &str) {
        match model::command(field, text, self.view.project) {
            Ok(command) => {
                self.state.drafts.remove(&field);
                self.state.problem = None;
                self.wishes.extend(command.map(|command| Wish::Enter { command, because: None }));
            }
            Err(why) => self.state.problem = Some((field, why)),
        }
    }
}
