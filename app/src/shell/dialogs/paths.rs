//! Sheets that ask for a path: which project to open, where to copy it to.

use super::Outcome;
use crate::{
    platform::{Ask, FileKind},
    session::{DEMOS, Demo},
    shell::{row, sheet},
    theme::Theme,
    widgets::PathField,
};
use eframe::egui::{Button, Context, RichText, ScrollArea, Ui};
use std::path::{Path, PathBuf};

/// Recent projects, those to practise on, a path, a new one.
#[derive(Debug, Default)]
pub struct Projects {
    field: PathField,
    recent: Vec<PathBuf>,
    /// Items of the projects to practise on.
    titles: Vec<String>,
}

impl Projects {
    /// The sheet with these recent projects.
    #[must_use]
    pub fn new(recent: &[PathBuf]) -> Self {
        let titles = DEMOS.iter().map(Demo::title).collect();
        Self { field: PathField::default().focused(), recent: recent.to_vec(), titles }
    }

    pub(super) fn show(&mut self, ctx: &Context) -> Option<Outcome> {
        let shown = sheet(ctx, "Open", 620.0, |ui| self.contents(ui));
        shown.inner.or_else(|| shown.closed.then_some(Outcome::Closed))
    }

    fn contents(&mut self, ui: &mut Ui) -> Option<Outcome> {
        let kinds = vec![
            FileKind::new("Projects, tables, records", &["assize", "csv", "tsv", "txt", "pdf"]),
            FileKind::new("All files", &["*"]),
        ];
        let field = self.field.show(ui, "A project, a table of readings, or a PDF to check", &Ask::Open(kinds));
        let mut outcome = field.map(Outcome::Open);
        ui.horizontal(|ui| {
            let typed = self.field.path();
            if ui.add_enabled(typed.is_some(), Button::new("Open")).clicked() {
                outcome = typed.map(Outcome::Open);
            }
            if ui.button("Start my own").clicked() {
                outcome = Some(Outcome::StartOwn);
            }
        });
        ScrollArea::vertical().max_height(320.0).show(ui, |ui| {
            if !self.recent.is_empty() {
                head(ui, "Recent");
            }
            for path in &self.recent {
                if row(ui, &name(path), &folder(path), "", false).clicked() {
                    outcome = Some(Outcome::Open(path.clone()));
                }
            }
            if !DEMOS.is_empty() {
                head(ui, "To practise on; a copy is opened, the original stays");
            }
            for (n, (demo, title)) in DEMOS.iter().zip(&self.titles).enumerate() {
                if row(ui, title, demo.file, "", false).clicked() {
                    outcome = Some(Outcome::Practise(n));
                }
            }
        });
        outcome
    }
}

fn head(ui: &mut Ui, text: &str) {
    let theme = Theme::of(ui);
    ui.add_space(theme.spacing.item);
    ui.label(RichText::new(text).font(theme.small()).color(theme.soft_ink));
}

fn name(path: &Path) -> String {
    path.file_stem().unwrap_or_default().to_string_lossy().into_owned()
}

fn folder(path: &Path) -> String {
    path.parent().map_or(String::new(), |folder| folder.display().to_string())
}

/// Where a copy of the project goes.
#[derive(Debug, Default)]
pub struct CopyTo {
    field: PathField,
    name: String,
}

impl CopyTo {
    /// The sheet, proposing a path beside the project.
    #[must_use]
    pub fn new(file: &Path) -> Self {
        let stem = name(file);
        let proposal = file.with_file_name(format!("{stem} copy.assize"));
        Self { field: PathField::new(proposal.display().to_string()).focused(), name: format!("{stem} copy.assize") }
    }

    pub(super) fn show(&mut self, ctx: &Context) -> Option<Outcome> {
        let kinds = vec![FileKind::new("Projects", &["assize"])];
        let ask = Ask::Save { kinds, name: self.name.clone() };
        let shown = sheet(ctx, "Copy the project to", 560.0, |ui| {
            let theme = Theme::of(ui);
            let why = "The project itself is on disk after every entry; this writes a second file.";
            ui.label(RichText::new(why).color(theme.soft_ink));
            let mut settled = self.field.show(ui, "File of the copy", &ask);
            let typed = self.field.path();
            if ui.add_enabled(typed.is_some(), Button::new("Copy")).clicked() {
                settled = typed;
            }
            settled
        });
        match shown.inner {
            Some(path) => Some(Outcome::CopyTo(with_ending(path))),
            None => shown.closed.then_some(Outcome::Closed),
        }
    }
}

/// A path without an ending gets the one of projects.
fn with_ending(path: PathBuf) -> PathBuf {
    if path.extension().is_some() { path } else { path.with_extension("assize") }
}
