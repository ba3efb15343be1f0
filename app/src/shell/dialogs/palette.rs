//! The list of commands: type a word, Enter takes the first.

use super::Outcome;
use crate::{
    command::{Entry, matching},
    shell::{row, sheet},
    widgets::Field,
};
use eframe::egui::{Context, Key, Modifiers, ScrollArea, Ui};

/// What was typed, and which line is marked.
#[derive(Debug, Default)]
pub struct Palette {
    typed: String,
    at: usize,
    asked: bool,
}

impl Palette {
    pub(super) fn show(&mut self, ctx: &Context) -> Option<Outcome> {
        let shown = sheet(ctx, "Find a command", 520.0, |ui| self.contents(ui));
        match shown.inner {
            Some(entry) => Some(Outcome::Does(entry.does)),
            None => shown.closed.then_some(Outcome::Closed),
        }
    }

    fn contents(&mut self, ui: &mut Ui) -> Option<&'static Entry> {
        let down = ui.input_mut(|i| i.consume_key(Modifiers::NONE, Key::ArrowDown));
        let up = ui.input_mut(|i| i.consume_key(Modifiers::NONE, Key::ArrowUp));
        let width = ui.available_width();
        let field = Field::text("Part of its name").width(width).show(ui, &mut self.typed);
        if !std::mem::replace(&mut self.asked, true) {
            field.request_focus();
        }
        if field.changed() {
            self.at = 0;
        }
        let entered = field.lost_focus() && ui.input(|i| i.key_pressed(Key::Enter));
        let found = matching(&self.typed);
        self.at = (self.at + usize::from(down)).min(found.len().saturating_sub(1));
        self.at = self.at.saturating_sub(usize::from(up));
        let mut taken = None;
        ScrollArea::vertical().max_height(300.0).show(ui, |ui| {
            for (n, entry) in found.iter().enumerate() {
                let shown = row(ui, entry.name, entry.hint, &entry.shortcut(), n == self.at);
                if shown.on_hover_text(entry.hint).clicked() {
                    taken = Some(*entry);
                }
            }
            if found.is_empty() {
                ui.label("No command holds these words.");
            }
        });
        taken.or_else(|| found.get(self.at).copied().filter(|_| entered))
    }
}
