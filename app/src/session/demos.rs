//! Practice projects that come with the program. They are never edited: a copy is.

use assize_core::trail::Document;
use std::path::Path;

/// A practice project inside the program.
#[derive(Debug, Clone, Copy)]
pub struct Demo {
    /// File name, e.g. `tension-link.assize`.
    pub file: &'static str,
    /// The bytes of the file.
    pub bytes: &'static [u8],
}

include!(concat!(env!("OUT_DIR"), "/demos.rs"));

/// Name of the folder in which shipped projects lie.
const FOLDER: &str = "demo-projects";

/// The one that opens at the very first start, when it is part of this program.
#[must_use]
pub fn default_demo() -> Option<&'static Demo> {
    DEMOS.iter().find(|d| d.file == "tension-link.assize")
}

impl Demo {
    /// What it is about: the item, else the file name.
    #[must_use]
    pub fn title(&self) -> String {
        Document::from_bytes(self.bytes).map_or_else(|_| self.file.to_owned(), |(d, _)| d.project().item.title())
    }
}

/// Whether a path leads to a shipped project.
#[must_use]
pub fn is_shipped(path: &Path) -> bool {
    path.parent().is_some_and(|folder| folder.ends_with(FOLDER))
}

#[cfg(test)]
mod tests {
    use super::*;
    use assize_core::project::about::Kind;

    #[test]
    fn every_shipped_project_reads_and_is_for_practice() {
        for demo in DEMOS {
            let (document, torn) =
                Document::from_bytes(demo.bytes).unwrap_or_else(|problem| panic!("{}: {problem}", demo.file));
            assert_eq!(torn, None, "{}", demo.file);
            assert_ne!(demo.title(), demo.file);
            assert_eq!(document.project().kind, Kind::Practice, "{}", demo.file);
        }
    }

    #[test]
    fn shipped_projects_are_known_by_their_place() {
        assert!(is_shipped(Path::new("/usr/share/assize/demo-projects/a.assize")));
        assert!(!is_shipped(Path::new("/home/m/demo-projects/mine/a.assize")));
        assert!(!is_shipped(Path::new("a.assize")));
    }
}
