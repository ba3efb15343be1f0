//! The record: the trail in sentences, the report as it will print, signing, checking a PDF.

mod check;
mod pages;
mod paint;
mod preview;
mod sign;
mod state;
mod trail;

pub use check::{Checked, Good};
pub use state::State;

use super::{View, Wish};
use eframe::egui::Ui;

/// Shows the record.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    paint::room(ui, view, state, wishes);
}
