//! A file that only grows, held by one window at a time.

use std::{
    fs::{self, File, OpenOptions, TryLockError},
    io::{Read, Seek, SeekFrom, Write},
    path::{Path, PathBuf},
};

use super::{PlatformError, files};

/// A file kept open and locked, to which entries are appended and synced.
///
/// The lock goes with the handle: it ends when the window closes, also by a crash.
#[derive(Debug)]
pub struct AppendFile {
    path: PathBuf,
    file: File,
    /// Bytes that are known to be whole entries.
    length: u64,
}

impl AppendFile {
    /// Makes a new, empty file, and its folder when that is missing.
    ///
    /// # Errors
    /// When something has this path already, or it cannot be written.
    pub fn create(path: &Path) -> Result<Self, PlatformError> {
        let folder = files::folder_of(path);
        fs::create_dir_all(folder).map_err(|error| PlatformError::at(folder, error))?;
        let file = options().create_new(true).open(path).map_err(|error| PlatformError::at(path, error))?;
        files::sync_folder(folder);
        Self::hold(path, file)
    }

    /// Opens an existing file.
    ///
    /// # Errors
    /// When it is missing, not ours to write, or open in another window.
    pub fn open(path: &Path) -> Result<Self, PlatformError> {
        if path.is_dir() {
            return Err(PlatformError::IsFolder { path: path.to_owned() });
        }
        let file = options().open(path).map_err(|error| PlatformError::at(path, error))?;
        Self::hold(path, file)
    }

    fn hold(path: &Path, file: File) -> Result<Self, PlatformError> {
        let at = |error| PlatformError::at(path, error);
        match file.try_lock() {
            Ok(()) => {}
            Err(TryLockError::WouldBlock) => {
                return Err(PlatformError::InUse { path: path.to_owned() });
            }
            // Some network file systems know no locks: working unlocked beats not working.
            Err(TryLockError::Error(error)) if error.kind() == std::io::ErrorKind::Unsupported => {}
            Err(TryLockError::Error(error)) => return Err(at(error)),
        }
        let length = file.metadata().map_err(at)?.len();
        Ok(Self { path: path.to_owned(), file, length })
    }

    /// Where the file is.
    #[must_use]
    pub fn path(&self) -> &Path {
        &self.path
    }

    /// Length in bytes.
    #[must_use]
    pub fn len(&self) -> u64 {
        self.length
    }

    /// Whether nothing is in it.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.length == 0
    }

    /// Reads the whole file through the handle that holds the lock.
    ///
    /// # Errors
    /// When the system cannot read it.
    pub fn read_all(&mut self) -> Result<Vec<u8>, PlatformError> {
        let mut bytes = Vec::new();
        self.file
            .seek(SeekFrom::Start(0))
            .and_then(|_| self.file.read_to_end(&mut bytes))
            .map_err(|error| PlatformError::at(&self.path, error))?;
        Ok(bytes)
    }

    /// Appends the bytes and returns when the disk has them.
    ///
    /// # Errors
    /// When they could not be written in full; what was written of them is taken away again.
    pub fn append(&mut self, bytes: &[u8]) -> Result<(), PlatformError> {
        let written = self
            .file
            .seek(SeekFrom::Start(self.length))
            .and_then(|_| self.file.write_all(bytes))
            .and_then(|()| self.file.sync_data());
        match written {
            Ok(()) => {
                self.length += bytes.len() as u64;
                Ok(())
            }
            Err(error) => {
                // Half an entry would damage the next one. If this fails too, the error says enough.
                let _ = self.file.set_len(self.length);
                Err(PlatformError::at(&self.path, error))
            }
        }
    }

    /// Shortens the file to `length` bytes, to drop a torn last entry; does nothing if it is shorter.
    ///
    /// # Errors
    /// When the system refuses.
    pub fn cut_to(&mut self, length: u64) -> Result<(), PlatformError> {
        if length < self.length {
            self.file
                .set_len(length)
                .and_then(|()| self.file.sync_data())
                .map_err(|error| PlatformError::at(&self.path, error))?;
            self.length = length;
        }
        Ok(())
    }

    /// Replaces the whole content: beside, synced, renamed. The new file is locked before it takes
    /// the old one's place, so no other window can come between.
    ///
    /// # Errors
    /// When it cannot be written; content and lock are then unchanged.
    pub fn replace(&mut self, bytes: &[u8]) -> Result<(), PlatformError> {
        let (beside, file) = files::write_beside(&self.path, bytes)?;
        let mut new = Self::hold(&beside, file)?;
        files::rename_over(&beside, &self.path)?;
        new.path.clone_from(&self.path);
        *self = new;
        Ok(())
    }
}

/// Reading and writing, not "append only": Windows does not let such a handle shorten the file.
fn options() -> OpenOptions {
    let mut options = OpenOptions::new();
    options.read(true).write(true);
    options
}

#[cfg(test)]
mod tests {
    use super::*;

    fn in_folder(check: impl FnOnce(&Path)) {
        let folder = tempfile::tempdir().expect("a folder");
        check(&folder.path().join("new/TL-07.assize"));
    }

    #[test]
    fn entries_are_there_after_closing() {
        in_folder(|path| {
            let mut file = AppendFile::create(path).expect("new");
            assert!(file.is_empty());
            file.append(b"header\n").expect("appended");
            drop(file);
            let mut file = AppendFile::open(path).expect("opened");
            file.append(b"entry\n").expect("appended");
            assert_eq!(file.read_all().expect("read"), b"header\nentry\n");
            // Reading does not move where the next entry goes.
            file.append(b"more\n").expect("appended");
            assert_eq!(file.len(), 18);
            drop(file);
            assert_eq!(files::read(path).expect("read"), b"header\nentry\nmore\n");
        });
    }

    #[test]
    fn a_second_window_is_told_so_until_the_first_closes() {
        in_folder(|path| {
            let first = AppendFile::create(path).expect("new");
            let second = AppendFile::open(path);
            assert!(matches!(second, Err(PlatformError::InUse { .. })), "{second:?}");
            drop(first);
            assert!(AppendFile::open(path).is_ok());
        });
    }

    #[test]
    fn a_new_file_never_takes_the_place_of_another() {
        in_folder(|path| {
            drop(AppendFile::create(path).expect("new"));
            let again = AppendFile::create(path);
            assert!(matches!(again, Err(PlatformError::AlreadyExists { .. })));
            let missing = AppendFile::open(&path.with_file_name("other"));
            assert!(matches!(missing, Err(PlatformError::NotFound { .. })));
        });
    }

    #[test]
    fn replacing_keeps_the_lock_and_goes_on_appending() {
        in_folder(|path| {
            let mut file = AppendFile::create(path).expect("new");
            file.append(b"a long history\n").expect("appended");
            file.replace(b"short\n").expect("replaced");
            let second = AppendFile::open(path);
            assert!(matches!(second, Err(PlatformError::InUse { .. })));
            file.append(b"next\n").expect("appended");
            assert_eq!(file.read_all().expect("read"), b"short\nnext\n");
            assert_eq!(file.path(), path);
        });
    }

    #[test]
    fn a_torn_end_can_be_cut_off() {
        in_folder(|path| {
            let mut file = AppendFile::create(path).expect("new");
            file.append(b"whole\nto").expect("appended");
            file.cut_to(6).expect("cut");
            file.cut_to(60).expect("nothing to cut");
            file.append(b"next\n").expect("appended");
            assert_eq!(file.read_all().expect("read"), b"whole\nnext\n");
        });
    }
}
