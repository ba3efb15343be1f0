//! A path: typed, or picked in the system's dialog where there is one.

use std::path::PathBuf;

use eframe::egui::{Key, TextEdit, Ui, vec2};

use super::field::label;
use super::finding::{Severity, caption_small};
use crate::platform::{self, Answer, Ask, Dialog};
use crate::theme::Theme;

/// Said when the machine has no file dialog.
const NO_DIALOG: &str = "No file dialog available here; type a path";

/// A field for a path with a button "Browse…" beside it; the caller keeps it between frames.
#[derive(Debug, Default)]
pub struct PathField {
    /// The path as typed.
    pub text: String,
    dialog: Option<Dialog>,
    no_dialog: bool,
    wants_focus: bool,
}

impl PathField {
    /// A field that starts with `path`.
    #[must_use]
    pub fn new(path: impl Into<String>) -> Self {
        Self { text: path.into(), ..Self::default() }
    }

    /// The same field, taking the keyboard when it is first shown.
    #[must_use]
    pub fn focused(self) -> Self {
        Self { wants_focus: true, ..self }
    }

    /// The typed path, quotes around it taken off; `None` when nothing is typed.
    #[must_use]
    pub fn path(&self) -> Option<PathBuf> {
        let text = self.text.trim();
        let inner = |quote| text.strip_prefix(quote).and_then(|text| text.strip_suffix(quote));
        // File managers copy a path with quotes.
        let text = inner('"').or_else(|| inner('\'')).unwrap_or(text);
        (!text.is_empty()).then(|| PathBuf::from(text))
    }

    /// Shows field and button; gives the path when the person settled on it, by Enter or in the
    /// dialog.
    pub fn show(&mut self, ui: &mut Ui, name: &str, ask: &Ask) -> Option<PathBuf> {
        let theme = Theme::of(ui);
        let mut settled = self.answered();
        ui.vertical(|ui| {
            ui.spacing_mut().item_spacing.y = 2.0;
            let label = label(ui, name);
            ui.horizontal(|ui| {
                let button_width = 84.0 + theme.spacing.item;
                let edit = TextEdit::singleline(&mut self.text)
                    .desired_width((ui.available_width() - button_width).clamp(120.0, 520.0))
                    .min_size(vec2(0.0, theme.spacing.control))
                    .hint_text("path of the file");
                let response = ui.add(edit).labelled_by(label.id);
                if std::mem::take(&mut self.wants_focus) {
                    response.request_focus();
                }
                if response.changed() {
                    self.no_dialog = false;
                }
                if response.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter)) {
                    settled = self.path();
                }
                self.browse(ui, name, ask);
            });
            if self.no_dialog {
                caption_small(ui, Severity::Note, NO_DIALOG);
            }
        });
        settled
    }

    fn browse(&mut self, ui: &mut Ui, name: &str, ask: &Ask) {
        let idle = self.dialog.is_none();
        let button =
            ui.add_enabled_ui(idle, |ui| ui.button("Browse…")).inner.accessible_name(format!("Browse for {name}"));
        if button.clicked() && idle {
            let ctx = ui.ctx().clone();
            let folder =
                self.path().and_then(|path| path.ancestors().skip(1).find(|folder| folder.is_dir()).map(PathBuf::from));
            self.no_dialog = false;
            let wake = move || ctx.request_repaint();
            self.dialog = Some(platform::ask(ask.clone(), folder, wake));
        }
    }

    /// The path chosen in the dialog, once.
    fn answered(&mut self) -> Option<PathBuf> {
        let answer = self.dialog.as_ref()?.answer()?;
        self.dialog = None;
        match answer {
            Answer::Path(path) => {
                self.text = path.display().to_string();
                Some(path)
            }
            Answer::Cancelled => None,
            Answer::NoDialog => {
                self.no_dialog = true;
                None
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn quotes_and_blanks_around_a_path_are_not_part_of_it() {
        let path = |text: &str| PathField::new(text).path();
        let expected = Some(PathBuf::from("/data/a b.csv"));
        assert_eq!(path("  /data/a b.csv "), expected);
        assert_eq!(path("\"/data/a b.csv\""), expected);
        assert_eq!(path("'/data/a b.csv'"), expected);
        assert_eq!(path("  "), None);
        assert_eq!(path("\"\""), None);
        assert_eq!(path("\""), Some(PathBuf::from("\"")));
    }
}
