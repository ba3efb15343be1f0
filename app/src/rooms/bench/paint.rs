//! How the bench is laid out.

use super::{
    events::{Happened, handle},
    grids::{Standards, Zeros},
    model::{Row, counted},
    papers_panel,
    state::{Part, State},
};
use crate::{
    rooms::{View, Wish},
    shell::Extent,
    theme::Theme,
    widgets::{
        Field, Severity, caption,
        grid::{Grid, GridOutput},
        segmented,
    },
};
use assize_core::readings::{Direction, Stage};
use eframe::egui::{Align, Frame, Label, Layout, Margin, Panel, RichText, TextStyle, Ui, vec2};

const DIRECTIONS: [(Direction, &str); 4] = [
    (Direction::None, "none"),
    (Direction::Rising, "rising"),
    (Direction::Falling, "falling"),
    (Direction::TurningPoint, "turning"),
];
const STAGES: [(Stage, &str); 3] = [(Stage::AsFound, "as found"), (Stage::AsLeft, "as left"), (Stage::Check, "check")];
const LETTERS: &str = "x set aside or count again · c correct · d direction · s stage · a same application";

/// The whole room.
pub fn room(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let (standards, zeros) = state.take_rows();
    let extent = Extent::of(ui);
    let both = (&*standards, &*zeros);
    state.has_keyboard = false;
    match (extent, ui.available_width()) {
        (Extent::Full, width) if width > 1240.0 => wide(ui, view, state, both, wishes),
        (_, width) if width > 980.0 => middle(ui, view, state, both, wishes),
        _ => narrow(ui, view, state, both, wishes),
    }
    state.put_rows((standards, zeros));
}

type Both<'a> = (&'a [Row], &'a [Row]);

fn wide(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: Both<'_>, wishes: &mut Vec<Wish>) {
    let frame = Frame::new().inner_margin(Margin { left: 8, right: 20, top: 14, bottom: 14 });
    side(ui, "papers", 292.0, frame, |ui| papers_panel::show(ui, view, state, wishes));
    tables(ui, view, state, rows, wishes);
}

/// The two tables side by side.
fn tables(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: Both<'_>, wishes: &mut Vec<Wish>) {
    let frame = Frame::new().inner_margin(Margin { left: 8, right: 8, top: 14, bottom: 14 });
    side(ui, "zeros", 302.0, frame, |ui| zero_part(ui, view, state, rows.1, wishes));
    let frame = Frame::new().inner_margin(Margin { left: 20, right: 8, top: 14, bottom: 14 });
    frame.show(ui, |ui| readings_part(ui, view, state, rows.0, wishes));
}

fn side(ui: &mut Ui, name: &str, width: f32, frame: Frame, contents: impl FnOnce(&mut Ui)) {
    let panel = Panel::right(name.to_owned()).frame(frame).resizable(false).show_separator_line(false);
    panel.exact_size(width).show(ui, contents);
}

/// Tables, or papers.
fn middle(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: Both<'_>, wishes: &mut Vec<Wish>) {
    let mut papers = state.part == Part::Papers;
    let parts = [(false, "Readings and zeros"), (true, "Standards")];
    let frame = Frame::new().inner_margin(Margin { left: 20, right: 20, top: 8, bottom: 0 });
    frame.show(ui, |ui| {
        if segmented(ui, "", &mut papers, &parts).changed() {
            state.part = if papers { Part::Papers } else { Part::Readings };
        }
    });
    if papers {
        let frame = Frame::new().inner_margin(Margin::symmetric(20, 10));
        frame.show(ui, |ui| papers_panel::show(ui, view, state, wishes));
    } else {
        tables(ui, view, state, rows, wishes);
    }
}

fn narrow(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: Both<'_>, wishes: &mut Vec<Wish>) {
    let small = Extent::of(ui) == Extent::Small;
    let margin = if small { Margin::symmetric(10, 6) } else { Margin::symmetric(20, 14) };
    Frame::new().inner_margin(margin).show(ui, |ui| {
        let parts = [(Part::Readings, "Readings"), (Part::Zeros, "Zero readings"), (Part::Papers, "Standards")];
        ui.horizontal(|ui| {
            segmented(ui, "", &mut state.part, &parts);
            let count = match state.part {
                Part::Readings => counted(rows.0, "reading", "readings"),
                Part::Zeros => counted(rows.1, "zero reading", "zero readings"),
                Part::Papers => String::new(),
            };
            soft(ui, &count);
            ui.with_layout(Layout::right_to_left(Align::Center), |ui| import(ui, state));
        });
        ui.add_space(2.0);
        match state.part {
            Part::Readings => readings_table(ui, view, state, rows.0, wishes),
            Part::Zeros => zero_table(ui, view, state, rows.1, wishes),
            Part::Papers => papers_panel::show(ui, view, state, wishes),
        }
    });
}

fn import(ui: &mut Ui, state: &mut State) {
    if ui.button("Import a table…").clicked() {
        state.ask_for_table();
    }
}

fn head(ui: &mut Ui, title: &str, count: &str, right: impl FnOnce(&mut Ui)) {
    let theme = Theme::of(ui);
    ui.horizontal(|ui| {
        ui.label(RichText::new(title).text_style(TextStyle::Heading));
        ui.label(RichText::new(count).font(theme.small()).color(theme.soft_ink));
        ui.with_layout(Layout::right_to_left(Align::Center), right);
    });
}

fn readings_part(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: &[Row], wishes: &mut Vec<Wish>) {
    head(ui, "Readings", &counted(rows, "reading", "readings"), |ui| import(ui, state));
    readings_table(ui, view, state, rows, wishes);
}

fn readings_table(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: &[Row], wishes: &mut Vec<Wish>) {
    beside(ui, state);
    if rows.is_empty() {
        empty(ui);
    }
    problem(ui, state, false);
    let source = Standards::new(rows, view.project);
    let entry = Standards::entry();
    let below = 24.0;
    let height = (ui.available_height() - below).max(120.0);
    ui.allocate_ui(vec2(ui.available_width(), height), |ui| {
        let shown = Grid::new("Readings").entry(&entry).show(ui, &mut state.grid, &source);
        keyboard(&shown, false, state);
        let happened = Happened { zeros: false, rows, events: shown.events };
        handle(happened, view, state, wishes);
    });
    soft(ui, LETTERS);
}

fn zero_part(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: &[Row], wishes: &mut Vec<Wish>) {
    head(ui, "Zero readings", &counted(rows, "zero reading", "zero readings"), |_| {});
    zero_table(ui, view, state, rows, wishes);
}

fn zero_table(ui: &mut Ui, view: &View<'_>, state: &mut State, rows: &[Row], wishes: &mut Vec<Wish>) {
    Field::text("Applied since the zero before, if noted")
        .hint("e.g. 5 kN, ten minutes")
        .width(ui.available_width())
        .show(ui, &mut state.between);
    if rows.is_empty() {
        soft(ui, "Readings with nothing applied. Paste one column, or type and press Enter.");
    }
    problem(ui, state, true);
    let source = Zeros::new(rows, view.project);
    let entry = Zeros::entry();
    let height = (ui.available_height() - 24.0).max(120.0);
    ui.allocate_ui(vec2(ui.available_width(), height), |ui| {
        let shown = Grid::new("Zero readings").entry(&entry).show(ui, &mut state.zero_grid, &source);
        keyboard(&shown, true, state);
        let happened = Happened { zeros: true, rows, events: shown.events };
        handle(happened, view, state, wishes);
    });
}

/// Notes which table has the keyboard.
fn keyboard(shown: &GridOutput, zeros: bool, state: &mut State) {
    let editing = if zeros { state.zero_grid.is_editing() } else { state.grid.is_editing() };
    if shown.response.has_focus() || editing {
        state.has_keyboard = true;
        state.in_zeros = zeros;
    }
}

/// Direction and stage of what is typed next.
fn beside(ui: &mut Ui, state: &mut State) {
    ui.horizontal_wrapped(|ui| {
        ui.spacing_mut().item_spacing.x = 16.0;
        ui.vertical(|ui| segmented(ui, "Direction of the next reading", &mut state.beside.direction, &DIRECTIONS));
        ui.vertical(|ui| segmented(ui, "Stage", &mut state.beside.stage, &STAGES));
        let applications = [(false, "new"), (true, "same again")];
        ui.vertical(|ui| segmented(ui, "Application", &mut state.beside.again, &applications));
    });
}

fn empty(ui: &mut Ui) {
    let theme = Theme::of(ui);
    Frame::from(theme).show(ui, |ui| {
        ui.set_width(ui.available_width());
        ui.label(RichText::new("Paste two columns: standard and reading").text_style(TextStyle::Heading));
        let how = "Ctrl+V anywhere in the window. Or type below: standard, Tab, reading, Enter. \
                   Or drop a table of delimited text onto the window.";
        ui.add(Label::new(RichText::new(how).color(theme.soft_ink)).wrap());
    });
}

/// What is wrong with the last step, beside the table it concerns.
fn problem(ui: &mut Ui, state: &State, zeros: bool) {
    if let Some((of_zeros, problem)) = &state.problem
        && *of_zeros == zeros
    {
        caption(ui, Some(Severity::Look), problem);
    }
}

fn soft(ui: &mut Ui, text: &str) {
    let theme = Theme::of(ui);
    ui.add(Label::new(RichText::new(text).font(theme.small()).color(theme.soft_ink)).wrap());
}
