//! Journeys through the room with mouse and keys, in a window without a screen.

mod choice;
mod cursor;
mod fixtures;
mod grid;
mod near;

use eframe::egui::{Key, Pos2, pos2};
use egui_kittest::{
    Harness,
    kittest::{NodeT, Queryable},
};
use fixtures::Bench;

type Window<'a> = Harness<'a, Bench>;

/// The named value that a screen reader would read.
fn value(h: &Window<'_>, name: &str) -> String {
    h.get_by_label(name).value().unwrap_or_default()
}

/// Labels of all figures on the screen.
fn figures(h: &Window<'_>) -> Vec<String> {
    use eframe::egui::Role;
    h.query_all_by_role(Role::Figure).filter_map(|n| n.accesskit_node().label()).collect()
}

/// Where the cursor's line lies in a column's plot, in the middle of it.
fn on_cursor(h: &Window<'_>, column: usize) -> Pos2 {
    let state = &h.state().state;
    let plot = state.near_plots.iter().find(|p| p.column == column).expect("the column is shown");
    let frame = *plot.transform.frame();
    pos2(frame.center().x, plot.transform.position_from_point_y(state.cursor))
}

fn press(h: &mut Window<'_>, key: Key) {
    h.key_press(key);
    h.run();
}
