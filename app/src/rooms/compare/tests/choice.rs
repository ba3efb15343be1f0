//! Choosing: nothing is chosen until a person chooses, and never without a reason.

use super::{Window, fixtures, press};
use crate::rooms::Wish;
use assize_core::project::command::{ColumnsCommand, Command};
use eframe::egui::Key;
use egui_kittest::kittest::Queryable;

fn chosen(h: &Window<'_>) -> Option<(String, String)> {
    match h.state().wishes.as_slice() {
        [] => None,
        [Wish::Enter { command: Command::Columns(ColumnsCommand::Choose(spec)), because }] => {
            Some((spec.head(), because.as_deref().unwrap_or("").to_owned()))
        }
        other => panic!("{other:?}"),
    }
}

#[test]
fn enter_offers_the_advised_column_with_its_reasons() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    assert!(h.query_by_label("Quadratic is advised, not yet chosen").is_some());
    press(&mut h, Key::Enter);
    let because = h.state().evaluation.advice.because.join("; ");
    assert_eq!(h.get_by_label("Reason").value().unwrap_or_default(), because);
    assert_eq!(chosen(&h), None);
    press(&mut h, Key::Enter);
    assert_eq!(chosen(&h), Some(("Quadratic".to_owned(), because)));
    assert!(h.query_by_label("Reason").is_none(), "the question is gone");
}

#[test]
fn another_column_needs_a_typed_reason() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    h.get_by_label("Choose Line").click();
    h.run();
    assert_eq!(h.get_by_label("Reason").value().unwrap_or_default(), "");
    press(&mut h, Key::Enter);
    assert_eq!(chosen(&h), None, "not without a reason");
    h.get_by_label("Reason").focus();
    h.run();
    h.get_by_label("Reason").type_text("the device takes two coefficients");
    h.run();
    press(&mut h, Key::Enter);
    assert_eq!(chosen(&h), Some(("Line".to_owned(), "the device takes two coefficients".to_owned())));
}

#[test]
fn not_now_and_escape_choose_nothing() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    press(&mut h, Key::Enter);
    h.get_by_label("Not now").click();
    h.run();
    assert!(h.query_by_label("Reason").is_none());
    press(&mut h, Key::Enter);
    press(&mut h, Key::Escape);
    assert!(h.query_by_label("Reason").is_none());
    assert_eq!(chosen(&h), None);
}

#[test]
fn keys_of_the_room_rest_while_a_reason_is_typed() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    press(&mut h, Key::Enter);
    let (measure, cursor) = (h.state().state.measure, h.state().state.cursor);
    h.get_by_label("Reason").type_text("uso1");
    h.run();
    press(&mut h, Key::ArrowUp);
    assert_eq!((h.state().state.measure, h.state().state.cursor), (measure, cursor));
    assert_eq!(h.state().state.open, None);
}

#[test]
fn a_chosen_column_says_so() {
    let h = fixtures::window(fixtures::chosen_line(), [1440.0, 900.0]);
    assert!(h.query_by_label("Line is chosen").is_some());
    assert!(h.query_by_label("Quadratic is advised").is_some());
    assert!(h.query_by_label("Line, chosen").is_some());
}
