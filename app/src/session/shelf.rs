//! Where the entries of a project are kept: one file that only grows.
//!
//! What could not be written waits here and goes first the next time, so nothing is lost while the window is open.

use super::{Clock, Torn};
use crate::platform::{AppendFile, PlatformError};
use assize_core::{quantity::Moment, trail::chain::HEADER};
use std::path::{Path, PathBuf};

/// The file of a project.
#[derive(Debug)]
pub struct Shelf {
    path: PathBuf,
    file: Option<AppendFile>,
    waiting: String,
    synced: Option<Moment>,
    failure: Option<String>,
    /// An end that was cut short; nothing is appended behind it.
    torn: Option<Torn>,
}

impl Shelf {
    /// A file that does not exist yet; it is made with the first entry.
    #[must_use]
    pub fn planned(path: PathBuf) -> Self {
        Self { path, file: None, waiting: String::new(), synced: None, failure: None, torn: None }
    }

    /// A file that is open, perhaps with an end that was cut short.
    #[must_use]
    pub fn opened(file: AppendFile, torn: Option<Torn>) -> Self {
        let path = file.path().to_owned();
        Self { file: Some(file), torn, ..Self::planned(path) }
    }

    /// Where the file is, or will be.
    #[must_use]
    pub fn path(&self) -> &Path {
        &self.path
    }

    /// When an entry last came to the disk, in this session.
    #[must_use]
    pub fn synced(&self) -> Option<Moment> {
        self.synced
    }

    /// Why the latest entries are not on disk, with the path; `None` while everything is.
    #[must_use]
    pub fn failure(&self) -> Option<&str> {
        self.failure.as_deref()
    }

    /// An end that was cut short and still stands in the file.
    #[must_use]
    pub fn torn(&self) -> Option<&Torn> {
        self.torn.as_ref()
    }

    /// Drops an end that was cut short; to be called after it has been said.
    pub(super) fn drop_torn(&mut self) -> Result<(), PlatformError> {
        if let (Some(torn), Some(file)) = (&self.torn, &mut self.file) {
            file.cut_to(torn.good_bytes)?;
        }
        self.torn = None;
        Ok(())
    }

    /// Appends a line (with its line feed) and syncs; what waited goes first.
    pub(super) fn keep(&mut self, line: &str, clock: Clock) {
        self.waiting.push_str(line);
        if self.waiting.is_empty() {
            return;
        }
        if self.torn.is_some() {
            let path = self.path.display();
            self.failure = Some(format!("the end that was cut short still stands in the file: {path}"));
            return;
        }
        match self.write() {
            Ok(()) => {
                self.waiting.clear();
                self.failure = None;
                self.synced = Some(clock());
            }
            Err(error) => self.failure = Some(error.to_string()),
        }
    }

    fn write(&mut self) -> Result<(), PlatformError> {
        let file = match &mut self.file {
            Some(file) => file,
            None => self.file.insert(create(&mut self.path)?),
        };
        let header = if file.is_empty() { format!("{HEADER}\n") } else { String::new() };
        file.append(format!("{header}{}", self.waiting).as_bytes())
    }
}

/// Makes the file; a name that is taken gets a number behind it, because two projects can begin in one second.
pub(super) fn create(path: &mut PathBuf) -> Result<AppendFile, PlatformError> {
    let planned = path.clone();
    let stem = planned.file_stem().unwrap_or_default().to_string_lossy().into_owned();
    let mut result = AppendFile::create(path);
    for number in 2..100 {
        if !matches!(result, Err(PlatformError::AlreadyExists { .. })) {
            break;
        }
        *path = planned.with_file_name(format!("{stem} ({number}).assize"));
        result = AppendFile::create(path);
    }
    if result.is_err() {
        *path = planned;
    }
    result
}

/// A name for a project that has none: date and time, in figures every file system takes.
#[must_use]
pub fn name_for(at: Moment) -> String {
    format!("{} {}.assize", at.date(), at.clock_seconds().replace(':', "-"))
}
