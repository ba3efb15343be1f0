//! Numbers as people type them: decimal point or decimal comma, never a thousands mark.
//!
//! Edge cases: nothing typed; a mark alone; two marks (`1.234,5`, `1,234,567`: a thousands mark is refused with
//! its place, because dropping it would change the value a thousandfold); a minus sign from a printed table
//! (U+2212); a value no double can hold, at either end; words that other parsers take for numbers (`inf`, `nan`,
//! `0x1F`).

use serde::{Deserialize, Serialize};
use std::{borrow::Cow, fmt};

/// The mark between whole part and fraction.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum DecimalMark {
    /// `1.5`
    Point,
    /// `1,5`
    Comma,
}

impl DecimalMark {
    /// The mark itself: `.` or `,`.
    #[must_use]
    pub fn as_char(self) -> char {
        match self {
            Self::Point => '.',
            Self::Comma => ',',
        }
    }

    fn of(mark: char) -> Option<Self> {
        match mark {
            '.' => Some(Self::Point),
            ',' => Some(Self::Comma),
            _ => None,
        }
    }
}

impl fmt::Display for DecimalMark {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Point => "decimal point",
            Self::Comma => "decimal comma",
        })
    }
}

/// Why a text is not taken for a number.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum NumberError {
    /// Nothing but space.
    #[error("nothing stands here; a number is needed")]
    Empty,
    /// Not the figures of a number.
    #[error("{text:?} is not a number")]
    NotANumber {
        /// What was found, cut to a readable length.
        text: String,
    },
    /// Figures grouped in threes.
    #[error("{text:?} has a thousands mark {mark:?} at character {position}; write the figures without it")]
    ThousandsMark {
        /// What was found, cut to a readable length.
        text: String,
        /// The mark that was taken for a thousands mark.
        mark: char,
        /// Which character of the trimmed text it is, from 1.
        position: usize,
    },
    /// The other decimal mark than the one in force.
    #[error(
        "{text:?} has {:?} at character {position}, but the {expected} is in force and thousands marks are refused",
        .found.as_char()
    )]
    OtherMark {
        /// What was found, cut to a readable length.
        text: String,
        /// The mark that was found.
        found: DecimalMark,
        /// The mark in force.
        expected: DecimalMark,
        /// Which character of the trimmed text it is, from 1.
        position: usize,
    },
    /// Beyond the largest double, about 1.8e308.
    #[error("{text:?} is larger than a double can hold (about 1.8e308)")]
    TooLarge {
        /// What was found, cut to a readable length.
        text: String,
    },
    /// Figures other than zero that a double would turn into zero.
    #[error("{text:?} is smaller than a double can hold (about 4.9e-324) and would become 0")]
    TooSmall {
        /// What was found, cut to a readable length.
        text: String,
    },
}

/// Reads one number; surrounding space is dropped and U+2212 is a minus sign.
///
/// Without `decimal` both `.` and `,` are decimal marks, so `1,234` is 1.234.
///
/// # Shapes and units
/// One text gives one finite double, in whatever unit the text was meant.
///
/// # Errors
/// [`NumberError`] says what was found: no figures, a thousands mark and its place, the other decimal mark, or a
/// value outside the doubles. Hexadecimal figures, `inf` and `nan` are not numbers here.
///
/// # Source
/// Decimal marks and the refusal of point and comma between groups of three: SI Brochure, 9th edition, 5.4.4.
pub fn parse_number(text: &str, decimal: Option<DecimalMark>) -> Result<f64, NumberError> {
    let text = text.trim();
    if text.is_empty() {
        return Err(NumberError::Empty);
    }
    let plain = plain(text, decimal)?;
    let value: f64 = plain.parse().map_err(|_| NumberError::NotANumber { text: shorten(text) })?;
    if !value.is_finite() {
        return Err(NumberError::TooLarge { text: shorten(text) });
    }
    if value == 0.0 && mantissa(&plain).bytes().any(|b| matches!(b, b'1'..=b'9')) {
        return Err(NumberError::TooSmall { text: shorten(text) });
    }
    Ok(value)
}

/// The start of a text that may be of any length, for use in a message.
pub(crate) fn shorten(text: &str) -> String {
    const LONGEST: usize = 48;
    match text.char_indices().nth(LONGEST) {
        Some((end, _)) => format!("{}…", &text[..end]),
        None => text.to_owned(),
    }
}

/// The text with an ASCII minus and a decimal point, once it has the form of a number.
fn plain(text: &str, decimal: Option<DecimalMark>) -> Result<Cow<'_, str>, NumberError> {
    let unsigned = text.strip_prefix(['+', '-', '\u{2212}']).unwrap_or(text);
    let sign_chars = usize::from(unsigned.len() < text.len());
    let mantissa = mantissa(unsigned);
    if !exponent_is_sound(&unsigned[mantissa.len()..]) {
        return Err(NumberError::NotANumber { text: shorten(text) });
    }
    let mut others = mantissa.char_indices().filter(|(_, c)| !c.is_ascii_digit());
    let first = others.next();
    if let Some((at, mark)) = first {
        let position = sign_chars + at + 1;
        let found = DecimalMark::of(mark).filter(|_| others.next().is_none() && mantissa.len() > 1);
        let Some(found) = found else {
            return Err(not_plain(text, mantissa, at, mark, position));
        };
        if let Some(expected) = decimal.filter(|d| *d != found) {
            return Err(NumberError::OtherMark { text: shorten(text), found, expected, position });
        }
    } else if mantissa.is_empty() {
        return Err(NumberError::NotANumber { text: shorten(text) });
    }
    Ok(if text.contains([',', '\u{2212}']) {
        Cow::Owned(text.replace(',', ".").replace('\u{2212}', "-"))
    } else {
        Cow::Borrowed(text)
    })
}

fn mantissa(unsigned: &str) -> &str {
    &unsigned[..unsigned.find(['e', 'E']).unwrap_or(unsigned.len())]
}

/// `text` is empty or begins with the `e`.
fn exponent_is_sound(text: &str) -> bool {
    let Some(power) = text.strip_prefix(['e', 'E']) else {
        return text.is_empty();
    };
    let figures = power.strip_prefix(['+', '-', '\u{2212}']).unwrap_or(power);
    !figures.is_empty() && figures.bytes().all(|b| b.is_ascii_digit())
}

/// Tells a thousands mark (a whole group of three behind it) from anything else.
fn not_plain(text: &str, mantissa: &str, at: usize, mark: char, position: usize) -> NumberError {
    const MARKS: [char; 9] = ['.', ',', ' ', '\'', '’', '_', '\u{a0}', '\u{2009}', '\u{202f}'];
    let behind = &mantissa[at + mark.len_utf8()..];
    let group = behind.bytes().take_while(u8::is_ascii_digit).count();
    if MARKS.contains(&mark) && at > 0 && group == 3 {
        return NumberError::ThousandsMark { text: shorten(text), mark, position };
    }
    NumberError::NotANumber { text: shorten(text) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use DecimalMark::{Comma, Point};
    use proptest::prelude::*;

    #[test]
    fn either_mark_is_a_decimal_mark_while_none_is_in_force() {
        for (text, value) in [
            ("1.5", 1.5),
            ("1,5", 1.5),
            ("1,234", 1.234),
            (" \t-.5\u{a0}", -0.5),
            ("5.", 5.0),
            ("+7", 7.0),
            ("\u{2212}3,25e\u{2212}2", -0.0325),
            ("6.02E+23", 6.02e23),
            ("0", 0.0),
            ("0.000e-999", 0.0),
            ("5e-324", 5e-324),
        ] {
            assert_eq!(parse_number(text, None), Ok(value), "{text}");
        }
        assert_eq!(parse_number("1,5", Some(Comma)), Ok(1.5));
        assert_eq!(parse_number("1.5", Some(Point)), Ok(1.5));
    }

    #[test]
    fn a_thousands_mark_is_refused_with_its_place() {
        for (text, mark, position) in [
            ("1.000,92", '.', 2),
            ("-12,345.6", ',', 4),
            ("1,234,567", ',', 2),
            ("1 234", ' ', 2),
            ("12'345", '\'', 3),
            ("1\u{202f}234,5", '\u{202f}', 2),
        ] {
            for decimal in [None, Some(Comma), Some(Point)] {
                let wanted = NumberError::ThousandsMark { text: text.into(), mark, position };
                assert_eq!(parse_number(text, decimal), Err(wanted), "{text}");
            }
        }
    }

    #[test]
    fn the_other_mark_is_refused_while_one_is_in_force() {
        let error = parse_number("-1,234", Some(Point)).unwrap_err();
        let wanted = NumberError::OtherMark { text: "-1,234".into(), found: Comma, expected: Point, position: 3 };
        assert_eq!(error, wanted);
        assert!(error.to_string().contains("decimal point is in force"), "{error}");
        assert!(parse_number("1.5", Some(Comma)).is_err());
    }

    #[test]
    fn what_is_no_number_is_refused() {
        for text in [
            "abc",
            "-",
            ".",
            ",",
            "e5",
            "1e",
            "1e+",
            "1e1.5",
            "--1",
            "0x1F",
            "inf",
            "-Infinity",
            "NaN",
            "nan",
            "1.2.3",
            "1 2",
            "12 kN",
            "5.0 ± 0.1",
            "١٢",
            "1d3",
            "2026-12-01",
            "\u{2212}",
            "1\u{2212}2",
        ] {
            let wanted = NumberError::NotANumber { text: text.into() };
            assert_eq!(parse_number(text, None), Err(wanted), "{text}");
        }
        assert_eq!(parse_number(" \u{a0}\t", None), Err(NumberError::Empty));
        assert_eq!(parse_number("1e400", None), Err(NumberError::TooLarge { text: "1e400".into() }));
        assert_eq!(parse_number("-1e-400", None), Err(NumberError::TooSmall { text: "-1e-400".into() }));
    }

    #[test]
    fn a_message_stays_short() {
        let error = parse_number(&"x".repeat(1_000_000), None).unwrap_err();
        assert!(error.to_string().len() < 120);
    }

    proptest! {
        #[test]
        fn every_double_reads_back(value in proptest::num::f64::NORMAL | proptest::num::f64::SUBNORMAL) {
            for text in [format!("{value}"), format!("{value:e}")] {
                prop_assert_eq!(parse_number(&text, Some(Point)), Ok(value));
                prop_assert_eq!(parse_number(&text.replace('.', ","), Some(Comma)), Ok(value));
                prop_assert_eq!(parse_number(&text.replace('-', "\u{2212}"), None), Ok(value));
            }
        }

        #[test]
        fn no_text_panics(text in ".{0,40}", figures in "[-+0-9.,eE' \u{2212}]{0,12}") {
            for decimal in [None, Some(Point), Some(Comma)] {
                let _ = parse_number(&text, decimal);
                let _ = parse_number(&figures, decimal);
            }
        }
    }
}
