//! The table in a window without a screen, found by the names a screen reader says.

use eframe::egui::{self, Event, Key, Modifiers, accesskit::Role};
use egui_kittest::{
    Harness,
    kittest::{NodeT, Queryable},
};

use super::model_tests::Bench;
use super::{EntryRow, Grid, GridEvent, GridState};
use crate::theme;

/// A table whose owner carries out what is reported.
struct Owner {
    bench: Bench,
    state: GridState,
    entry: EntryRow,
    events: Vec<GridEvent>,
    before: String,
    after: String,
}

impl Owner {
    fn new(bench: Bench) -> Self {
        Self {
            bench,
            state: GridState::default(),
            entry: EntryRow::default(),
            events: Vec::new(),
            before: String::new(),
            after: String::new(),
        }
    }

    fn ui(&mut self, ui: &mut egui::Ui) {
        ui.text_edit_singleline(&mut self.before).accessible_name("Before");
        let output = Grid::new("Readings").entry(&self.entry).max_height(400.0).show(ui, &mut self.state, &self.bench);
        ui.text_edit_singleline(&mut self.after).accessible_name("After");
        for event in output.events {
            match &event {
                GridEvent::Edit { row, col, text } => {
                    self.bench.rows[*row][*col].clone_from(text);
                }
                GridEvent::NewRow { cells } => {
                    let mut row: [String; 3] = Default::default();
                    for (col, text) in cells {
                        row[*col].clone_from(text);
                    }
                    self.bench.rows.push(row);
                }
                _ => {}
            }
            if !matches!(event, GridEvent::Selected { .. }) {
                self.events.push(event);
            }
        }
    }
}

fn window(bench: Bench) -> Harness<'static, Owner> {
    Harness::builder()
        .with_size([600.0, 500.0])
        .with_context_setup(theme::install)
        .build_ui_state(|ui, owner: &mut Owner| owner.ui(ui), Owner::new(bench))
}

fn type_text(harness: &Harness<'_, Owner>, text: &str) {
    for character in text.chars() {
        harness.event(Event::Text(character.to_string()));
    }
}

fn value(harness: &Harness<'_, Owner>, name: &str) -> String {
    let node = harness.get_by_label(name);
    node.accesskit_node().value().unwrap_or_default()
}

fn edit(row: usize, col: usize, text: &str) -> GridEvent {
    GridEvent::Edit { row, col, text: text.to_owned() }
}

#[test]
fn cells_and_table_have_names_roles_and_values() {
    let harness = window(Bench::three());
    let cell = harness.get_by_role_and_label(Role::Cell, "R2 Reading");
    assert_eq!(cell.accesskit_node().value().as_deref(), Some("0.80"));
    assert_eq!(value(&harness, "R4 Standard"), "");
    let table = harness.get_by_role_and_label(Role::Grid, "Readings");
    assert_eq!(table.accesskit_node().value().as_deref(), Some("R4 Standard: "));
}

#[test]
fn click_type_enter_changes_a_cell_and_goes_down() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R1 Reading").click();
    harness.run();
    for text in ["0.41", "0.82"] {
        type_text(&harness, text);
        harness.run();
        assert!(harness.query_by_label_contains("Edit R").is_some());
        harness.key_press(Key::Enter);
        harness.run();
    }
    assert_eq!(harness.state().events, [edit(0, 1, "0.41"), edit(1, 1, "0.82")]);
    assert_eq!(harness.state().state.cursor(), (Some(2), 1));
    assert_eq!(value(&harness, "R2 Reading"), "0.82");
}

#[test]
fn keys_that_come_in_one_frame_are_neither_lost_nor_doubled() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R4 Standard").click();
    harness.run();
    // A display that types "4", Tab, "1.60", Enter faster than the window draws; then in pieces.
    type_text(&harness, "4");
    harness.key_press(Key::Tab);
    type_text(&harness, "1.6");
    harness.step();
    type_text(&harness, "0");
    harness.key_press(Key::Enter);
    type_text(&harness, "5");
    harness.step();
    harness.key_press(Key::Tab);
    type_text(&harness, "2.0");
    harness.key_press(Key::Enter);
    harness.run();
    let rows = &harness.state().bench.rows;
    assert_eq!(rows[3..], [["4", "1.60", ""], ["5", "2.0", ""]]);
    assert_eq!(harness.state().state.cursor(), (None, 0));
}

#[test]
fn the_cursor_can_be_moved_within_a_text_being_typed() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R1 Reading").click();
    harness.run();
    type_text(&harness, "0.1");
    harness.run();
    harness.key_press(Key::ArrowLeft);
    harness.run();
    type_text(&harness, "4");
    harness.run();
    harness.key_press(Key::ArrowDown);
    harness.run();
    assert_eq!(harness.state().events, [edit(0, 1, "0.41")]);
    assert_eq!(harness.state().state.cursor(), (Some(1), 1));
}

#[test]
fn f2_goes_on_with_the_text_and_escape_gives_up() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R1 Reading").click();
    harness.run();
    harness.key_press(Key::F2);
    harness.run();
    type_text(&harness, "5");
    harness.key_press(Key::Enter);
    harness.run();
    assert_eq!(harness.state().events, [edit(0, 1, "0.405")]);
    harness.key_press(Key::F2);
    harness.step();
    type_text(&harness, "7");
    harness.key_press(Key::Escape);
    harness.run();
    assert_eq!(harness.state().events.len(), 1);
    // The table still has the keyboard.
    harness.key_press(Key::ArrowUp);
    harness.run();
    assert_eq!(harness.state().state.cursor(), (Some(0), 1));
}

#[test]
fn a_click_elsewhere_takes_the_text() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R1 Reading").click();
    harness.run();
    type_text(&harness, "0.43");
    harness.run();
    harness.get_by_label("R3 Standard").click();
    harness.run();
    assert_eq!(harness.state().events, [edit(0, 1, "0.43")]);
    assert_eq!(harness.state().state.cursor(), (Some(2), 0));
    type_text(&harness, "7");
    harness.run();
    harness.get_by_label("After").click();
    harness.run();
    assert_eq!(harness.state().events[1..], [edit(2, 0, "7")]);
}

#[test]
fn a_double_click_edits_and_the_keyboard_stays_when_the_row_goes() {
    let mut harness = window(Bench::three());
    for _ in 0..2 {
        harness.get_by_label("R3 Reading").click();
    }
    harness.run();
    type_text(&harness, "5");
    harness.step();
    harness.get_by_label("Edit R3 Reading");
    // Somebody else's undo takes the rows away.
    harness.state_mut().bench.rows.truncate(1);
    harness.run();
    assert!(harness.state().events.is_empty());
    let focused = |name| {
        let node = harness.get_by_label(name);
        node.accesskit_node().is_focused()
    };
    assert!(focused("Readings"));
}

#[test]
fn a_row_number_selects_the_row() {
    let mut harness = window(Bench::three());
    let cell = harness.get_by_label("R2 Standard").rect();
    let number = egui::pos2(cell.left() - 10.0, cell.center().y);
    harness.hover_at(number);
    for pressed in [true, false] {
        harness.event(Event::PointerButton {
            pos: number,
            button: egui::PointerButton::Primary,
            pressed,
            modifiers: Modifiers::NONE,
        });
    }
    harness.run();
    harness.key_press(Key::Delete);
    harness.run();
    let cleared = GridEvent::Clear { rows: 1..2, cols: 0..3 };
    assert_eq!(harness.state().events, [cleared]);
}

#[test]
fn shift_selects_and_copy_paste_cut_work_on_the_selection() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R1 Standard").click();
    harness.run();
    harness.key_press_modifiers(Modifiers::SHIFT, Key::ArrowDown);
    harness.key_press_modifiers(Modifiers::SHIFT, Key::ArrowRight);
    harness.run();
    harness.event(Event::Copy);
    harness.step();
    let copied = harness
        .output()
        .platform_output
        .commands
        .iter()
        .any(|command| matches!(command, egui::OutputCommand::CopyText(text) if text == "1\t0.40\n2\t0.80"));
    assert!(copied, "{:?}", harness.output().platform_output.commands);
    harness.event(Event::Cut);
    harness.run();
    harness.event(Event::Paste("11\t12\n21\t22\n".to_owned()));
    harness.run();
    let cells = vec![vec!["11".to_owned(), "12".to_owned()], vec!["21".to_owned(), "22".to_owned()]];
    let expected = [GridEvent::Clear { rows: 0..2, cols: 0..2 }, GridEvent::Paste { row: 0, col: 0, cells }];
    assert_eq!(harness.state().events, expected);
}

#[test]
fn dragging_selects_a_block() {
    let mut harness = window(Bench::three());
    let from = harness.get_by_label("R1 Standard").rect().center();
    let to = harness.get_by_label("R3 Reading").rect().center();
    for step in 0..4 {
        match step {
            0 => harness.hover_at(from),
            1 => harness.drag_at(from),
            2 => harness.hover_at(to),
            _ => harness.drop_at(to),
        }
        harness.run();
    }
    assert_eq!(harness.state().state.selected_rows(3), 0..3);
    assert_eq!(harness.state().state.cursor(), (Some(2), 1));
}

#[test]
fn tab_and_arrows_stay_within_the_table_while_there_is_somewhere_to_go() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R1 Standard").click();
    harness.run();
    for _ in 0..2 {
        harness.key_press(Key::Tab);
        harness.run();
    }
    assert_eq!(harness.state().state.cursor(), (Some(1), 0));
    for _ in 0..4 {
        harness.key_press(Key::ArrowDown);
        harness.step();
    }
    harness.run();
    assert_eq!(harness.state().state.cursor(), (None, 0));
    let table = harness.get_by_label("Readings");
    assert!(table.accesskit_node().is_focused());
}

#[test]
fn tab_and_escape_lead_out_of_the_table() {
    let mut harness = window(Bench::three());
    harness.get_by_label("R4 Reading").click();
    harness.run();
    // Nothing typed: Tab from the last column leaves.
    harness.key_press(Key::Tab);
    harness.run();
    assert!(harness.get_by_label("After").accesskit_node().is_focused());
    harness.key_press_modifiers(Modifiers::SHIFT, Key::Tab);
    harness.run();
    assert!(harness.get_by_label("Readings").accesskit_node().is_focused());
    harness.key_press_modifiers(Modifiers::COMMAND, Key::Home);
    harness.key_press(Key::Home);
    harness.run();
    harness.key_press_modifiers(Modifiers::SHIFT, Key::Tab);
    harness.run();
    assert!(harness.get_by_label("Before").accesskit_node().is_focused());
}

#[test]
fn ten_thousand_rows_only_show_what_is_seen() {
    let rows: Vec<[String; 3]> = (0..10_000).map(|k| [k.to_string(), (2 * k).to_string(), String::new()]).collect();
    let mut bench = Bench::three();
    bench.rows = rows;
    let mut harness = window(bench);
    let cells = |harness: &Harness<'_, Owner>| harness.query_all_by_role(Role::Cell).count();
    assert!(cells(&harness) < 3 * 20, "{}", cells(&harness));
    harness.get_by_label("R1 Reading").click();
    harness.run();
    harness.key_press_modifiers(Modifiers::COMMAND, Key::End);
    harness.run();
    // The cursor was scrolled into view.
    assert_eq!(harness.state().state.cursor(), (None, 1));
    assert_eq!(value(&harness, "R10000 Standard"), "9999");
    assert!(cells(&harness) < 3 * 20);
    harness.key_press(Key::PageUp);
    harness.run();
    let (row, _) = harness.state().state.cursor();
    assert!(row.is_some_and(|row| (9_900..9_999).contains(&row)), "{row:?}");
}
