//! The answer of a checked PDF: one sentence, details behind it.

use crate::{
    rooms::Wish,
    session::KnownKey,
    widgets::{Severity, finding_line},
};
use eframe::egui::{CollapsingHeader, Label, Ui};
use std::path::PathBuf;

/// What a check of a PDF found.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Checked {
    /// Which file.
    pub path: PathBuf,
    /// The answer in one sentence.
    pub answer: String,
    /// How much it matters.
    pub good: Good,
    /// What the answer rests on, one line each.
    pub details: Vec<String>,
    /// A key that signed and is not known here.
    pub unknown: Option<KnownKey>,
}

/// How an answer is to be taken; it never looks like a pass by silence.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Good {
    /// Unaltered, signer known.
    Yes,
    /// Unaltered, but somebody has to say whose key it is.
    Open,
    /// Altered, or it does not recompute.
    No,
}

/// Shows the answer.
pub fn show(ui: &mut Ui, checked: &Checked, wishes: &mut Vec<Wish>) {
    let severity = match checked.good {
        Good::Yes => Severity::Note,
        Good::Open => Severity::Look,
        Good::No => Severity::Stop,
    };
    finding_line(ui, severity, &checked.answer);
    CollapsingHeader::new("Details").id_salt("details of the check").show(ui, |ui| {
        for line in &checked.details {
            ui.add(Label::new(line).wrap());
        }
    });
    if let (Some(key), Good::Open) = (&checked.unknown, checked.good) {
        let ask = "Compare the fingerprint with the one the signer gives you in person or by telephone.";
        ui.add(Label::new(ask).wrap());
        if ui.button(format!("It is the key of {}", key.name)).clicked() {
            let (name, fingerprint) = (key.name.clone(), key.fingerprint.clone());
            wishes.push(Wish::Know { name, fingerprint, of: checked.path.clone() });
        }
    }
}
