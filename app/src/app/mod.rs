//! The window's application: draws the shell and one room, and carries out what they wish for.
//!
//! Rooms only see a [`crate::rooms::View`] and answer with wishes; everything that changes something happens in
//! `wishes`, after the frame was drawn.

mod opening;
mod paste;
pub mod reasons;
mod reporting;
mod wishes;
mod work;

#[cfg(test)]
mod tests;

pub use work::draft;

use crate::{
    command::{self, Typing},
    platform,
    rooms::{Room, Wish, bench, compare, plan, record},
    session::{self, Clock, Messages, Session, Settings},
    shell::{self, Asked, Extent, StripState, dialogs::Dialog},
    widgets::QuestionState,
};
use eframe::{
    Frame,
    egui::{self, CentralPanel, Context, Margin, Ui, ViewportCommand},
};
use std::{collections::VecDeque, path::PathBuf};
use work::Work;

/// Where the program keeps things, and its clock; other ones in tests.
#[derive(Debug, Clone)]
pub struct Surroundings {
    /// Folder of settings.
    pub config: PathBuf,
    /// Folder of projects and keys.
    pub data: PathBuf,
    /// The clock.
    pub clock: Clock,
    /// Name of the account, proposed as the first name at the bench.
    pub account: Option<String>,
    /// Whether every entry is told on stderr once it is on disk.
    pub diary: bool,
}

impl Surroundings {
    /// Those of this computer and its account.
    ///
    /// # Errors
    /// When the system names no home folder.
    pub fn of_this_computer() -> Result<Self, platform::PlatformError> {
        let account = ["USER", "USERNAME", "LOGNAME"].iter().find_map(|name| std::env::var(name).ok());
        Ok(Self {
            config: platform::config_folder()?,
            data: platform::data_folder()?,
            clock: session::clock,
            account,
            diary: std::env::var_os("ASSIZE_DIARY").is_some_and(|value| value == "1"),
        })
    }
}

/// The application.
pub struct App {
    around: Surroundings,
    settings: Settings,
    session: Session,
    messages: Messages,
    room: Room,
    strip: StripState,
    dialog: Option<Dialog>,
    /// Wishes that wait for a dialog to be answered.
    waiting: VecDeque<Wish>,
    work: Work,
    /// The title the window has.
    title: String,
    /// A person said that the window may close.
    leaving: bool,
    plan: plan::State,
    bench: bench::State,
    compare: compare::State,
    record: record::State,
}

impl App {
    /// The project at work.
    #[must_use]
    pub fn session(&self) -> &Session {
        &self.session
    }

    /// The room that is shown.
    #[must_use]
    pub fn room(&self) -> Room {
        self.room
    }

    /// Draws one frame and carries out what was asked for.
    pub fn frame(&mut self, ui: &mut Ui) {
        let mut asked = Asked::default();
        self.listen(ui, &mut asked);
        let head = shell::head::head(&self.session);
        shell::masthead(ui, &head, &mut asked);
        let lines = shell::strip::lines(self.messages.all(), self.session.project(), self.session.evaluation());
        shell::rooms_column(ui, &self.session.view(), self.room, &mut asked);
        shell::findings(ui, &mut self.strip, &lines, &mut asked);
        self.show_room(ui, &mut asked);
        let before = self.standing();
        let outcome = self.dialog.as_mut().and_then(|d| d.show(ui.ctx(), &self.session));
        if let Some(outcome) = outcome {
            self.answered(outcome, ui.ctx());
        }
        for text in &asked.closed {
            self.messages.close(text);
        }
        for does in asked.does {
            self.carry_out(does, ui.ctx());
        }
        self.waiting.extend(asked.wishes);
        self.grant_waiting(ui.ctx());
        if self.standing() != before {
            // What was just carried out is not in the picture yet.
            ui.ctx().request_repaint();
        }
    }

    /// What the picture depends on besides the rooms' own memory.
    fn standing(&self) -> (u64, PathBuf, Room, bool, usize) {
        let file = self.session.shelf().path().to_owned();
        (self.session.revision(), file, self.room, self.dialog.is_some(), self.messages.all().len())
    }

    /// Shortcuts, dropped files, and a paste into a project that has no readings yet.
    fn listen(&mut self, ui: &mut Ui, asked: &mut Asked) {
        if self.dialog.is_some() {
            return;
        }
        let typing = match (ui.ctx().text_edit_focused(), self.in_a_table()) {
            (true, _) => Typing::Text,
            (false, true) => Typing::InATable,
            (false, false) => Typing::Nothing,
        };
        asked.does.extend(command::pressed(ui.ctx(), typing));
        let dropped = ui.input(|input| {
            let files = input.raw.dropped_files.iter();
            files.map(|file| file.path().to_owned()).collect::<Vec<_>>()
        });
        asked.wishes.extend(dropped.into_iter().map(|path| self.dropped(path)));
        self.pasted_anywhere(ui, asked);
    }

    /// A table dropped at the bench belongs to the project there; anything else is opened.
    fn dropped(&self, path: PathBuf) -> Wish {
        let ending = path.extension().map(|e| e.to_string_lossy().to_lowercase());
        let table = !matches!(ending.as_deref(), Some("assize" | "pdf"));
        if table && self.room == Room::Bench { Wish::Import { path, zeros: false } } else { Wish::Open(path) }
    }

    /// Whether a table of the bench has the keyboard.
    fn in_a_table(&self) -> bool {
        self.room == Room::Bench && self.bench.has_keyboard()
    }

    /// Draws the room. While a dialog is open the keys belong to it, not to what lies beneath.
    fn show_room(&mut self, ui: &mut Ui, asked: &mut Asked) {
        let withheld = self.dialog.is_some().then(|| ui.input_mut(|input| std::mem::take(&mut input.events)));
        let view = self.session.view();
        let wishes = &mut asked.wishes;
        let frame = egui::Frame::central_panel(ui.style()).inner_margin(margin(self.room, Extent::of(ui)));
        CentralPanel::default().frame(frame).show(ui, |ui| match self.room {
            Room::Plan => plan::show(ui, &view, &mut self.plan, wishes),
            Room::Bench => bench::show(ui, &view, &mut self.bench, wishes),
            Room::Compare => compare::show(ui, &view, &mut self.compare, wishes),
            Room::Record => record::show(ui, &view, &mut self.record, wishes),
        });
        if let Some(events) = withheld {
            ui.input_mut(|input| input.events = events);
        }
    }

    /// Keeps the title of the window in step with the item.
    fn name_window(&mut self, ctx: &Context) {
        let item = &self.session.project().item;
        let name = item.identity.as_deref().or(item.description.as_deref());
        let title = match name {
            Some(name) => format!("Assize: {name}"),
            None => "Assize".to_owned(),
        };
        if title != self.title {
            ctx.send_viewport_cmd(ViewportCommand::Title(title.clone()));
            self.title = title;
        }
    }

    /// Remembers the zoom, and keeps it between 75 and 250 %.
    fn keep_zoom(&mut self, ctx: &Context) {
        let zoom = ctx.zoom_factor().clamp(0.75, 2.5);
        if zoom != ctx.zoom_factor() {
            ctx.set_zoom_factor(zoom);
        }
        if self.settings.zoom.unwrap_or(1.0) != zoom {
            self.settings.zoom = Some(zoom);
            self.keep_settings();
        }
    }

    /// A window is not closed over entries that are not on disk, unless a person says so.
    fn guard_closing(&mut self, ctx: &Context) {
        if self.leaving || !ctx.input(|input| input.viewport().close_requested()) {
            return;
        }
        self.session.try_again();
        if self.session.shelf().failure().is_some() {
            ctx.send_viewport_cmd(ViewportCommand::CancelClose);
            self.dialog = Some(Dialog::Leave(QuestionState::default()));
        }
    }

    /// Tells on stderr which entries came to the disk, when that is wanted.
    fn tell_diary(&mut self) {
        for number in self.session.newly_on_disk() {
            if self.around.diary {
                eprintln!("entry {number} on disk");
            }
        }
    }
}

impl eframe::App for App {
    fn logic(&mut self, ctx: &Context, _frame: &mut Frame) {
        self.finished_work();
        self.name_window(ctx);
        self.guard_closing(ctx);
        self.keep_zoom(ctx);
        self.tell_diary();
    }

    fn ui(&mut self, ui: &mut Ui, _frame: &mut Frame) {
        self.frame(ui);
    }

    fn clear_color(&self, visuals: &egui::Visuals) -> [f32; 4] {
        visuals.panel_fill.to_normalized_gamma_f32()
    }
}

/// Space around a room; rooms made of panels bring their own.
fn margin(room: Room, extent: Extent) -> Margin {
    match (room, extent) {
        (Room::Compare, Extent::Full) => Margin { left: 8, right: 22, top: 10, bottom: 4 },
        (Room::Compare, Extent::Small) => Margin { left: 4, right: 12, top: 4, bottom: 2 },
        _ => Margin::ZERO,
    }
}
