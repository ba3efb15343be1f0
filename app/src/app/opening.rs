//! What opens: at the start, from a path, by the kind of file.

use super::{App, Surroundings, work::Work};
use crate::{
    headless::Start,
    platform,
    rooms::{Room, Wish},
    session::{
        DEMOS, Demo, Message, Messages, Opened, Session, Settings, Shelf, default_demo, name_for, open, practice_copy,
    },
    shell::dialogs::{Dialog, Projects},
    widgets::QuestionState,
};
use assize_core::trail::chain::HEADER;
use eframe::egui::{self, Context};
use std::path::Path;

impl App {
    /// The application as it starts.
    #[must_use]
    pub fn new(ctx: &Context, around: Surroundings, start: &Start) -> Self {
        let settings = Settings::read(&around.config);
        // Where the system does not say, it is day.
        ctx.options_mut(|options| options.fallback_theme = egui::Theme::Light);
        if let Some(dark) = settings.dark {
            ctx.set_theme(if dark { egui::Theme::Dark } else { egui::Theme::Light });
        }
        ctx.set_zoom_factor(settings.zoom.unwrap_or(1.0).clamp(0.75, 2.5));
        let clock = around.clock;
        let path = around.data.join("projects").join(name_for(clock()));
        let mut app = Self {
            around,
            settings,
            session: Session::begin(Shelf::planned(path), clock),
            messages: Messages::default(),
            room: Room::Bench,
            strip: Default::default(),
            dialog: None,
            waiting: Default::default(),
            work: Work::default(),
            title: "Assize".to_owned(),
            leaving: false,
            plan: Default::default(),
            bench: Default::default(),
            compare: Default::default(),
            record: Default::default(),
        };
        app.start(start, ctx);
        app
    }

    fn start(&mut self, start: &Start, ctx: &Context) {
        match start {
            Start::File(path) => self.waiting.push_back(Wish::Open(path.clone())),
            Start::Last => match (self.settings.recent.first().cloned(), default_demo()) {
                (Some(last), _) if platform::exists(&last) => self.open(&last, ctx),
                (None, Some(demo)) if !self.settings.demo_seen => self.open_demo(demo),
                (None, _) if DEMOS.is_empty() => {}
                _ => self.dialog = Some(Dialog::Projects(Projects::new(&self.settings.recent))),
            },
        }
    }

    /// Opens a project, a table or a PDF, told apart by what is in the file.
    pub(super) fn open(&mut self, path: &Path, ctx: &Context) {
        if path == self.session.shelf().path() && platform::exists(path) {
            return;
        }
        match kind_of(path) {
            Ok(FileIs::Pdf) => self.verify(path.to_owned(), ctx),
            Ok(FileIs::Table) => self.open_table(path),
            Ok(FileIs::Project) => self.open_project(path),
            Err(why) => {
                self.settings.gone(path);
                self.messages.say(Message::stop(format!("Not opened: {why}."), "Check the path."));
            }
        }
    }

    fn open_project(&mut self, path: &Path) {
        let practice = self.around.data.join("practice");
        match open(path, &practice, self.around.clock) {
            Ok(opened) => self.opened(opened),
            Err(error) => {
                let hint = error.hint();
                self.messages.say(Message::stop(format!("Not opened: {error}."), hint));
            }
        }
    }

    fn opened(&mut self, opened: Opened) {
        self.take(opened.session);
        self.room = if self.session.project().readings.is_empty() { Room::Bench } else { Room::Compare };
        self.settings.opened(self.session.shelf().path());
        self.settings.demo_seen = true;
        self.keep_settings();
        if let Some(note) = opened.note {
            self.messages.say(Message::note(note));
        }
        if let Some(torn) = self.session.shelf().torn() {
            self.messages.say(Message::look(torn.sentence(), ""));
            self.dialog = Some(Dialog::Torn(QuestionState::default()));
        }
    }

    fn open_demo(&mut self, demo: &Demo) {
        let practice = self.around.data.join("practice");
        match practice_copy(demo.bytes, demo.file, &practice, self.around.clock) {
            Ok(opened) => self.opened(opened),
            Err(error) => self.messages.say(Message::stop(format!("Not opened: {error}."), error.hint())),
        }
    }

    /// Opens a copy of a shipped practice project.
    pub(super) fn practise(&mut self, number: usize, _ctx: &Context) {
        if let Some(demo) = DEMOS.get(number) {
            self.open_demo(demo);
        }
    }

    /// A table goes into the project at work while that is empty, else into a new one.
    fn open_table(&mut self, path: &Path) {
        if !self.session.project().readings.is_empty() {
            self.start_own();
        }
        self.import(path, false);
    }

    /// Shows how a table is understood, before anything is taken from it.
    pub(super) fn import(&mut self, path: &Path, zeros: bool) {
        self.room = Room::Bench;
        match platform::read(path) {
            Ok(bytes) => {
                let name = path.file_name().unwrap_or_default().to_string_lossy().into_owned();
                self.bench.read_table(name, bytes, zeros);
            }
            Err(error) => self.messages.say(Message::stop(format!("Not opened: {error}."), "Check the path.")),
        }
    }
}

/// Kinds of files a window opens.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum FileIs {
    Project,
    Pdf,
    Table,
}

fn kind_of(path: &Path) -> Result<FileIs, platform::PlatformError> {
    // A project in another window is locked; its ending says enough.
    if path.extension().is_some_and(|ending| ending == "assize") {
        return Ok(FileIs::Project);
    }
    let bytes = platform::read(path)?;
    Ok(kind_of_bytes(&bytes))
}

fn kind_of_bytes(bytes: &[u8]) -> FileIs {
    if bytes.starts_with(HEADER.as_bytes()) {
        FileIs::Project
    } else if bytes.starts_with(b"%PDF-") {
        FileIs::Pdf
    } else {
        FileIs::Table
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn files_are_told_apart_by_what_is_in_them() {
        assert_eq!(kind_of_bytes(b"assize project, version 1\n"), FileIs::Project);
        assert_eq!(kind_of_bytes(b"%PDF-1.7\n"), FileIs::Pdf);
        assert_eq!(kind_of_bytes(b"standard,reading\n1,2\n"), FileIs::Table);
        assert_eq!(kind_of_bytes(b""), FileIs::Table);
    }
}
