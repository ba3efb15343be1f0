//! What the record room remembers from frame to frame.

use super::{check::Checked, preview::Preview, sign::SignForm};
use crate::widgets::PathField;
use assize_core::trail::sentences::Teller;

/// The part that has the room in a small window.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Part {
    /// The trail.
    Trail,
    /// The report as it will print.
    #[default]
    Report,
    /// Signing and checking.
    Sign,
}

/// The memory of the record room.
#[derive(Default)]
pub struct State {
    pub(super) part: Part,
    pub(super) teller: Teller,
    pub(super) filter: String,
    pub(super) preview: Preview,
    pub(super) sign: SignForm,
    pub(super) check: PathField,
    pub(super) checked: Option<Checked>,
    /// A report or key is being made.
    pub(super) busy: bool,
}

impl State {
    /// Takes the answer of a check.
    pub fn answer(&mut self, checked: Checked) {
        self.part = Part::Sign;
        self.check = PathField::new(checked.path.display().to_string());
        self.checked = Some(checked);
    }

    /// Tells whether a report, a key or a check is being worked on.
    pub fn set_busy(&mut self, busy: bool) {
        self.busy = busy;
    }

    /// Shows what keeps the record from being signed.
    pub fn show_missing(&mut self) {
        self.part = Part::Sign;
    }

    /// A key was made: it is the one to sign with.
    pub fn use_key(&mut self, path: &std::path::Path) {
        self.sign.key = PathField::new(path.display().to_string());
        self.sign.making = None;
    }

    /// A passphrase is forgotten as soon as it was used.
    pub fn forget_passphrase(&mut self) {
        self.sign.passphrase.clear();
    }
}
