//! What the program remembers between starts, beside the projects themselves.

use crate::platform;
use serde::{Deserialize, Serialize};
use std::path::{Path, PathBuf};

/// How many projects the list of recent ones holds.
const RECENT: usize = 8;

/// The settings of a person on this computer.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(default)]
pub struct Settings {
    /// The name last used at the bench.
    pub name: Option<String>,
    /// Dark by night; `None` until somebody switches.
    pub dark: Option<bool>,
    /// Zoom of the window, 1 = 100 %; `None` until somebody changes it.
    pub zoom: Option<f32>,
    /// Projects opened lately, the latest first.
    pub recent: Vec<PathBuf>,
    /// The demonstration was shown once.
    pub demo_seen: bool,
    /// Keys whose owner is known here: made on this computer, or said to be known.
    pub known_keys: Vec<KnownKey>,
}

/// A key whose owner is known.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct KnownKey {
    /// Whose it is.
    pub name: String,
    /// Its fingerprint.
    pub fingerprint: String,
}

impl Settings {
    /// Reads them from a folder; unreadable ones count as none.
    #[must_use]
    pub fn read(folder: &Path) -> Self {
        let bytes = platform::read(&folder.join(FILE)).unwrap_or_default();
        std::str::from_utf8(&bytes).ok().and_then(|text| ron::from_str(text).ok()).unwrap_or_default()
    }

    /// Writes them to a folder.
    ///
    /// # Errors
    /// What the system says; the window goes on without.
    pub fn write(&self, folder: &Path) -> Result<(), String> {
        let text = ron::ser::to_string_pretty(self, ron::ser::PrettyConfig::default()).map_err(|e| e.to_string())?;
        platform::write_whole(&folder.join(FILE), text.as_bytes()).map_err(|e| e.to_string())
    }

    /// Puts a project at the head of the recent ones.
    pub fn opened(&mut self, path: &Path) {
        self.recent.retain(|p| p != path);
        self.recent.insert(0, path.to_owned());
        self.recent.truncate(RECENT);
    }

    /// Remembers whose key it is.
    pub fn know(&mut self, key: KnownKey) {
        self.known_keys.retain(|k| k.fingerprint != key.fingerprint);
        self.known_keys.push(key);
    }

    /// Drops a project that is gone.
    pub fn gone(&mut self, path: &Path) {
        self.recent.retain(|p| p != path);
    }
}

const FILE: &str = "settings.ron";

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn settings_survive_and_damaged_ones_count_as_none() {
        let folder = tempfile::tempdir().unwrap();
        assert_eq!(Settings::read(folder.path()), Settings::default());
        let mut settings = Settings { name: Some("M. Orrin".to_owned()), ..Settings::default() };
        for n in 0..10 {
            settings.opened(Path::new(&format!("{n}.assize")));
        }
        settings.opened(Path::new("5.assize"));
        assert_eq!(settings.recent.len(), RECENT);
        assert_eq!(settings.recent[0], Path::new("5.assize"));
        settings.write(folder.path()).unwrap();
        assert_eq!(Settings::read(folder.path()), settings);
        std::fs::write(folder.path().join(FILE), b"(name: 3").unwrap();
        assert_eq!(Settings::read(folder.path()), Settings::default());
        std::fs::write(folder.path().join(FILE), b"(name: Some(\"A\"))").unwrap();
        assert_eq!(Settings::read(folder.path()).name.as_deref(), Some("A"), "fields may be missing");
    }
}
