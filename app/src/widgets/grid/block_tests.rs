//! Clearing, copying and pasting blocks, without a window.

use super::actions::{Act, Step};
use super::model_tests::{Bench, at, run};
use super::{EntryRow, GridEvent, GridState};

#[test]
fn delete_clears_the_selection_and_the_half_typed_row() {
    let bench = Bench::three();
    let entry = EntryRow::default();
    let mut state = at(1, 0);
    run(&mut state, &bench, Some(&entry), &[]);
    state.set_entry(0, "4".to_owned());
    let extend = Act::Move { step: Step::Down, extend: true };
    let out = run(&mut state, &bench, Some(&entry), &[extend.clone(), extend, Act::Clear]);
    let cleared = GridEvent::Clear { rows: 1..3, cols: 0..1 };
    assert_eq!(out.events, [cleared]);
    assert_eq!(state.entry_texts()[0], "");
}

#[test]
fn copy_gives_lines_and_tabs_and_cut_clears_too() {
    let bench = Bench::three();
    let mut state = at(0, 0);
    let extend = |step| Act::Move { step, extend: true };
    let steps = [extend(Step::Down), extend(Step::Right), Act::Cut];
    let out = run(&mut state, &bench, None, &steps);
    assert_eq!(out.copied.as_deref(), Some("1\t0.40\n2\t0.80"));
    let cleared = GridEvent::Clear { rows: 0..2, cols: 0..2 };
    assert_eq!(out.events, [cleared]);
}

#[test]
fn paste_splits_lines_and_tabs_of_every_system() {
    let bench = Bench::three();
    let expected = vec![vec!["1".to_owned(), "2".to_owned()], vec!["3".to_owned()]];
    for text in ["1\t2\n3", "1\t2\r\n3\r\n", "1\t2\r3\r", " 1 \t2\n3 \n"] {
        let out = run(&mut at(1, 0), &bench, None, &[Act::Paste(text.to_owned())]);
        let pasted = GridEvent::Paste { row: 1, col: 0, cells: expected.clone() };
        assert_eq!(out.events, [pasted], "{text:?}");
    }
    for nothing in ["", "\n", "\r\n"] {
        let out = run(&mut at(1, 0), &bench, None, &[Act::Paste(nothing.to_owned())]);
        assert!(out.events.is_empty());
    }
}

#[test]
fn a_block_goes_into_the_entry_row_and_a_single_value_into_its_cell() {
    let bench = Bench::three();
    let entry = EntryRow::default();
    let block = [Act::Paste("4\t1.6\n5\t2.0\n".to_owned())];
    let out = run(&mut GridState::default(), &bench, Some(&entry), &block);
    assert!(matches!(&out.events[..], [GridEvent::Paste { row: 3, col: 0, cells }] if cells.len() == 2));
    let mut state = GridState::default();
    let out = run(&mut state, &bench, Some(&entry), &[Act::Paste("4\n".to_owned())]);
    assert!(out.events.is_empty());
    assert_eq!(state.entry_texts()[0], "4");
}
