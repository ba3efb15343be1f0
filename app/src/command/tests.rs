use super::{Does, TABLE, Typing, entry, matching};
use crate::rooms::Room;
use eframe::egui::{self, Key, Modifiers};
use std::collections::BTreeSet;

#[test]
fn no_name_hint_or_shortcut_is_blank_or_used_twice() {
    let mut names = BTreeSet::new();
    let mut keys = BTreeSet::new();
    for line in TABLE {
        assert!(!line.name.trim().is_empty(), "{:?}", line.does);
        assert!(line.hint.trim().ends_with('.'), "{}: a sentence", line.name);
        assert!(names.insert(line.name), "{} stands twice", line.name);
        for k in line.keys {
            assert!(keys.insert(k.shown()), "{} is taken twice", k.shown());
        }
    }
    let does: Vec<Does> = TABLE.iter().map(|e| e.does).collect();
    for (n, d) in does.iter().enumerate() {
        assert!(!does[..n].contains(d), "{d:?} stands twice");
    }
}

#[test]
fn clipboard_and_zoom_keys_stay_with_the_window_system() {
    for line in TABLE {
        for k in line.keys {
            let taken = [Key::C, Key::V, Key::X, Key::A, Key::Plus, Key::Minus, Key::Num0];
            assert!(!(k.ctrl && !k.shift && taken.contains(&k.key)), "{}", k.shown());
        }
    }
}

#[test]
fn every_room_has_its_command_under_its_own_name() {
    for room in Room::ALL {
        assert_eq!(entry(Does::Show(room)).name, room.name());
    }
}

#[test]
fn a_typed_word_finds_its_command() {
    assert_eq!(matching("take")[0].does, Does::TakeBack);
    assert_eq!(matching("dark")[0].does, Does::SwitchTheme);
    assert_eq!(matching("copy project")[0].does, Does::CopyTo);
    assert_eq!(matching("").len(), TABLE.len());
    assert!(matching("no such thing").is_empty());
}

fn heard(key: Key, modifiers: Modifiers, typing: Typing) -> Vec<Does> {
    let ctx = egui::Context::default();
    let mut input = egui::RawInput::default();
    input.events.push(egui::Event::Key { key, physical_key: None, pressed: true, repeat: false, modifiers });
    let mut done = Vec::new();
    ctx.run_ui(input, |ui| done.extend(super::pressed(ui.ctx(), typing))).drop_without_applying_deltas();
    done
}

#[test]
fn shift_tells_put_back_from_take_back() {
    let ctrl = Modifiers::COMMAND;
    assert_eq!(heard(Key::Z, ctrl, Typing::Nothing), [Does::TakeBack]);
    assert_eq!(heard(Key::Z, ctrl | Modifiers::SHIFT, Typing::Nothing), [Does::PutBack]);
    assert_eq!(heard(Key::Y, ctrl, Typing::Nothing), [Does::PutBack]);
    assert_eq!(heard(Key::Num3, ctrl, Typing::Text), [Does::Show(Room::Compare)]);
}

#[test]
fn while_somebody_types_letters_and_undo_are_left_to_the_text_field() {
    assert_eq!(heard(Key::N, Modifiers::NONE, Typing::Nothing), [Does::StartOwn]);
    assert!(heard(Key::N, Modifiers::NONE, Typing::Text).is_empty());
    assert!(heard(Key::Z, Modifiers::COMMAND, Typing::Text).is_empty());
    assert!(heard(Key::N, Modifiers::NONE, Typing::InATable).is_empty());
    assert_eq!(heard(Key::Z, Modifiers::COMMAND, Typing::InATable), [Does::TakeBack]);
}
