//! Whole files: read at once, or replaced at once.

use std::{
    fs::{self, File, OpenOptions},
    io::Write,
    path::{Path, PathBuf},
};

use super::PlatformError;

/// Reads a whole file.
///
/// # Errors
/// When it is missing, a folder, not ours to read, or locked by another program.
pub fn read(path: &Path) -> Result<Vec<u8>, PlatformError> {
    // Windows answers "access denied" for a folder, which would send people the wrong way.
    if path.is_dir() {
        return Err(PlatformError::IsFolder { path: path.to_owned() });
    }
    fs::read(path).map_err(|error| PlatformError::at(path, error))
}

/// Whether anything has this path.
#[must_use]
pub fn exists(path: &Path) -> bool {
    path.symlink_metadata().is_ok()
}

/// Writes a whole file: beside, synced, then renamed over the old one.
///
/// Whoever reads meanwhile sees all of the old bytes or all of the new ones, also after a power
/// cut. The folder is made when it is missing.
///
/// # Errors
/// When folder or file cannot be written; the old file is then unchanged.
pub fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), PlatformError> {
    let (beside, file) = write_beside(path, bytes)?;
    drop(file);
    rename_over(&beside, path)
}

/// Writes and syncs the bytes to a new file in the folder of `path`; returns where, and the handle.
pub(super) fn write_beside(path: &Path, bytes: &[u8]) -> Result<(PathBuf, File), PlatformError> {
    if path.is_dir() {
        return Err(PlatformError::IsFolder { path: path.to_owned() });
    }
    let folder = folder_of(path);
    fs::create_dir_all(folder).map_err(|error| PlatformError::at(folder, error))?;
    let (beside, mut file) = create_beside(path)?;
    let written = file.write_all(bytes).and_then(|()| file.sync_all());
    match written {
        Ok(()) => Ok((beside, file)),
        Err(error) => {
            discard(&beside);
            Err(PlatformError::at(path, error))
        }
    }
}

/// Renames `beside` over `path` and makes the change last.
pub(super) fn rename_over(beside: &Path, path: &Path) -> Result<(), PlatformError> {
    if let Err(error) = fs::rename(beside, path) {
        discard(beside);
        return Err(PlatformError::at(path, error));
    }
    sync_folder(folder_of(path));
    Ok(())
}

/// Creates a file with a name nobody uses, next to `path`.
fn create_beside(path: &Path) -> Result<(PathBuf, File), PlatformError> {
    let name = path.file_name().unwrap_or_default().to_string_lossy();
    for attempt in 0..100_u8 {
        let beside = path.with_file_name(format!(".{name}.{attempt}.part"));
        let created = OpenOptions::new().read(true).write(true).create_new(true).open(&beside);
        match created {
            Ok(file) => return Ok((beside, file)),
            // Left over from a crash, or another window is writing right now.
            Err(error) if error.kind() == std::io::ErrorKind::AlreadyExists => {}
            Err(error) => return Err(PlatformError::at(path, error)),
        }
    }
    Err(PlatformError::InUse { path: path.to_owned() })
}

/// The folder a file lies in; the current one for a bare name.
pub(super) fn folder_of(path: &Path) -> &Path {
    match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    }
}

/// Makes a new or renamed entry of a folder last; best effort, not every system can.
pub(super) fn sync_folder(folder: &Path) {
    if cfg!(unix)
        && let Ok(folder) = File::open(folder)
    {
        // A file system that cannot sync folders has nothing better to offer.
        let _ = folder.sync_all();
    }
}

/// Removes a half-written file of ours; if that fails too, it stays as a hidden `.part`.
fn discard(beside: &Path) {
    let _ = fs::remove_file(beside);
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_file_is_replaced_as_a_whole_and_nothing_is_left_beside() {
        let folder = tempfile::tempdir().expect("a folder");
        let path = folder.path().join("new/report.pdf");
        write_whole(&path, b"first").expect("written");
        write_whole(&path, b"second").expect("written");
        assert_eq!(read(&path).expect("read"), b"second");
        let left = fs::read_dir(folder.path().join("new")).expect("listed");
        assert_eq!(left.count(), 1);
    }

    #[test]
    fn a_leftover_part_is_no_obstacle() {
        let folder = tempfile::tempdir().expect("a folder");
        let path = folder.path().join("a.txt");
        fs::write(folder.path().join(".a.txt.0.part"), b"crashed").expect("written");
        write_whole(&path, b"fine").expect("written");
        assert_eq!(read(&path).expect("read"), b"fine");
    }

    #[test]
    fn a_refused_write_says_why_and_keeps_the_old_bytes() {
        let folder = tempfile::tempdir().expect("a folder");
        let path = folder.path().join("a.txt");
        assert!(matches!(read(&path), Err(PlatformError::NotFound { .. })));
        assert!(matches!(write_whole(folder.path(), b"x"), Err(PlatformError::IsFolder { .. })));
        fs::write(&path, b"old").expect("written");
        let below_a_file = path.join("b.txt");
        assert!(write_whole(&below_a_file, b"x").is_err());
        assert_eq!(read(&path).expect("read"), b"old");
    }
}
