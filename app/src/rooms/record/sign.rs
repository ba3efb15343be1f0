//! The panel that writes the report: as a draft, or signed.

use super::{check, state::State};
use crate::{
    platform::{Ask, FileKind},
    rooms::{SignWith, View, Wish},
    shell::strip,
    theme::Theme,
    widgets::{Field, PathField, Severity, finding_line, segmented},
};
use assize_core::{exchange::report::not_ready, project::about::Kind};
use eframe::egui::{Button, Label, RichText, ScrollArea, TextStyle, Ui};
use std::path::Path;

/// What is typed in the panel.
#[derive(Debug, Default)]
pub struct SignForm {
    /// Where the report goes.
    pub report: PathField,
    /// The key file.
    pub key: PathField,
    /// Its passphrase.
    pub passphrase: String,
    /// What the signature means.
    pub meaning: Meaning,
    /// A key being made.
    pub making: Option<NewKey>,
    /// The report path was proposed.
    proposed: bool,
}

/// What a signature means.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Meaning {
    /// The work was done by the signer.
    #[default]
    Performed,
    /// The record is approved by the signer.
    Approved,
}

impl Meaning {
    const ALL: [(Self, &'static str); 2] = [(Self::Performed, "performed"), (Self::Approved, "approved")];

    /// The word printed in the signature box.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            Self::Performed => "performed",
            Self::Approved => "approved",
        }
    }
}

/// What is typed for a new key.
#[derive(Debug, Default)]
pub struct NewKey {
    name: String,
    path: PathField,
    first: String,
    second: String,
}

/// Shows the panel.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    ScrollArea::vertical().auto_shrink([false, false]).id_salt("sign").show(ui, |ui| {
        ui.spacing_mut().item_spacing.y = 8.0;
        heading(ui, "Report");
        report(ui, view, state, wishes);
        ui.add_space(12.0);
        heading(ui, "Check a PDF");
        let pdf = vec![FileKind::new("PDF", &["pdf"])];
        let settled = state.check.show(ui, "A signed report", &Ask::Open(pdf));
        let typed = state.check.path();
        let pressed = ui.add_enabled(typed.is_some() && !state.busy, Button::new("Check it")).clicked();
        wishes.extend(settled.or(typed.filter(|_| pressed)).map(Wish::Verify));
        if let Some(checked) = &state.checked {
            check::show(ui, checked, wishes);
        }
    });
}

fn report(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let busy = state.busy;
    let form = &mut state.sign;
    form.propose(view.file);
    let pdf = vec![FileKind::new("PDF", &["pdf"])];
    let name = form.report.path().and_then(|p| p.file_name().map(|n| n.to_string_lossy().into_owned()));
    let ask = Ask::Save { kinds: pdf, name: name.unwrap_or_else(|| "report.pdf".to_owned()) };
    form.report.show(ui, "File of the report", &ask);
    let path = form.report.path();
    if ui.add_enabled(path.is_some() && !busy, Button::new("Save draft…")).clicked() {
        wishes.extend(path.clone().map(|path| Wish::Report { path, sign: None }));
    }
    soft(ui, "A draft says so on every page and carries no signature.");
    ui.add_space(6.0);
    if view.project.kind == Kind::Practice {
        finding_line(ui, Severity::Note, "Practice stays practice: this project is never signed as a record.");
        return;
    }
    let missing = missing(ui, view, wishes);
    form.key(ui, wishes);
    let ready = !missing && !busy && form.key.path().is_some() && path.is_some();
    let sign = ui.add_enabled(ready, Button::new(format!("Sign as {} and save", form.meaning.word())));
    if sign.clicked()
        && let (Some(path), Some(key)) = (path, form.key.path())
    {
        let passphrase = form.passphrase.clone();
        let meaning = form.meaning.word().to_owned();
        wishes.push(Wish::Report { path, sign: Some(SignWith { key, passphrase, meaning }) });
    }
    soft(ui, "A signature cannot be taken back. What is entered afterwards is not covered by it.");
}

/// What keeps the record from being signed; each line leads to where it can be done. Says whether anything does.
fn missing(ui: &mut Ui, view: &View<'_>, wishes: &mut Vec<Wish>) -> bool {
    let reasons = not_ready(view.project, view.evaluation);
    if reasons.is_empty() {
        return false;
    }
    soft(ui, "Before it can be signed:");
    let lines = strip::lines(&[], view.project, view.evaluation);
    for reason in &reasons {
        let line = lines.iter().find(|l| l.text == *reason);
        let text = line.map_or_else(|| reason.clone(), |l| format!("{}; {}", l.text, l.hint));
        let clicked = finding_line(ui, Severity::Stop, &text).clicked();
        let goes = line.and_then(|l| l.goes.clone()).filter(|_| clicked);
        wishes.extend(goes.map(|(room, place)| Wish::Go(room, Some(place))));
    }
    true
}

impl SignForm {
    /// Proposes a report beside the project, once.
    fn propose(&mut self, file: Option<&Path>) {
        if !std::mem::replace(&mut self.proposed, true)
            && self.report.path().is_none()
            && let Some(file) = file
        {
            self.report = PathField::new(file.with_extension("pdf").display().to_string());
        }
    }

    fn key(&mut self, ui: &mut Ui, wishes: &mut Vec<Wish>) {
        let kinds = vec![FileKind::new("Keys", &["p12", "pfx"])];
        self.key.show(ui, "Key file", &Ask::Open(kinds));
        Field::secret("Passphrase of the key").width(ui.available_width()).show(ui, &mut self.passphrase);
        segmented(ui, "The signature means", &mut self.meaning, &Meaning::ALL);
        if self.making.is_none() && ui.button("Make a new key…").clicked() {
            self.making = Some(NewKey::default());
        }
        let closed = self.making.as_mut().is_some_and(|new| new.show(ui, wishes));
        if closed {
            self.making = None;
        }
    }
}

impl NewKey {
    /// Shows the form; says whether it was given up.
    fn show(&mut self, ui: &mut Ui, wishes: &mut Vec<Wish>) -> bool {
        let theme = Theme::of(ui);
        let mut closed = false;
        eframe::egui::Frame::from(theme).show(ui, |ui| {
            let width = ui.available_width();
            Field::text("Printed name").width(width).show(ui, &mut self.name);
            let ask = Ask::Save { kinds: vec![FileKind::new("Keys", &["p12"])], name: "my key.p12".to_owned() };
            self.path.show(ui, "File of the new key", &ask);
            Field::secret("Passphrase").width(width).show(ui, &mut self.first);
            let differ = !self.second.is_empty() && self.first != self.second;
            let problem = differ.then_some("the two passphrases differ");
            Field::secret("Passphrase again").width(width).problem(problem).show(ui, &mut self.second);
            soft(ui, "Whoever has this file and its passphrase can sign in this name. Nobody can restore a lost one.");
            ui.horizontal(|ui| {
                let path = self.path.path();
                let same = !self.first.is_empty() && self.first == self.second;
                let ready = same && !self.name.trim().is_empty() && path.is_some();
                if ui.add_enabled(ready, Button::new("Make the key")).clicked() {
                    let (name, passphrase) = (self.name.trim().to_owned(), self.first.clone());
                    wishes.extend(path.map(|path| Wish::NewKey { name, path, passphrase }));
                }
                closed = ui.button("Not now").clicked();
            });
        });
        closed
    }
}

fn heading(ui: &mut Ui, text: &str) {
    ui.label(RichText::new(text).text_style(TextStyle::Heading));
}

fn soft(ui: &mut Ui, text: &str) {
    let theme = Theme::of(ui);
    ui.add(Label::new(RichText::new(text).font(theme.small()).color(theme.soft_ink)).wrap());
}
