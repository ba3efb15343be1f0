use super::super::error::ReportError;
use super::super::style::{BODY, CELL, Style, TITLE};
use super::{FaceId, Line, Typesetter};

fn setter() -> Typesetter {
    Typesetter::new().expect("the bundled fonts are sound")
}

fn width(text: &str, style: Style) -> f32 {
    setter().line(text, style).expect("printable").width
}

fn words(lines: &[Line]) -> Vec<String> {
    let text = |line: &Line| line.runs.iter().map(|run| run.text.as_str()).collect();
    lines.iter().map(text).collect()
}

#[test]
fn tabular_digits_are_equally_wide_and_points_stay_narrow() {
    let ones = width("11111", CELL);
    for digits in ["00000", "22222", "48484", "79797"] {
        assert!((width(digits, CELL) - ones).abs() < 1e-4, "{digits}");
    }
    assert!(width("11111", BODY) / BODY.size < ones / CELL.size - 0.1);
    let point = |style: Style| (width("8.8", style) - width("88", style)) / style.size;
    assert!(point(CELL) < 0.3, "a point as wide as a digit leaves holes in numbers");
}

#[test]
fn lines_are_no_wider_than_asked_and_lose_no_word() {
    let text = "The transfer function was fitted by least squares with equal weights.";
    for room in [40.0, 77.7, 123.0, 300.0] {
        let lines = setter().lines(text, BODY, room).expect("printable");
        assert!(lines.iter().all(|line| line.width <= room + 0.01), "{room}");
        assert_eq!(words(&lines).concat().trim_end(), text);
    }
}

#[test]
fn a_text_fits_into_the_width_it_asks_for() {
    for text in ["10 readings within 2 µV/V", "−0.0028", "Ωµ β̂₀ ♯ = σ̂", ""] {
        let needs = setter().needs(text, CELL).expect("printable");
        let lines = setter().lines(text, CELL, needs.natural).expect("printable");
        assert_eq!(lines.len(), 1, "{text}");
        assert!((lines[0].width - needs.natural).abs() < 1e-3, "{text}");
        assert!(needs.word <= needs.natural);
    }
}

#[test]
fn long_words_break_after_a_sign_if_there_is_one() {
    let lines = setter().lines("first/second/third", BODY, 40.0).expect("printable");
    assert_eq!(words(&lines), ["first/", "second/", "third "]);
    let lines = setter().lines("abcdefghijklmnopqrstuvwxyz", BODY, 40.0).expect("printable");
    assert!(lines.len() > 2 && lines.iter().all(|line| line.width <= 40.01));
    assert_eq!(words(&lines).concat(), "abcdefghijklmnopqrstuvwxyz ");
}

#[test]
fn a_number_is_not_broken_at_its_point_and_an_accent_not_from_its_letter() {
    let room = width("1234.5", CELL);
    let lines = setter().lines("1234.56789", CELL, room).expect("printable");
    assert_eq!(words(&lines)[0], "1234.5");
    let room = width("σσσ", BODY) + 0.1;
    let lines = setter().lines("σσσ\u{302}σ", BODY, room).expect("printable");
    assert!(!words(&lines)[1].starts_with('\u{302}'), "{:?}", words(&lines));
}

#[test]
fn blanks_inside_numbers_hold() {
    let text = "0.002\u{2009}6\u{A0}mV/V and 12\u{202F}kN";
    let room = width("0.002\u{2009}6\u{A0}mV/V", BODY) + 1.0;
    let lines = setter().lines(text, BODY, room).expect("printable");
    let expected = ["0.002\u{2009}6\u{A0}mV/V ", "and 12\u{202F}kN "];
    assert_eq!(words(&lines), expected);
}

#[test]
fn characters_fall_back_one_by_one() {
    let line = setter().line("a♯b", TITLE).expect("printable");
    let faces: Vec<FaceId> = line.runs.iter().map(|run| run.face).collect();
    assert_eq!(faces, [FaceId::SemiBold, FaceId::Symbols, FaceId::SemiBold]);
    let line = setter().line("β\u{302}", BODY).expect("printable");
    assert_eq!(line.runs[0].face, FaceId::Symbols);
    let line = setter().line("σ\u{302}", BODY).expect("printable");
    assert_eq!(line.runs[0].face, FaceId::Regular);
}

#[test]
fn words_written_from_right_to_left_are_drawn_so_and_read_in_order() {
    let line = setter().line("אב גד", BODY).expect("printable");
    let run = &line.runs[0];
    assert_eq!(run.text, "אב גד");
    let starts: Vec<usize> = run.glyphs.iter().map(|glyph| glyph.text.start).collect();
    assert!(starts.is_sorted_by(|a, b| a > b), "{starts:?}");
}

#[test]
fn a_character_without_glyph_is_named_with_its_text() {
    let found = setter().line("serial 日本", BODY);
    let expected = ReportError::NoGlyph { text: "serial 日本".to_owned(), character: '日' };
    assert_eq!(found, Err(expected));
}

#[test]
fn commands_are_resolved_and_other_controls_refused() {
    let lines = setter().lines("a\tb\r\nc\u{AD}d\u{2028}e", BODY, 400.0).expect("printable");
    assert_eq!(words(&lines), ["a b ", "cd ", "e "]);
    for bad in ['\u{0}', '\u{1B}', '\u{FEFF}', '\u{E071}', '\u{FFFE}'] {
        let found = setter().line(&format!("x{bad}"), BODY);
        assert!(matches!(found, Err(ReportError::NoGlyph { character, .. }) if character == bad), "{bad:?}");
    }
}
