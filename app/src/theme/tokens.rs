//! The tokens of `assets/theme/tokens.ron`, read at compile time.
//!
//! These types only mirror the file; `Theme` turns them into colours a painter takes.

use std::sync::LazyLock;

use serde::Deserialize;

use super::lines::{FitMarker, LinePattern};

/// The text of the token file, part of the program.
const TOKENS: &str = include_str!(concat!(env!("CARGO_MANIFEST_DIR"), "/../assets/theme/tokens.ron"));

/// The parsed token file.
pub(super) static FILE: LazyLock<TokenFile> =
    LazyLock::new(|| parse(TOKENS).expect("the token file is part of the program and tested"));

/// Reads a token file.
fn parse(text: &str) -> Result<TokenFile, ron::error::SpannedError> {
    ron::from_str(text)
}

/// The whole token file.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct TokenFile {
    /// Colours by day.
    pub(super) light: Colours,
    /// Colours by night.
    pub(super) dark: Colours,
    /// Line and marker of each fit, in the order of the fits' colours.
    pub(super) fit_lines: [FitLine; FIT_COUNT],
    /// Sizes of text.
    pub(super) sizes: Sizes,
    /// Distances.
    pub(super) spacing: Spacing,
}

/// How many fits can stand side by side.
pub const FIT_COUNT: usize = 6;

/// Colours of one theme.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct Colours {
    pub(super) dark: bool,
    pub(super) ground: Hex,
    pub(super) panel: Hex,
    pub(super) field: Hex,
    pub(super) hover: Hex,
    pub(super) selected: Hex,
    pub(super) ink: Hex,
    pub(super) soft_ink: Hex,
    pub(super) rule: Hex,
    pub(super) hair: Hex,
    pub(super) edge: Hex,
    pub(super) brass: Hex,
    pub(super) brass_fill: Veil,
    pub(super) focus: Hex,
    pub(super) alert: Hex,
    pub(super) note: Hex,
    pub(super) backdrop: Veil,
    pub(super) shadow: Veil,
    pub(super) fits: [FitColours; FIT_COUNT],
}

/// Colours of one fit.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct FitColours {
    pub(super) colour: Hex,
    pub(super) text: Hex,
}

/// Line pattern and marker of one fit.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct FitLine {
    pub(super) pattern: LinePattern,
    pub(super) marker: FitMarker,
}

/// A colour laid over others.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct Veil {
    pub(super) colour: Hex,
    /// 0 (nothing) to 1 (opaque).
    pub(super) opacity: f32,
}

/// Sizes of text, in points at 100 % zoom.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Sizes {
    /// Units, hints, axis numbers; the smallest text there is.
    pub small: f32,
    /// Running text and table cells.
    pub body: f32,
    /// The verdict over a plot (semibold).
    pub caption: f32,
    /// Heads of columns and sections (semibold).
    pub heading: f32,
    /// The instrument in the masthead, the title of a question (semibold).
    pub title: f32,
    /// Figures readable at arm's length.
    pub prompt: f32,
}

/// Distances, in points at 100 % zoom.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Spacing {
    /// Width of a hairline.
    pub hair: f32,
    /// Width of the focus ring.
    pub focus: f32,
    /// Between things that belong together.
    pub tight: f32,
    /// Between neighbours.
    pub item: f32,
    /// Inside a panel, and between panels.
    pub panel: f32,
    /// Around a room.
    pub room: f32,
    /// Height of a table row.
    pub row: f32,
    /// Height of a button or a field.
    pub control: f32,
    /// Width of a mark beside text.
    pub mark: f32,
    /// Radius of a rounded corner.
    pub corner: u8,
}

/// Red, green and blue of an sRGB colour, 0 to 255.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize)]
#[serde(try_from = "String")]
pub(super) struct Hex(pub(super) [u8; 3]);

impl TryFrom<String> for Hex {
    type Error = String;

    fn try_from(text: String) -> Result<Self, String> {
        let digits = text.len() == 6 && text.bytes().all(|b| b.is_ascii_hexdigit());
        let number = u32::from_str_radix(&text, 16);
        match (digits, number) {
            (true, Ok(number)) => {
                let [_, red, green, blue] = number.to_be_bytes();
                Ok(Self([red, green, blue]))
            }
            _ => Err(format!("a colour is six hexadecimal digits, not {text:?}")),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_token_file_is_complete() {
        let file = parse(TOKENS).unwrap_or_else(|error| panic!("{error}"));
        assert!(!file.light.dark && file.dark.dark);
        assert!(file.sizes.small >= 12.0, "no text under 12 points");
        assert!(file.sizes.prompt >= 48.0, "prompts are read at arm's length");
    }

    #[test]
    fn a_colour_is_six_hexadecimal_digits() {
        assert_eq!(Hex::try_from("0B65A8".to_owned()), Ok(Hex([0x0B, 0x65, 0xA8])));
        for wrong in ["", "0B65A", "0B65A8F", "+B65A8", "#0B65A", "0B65Ä"] {
            assert!(Hex::try_from(wrong.to_owned()).is_err(), "{wrong:?}");
        }
    }
}
