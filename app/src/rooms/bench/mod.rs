//! The bench: standards, readings, zero readings, and the papers of the standards.

mod entry;
mod events;
mod grids;
mod import;
mod model;
mod paint;
mod papers;
mod papers_panel;
mod state;
mod table;

pub use state::State;
pub use table::pasted;

use super::{View, Wish};
use eframe::egui::Ui;

/// Shows the bench.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    state.refresh(view.project, view.revision);
    events::show_wanted(state);
    paint::room(ui, view, state, wishes);
    events::correcting(ui.ctx(), view, state, wishes);
    import::sheets(ui.ctx(), view, state, wishes);
}
