//! The plan: what is fixed before the first reading. Nothing here is compulsory before a first fit.

mod choices;
mod fields;
mod lists;
mod model;
#[cfg(test)]
mod model_tests;
mod paint;

use self::model::Field;
use super::{View, Wish};
use eframe::egui::Ui;
use std::collections::BTreeMap;

/// Texts being typed; they become commands when the field is left.
#[derive(Debug, Default)]
pub struct State {
    drafts: BTreeMap<Field, String>,
    problem: Option<(Field, String)>,
    /// The first field in which something is missing is to have the keyboard.
    go_to_missing: bool,
}

impl State {
    /// Gives the keyboard to the first field in which something is missing.
    pub fn go_to_missing(&mut self) {
        self.go_to_missing = true;
    }
}

/// Shows the plan.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    paint::room(ui, view, state, wishes);
}
