//! The small widgets in a window without a screen.

use eframe::egui::{self, Event, Key, accesskit::Role};
use egui_kittest::{
    Harness,
    kittest::{NodeT, Queryable},
};

use super::{Field, PathField, Question, QuestionState, ReasonKey, Reply, Severity, caption, finding_line, segmented};
use crate::platform::Ask;
use crate::theme;

fn window<State>(state: State, show: impl FnMut(&mut egui::Ui, &mut State) + 'static) -> Harness<'static, State>
where
    State: 'static,
{
    Harness::builder().with_size([700.0, 420.0]).with_context_setup(theme::install).build_ui_state(show, state)
}

#[test]
fn a_finding_says_its_word_and_can_be_clicked_and_reached_by_tab() {
    let mut harness = window(0, |ui, clicks| {
        for severity in [Severity::Stop, Severity::Look, Severity::Note] {
            if finding_line(ui, severity, "rising and falling differ").clicked() {
                *clicks += 1;
            }
        }
    });
    harness.get_by_label("Look: rising and falling differ").click();
    harness.run();
    assert_eq!(*harness.state(), 1);
    harness.key_press(Key::Tab);
    harness.run();
    harness.key_press(Key::Enter);
    harness.run();
    assert_eq!(*harness.state(), 2);
}

#[test]
fn a_caption_wraps_and_is_never_cut_short() {
    let long = "bows: reads up to 0.023 kN low at 5 kN, and high in the middle, more than anybody \
                would accept from an instrument of this class";
    let mut harness = window(0.0_f32, move |ui, height| {
        ui.set_max_width(220.0);
        *height = caption(ui, Some(Severity::Look), long).rect.height();
    });
    harness.run();
    assert!(*harness.state() > 3.0 * 13.0, "{}", harness.state());
    let node = harness.get_by_role(Role::Label);
    let name = node.accesskit_node().value().unwrap_or_default();
    assert_eq!(name, format!("Look: {long}"));
}

#[test]
fn a_number_field_keeps_what_is_typed() {
    let mut harness = window(String::new(), |ui, text| {
        Field::number("Upper end", "kN").hint("5").problem(Some("thousands marks are not taken")).show(ui, text);
    });
    harness.get_by_label("Upper end").click();
    harness.run();
    harness.event(Event::Text("1,5".to_owned()));
    harness.run();
    assert_eq!(harness.state(), "1,5");
    harness.get_by_label("Look: thousands marks are not taken");
}

#[test]
fn a_choice_is_made_by_mouse_and_keyboard() {
    let options = [(1, "value"), (2, "run order")];
    let mut harness = window((1, 0), move |ui, (value, changes)| {
        if segmented(ui, "against", value, &options).changed() {
            *changes += 1;
        }
    });
    harness.get_by_label("against: run order").click();
    harness.run();
    assert_eq!(*harness.state(), (2, 1));
    // What is taken already changes nothing.
    harness.get_by_label("against: run order").click();
    harness.run();
    assert_eq!(*harness.state(), (2, 1));
    harness.get_by_label("against: value").focus();
    harness.run();
    harness.key_press(Key::Space);
    harness.run();
    assert_eq!(*harness.state(), (1, 2));
}

#[test]
fn a_typed_path_is_settled_by_enter() {
    let state = (PathField::default(), None);
    let mut harness = window(state, |ui, (field, settled)| {
        if let Some(path) = field.show(ui, "Table", &Ask::Open(Vec::new())) {
            *settled = Some(path);
        }
    });
    harness.get_by_label("Browse for Table");
    harness.get_by_label("Table").click();
    harness.run();
    harness.event(Event::Text("readings.csv".to_owned()));
    harness.run();
    assert_eq!(harness.state().1, None);
    harness.key_press(Key::Enter);
    harness.run();
    assert_eq!(harness.state().1, Some("readings.csv".into()));
}

const SET_ASIDE: Question<'static> = Question {
    title: "Set reading 14 aside?",
    body: "It stays visible and is printed with its reason.",
    reasons: &[ReasonKey { key: 't', text: "typed wrong" }, ReasonKey { key: 'n', text: "not settled" }],
    reason_label: Some("Other reason"),
    confirm: "Set aside",
    cancel: "Keep",
};

type Asked = (QuestionState, Option<Reply>);

fn asked(question: Question<'static>) -> Harness<'static, Asked> {
    let mut harness = window(Asked::default(), move |ui, (state, reply)| {
        if reply.is_none() {
            *reply = question.show(ui.ctx(), state);
        }
    });
    harness.run();
    harness
}

fn confirmed(reason: &str) -> Option<Reply> {
    Some(Reply::Confirmed { reason: reason.to_owned() })
}

#[test]
fn one_key_gives_the_reason_and_the_answer() {
    let mut harness = asked(SET_ASIDE);
    harness.get_by_role_and_label(Role::Dialog, "Set reading 14 aside?");
    harness.event(Event::Text("n".to_owned()));
    harness.run();
    assert_eq!(harness.state().1, confirmed("not settled"));
}

#[test]
fn a_typed_reason_may_hold_the_letters_of_the_keys() {
    let mut harness = asked(SET_ASIDE);
    assert!(harness.get_by_label("Set aside").accesskit_node().is_disabled());
    harness.get_by_label("Other reason").click();
    harness.run();
    harness.event(Event::Text("t".to_owned()));
    harness.event(Event::Text("n".to_owned()));
    harness.run();
    assert_eq!(harness.state().1, None);
    harness.key_press(Key::Enter);
    harness.run();
    assert_eq!(harness.state().1, confirmed("tn"));
}

#[test]
fn escape_and_the_button_mean_no() {
    let mut harness = asked(SET_ASIDE);
    harness.key_press(Key::Escape);
    harness.run();
    assert_eq!(harness.state().1, Some(Reply::Cancelled));
    let mut harness = asked(SET_ASIDE);
    harness.get_by_label("Keep").click();
    harness.run();
    assert_eq!(harness.state().1, Some(Reply::Cancelled));
}

#[test]
fn a_question_without_a_reason_starts_on_no() {
    let mut harness = asked(Question { reasons: &[], reason_label: None, ..SET_ASIDE });
    harness.key_press(Key::Enter);
    harness.run();
    assert_eq!(harness.state().1, Some(Reply::Cancelled));
}
