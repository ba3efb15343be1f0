//! A project with its trail: every state it ever had, undo as *taken back*, bytes to be appended.

use super::{
    chain::{self, Digest, FileProblem, HEADER},
    tally::Tally,
};
use crate::project::{
    Project,
    command::{self, Act, Command, RecordCommand, Refused},
};
use std::sync::Arc;

/// A project and all entries that made it.
#[derive(Debug, Clone, Default)]
pub struct Document {
    acts: Vec<Act>,
    digests: Vec<Digest>,
    now: Arc<Project>,
    undo: Vec<Step>,
    redo: Vec<Step>,
}

/// A change that can be taken back or put back: which entry, and the project on its other side.
#[derive(Debug, Clone)]
struct Step {
    entry: usize,
    other_side: Arc<Project>,
}

/// One accepted entry: its text is to be written and synced before the next prompt.
#[derive(Debug, Clone, PartialEq)]
pub struct Accepted {
    /// The line with its line feed.
    pub line: String,
    /// Its number.
    pub number: u32,
}

impl Document {
    /// The project as it stands.
    #[must_use]
    pub fn project(&self) -> &Arc<Project> {
        &self.now
    }

    /// All entries, oldest first.
    #[must_use]
    pub fn acts(&self) -> &[Act] {
        &self.acts
    }

    /// Digest of the whole trail.
    #[must_use]
    pub fn digest(&self) -> Digest {
        self.digests.last().copied().unwrap_or_else(chain::start)
    }

    /// The entry that *take back* would act on.
    #[must_use]
    pub fn can_take_back(&self) -> Option<&Act> {
        self.undo.last().map(|s| &self.acts[s.entry])
    }

    /// The entry that *put back* would act on.
    #[must_use]
    pub fn can_put_back(&self) -> Option<&Act> {
        self.redo.last().map(|s| &self.acts[s.entry])
    }

    /// Counts for the report: taken back, corrected, columns tried.
    #[must_use]
    pub fn tally(&self) -> Tally {
        Tally::of(&self.acts)
    }

    /// Carries out an act and returns the line to be stored.
    ///
    /// # Errors
    /// [`Refused`]; then nothing has changed. A text that cannot be stored counts as refused too.
    pub fn enter(&mut self, act: Act) -> Result<Accepted, Refused> {
        let number = u32::try_from(self.acts.len()).unwrap_or(u32::MAX - 1) + 1;
        let (line, digest) = chain::encode(number, &act, self.digest()).map_err(|e| Refused::NotUsable {
            what: "entry",
            found: e.to_string(),
            accepted: "numbers must be finite",
        })?;
        self.take(act, digest)?;
        Ok(Accepted { line: format!("{line}\n"), number })
    }

    fn take(&mut self, act: Act, digest: Digest) -> Result<(), Refused> {
        match &act.command {
            Command::TakeBack => {
                let step = self.undo.pop().ok_or(Refused::NothingTo("there is nothing to take back"))?;
                let forth = self.cross(step);
                self.redo.push(forth);
            }
            Command::PutBack => {
                let step = self.redo.pop().ok_or(Refused::NothingTo("there is nothing to put back"))?;
                let back = self.cross(step);
                self.undo.push(back);
            }
            other => {
                let next = command::apply(&self.now, &act)?;
                self.redo.clear();
                if matches!(other, Command::Record(RecordCommand::Signed(_))) {
                    // Undo never crosses a signature.
                    self.undo.clear();
                } else {
                    self.undo.push(Step { entry: self.acts.len(), other_side: Arc::clone(&self.now) });
                }
                self.now = Arc::new(next);
            }
        }
        self.acts.push(act);
        self.digests.push(digest);
        Ok(())
    }

    /// Steps to the other side of a change and returns the step that leads back. The plan stays fixed.
    fn cross(&mut self, step: Step) -> Step {
        let here = Arc::clone(&self.now);
        let mut there = Arc::clone(&step.other_side);
        if there.plan.fixed != here.plan.fixed {
            Arc::make_mut(&mut there).plan.fixed = here.plan.fixed.or(there.plan.fixed);
        }
        self.now = there;
        Step { entry: step.entry, other_side: here }
    }

    /// The whole file.
    ///
    /// # Errors
    /// [`FileProblem::Unwritable`], which cannot happen for entries that were accepted.
    pub fn to_bytes(&self) -> Result<Vec<u8>, FileProblem> {
        let mut out = format!("{HEADER}\n");
        let mut before = chain::start();
        for (n, act) in (1..).zip(&self.acts) {
            let (line, digest) = chain::encode(n, act, before)?;
            out.push_str(&line);
            out.push('\n');
            before = digest;
        }
        Ok(out.into_bytes())
    }

    /// Reads a file: checks the chain and carries out every entry again.
    ///
    /// # Errors
    /// [`FileProblem`] with the line. The second value is a last line that was cut short by a loss of
    /// power; it had not been acknowledged.
    pub fn from_bytes(bytes: &[u8]) -> Result<(Self, Option<String>), FileProblem> {
        let loaded = chain::decode(bytes)?;
        let mut document = Self::default();
        for (index, (act, digest)) in loaded.acts.into_iter().zip(loaded.digests).enumerate() {
            document.take(act, digest).map_err(|e| FileProblem::Refused { line: index + 2, reason: e.to_string() })?;
        }
        Ok((document, loaded.torn))
    }
}
