//! Opening a project file: lock, chain, and an end that was cut short.

use super::{Clock, Session, Shelf, demos, shelf};
use crate::platform::{self, AppendFile, PlatformError};
use assize_core::trail::{Document, FileProblem};
use std::path::{Path, PathBuf};

/// A project that was opened.
pub struct Opened {
    /// The project; an end that was cut short stays in the file until [`Session::drop_torn`].
    pub session: Session,
    /// A sentence about what was opened, where the path says less than the truth.
    pub note: Option<String>,
}

/// The end of a file that was cut short while it was written, and had not been acknowledged.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Torn {
    /// What is there.
    pub text: String,
    /// Length of the whole entries before it, in bytes.
    pub good_bytes: u64,
}

impl Torn {
    /// What is said before the file is touched.
    #[must_use]
    pub fn sentence(&self) -> String {
        format!(
            "The last entry was cut short after {} bytes, as by a loss of power, and had not been acknowledged.",
            self.text.len()
        )
    }
}

/// Why a project could not be opened.
#[derive(Debug, thiserror::Error)]
pub enum OpenError {
    /// The system, or another window.
    #[error(transparent)]
    Platform(#[from] PlatformError),
    /// What is in the file.
    #[error("{problem} (file {})", path.display())]
    Content {
        /// What is wrong, with its line.
        problem: FileProblem,
        /// The file.
        path: PathBuf,
    },
}

impl OpenError {
    /// What to do about it.
    #[must_use]
    pub fn hint(&self) -> &'static str {
        match self {
            Self::Platform(PlatformError::InUse { .. }) => {
                "Go on in the window where it is open, or close it there first."
            }
            Self::Platform(PlatformError::PermissionDenied { .. }) => {
                "Copy the file to a folder of your own and open the copy."
            }
            Self::Platform(_) => "Check the path, and whether the drive is connected.",
            Self::Content { problem: FileProblem::Changed { .. } | FileProblem::OutOfOrder { .. }, .. } => {
                "The file was left as it is. Compare it with a copy, or with the record inside a signed PDF."
            }
            Self::Content { .. } => "The file was left as it is.",
        }
    }
}

/// Opens a project; one that was shipped with the program is copied first and the copy is opened.
///
/// # Errors
/// [`OpenError`] in words; the file is unchanged.
pub fn open(path: &Path, practice: &Path, clock: Clock) -> Result<Opened, OpenError> {
    if demos::is_shipped(path) {
        let bytes = platform::read(path)?;
        let name = path.file_name().unwrap_or_default().to_string_lossy();
        return practice_copy(&bytes, &name, practice, clock);
    }
    let mut file = AppendFile::open(path)?;
    let bytes = file.read_all()?;
    let content = |problem| OpenError::Content { problem, path: path.to_owned() };
    let (document, torn) = Document::from_bytes(&bytes).map_err(content)?;
    let torn = torn.map(|text| Torn { good_bytes: (bytes.len() - text.len()) as u64, text });
    let session = Session::with(document, Shelf::opened(file, torn), clock);
    Ok(Opened { session, note: None })
}

/// Puts a shipped project into the folder for practice under a free name, and opens it there.
///
/// # Errors
/// [`OpenError`] in words.
pub fn practice_copy(bytes: &[u8], name: &str, folder: &Path, clock: Clock) -> Result<Opened, OpenError> {
    let stem = name.strip_suffix(".assize").unwrap_or(name);
    let day = shelf::name_for(clock());
    let mut path = folder.join(format!("{stem} {day}"));
    let content = |problem| OpenError::Content { problem, path: PathBuf::from(name) };
    let (document, _) = Document::from_bytes(bytes).map_err(content)?;
    let mut file = shelf::create(&mut path)?;
    file.append(bytes)?;
    let note = "This is a copy to practise on; the project it was made from stays as it is.".to_owned();
    let session = Session::with(document, Shelf::opened(file, None), clock);
    Ok(Opened { session, note: Some(note) })
}

impl Session {
    /// Drops an end that was cut short from the file, after it has been said.
    ///
    /// # Errors
    /// What the system says.
    pub fn drop_torn(&mut self) -> Result<(), PlatformError> {
        self.shelf.drop_torn()?;
        self.try_again();
        Ok(())
    }
}
