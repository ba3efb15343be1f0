//! The project at work: its document, its file, its evaluation, who is at the bench.
//!
//! Every change goes through [`Session::enter`]: carried out, written and synced, evaluated, in this order,
//! before the next prompt is shown.

mod demos;
mod message;
mod open;
mod settings;
mod shelf;
#[cfg(test)]
mod tests;

pub use demos::{DEMOS, Demo, default_demo};
pub use message::{Message, Messages};
pub use open::{OpenError, Opened, Torn, open, practice_copy};
pub use settings::{KnownKey, Settings};
pub use shelf::{Shelf, name_for};

use crate::{platform, rooms::View};
use assize_core::{
    project::{
        Project,
        command::{AboutCommand, Act, Command, Refused},
        evaluate::{Evaluation, evaluate},
    },
    quantity::{Moment, Text},
    trail::Document,
};
use std::{path::Path, sync::Arc};

/// Time as a value: this computer's clock, or a fixed one in tests.
pub type Clock = fn() -> Moment;

/// This computer's clock.
#[must_use]
pub fn clock() -> Moment {
    let now = platform::now();
    Moment::new(now.timestamp, now.offset.seconds())
}

/// The project at work.
pub struct Session {
    document: Document,
    evaluation: Arc<Evaluation>,
    revision: u64,
    shelf: Shelf,
    /// Who enters; `None` until a name is given.
    by: Option<Text>,
    clock: Clock,
    /// Entries on disk that a diary may still have to tell.
    told: usize,
}

impl Session {
    /// An empty project; its file is made with the first entry.
    #[must_use]
    pub fn begin(shelf: Shelf, clock: Clock) -> Self {
        Self::with(Document::default(), shelf, clock)
    }

    /// A project as read from its file.
    #[must_use]
    pub fn with(document: Document, shelf: Shelf, clock: Clock) -> Self {
        let evaluation = Arc::new(evaluate(document.project()));
        let told = document.acts().len();
        Self { document, evaluation, revision: 0, shelf, by: None, clock, told }
    }

    /// The project.
    #[must_use]
    pub fn project(&self) -> &Project {
        self.document.project()
    }

    /// The project with its trail.
    #[must_use]
    pub fn document(&self) -> &Document {
        &self.document
    }

    /// Everything computed from the project.
    #[must_use]
    pub fn evaluation(&self) -> &Arc<Evaluation> {
        &self.evaluation
    }

    /// Changes with every accepted entry.
    #[must_use]
    pub fn revision(&self) -> u64 {
        self.revision
    }

    /// Its file.
    #[must_use]
    pub fn shelf(&self) -> &Shelf {
        &self.shelf
    }

    /// Who enters, once a name is given.
    #[must_use]
    pub fn by(&self) -> Option<&Text> {
        self.by.as_ref()
    }

    /// What a room sees.
    #[must_use]
    pub fn view(&self) -> View<'_> {
        View {
            project: self.document.project(),
            document: &self.document,
            evaluation: &self.evaluation,
            revision: self.revision,
            file: Some(self.shelf.path()),
        }
    }

    /// Notes who is at the bench; every later entry carries the name.
    ///
    /// # Errors
    /// A blank name is refused.
    pub fn sit_down(&mut self, name: &str) -> Result<(), Refused> {
        let name = Text::from(name.trim());
        if name.is_empty() {
            return Err(Refused::NobodyAtBench);
        }
        self.by = Some(name.clone());
        if self.project().at_bench.as_ref() == Some(&name) {
            return Ok(());
        }
        self.enter(Command::About(AboutCommand::AtBench { name, role: None }), None)
    }

    /// Carries out a command, brings the entry to the disk, evaluates anew.
    ///
    /// An entry that cannot be written stays, is tried again with the next one, and [`Shelf::failure`] says why.
    ///
    /// # Errors
    /// [`Refused`]; nothing has changed then.
    pub fn enter(&mut self, command: Command, because: Option<Text>) -> Result<(), Refused> {
        let by = self.by.clone().ok_or(Refused::NobodyAtBench)?;
        let at = (self.clock)();
        let accepted = self.document.enter(Act { by, at, because, command })?;
        self.shelf.keep(&accepted.line, self.clock);
        self.evaluation = Arc::new(evaluate(self.document.project()));
        self.revision += 1;
        Ok(())
    }

    /// Tries again to bring entries to the disk that could not be written.
    pub fn try_again(&mut self) {
        self.shelf.keep("", self.clock);
    }

    /// Writes a copy of the whole file: beside, synced, renamed.
    ///
    /// # Errors
    /// What the system says, or that the path is the project's own file.
    pub fn copy_to(&self, path: &Path) -> Result<(), String> {
        if path == self.shelf.path() {
            return Err("the project is in this file already; choose another name".to_owned());
        }
        let bytes = self.document.to_bytes().map_err(|e| e.to_string())?;
        platform::write_whole(path, &bytes).map_err(|e| e.to_string())
    }

    /// Numbers of entries that came to the disk since the last call, in order.
    pub fn newly_on_disk(&mut self) -> std::ops::RangeInclusive<usize> {
        let on_disk = if self.shelf.failure().is_none() { self.document.acts().len() } else { self.told };
        let first = self.told + 1;
        self.told = self.told.max(on_disk);
        first..=on_disk
    }
}
