//! Work that takes longer than a frame: reports, keys, checks. One piece at a time, off the window's thread.

use super::{App, reporting};
use crate::{
    rooms::{SignWith, record::Checked},
    session::{KnownKey, Message},
};
use assize_core::{
    project::{
        about::Signed,
        command::{Command, RecordCommand},
    },
    quantity::Moment,
    trail::Document,
};
use eframe::egui::Context;
use std::{
    path::{Path, PathBuf},
    sync::mpsc::{self, Receiver, TryRecvError},
};

/// What a piece of work came to.
pub enum Done {
    /// A draft was written: where, and how many pages.
    Draft(Result<(PathBuf, usize), String>),
    /// A report was signed and is to be written.
    Signed(Result<Box<SignedReport>, String>),
    /// A key was made.
    Key(Result<(PathBuf, KnownKey), String>),
    /// A PDF was checked.
    Checked(Result<Checked, (PathBuf, String)>),
}

/// A signed report on its way to the disk.
pub struct SignedReport {
    /// Where it goes.
    pub path: PathBuf,
    /// The file.
    pub pdf: Vec<u8>,
    /// The entry about it.
    pub signed: Signed,
    /// The revision it shows.
    pub revision: u64,
}

/// The piece of work under way.
#[derive(Default)]
pub struct Work {
    running: Option<Receiver<Done>>,
}

impl Work {
    /// Starts a piece of work; says why when one is under way.
    fn start(&mut self, ctx: &Context, work: impl FnOnce() -> Done + Send + 'static) -> Result<(), String> {
        if self.running.is_some() {
            return Err("the piece of work before is not finished yet".to_owned());
        }
        let (sender, receiver) = mpsc::channel();
        let ctx = ctx.clone();
        let run = move || {
            // Nobody listens any more when the window is gone.
            let _ = sender.send(work());
            ctx.request_repaint();
        };
        std::thread::Builder::new().name("work".to_owned()).spawn(run).map_err(|e| e.to_string())?;
        self.running = Some(receiver);
        Ok(())
    }

    /// What was finished since the last call.
    fn finished(&mut self) -> Option<Result<Done, String>> {
        let done = match self.running.as_ref()?.try_recv() {
            Ok(done) => Ok(done),
            Err(TryRecvError::Empty) => return None,
            Err(TryRecvError::Disconnected) => Err("it stopped without an answer".to_owned()),
        };
        self.running = None;
        Some(done)
    }
}

impl App {
    /// Takes what was finished since the last frame.
    pub(super) fn finished_work(&mut self) {
        let Some(done) = self.work.finished() else { return };
        self.record.set_busy(false);
        match done {
            Ok(Done::Draft(Ok((path, pages)))) => {
                self.messages.say(Message::note(format!("Draft of {pages} pages written: {}", path.display())));
            }
            Ok(Done::Signed(Ok(report))) => self.write_signed(*report),
            Ok(Done::Key(Ok((path, key)))) => self.key_made(&path, key),
            Ok(Done::Checked(Ok(checked))) => self.record.answer(checked),
            Ok(Done::Checked(Err((path, why)))) => {
                self.messages.say(Message::stop(format!("Not checked: {why} (file {})", path.display()), ""));
            }
            Ok(Done::Draft(Err(why)) | Done::Key(Err(why)) | Done::Signed(Err(why))) | Err(why) => {
                self.messages.say(Message::stop(format!("Not done: {why}."), ""));
            }
        }
    }

    /// The file first, then the entry about it: an entry never speaks of a file that is not there.
    fn write_signed(&mut self, report: SignedReport) {
        self.record.forget_passphrase();
        if report.revision != self.session.revision() {
            let why = "Not signed: the project changed while the signature was made.";
            self.messages.say(Message::stop(why, "Sign it again as it is now."));
            return;
        }
        let path = report.path.display().to_string();
        if let Err(why) = reporting::write_new(&report.path, &report.pdf) {
            self.messages.say(Message::stop(format!("Not signed: {why}."), "Choose another file name."));
            return;
        }
        let command = Command::Record(RecordCommand::Signed(report.signed));
        match self.session.enter(command, None) {
            Ok(()) => {
                self.entered();
                self.messages.say(Message::note(format!("Signed: {path}")));
            }
            Err(refused) => {
                let text = format!("The signed file was written, the entry about it was refused: {refused}.");
                self.messages.say(Message::stop(text, ""));
            }
        }
    }

    fn key_made(&mut self, path: &Path, key: KnownKey) {
        let text = format!("Key of {} made: {}. Fingerprint {}", key.name, path.display(), key.fingerprint);
        self.messages.say(Message::note(text));
        self.record.use_key(path);
        self.settings.know(key);
        self.keep_settings();
    }

    /// Writes a draft, or signs.
    pub(super) fn report(&mut self, path: PathBuf, sign: Option<SignWith>, ctx: &Context) {
        let document = self.session.document().clone();
        let at = (self.around.clock)();
        let revision = self.session.revision();
        if sign.is_some() && self.session.by().is_none() {
            // The entry about the signature needs a name; asked before the work, not after it.
            self.waiting.push_front(crate::rooms::Wish::Report { path, sign });
            self.ask_name();
            return;
        }
        self.run(ctx, move || match sign {
            None => Done::Draft(reporting::write_draft(&document, at, &path).map(|pages| (path, pages))),
            Some(with) => {
                let made = reporting::sign(&document, at, &with);
                Done::Signed(made.map(|(pdf, signed)| Box::new(SignedReport { path, pdf, signed, revision })))
            }
        });
    }

    /// Makes a key file.
    pub(super) fn new_key(&mut self, name: String, path: PathBuf, passphrase: String, ctx: &Context) {
        let at = (self.around.clock)();
        self.run(ctx, move || {
            let made = reporting::make_key(&name, &path, &passphrase, at);
            Done::Key(made.map(|fingerprint| (path, KnownKey { name, fingerprint })))
        });
    }

    /// Checks a PDF and shows the answer in the record room.
    pub(super) fn verify(&mut self, path: PathBuf, ctx: &Context) {
        self.room = crate::rooms::Room::Record;
        let known = self.settings.known_keys.clone();
        self.run(ctx, move || Done::Checked(reporting::check(&path, &known).map_err(|why| (path, why))));
    }

    fn run(&mut self, ctx: &Context, work: impl FnOnce() -> Done + Send + 'static) {
        match self.work.start(ctx, work) {
            Ok(()) => self.record.set_busy(true),
            Err(why) => self.messages.say(Message::look(format!("Not started: {why}."), "")),
        }
    }
}

/// The draft report of a project, for the preview.
///
/// # Errors
/// Why there is none, in words.
pub fn draft(document: &Document, at: Moment) -> Result<Vec<u8>, String> {
    reporting::draft(document, at).map(|(pdf, _)| pdf)
}
