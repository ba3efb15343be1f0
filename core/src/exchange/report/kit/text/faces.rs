//! The bundled fonts, and which of them draws which character.

use std::borrow::Cow;

use krilla::Data;
use krilla::text::Font;

use super::super::error::ReportError;
use super::super::fonts;
use super::super::style::{Style, Weight};

/// One of the bundled fonts.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(in super::super) enum FaceId {
    /// Inter Regular.
    Regular,
    /// Inter SemiBold.
    SemiBold,
    /// DejaVu Sans, for what Inter lacks.
    Symbols,
}

/// A font, once for measuring and once for the PDF writer.
pub(super) struct Face {
    /// For measuring.
    pub buzz: rustybuzz::Face<'static>,
    font: Font,
}

impl Face {
    fn new(name: &'static str, bytes: &'static [u8]) -> Result<Self, ReportError> {
        let buzz = rustybuzz::Face::from_slice(bytes, 0).ok_or(ReportError::Font { name })?;
        let font = Font::new(Data::from(bytes), 0).ok_or(ReportError::Font { name })?;
        Ok(Self { buzz, font })
    }

    fn draws(&self, text: &str) -> bool {
        text.chars().all(|c| self.buzz.glyph_index(c).is_some())
    }
}

/// The bundled fonts.
pub(super) struct Faces {
    regular: Face,
    semibold: Face,
    symbols: Face,
}

impl Faces {
    pub(super) fn new() -> Result<Self, ReportError> {
        Ok(Self {
            regular: Face::new("Inter-Regular.otf", fonts::INTER_REGULAR)?,
            semibold: Face::new("Inter-SemiBold.otf", fonts::INTER_SEMIBOLD)?,
            symbols: Face::new("DejaVuSans.ttf", fonts::DEJAVU_SANS)?,
        })
    }

    pub(super) fn get(&self, face: FaceId) -> &Face {
        match face {
            FaceId::Regular => &self.regular,
            FaceId::SemiBold => &self.semibold,
            FaceId::Symbols => &self.symbols,
        }
    }

    pub(super) fn font(&self, face: FaceId) -> Font {
        self.get(face).font.clone()
    }

    /// Cuts a text into stretches that one font can draw.
    ///
    /// A letter and its accents come from one font. A blank goes with its neighbours, so that
    /// words of a script written from right to left stay one stretch.
    pub(super) fn stretches<'a>(&self, text: &'a str, style: Style) -> Result<Vec<(FaceId, &'a str)>, ReportError> {
        let main = match style.weight {
            Weight::Regular => FaceId::Regular,
            Weight::SemiBold => FaceId::SemiBold,
        };
        let pieces = letters(text);
        let mut faces = Vec::with_capacity(pieces.len());
        for piece in &pieces {
            faces.push(
                self.choose(piece, main)
                    .map_err(|character| ReportError::NoGlyph { text: text.to_owned(), character })?,
            );
        }
        lend_blanks(&pieces, &mut faces);
        let mut stretches: Vec<(FaceId, &str)> = Vec::new();
        let mut start = 0;
        let mut end = 0;
        for (i, piece) in pieces.iter().enumerate() {
            end += piece.len();
            if faces.get(i + 1) != Some(&faces[i]) {
                stretches.push((faces[i], &text[start..end]));
                start = end;
            }
        }
        Ok(stretches)
    }

    /// The font for a letter with its accents, or the character that has no glyph.
    fn choose(&self, piece: &str, main: FaceId) -> Result<FaceId, char> {
        if let Some(c) = piece.chars().find(|&c| unprintable(c)) {
            return Err(c);
        }
        let order = if tall_and_marked(piece) { [FaceId::Symbols, main] } else { [main, FaceId::Symbols] };
        order.into_iter().find(|&face| self.get(face).draws(piece)).ok_or_else(|| self.culprit(piece, main))
    }

    fn culprit(&self, piece: &str, main: FaceId) -> char {
        let lacks = |c: &char| {
            let one = c.to_string();
            !self.get(main).draws(&one) && !self.symbols.draws(&one)
        };
        let first = piece.chars().next().unwrap_or('\u{FFFD}');
        piece.chars().find(lacks).unwrap_or(first)
    }
}

/// Cuts a text into letters, each with the accents that follow it.
fn letters(text: &str) -> Vec<&str> {
    let mut pieces = Vec::new();
    let mut start = 0;
    for (at, c) in text.char_indices().skip(1) {
        if !joins(c) {
            pieces.push(&text[start..at]);
            start = at;
        }
    }
    if start < text.len() {
        pieces.push(&text[start..]);
    }
    pieces
}

/// Gives a blank between two letters of the spare font to that font.
fn lend_blanks(pieces: &[&str], faces: &mut [FaceId]) {
    for i in 1..faces.len().saturating_sub(1) {
        let between = faces[i - 1] == FaceId::Symbols && faces[i + 1] == FaceId::Symbols;
        if pieces[i] == " " && between {
            faces[i] = FaceId::Symbols;
        }
    }
}

/// Whether a character belongs to the letter before it: combining marks, variation selectors and
/// the zero-width joiner (Unicode 15.1, blocks of combining marks).
pub(super) fn joins(c: char) -> bool {
    matches!(u32::from(c),
        0x0300..=0x036F | 0x0483..=0x0489 | 0x0591..=0x05BD | 0x064B..=0x065F | 0x1AB0..=0x1AFF
        | 0x1DC0..=0x1DFF | 0x200D | 0x20D0..=0x20FF | 0xFE00..=0xFE0F | 0xFE20..=0xFE2F)
}

/// Greek letters with an ascender and a mark above: Inter sets the mark into the letter.
fn tall_and_marked(piece: &str) -> bool {
    let mut chars = piece.chars();
    let tall = chars.next().is_some_and(|c| "βδζθλξφψ".contains(c));
    tall && chars.next().is_some_and(joins)
}

/// Characters that must never be printed even if a font should have a glyph: controls, byte-order
/// marks, non-characters, and private ones whose meaning hangs on the font (ISO 19005-3, 6.2.11.7).
fn unprintable(c: char) -> bool {
    let code = u32::from(c);
    c.is_control()
        || code == 0xFEFF
        || code & 0xFFFE == 0xFFFE
        || matches!(code, 0xE000..=0xF8FF | 0xFDD0..=0xFDEF | 0xF_0000..)
}

/// A text with the characters resolved that are commands rather than signs: tabulators become
/// blanks, every kind of line end `\n`, and hints for hyphenation go.
pub(super) fn clean(text: &str) -> Cow<'_, str> {
    let command = |c| matches!(c, '\t' | '\r' | '\u{AD}' | '\u{2028}' | '\u{2029}');
    if !text.contains(command) {
        return Cow::Borrowed(text);
    }
    let unified = text.replace("\r\n", "\n");
    let resolved = unified.chars().filter_map(|c| match c {
        '\t' => Some(' '),
        '\r' | '\u{2028}' | '\u{2029}' => Some('\n'),
        '\u{AD}' => None,
        other => Some(other),
    });
    Cow::Owned(resolved.collect())
}
