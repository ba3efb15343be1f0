//! The only door to the world outside: clock, chance, files, folders, dialogs.
//!
//! Everything else takes times, bytes and random numbers as values, so that it can be tested and
//! gives the same answer twice.

mod append;
mod dialog;
mod files;
mod folders;

use std::{
    io,
    path::{Path, PathBuf},
    time::{Duration, Instant},
};

use jiff::{Timestamp, tz::Offset, tz::TimeZone};
use thiserror::Error;

pub use append::AppendFile;
pub use dialog::{Answer, Ask, Dialog, FileKind, ask};
pub use files::{exists, read, write_whole};
pub use folders::{config_folder, data_folder};

/// What went wrong outside. The path stands last, so that a long one hides nothing.
#[derive(Debug, Error)]
pub enum PlatformError {
    /// Nothing is there.
    #[error("there is no such file: {}", path.display())]
    NotFound {
        /// The file or folder.
        path: PathBuf,
    },
    /// The system does not allow it.
    #[error("permission denied: {}", path.display())]
    PermissionDenied {
        /// The file or folder.
        path: PathBuf,
    },
    /// Another window, or another program, has it open.
    #[error("in use by another window: {}", path.display())]
    InUse {
        /// The file.
        path: PathBuf,
    },
    /// Something is there already.
    #[error("there is a file already: {}", path.display())]
    AlreadyExists {
        /// The file.
        path: PathBuf,
    },
    /// A file was wanted.
    #[error("this is a folder, not a file: {}", path.display())]
    IsFolder {
        /// The folder.
        path: PathBuf,
    },
    /// Disk or quota is full.
    #[error("the disk is full: {}", path.display())]
    DiskFull {
        /// The file being written.
        path: PathBuf,
    },
    /// Anything else, in the system's words.
    #[error("{source}: {}", path.display())]
    Other {
        /// What the system says.
        source: io::Error,
        /// The file or folder.
        path: PathBuf,
    },
    /// The system names no home folder for this person.
    #[error("the system names no folder for settings and data of this person")]
    NoHome,
    /// The system gives no random bytes.
    #[error("the system gives no random bytes: {reason}")]
    NoRandom {
        /// What the system says.
        reason: String,
    },
}

impl PlatformError {
    /// Sorts an error of the system by what a person can do about it.
    fn at(path: &Path, source: io::Error) -> Self {
        let path = path.to_owned();
        match source.kind() {
            io::ErrorKind::NotFound => Self::NotFound { path },
            io::ErrorKind::PermissionDenied | io::ErrorKind::ReadOnlyFilesystem => Self::PermissionDenied { path },
            io::ErrorKind::AlreadyExists => Self::AlreadyExists { path },
            io::ErrorKind::IsADirectory => Self::IsFolder { path },
            io::ErrorKind::StorageFull | io::ErrorKind::QuotaExceeded => Self::DiskFull { path },
            io::ErrorKind::WouldBlock | io::ErrorKind::ResourceBusy => Self::InUse { path },
            // Windows: ERROR_SHARING_VIOLATION and ERROR_LOCK_VIOLATION.
            _ if cfg!(windows) && matches!(source.raw_os_error(), Some(32 | 33)) => Self::InUse { path },
            _ => Self::Other { source, path },
        }
    }
}

/// A moment on the clock of this computer.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Now {
    /// The moment, in UTC.
    pub timestamp: Timestamp,
    /// How far local time is ahead of UTC at that moment.
    pub offset: Offset,
}

/// Reads the clock.
#[must_use]
pub fn now() -> Now {
    let timestamp = Timestamp::now();
    // Without a known time zone this is UTC, which the offset then says.
    let offset = TimeZone::system().to_offset(timestamp);
    Now { timestamp, offset }
}

/// A running stopwatch.
#[derive(Debug, Clone, Copy)]
pub struct Stopwatch(Instant);

impl Stopwatch {
    /// Starts one.
    #[must_use]
    #[expect(clippy::disallowed_methods, reason = "this is the one door to the clock")]
    pub fn start() -> Self {
        Self(Instant::now())
    }

    /// Time since it was started.
    #[must_use]
    pub fn elapsed(&self) -> Duration {
        self.0.elapsed()
    }
}

/// Random bytes fit for keys, from the system.
///
/// # Errors
/// When the system gives none.
pub fn random_bytes<const N: usize>() -> Result<[u8; N], PlatformError> {
    let mut bytes = [0; N];
    getrandom::fill(&mut bytes).map_err(|error| PlatformError::NoRandom { reason: error.to_string() })?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn random_bytes_differ() {
        let (a, b) = (random_bytes::<32>(), random_bytes::<32>());
        assert_ne!(a.expect("random"), b.expect("random"));
    }

    #[test]
    fn the_clock_goes_forwards() {
        let (first, second) = (now(), now());
        assert!(second.timestamp >= first.timestamp);
        assert!(first.offset.seconds().abs() <= 15 * 3600);
    }

    #[test]
    fn the_path_stands_last() {
        let path = Path::new("folder/TL-07.assize");
        for kind in [
            io::ErrorKind::NotFound,
            io::ErrorKind::PermissionDenied,
            io::ErrorKind::WouldBlock,
            io::ErrorKind::StorageFull,
            io::ErrorKind::InvalidData,
        ] {
            let text = PlatformError::at(path, kind.into()).to_string();
            assert!(text.ends_with(": folder/TL-07.assize"), "{text}");
        }
    }
}
