//! Where this person's settings and data live.

use std::path::PathBuf;

use etcetera::BaseStrategy;

use super::PlatformError;

/// Name of our folder among those of other programs.
const FOLDER: &str = "assize";

/// Folder of settings; it may not exist yet.
///
/// # Errors
/// When the system names no home folder.
pub fn config_folder() -> Result<PathBuf, PlatformError> {
    Ok(strategy()?.config_dir().join(FOLDER))
}

/// Folder of data that belong to the person: keys, the demo, unnamed projects; it may not exist yet.
///
/// # Errors
/// When the system names no home folder.
pub fn data_folder() -> Result<PathBuf, PlatformError> {
    Ok(strategy()?.data_dir().join(FOLDER))
}

fn strategy() -> Result<impl BaseStrategy, PlatformError> {
    etcetera::choose_base_strategy().map_err(|_| PlatformError::NoHome)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_folders_are_ours() {
        for folder in [config_folder(), data_folder()] {
            let folder = folder.expect("a home folder");
            assert!(folder.is_absolute() && folder.ends_with(FOLDER), "{folder:?}");
        }
    }
}
