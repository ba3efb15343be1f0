//! Ctrl+V anywhere in a project that has no readings yet: two columns become a comparison.

use super::App;
use crate::{
    rooms::{Room, Wish, bench::pasted},
    session::Message,
    shell::Asked,
};
use eframe::egui::{Event, Ui};

impl App {
    /// Takes a paste that no text field and no table took.
    pub(super) fn pasted_anywhere(&mut self, ui: &Ui, asked: &mut Asked) {
        let project = self.session.project();
        let somewhere_else = ui.ctx().text_edit_focused() || self.in_a_table();
        if !project.readings.is_empty() || somewhere_else {
            return;
        }
        let text = ui.input(|input| {
            input.events.iter().find_map(|event| match event {
                Event::Paste(text) => Some(text.clone()),
                _ => None,
            })
        });
        let Some(text) = text else { return };
        match pasted(&text, false, project) {
            Ok(commands) => {
                let entries = commands.into_iter().map(|command| Wish::Enter { command, because: None });
                asked.wishes.extend(entries);
                asked.wishes.push(Wish::Go(Room::Compare, None));
            }
            Err(why) => self.messages.say(Message::look(
                format!("Nothing was pasted: {why}."),
                "Two columns are wanted: standard and reading.",
            )),
        }
    }
}
