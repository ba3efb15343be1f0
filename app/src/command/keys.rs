//! Shortcuts: how they are written, shown and heard.

use super::{Does, TABLE};
use eframe::egui::{self, Key, KeyboardShortcut, Modifiers};

/// A key with the keys held beside it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Keys {
    /// Ctrl (on a Mac: Command) is held.
    pub ctrl: bool,
    /// Shift is held.
    pub shift: bool,
    /// The key.
    pub key: Key,
}

/// What has the keyboard.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Typing {
    /// Nothing that takes letters.
    Nothing,
    /// A table: letters are its own, but undo is the window's.
    InATable,
    /// A text field, which has an undo of its own.
    Text,
}

impl Keys {
    /// The key alone; heard only while nobody types.
    #[must_use]
    pub const fn plain(key: Key) -> Self {
        Self { ctrl: false, shift: false, key }
    }

    /// With Ctrl.
    #[must_use]
    pub const fn ctrl(key: Key) -> Self {
        Self { ctrl: true, shift: false, key }
    }

    /// With Ctrl and Shift.
    #[must_use]
    pub const fn ctrl_shift(key: Key) -> Self {
        Self { ctrl: true, shift: true, key }
    }

    /// As shown beside a command: `Ctrl+Shift+Z`.
    #[must_use]
    pub fn shown(&self) -> String {
        let mut text = String::new();
        if self.ctrl {
            text.push_str("Ctrl+");
        }
        if self.shift {
            text.push_str("Shift+");
        }
        text.push_str(self.key.symbol_or_name());
        text
    }

    /// Whether typing text would use the same keys: plain letters, and undo inside a text field.
    #[must_use]
    pub fn belongs_to_typing(&self, typing: Typing) -> bool {
        match typing {
            Typing::Nothing => false,
            Typing::InATable => !self.ctrl,
            Typing::Text => !self.ctrl || matches!(self.key, Key::Z | Key::Y),
        }
    }

    fn shortcut(self) -> KeyboardShortcut {
        let mut held = Modifiers::NONE;
        held.command = self.ctrl;
        held.shift = self.shift;
        KeyboardShortcut::new(held, self.key)
    }
}

/// What the keys of this frame ask for; they are then used up. Those with Shift are heard first, because a
/// shortcut without Shift is also heard when Shift is held.
#[must_use]
pub fn pressed(ctx: &egui::Context, typing: Typing) -> Vec<Does> {
    let mut all: Vec<(Keys, Does)> = TABLE
        .iter()
        .flat_map(|e| e.keys.iter().map(|k| (*k, e.does)))
        .filter(|(k, _)| !k.belongs_to_typing(typing))
        .collect();
    all.sort_by_key(|(k, _)| !k.shift);
    ctx.input_mut(|input| {
        all.into_iter().filter(|(keys, _)| input.consume_shortcut(&keys.shortcut())).map(|(_, does)| does).collect()
    })
}
