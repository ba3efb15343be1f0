//! Carrying out what was wished for: entries, ways to rooms, files.

use super::{App, reasons};
use crate::{
    command::Does,
    rooms::{Room, Wish},
    session::{KnownKey, Message, Session, Shelf, name_for},
    shell::dialogs::{Columns, CopyTo, Dialog, Outcome, Palette, Projects},
};
use assize_core::{
    project::{command::Command, evaluate::Place},
    quantity::Text,
};
use eframe::egui::{self, Context, ViewportCommand};

impl App {
    /// Grants wishes until one has to wait for an answer.
    pub(super) fn grant_waiting(&mut self, ctx: &Context) {
        while self.dialog.is_none() {
            let Some(wish) = self.waiting.pop_front() else { return };
            self.grant(wish, ctx);
        }
    }

    fn grant(&mut self, wish: Wish, ctx: &Context) {
        match wish {
            Wish::Enter { command, because } => self.enter(command, because),
            Wish::Go(room, place) => self.go(room, place),
            Wish::Open(path) => self.open(&path, ctx),
            Wish::PickColumns => self.carry_out(Does::Columns, ctx),
            Wish::StartOwn => self.start_own(),
            Wish::CopyTo(path) => self.copy_to(&path),
            Wish::Import { path, zeros } => self.import(&path, zeros),
            Wish::Report { path, sign } => self.report(path, sign, ctx),
            Wish::NewKey { name, path, passphrase } => self.new_key(name, path, passphrase, ctx),
            Wish::Verify(path) => self.verify(path, ctx),
            Wish::Know { name, fingerprint, of } => self.know(KnownKey { name, fingerprint }, of, ctx),
        }
    }

    /// Enters a command, after a name and a reason where they are missing.
    fn enter(&mut self, command: Command, because: Option<Text>) {
        if self.session.by().is_none() {
            self.waiting.push_front(Wish::Enter { command, because });
            self.ask_name();
            return;
        }
        let missing = because.as_ref().is_none_or(|why| why.trim().is_empty());
        let ask = reasons::wanted(&command, self.session.project()).filter(|_| missing);
        if let Some(ask) = ask {
            self.dialog = Some(Dialog::reason(Wish::Enter { command, because }, ask));
            return;
        }
        match self.session.enter(command, because) {
            Ok(()) => self.entered(),
            Err(refused) => self.messages.say(Message::look(sentence(&refused.to_string()), "")),
        }
    }

    /// After an entry: what only concerned the step before is closed, a failing disk is told.
    pub(super) fn entered(&mut self) {
        self.messages.close_passing();
        self.tell_disk();
        if self.session.revision() == 1 {
            self.settings.opened(self.session.shelf().path());
            self.keep_settings();
        }
    }

    pub(super) fn tell_disk(&mut self) {
        const LOST: &str = "The latest entries are not on disk:";
        let told: Vec<String> =
            self.messages.all().iter().filter(|m| m.text.starts_with(LOST)).map(|m| m.text.clone()).collect();
        told.iter().for_each(|text| self.messages.close(text));
        if let Some(why) = self.session.shelf().failure() {
            let hint = "They are kept in this window and written with the next entry. Copy the project elsewhere with “Copy to…”.";
            self.messages.say(Message::stop(format!("{LOST} {why}."), hint));
        }
    }

    /// The name last used, else that of the project, else that of the account.
    fn proposed_name(&self) -> String {
        let used = self.settings.name.clone();
        let known = || self.session.project().at_bench.as_ref().map(ToString::to_string);
        used.or_else(known).or_else(|| self.around.account.clone()).unwrap_or_default()
    }

    /// Shows a room, and there the place a finding speaks of.
    pub(super) fn go(&mut self, room: Room, place: Option<Place>) {
        self.room = room;
        match (room, place) {
            (Room::Bench, Some(place)) => self.bench.go_to(&place),
            (Room::Bench, None) => self.bench.take_keyboard(),
            (Room::Record, Some(_)) => self.record.show_missing(),
            (Room::Plan, Some(_)) => self.plan.go_to_missing(),
            (Room::Plan | Room::Compare | Room::Record, _) => {}
        }
    }

    /// Carries out a command of the table.
    pub(super) fn carry_out(&mut self, does: Does, ctx: &Context) {
        match does {
            Does::TakeBack => self.step(Command::TakeBack),
            Does::PutBack => self.step(Command::PutBack),
            Does::Show(room) => self.go(room, None),
            Does::Open => self.dialog = Some(Dialog::Projects(Projects::new(&self.settings.recent))),
            Does::CopyTo => self.dialog = Some(Dialog::CopyTo(CopyTo::new(self.session.shelf().path()))),
            Does::StartOwn => self.start_own(),
            Does::Import => {
                self.room = Room::Bench;
                self.bench.ask_for_table();
            }
            Does::AtBench => self.ask_name(),
            Does::Columns => {
                self.room = Room::Compare;
                self.dialog = Some(Dialog::Columns(Columns::new(self.session.project())));
            }
            Does::SwitchTheme => self.switch_theme(ctx),
            Does::Find => self.dialog = Some(Dialog::Palette(Palette::default())),
        }
    }

    /// Asks who is at the bench.
    pub(super) fn ask_name(&mut self) {
        let name = self.session.by().map_or_else(|| self.proposed_name(), ToString::to_string);
        self.dialog = Some(Dialog::name(&name));
    }

    /// Notes whose key it is, and checks the file again that was signed with it.
    fn know(&mut self, key: KnownKey, of: std::path::PathBuf, ctx: &Context) {
        self.settings.know(key);
        self.keep_settings();
        self.verify(of, ctx);
    }

    /// Takes back or puts back, in the room where the change lies, so that nothing changes out of sight.
    fn step(&mut self, command: Command) {
        let document = self.session.document();
        let act = match command {
            Command::TakeBack => document.can_take_back(),
            _ => document.can_put_back(),
        };
        if let Some(room) = act.map(|a| room_of(&a.command)) {
            self.room = room;
        }
        self.waiting.push_back(Wish::Enter { command, because: None });
    }

    fn switch_theme(&mut self, ctx: &Context) {
        let dark = ctx.theme() == egui::Theme::Light;
        ctx.set_theme(if dark { egui::Theme::Dark } else { egui::Theme::Light });
        self.settings.dark = Some(dark);
        self.keep_settings();
    }

    /// Carries on after a dialog.
    pub(super) fn answered(&mut self, outcome: Outcome, ctx: &Context) {
        self.dialog = None;
        if self.room == Room::Bench {
            // Whoever was typing readings goes on typing.
            self.bench.take_keyboard();
        }
        match outcome {
            // Whatever waited for the answer is given up with it.
            Outcome::Closed => {
                self.waiting.clear();
                self.bench.give_back();
            }
            Outcome::Name(name) => self.named(&name),
            Outcome::Reasoned(wish) | Outcome::Wished(wish) => self.waiting.push_front(wish),
            Outcome::DropTorn => self.drop_torn(),
            Outcome::Leave => {
                self.leaving = true;
                ctx.send_viewport_cmd(ViewportCommand::Close);
            }
            Outcome::Open(path) => self.waiting.push_back(Wish::Open(path)),
            Outcome::Practise(n) => self.practise(n, ctx),
            Outcome::StartOwn => self.start_own(),
            Outcome::CopyTo(path) => self.waiting.push_back(Wish::CopyTo(path)),
            Outcome::Does(does) => self.carry_out(does, ctx),
        }
    }

    fn named(&mut self, name: &str) {
        match self.session.sit_down(name) {
            Ok(()) => {
                self.settings.name = Some(name.trim().to_owned());
                self.keep_settings();
                self.entered();
            }
            Err(refused) => {
                self.messages.say(Message::look(sentence(&refused.to_string()), ""));
                self.waiting.clear();
            }
        }
    }

    fn drop_torn(&mut self) {
        match self.session.drop_torn() {
            Ok(()) => self.messages.say(Message::note("The torn end was taken off; every entry before it is whole.")),
            Err(error) => self.messages.say(Message::stop(
                format!("The torn end could not be taken off: {error}."),
                "Until then nothing new is written behind it.",
            )),
        }
        self.tell_disk();
    }

    /// An empty project of one's own; its file is made with the first entry.
    pub(super) fn start_own(&mut self) {
        let clock = self.around.clock;
        let path = self.around.data.join("projects").join(name_for(clock()));
        self.take(Session::begin(Shelf::planned(path), clock));
        self.go(Room::Bench, None);
    }

    /// Puts another project in the place of the one at work.
    pub(super) fn take(&mut self, session: Session) {
        self.session = session;
        self.messages.clear();
        self.waiting.clear();
        self.plan = Default::default();
        self.bench = Default::default();
        self.compare = Default::default();
        self.record = Default::default();
    }

    fn copy_to(&mut self, path: &std::path::Path) {
        self.messages.say(match self.session.copy_to(path) {
            Ok(()) => Message::note(format!("Copied to {}.", path.display())),
            Err(why) => Message::stop(format!("Not copied: {why}."), "Choose another place."),
        });
    }

    pub(super) fn keep_settings(&mut self) {
        if let Err(why) = self.settings.write(&self.around.config) {
            self.messages.say(Message::note(format!("Settings could not be kept: {why}.")));
        }
    }
}

/// The room in which a change can be seen.
fn room_of(command: &Command) -> Room {
    match command {
        Command::About(_) | Command::Plan(_) => Room::Plan,
        Command::Standards(_) | Command::Readings(_) => Room::Bench,
        Command::Columns(_) => Room::Compare,
        Command::Record(_) | Command::TakeBack | Command::PutBack => Room::Record,
    }
}

/// A refusal as a sentence: first letter large, a full stop at the end.
fn sentence(text: &str) -> String {
    let mut letters = text.chars();
    let first: String = letters.next().into_iter().flat_map(char::to_uppercase).collect();
    let text = format!("{first}{}", letters.as_str());
    if text.ends_with('.') { text } else { format!("{text}.") }
}
