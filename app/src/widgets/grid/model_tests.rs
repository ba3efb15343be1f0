//! What the keys do, without a window.

use super::actions::{Act, Leave, Outcome, Step};
use super::sheet::{ENTRY, Place, Sheet};
use super::{CellView, Column, EntryRow, GridEvent, GridSource, GridState};

/// Three rows: standard, reading, and a computed column nobody types in.
pub(super) struct Bench {
    pub(super) columns: Vec<Column>,
    pub(super) rows: Vec<[String; 3]>,
}

impl Bench {
    pub(super) fn new(rows: &[[&str; 3]]) -> Self {
        Self {
            columns: vec![
                Column::number("Standard", "kN", 90.0),
                Column::number("Reading", "mV/V", 90.0),
                Column::number("Residual", "µV/V", 90.0).read_only(),
            ],
            rows: rows.iter().map(|row| row.map(str::to_owned)).collect(),
        }
    }

    pub(super) fn three() -> Self {
        Self::new(&[["1", "0.40", "a"], ["2", "0.80", "b"], ["3", "1.20", "c"]])
    }
}

impl GridSource for Bench {
    fn rows(&self) -> usize {
        self.rows.len()
    }

    fn columns(&self) -> &[Column] {
        &self.columns
    }

    fn cell(&self, row: usize, col: usize) -> CellView {
        CellView::plain(self.rows[row][col].as_str())
    }
}

pub(super) const DOWN: Act = Act::Move { step: Step::Down, extend: false };
pub(super) const ENTER: Act = Act::Enter { back: false };
const TAB: Act = Act::Tab { back: false };
const BACK_TAB: Act = Act::Tab { back: true };

pub(super) fn text(text: &str) -> Act {
    Act::Text(text.to_owned())
}

/// Does the steps one after the other.
pub(super) fn run(state: &mut GridState, bench: &Bench, entry: Option<&EntryRow>, acts: &[Act]) -> Outcome {
    let sheet = Sheet::new(bench, entry);
    state.settle(&sheet);
    let mut out = Outcome::default();
    for act in acts {
        state.act(act.clone(), &sheet, &mut out);
    }
    out
}

pub(super) fn at(row: usize, col: usize) -> GridState {
    let mut state = GridState::default();
    state.go_to(row, col);
    state
}

fn edit(row: usize, col: usize, text: &str) -> GridEvent {
    GridEvent::Edit { row, col, text: text.to_owned() }
}

fn new_row(cells: &[(usize, &str)]) -> GridEvent {
    GridEvent::NewRow { cells: cells.iter().map(|(c, t)| (*c, (*t).to_owned())).collect() }
}

#[test]
fn typing_and_enter_goes_down_a_column() {
    let bench = Bench::three();
    let mut state = at(0, 1);
    let out = run(&mut state, &bench, None, &[text("0"), text(".41"), ENTER, text("0.82"), ENTER]);
    assert_eq!(out.events, [edit(0, 1, "0.41"), edit(1, 1, "0.82")]);
    assert_eq!(state.cursor(), (Some(2), 1));
}

#[test]
fn a_text_that_does_not_change_is_no_edit() {
    let bench = Bench::three();
    let out = run(&mut at(0, 1), &bench, None, &[Act::Edit, ENTER, text("0.80 "), ENTER]);
    assert!(out.events.is_empty(), "{:?}", out.events);
}

#[test]
fn escape_gives_up_the_edit() {
    let bench = Bench::three();
    let mut state = at(0, 1);
    let out = run(&mut state, &bench, None, &[text("9"), Act::Escape, ENTER]);
    assert!(out.events.is_empty());
    assert_eq!(state.cursor(), (Some(1), 1));
}

#[test]
fn digits_signs_and_decimal_marks_start_typing_and_letters_are_requests() {
    let bench = Bench::three();
    for start in ["0", "9", "+", "-", "−", ".", ","] {
        let mut state = at(1, 1);
        let out = run(&mut state, &bench, None, &[text(start)]);
        assert!(state.is_editing() && out.events.is_empty(), "{start}");
    }
    for key in ['x', 'r', '?', 'é'] {
        let mut state = at(1, 1);
        let out = run(&mut state, &bench, None, &[text(&key.to_string())]);
        assert_eq!(out.events, [GridEvent::Request { row: 1, key }]);
        assert!(!state.is_editing());
    }
}

#[test]
fn a_column_of_words_takes_letters() {
    let mut bench = Bench::three();
    bench.columns[1] = Column::words("Who", 80.0);
    let out = run(&mut at(0, 1), &bench, None, &[text("x"), ENTER]);
    assert_eq!(out.events, [edit(0, 1, "x")]);
}

#[test]
fn a_column_nobody_types_in_stays_as_it_is() {
    let bench = Bench::three();
    let mut state = at(0, 2);
    let out = run(&mut state, &bench, None, &[text("5"), Act::Edit]);
    assert!(out.events.is_empty() && !state.is_editing());
}

#[test]
fn the_entry_row_walks_through_its_columns_and_adds_the_row() {
    let bench = Bench::three();
    let entry = EntryRow::default();
    let mut state = GridState::default();
    let keys = [text("4"), TAB, text("1.60"), ENTER, text("5"), ENTER, text("2.0"), TAB];
    let out = run(&mut state, &bench, Some(&entry), &keys);
    let rows = [new_row(&[(0, "4"), (1, "1.60")]), new_row(&[(0, "5"), (1, "2.0")])];
    assert_eq!(out.events, rows);
    assert_eq!(state.cursor(), (None, 0));
    assert!(out.leave.is_none());
}

#[test]
fn a_repeating_standard_is_typed_once() {
    let bench = Bench::three();
    let entry = EntryRow { repeats: vec![0], ..EntryRow::default() };
    let mut state = GridState::default();
    let keys = [text("4"), ENTER, text("1.60"), ENTER, text("1.61"), ENTER, ENTER];
    let out = run(&mut state, &bench, Some(&entry), &keys);
    let rows = [new_row(&[(0, "4"), (1, "1.60")]), new_row(&[(0, "4"), (1, "1.61")])];
    // The last Enter, on an empty reading, adds nothing.
    assert_eq!(out.events, rows);
    assert_eq!(state.cursor(), (None, 1));
}

#[test]
fn enter_can_add_the_row_before_the_last_column() {
    let bench = Bench::three();
    let entry = EntryRow { last_column: Some(0), ..EntryRow::default() };
    let out = run(&mut GridState::default(), &bench, Some(&entry), &[text("4"), ENTER]);
    assert_eq!(out.events, [new_row(&[(0, "4")])]);
}

#[test]
fn the_cursor_stays_in_the_entry_row_when_rows_come() {
    let mut bench = Bench::three();
    let entry = EntryRow::default();
    let mut state = GridState::default();
    run(&mut state, &bench, Some(&entry), &[text("4"), ENTER, text("1.6"), ENTER]);
    bench.rows.push(["4", "1.6", ""].map(str::to_owned));
    run(&mut state, &bench, Some(&entry), &[]);
    assert_eq!(state.cursor(), (None, 0));
    assert_eq!(state.cursor.row, ENTRY);
}

#[test]
fn a_refused_row_can_be_put_back() {
    let bench = Bench::three();
    let entry = EntryRow::default();
    let mut state = GridState::default();
    run(&mut state, &bench, Some(&entry), &[text("4"), ENTER, text("1,600.0"), ENTER]);
    state.refill_entry(&[(0, "4".to_owned()), (1, "1,600.0".to_owned())], 1);
    let out = run(&mut state, &bench, Some(&entry), &[text("1.6"), ENTER]);
    assert_eq!(out.events, [new_row(&[(0, "4"), (1, "1.6")])]);
}

#[test]
fn tab_walks_editable_columns_and_leaves_at_the_ends() {
    let bench = Bench::three();
    let entry = EntryRow::default();
    let mut state = at(2, 1);
    let out = run(&mut state, &bench, Some(&entry), &[TAB]);
    assert_eq!((state.cursor(), out.leave), ((None, 0), None));
    let out = run(&mut state, &bench, Some(&entry), &[TAB, TAB]);
    assert_eq!(out.leave, Some(Leave::Forwards));
    let mut state = at(1, 0);
    let out = run(&mut state, &bench, Some(&entry), &[BACK_TAB]);
    assert_eq!((state.cursor(), out.leave), ((Some(0), 1), None));
    let out = run(&mut state, &bench, Some(&entry), &[BACK_TAB, BACK_TAB]);
    assert_eq!(out.leave, Some(Leave::Backwards));
}

#[test]
fn arrows_stop_at_the_edges() {
    let bench = Bench::three();
    for (step, end) in [
        (Step::Up, (Some(0), 1)),
        (Step::Down, (Some(2), 1)),
        (Step::Left, (Some(1), 0)),
        (Step::Right, (Some(1), 2)),
        (Step::PageUp, (Some(0), 1)),
        (Step::PageDown, (Some(2), 1)),
        (Step::Top, (Some(0), 1)),
        (Step::Bottom, (Some(2), 1)),
        (Step::RowStart, (Some(1), 0)),
        (Step::RowEnd, (Some(1), 2)),
    ] {
        let mut state = at(1, 1);
        let act = Act::Move { step, extend: false };
        run(&mut state, &bench, None, &[act.clone(), act.clone(), act.clone(), act]);
        assert_eq!(state.cursor(), end, "{step:?}");
    }
}

#[test]
fn a_table_without_rows_or_columns_does_nothing() {
    let mut bench = Bench::new(&[]);
    for _ in 0..2 {
        let mut state = GridState::default();
        let keys = [text("5"), ENTER, DOWN, Act::Copy, Act::Cut, Act::SelectAll, Act::Edit];
        let out = run(&mut state, &bench, None, &keys);
        assert!(out.events.is_empty() && out.copied.is_none());
        bench.columns.clear();
    }
}

#[test]
fn an_edit_whose_row_is_gone_is_dropped() {
    let mut bench = Bench::three();
    let mut state = at(2, 1);
    run(&mut state, &bench, None, &[text("7")]);
    bench.rows.truncate(1);
    let out = run(&mut state, &bench, None, &[ENTER]);
    assert!(out.events.is_empty());
    assert_eq!(state.cursor(), (Some(0), 1));
}

#[test]
fn selected_rows_never_reach_beyond_the_rows() {
    let bench = Bench::three();
    let entry = EntryRow::default();
    let mut state = GridState::default();
    run(&mut state, &bench, Some(&entry), &[]);
    assert!(state.selected_rows(3).is_empty());
    run(&mut state, &bench, Some(&entry), &[Act::SelectAll]);
    assert_eq!(state.selected_rows(3), 0..3);
    assert_eq!(state.cursor, Place { row: 2, col: 2 });
}
