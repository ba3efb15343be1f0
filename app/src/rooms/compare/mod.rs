//! Compare: fits side by side, and what each of them would mean for a signal near zero.
//!
//! `model` parts know no window (`ticks`, `dots`, `scale`, `near_facts`, `readout`,
//! `misses`, `distance`), `cache` keeps
//! samples, `layout` says where everything stands, the rows draw, `pointer` and `keys` listen.

mod cache;
mod choose;
mod corner;
mod curve;
mod distance;
mod dots;
mod folded;
mod heads;
mod keys;
mod labels;
mod layout;
mod lines;
mod marks;
mod misses;
mod near_column;
mod near_ends;
mod near_facts;
mod near_zero;
mod numbers;
mod pointer;
mod probe;
mod readout;
mod residual_column;
mod residual_words;
mod residuals;
mod rows;
mod scale;
mod sheet;
mod state;
mod status;
mod ticks;
mod words;

#[cfg(test)]
mod tests;

pub use dots::Measure;
pub use readout::Readout;
pub use rows::Row;
pub use state::{Against, Choosing, Drag, Probe, State, TraceEnds, Windows};

use crate::{
    rooms::{Room, View, Wish},
    theme::Theme,
};
use eframe::egui::{RichText, Ui};
use layout::{ColumnPlace, Layout};
use rows::RowPlace;
use words::Scene;

/// Draws the room and listens to it.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    state.meet(view);
    let theme = Theme::of(ui.ctx());
    if view.evaluation.columns.is_empty() || view.evaluation.data.applications == 0 {
        nothing_yet(ui, theme, wishes);
        return;
    }
    keys::handle(ui, view, state);
    pointer::handle(ui, state);
    if let Some(readouts) = state.cache.readouts(view, state.cursor) {
        state.readouts = readouts;
        state.computed += 1;
    }
    let room = ui.available_rect_before_wrap();
    let wraps = |row: Row, columns: &[ColumnPlace]| wraps(ui, view, theme, (row, columns));
    let height = ui.ctx().content_rect().height();
    let gutter = near_zero::gutter(ui, view, state, theme);
    let layout = Layout::new(view, state, (room, height, gutter), wraps);
    state.alone = layout.alone;
    let scene = Scene { view: *view, layout: &layout, theme };
    heads::show(ui, scene, state);
    let mut hover = None;
    for row in &layout.rows {
        hover = show_row(ui, scene, state, *row).or(hover);
    }
    heads::not_fitted(ui, scene);
    folded::columns(ui, scene, state);
    status::show(ui, scene, state, wishes);
    choose::show(ui, scene, state, wishes);
    if state.hover != hover {
        state.hover = hover;
        // Rows drawn before the one under the pointer have not shown it yet.
        ui.ctx().request_repaint();
    }
    ui.advance_cursor_after_rect(room);
}

/// Whether a caption of a row needs two lines; judged by the captions of the evaluation, so that the
/// rows stand still while the cursor moves.
fn wraps(ui: &Ui, view: &View<'_>, theme: &Theme, (row, columns): (Row, &[ColumnPlace])) -> bool {
    columns.iter().any(|place| {
        let captions = &view.evaluation.columns[place.index].captions;
        let caption = match row {
            Row::Residuals => &captions.residuals,
            Row::NearZero => &captions.near_zero,
            Row::Curve | Row::Numbers => return false,
        };
        words::caption_width(ui, caption, theme) > place.x.span()
    })
}

fn show_row(ui: &mut Ui, scene: Scene<'_>, state: &mut State, row: RowPlace) -> Option<usize> {
    if row.folded {
        if row.row == Row::NearZero {
            state.near_plots.clear();
            state.painted.clear();
        }
        folded::row(ui, scene, state, row);
        return None;
    }
    folded::row_name(ui, scene, state, row);
    match row.row {
        Row::Curve => curve::show(ui, scene, state, row.plot),
        Row::Residuals => residuals::show(ui, scene, state, row),
        Row::NearZero => near_zero::show(ui, scene, state, row),
        Row::Numbers => {
            numbers::show(ui, scene, row, state.open == Some(Row::Numbers));
            None
        }
    }
}

/// Nothing to compare: what to do next.
fn nothing_yet(ui: &mut Ui, theme: &Theme, wishes: &mut Vec<Wish>) {
    ui.add_space(theme.spacing.room);
    ui.label(RichText::new("Nothing to compare yet").font(theme.semibold(theme.sizes.heading)).color(theme.ink));
    ui.label("Type or paste standards and readings, or drop a table on the window; the fits stand here at once.");
    if ui.button("To the bench").clicked() {
        wishes.push(Wish::Go(Room::Bench, None));
    }
}
