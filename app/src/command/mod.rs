//! One table of what the window can do: it feeds menu, tooltip, shortcut and the list of commands.
//!
//! A shortcut that stands here works and is shown beside its command; one that does not stand here exists
//! nowhere. Keys that belong to a table of readings are the table's own.

mod keys;
mod palette;
#[cfg(test)]
mod tests;

pub use keys::{Keys, Typing, pressed};
pub use palette::matching;

use crate::rooms::Room;
use eframe::egui::Key;

/// Something the window does.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Does {
    /// Takes back the latest change.
    TakeBack,
    /// Puts back what was taken back.
    PutBack,
    /// Shows a room.
    Show(Room),
    /// Opens a project, a table or a PDF.
    Open,
    /// Writes a copy of the project file.
    CopyTo,
    /// Starts an empty project.
    StartOwn,
    /// Imports a table.
    Import,
    /// Says who is at the bench.
    AtBench,
    /// Picks the columns of the comparison.
    Columns,
    /// Light by day, dark by night.
    SwitchTheme,
    /// Lists the commands.
    Find,
}

/// One line of the table.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Entry {
    /// What it does.
    pub does: Does,
    /// Its name on buttons and in lists.
    pub name: &'static str,
    /// One sentence for tooltip and list.
    pub hint: &'static str,
    /// Its shortcuts; the first one is shown.
    pub keys: &'static [Keys],
}

/// All commands, in the order of the list.
pub const TABLE: &[Entry] = &[
    Entry {
        does: Does::TakeBack,
        name: "Take back",
        hint: "Takes back the latest change; it stays visible in the trail.",
        keys: &[Keys::ctrl(Key::Z)],
    },
    Entry {
        does: Does::PutBack,
        name: "Put back",
        hint: "Puts back what was taken back last.",
        keys: &[Keys::ctrl(Key::Y), Keys::ctrl_shift(Key::Z)],
    },
    Entry {
        does: Does::Show(Room::Plan),
        name: "Plan",
        hint: "What is fixed before the first reading.",
        keys: &[Keys::ctrl(Key::Num1)],
    },
    Entry {
        does: Does::Show(Room::Bench),
        name: "Bench",
        hint: "Standards, readings and zero readings.",
        keys: &[Keys::ctrl(Key::Num2)],
    },
    Entry {
        does: Does::Show(Room::Compare),
        name: "Compare",
        hint: "Fits side by side.",
        keys: &[Keys::ctrl(Key::Num3)],
    },
    Entry {
        does: Does::Show(Room::Record),
        name: "Record",
        hint: "Trail, report and signature.",
        keys: &[Keys::ctrl(Key::Num4)],
    },
    Entry {
        does: Does::Open,
        name: "Open…",
        hint: "Opens a project, a table of readings, or a PDF to check; lists recent projects and those to practise on.",
        keys: &[Keys::ctrl(Key::O)],
    },
    Entry {
        does: Does::CopyTo,
        name: "Copy to…",
        hint: "Writes a copy of the project file; the project itself is always on disk.",
        keys: &[Keys::ctrl_shift(Key::S)],
    },
    Entry {
        does: Does::StartOwn,
        name: "Start my own",
        hint: "Starts an empty project of your own.",
        keys: &[Keys::plain(Key::N)],
    },
    Entry {
        does: Does::Import,
        name: "Import a table…",
        hint: "Reads standards and readings, or zero readings, from a delimited text file.",
        keys: &[Keys::ctrl(Key::I)],
    },
    Entry {
        does: Does::AtBench,
        name: "Who is at the bench…",
        hint: "Every entry carries the name of the person at the bench.",
        keys: &[],
    },
    Entry {
        does: Does::Columns,
        name: "Columns to compare…",
        hint: "Picks up to six functions with their weights, and says when each is of use.",
        keys: &[Keys::ctrl(Key::M)],
    },
    Entry {
        does: Does::SwitchTheme,
        name: "Light or dark",
        hint: "Switches between the theme of the day and the theme of the night.",
        keys: &[Keys::ctrl(Key::L)],
    },
    Entry {
        does: Does::Find,
        name: "Find a command…",
        hint: "Lists all commands by name.",
        keys: &[Keys::ctrl(Key::K)],
    },
];

/// The line of the table for what is to be done.
///
/// # Panics
/// Never: a test holds that every command has a line.
#[must_use]
pub fn entry(does: Does) -> &'static Entry {
    TABLE.iter().find(|e| e.does == does).expect("every command has a line in the table")
}

impl Entry {
    /// Its first shortcut in words, e.g. `Ctrl+Z`; empty without one.
    #[must_use]
    pub fn shortcut(&self) -> String {
        self.keys.first().map(Keys::shown).unwrap_or_default()
    }

    /// What a tooltip says: hint and shortcut.
    #[must_use]
    pub fn tooltip(&self) -> String {
        match self.keys.first() {
            Some(keys) => format!("{} ({})", self.hint, keys.shown()),
            None => self.hint.to_owned(),
        }
    }
}
