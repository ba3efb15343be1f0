//! From bytes to characters.
//!
//! Edge cases: a byte-order mark settles the encoding; without one the bytes are UTF-8 when they are sound UTF-8
//! and Latin-1 otherwise; UTF-16 without a mark, a packed spreadsheet or another binary file shows as control
//! characters and is refused; half a UTF-16 character is refused with its line.

use super::error::TableError;
use serde::{Deserialize, Serialize};
use std::{borrow::Cow, fmt};

/// How bytes stand for characters.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum Encoding {
    /// UTF-8, with or without a byte-order mark.
    #[serde(rename = "utf-8")]
    Utf8,
    /// UTF-16, low byte first.
    #[serde(rename = "utf-16le")]
    Utf16Le,
    /// UTF-16, high byte first.
    #[serde(rename = "utf-16be")]
    Utf16Be,
    /// ISO 8859-1 with the printable characters of Windows-1252 in its unused places.
    #[serde(rename = "latin-1")]
    Latin1,
}

impl fmt::Display for Encoding {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Utf8 => "UTF-8",
            Self::Utf16Le => "UTF-16 (low byte first)",
            Self::Utf16Be => "UTF-16 (high byte first)",
            Self::Latin1 => "Latin-1",
        })
    }
}

/// A decoded file.
#[derive(Debug)]
pub(super) struct Decoded<'a> {
    /// The encoding used.
    pub(super) encoding: Encoding,
    /// The characters, without byte-order marks.
    pub(super) text: Cow<'a, str>,
    /// The line of the first byte that is not UTF-8, where Latin-1 was chosen for that reason.
    pub(super) not_utf8_in_line: Option<usize>,
}

/// Decodes by the given encoding, or else by mark and content.
pub(super) fn decode(bytes: &[u8], wanted: Option<Encoding>) -> Result<Decoded<'_>, TableError> {
    let encoding = wanted.or_else(|| by_mark(bytes));
    let decoded = match encoding {
        Some(Encoding::Utf8) => {
            let text = std::str::from_utf8(bytes).map_err(|error| TableError::Encoding {
                encoding: Encoding::Utf8,
                line: line_of(&bytes[..error.valid_up_to()]),
                found: format!("the byte 0x{:02X}", bytes[error.valid_up_to()]),
            })?;
            Decoded { encoding: Encoding::Utf8, text: text.into(), not_utf8_in_line: None }
        }
        Some(Encoding::Latin1) => latin1(bytes, None),
        Some(encoding) => Decoded { encoding, text: utf16(bytes, encoding)?, not_utf8_in_line: None },
        None => match std::str::from_utf8(bytes) {
            Ok(text) => Decoded { encoding: Encoding::Utf8, text: text.into(), not_utf8_in_line: None },
            Err(error) => latin1(bytes, Some(line_of(&bytes[..error.valid_up_to()]))),
        },
    };
    refuse_control_characters(&decoded)?;
    Ok(without_marks(decoded))
}

fn by_mark(bytes: &[u8]) -> Option<Encoding> {
    let (encoding, _) = encoding_rs::Encoding::for_bom(bytes)?;
    Some(if encoding == encoding_rs::UTF_16LE {
        Encoding::Utf16Le
    } else if encoding == encoding_rs::UTF_16BE {
        Encoding::Utf16Be
    } else {
        Encoding::Utf8
    })
}

fn latin1(bytes: &[u8], not_utf8_in_line: Option<usize>) -> Decoded<'_> {
    let (text, _) = encoding_rs::WINDOWS_1252.decode_without_bom_handling(bytes);
    Decoded { encoding: Encoding::Latin1, text, not_utf8_in_line }
}

fn utf16(bytes: &[u8], encoding: Encoding) -> Result<Cow<'_, str>, TableError> {
    let decoder = match encoding {
        Encoding::Utf16Be => encoding_rs::UTF_16BE,
        _ => encoding_rs::UTF_16LE,
    };
    decoder.decode_without_bom_handling_and_without_replacement(bytes).ok_or_else(|| {
        let (text, _) = decoder.decode_without_bom_handling(bytes);
        let sound = text.split('\u{fffd}').next().unwrap_or_default();
        TableError::Encoding { encoding, line: line_of(sound.as_bytes()), found: "half a character".to_owned() }
    })
}

fn refuse_control_characters(decoded: &Decoded<'_>) -> Result<(), TableError> {
    let bytes = decoded.text.as_bytes();
    let control = |b: &u8| *b < b' ' && !matches!(b, b'\t' | b'\n' | b'\r');
    match bytes.iter().position(control) {
        None => Ok(()),
        Some(at) => Err(TableError::Encoding {
            encoding: decoded.encoding,
            line: line_of(&bytes[..at]),
            found: format!("the control character U+{:04X}", bytes[at]),
        }),
    }
}

fn without_marks(decoded: Decoded<'_>) -> Decoded<'_> {
    let text = match decoded.text {
        Cow::Borrowed(text) => Cow::Borrowed(text.trim_start_matches('\u{feff}')),
        Cow::Owned(text) => match text.trim_start_matches('\u{feff}') {
            rest if rest.len() == text.len() => Cow::Owned(text),
            rest => Cow::Owned(rest.to_owned()),
        },
    };
    Decoded { text, ..decoded }
}

/// How many line ends (`\n`, `\r\n` or `\r`) stand in the bytes.
pub(super) fn line_ends(bytes: &[u8]) -> usize {
    let mut ends = 0;
    let mut before = 0;
    for &byte in bytes {
        ends += usize::from(byte == b'\r' || (byte == b'\n' && before != b'\r'));
        before = byte;
    }
    ends
}

fn line_of(before: &[u8]) -> usize {
    line_ends(before) + 1
}

#[cfg(test)]
mod tests {
    use super::*;

    fn utf16_bytes(text: &str, little: bool) -> Vec<u8> {
        let unit = |u: u16| {
            if little { u.to_le_bytes() } else { u.to_be_bytes() }
        };
        text.encode_utf16().flat_map(unit).collect()
    }

    #[test]
    fn marks_settle_the_encoding_and_are_dropped() {
        let text = "\u{feff}Prüfung µm\n";
        for (bytes, encoding) in [
            (text.as_bytes().to_vec(), Encoding::Utf8),
            (utf16_bytes(text, true), Encoding::Utf16Le),
            (utf16_bytes(text, false), Encoding::Utf16Be),
        ] {
            let decoded = decode(&bytes, None).unwrap();
            assert_eq!((decoded.encoding, &*decoded.text), (encoding, "Prüfung µm\n"));
        }
    }

    #[test]
    fn bytes_that_are_not_utf8_are_latin1_unless_utf8_was_asked_for() {
        let decoded = decode(b"a\n\xb0C \xb5m \x96\n", None).unwrap();
        assert_eq!((decoded.encoding, &*decoded.text), (Encoding::Latin1, "a\n°C µm –\n"));
        assert_eq!(decoded.not_utf8_in_line, Some(2));
        let error = decode(b"a\r\n\xb0C", Some(Encoding::Utf8)).unwrap_err();
        assert!(matches!(&error, TableError::Encoding { line: 2, found, .. } if found.contains("0xB0")));
    }

    #[test]
    fn what_is_no_text_is_refused_with_its_line() {
        for (bytes, wanted) in [(&b"PK\x03\x04"[..], 1), (b"a\nb\0c", 2), (b"\xff\xfea\0\n\0\x00\xd8", 2)] {
            let error = decode(bytes, None).unwrap_err();
            assert!(matches!(error, TableError::Encoding { line, .. } if line == wanted), "{error}");
        }
        let error = decode(&utf16_bytes("1;2", true), None).unwrap_err();
        assert!(error.to_string().contains("byte-order mark"), "{error}");
        assert_eq!(decode(&utf16_bytes("1;2", true), Some(Encoding::Utf16Le)).unwrap().text, "1;2");
    }

    #[test]
    fn every_kind_of_line_end_counts_once() {
        assert_eq!(line_ends(b"a\nb\r\nc\rd"), 3);
        assert_eq!(line_ends(b"\r\r\n\n"), 3);
    }
}
