//! Text: which font draws which character, how wide it is, where a line ends.

mod faces;
mod shape;
mod wrap;

use std::ops::Range;

use super::error::ReportError;
use super::style::Style;
pub(super) use faces::FaceId;
use faces::Faces;
use shape::Shaped;

/// One glyph of a run; lengths are parts of the size of the letters.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Glyph {
    /// Number of the glyph in its font.
    pub id: u32,
    /// Step to the next glyph.
    pub advance: f32,
    /// Shift to the right.
    pub right: f32,
    /// Shift upwards.
    pub up: f32,
    /// Bytes of the run's text that the glyph stands for.
    pub text: Range<usize>,
}

/// Glyphs of one font, side by side.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Run {
    /// The font.
    pub face: FaceId,
    /// From the left end of the line, in points.
    pub x: f32,
    /// The glyphs, from left to right.
    pub glyphs: Vec<Glyph>,
    /// The text they stand for, in reading order.
    pub text: String,
}

/// A measured line of text.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Line {
    /// The runs, from left to right.
    pub runs: Vec<Run>,
    /// Width in points, without the blank that ends a line.
    pub width: f32,
    /// Size of the letters in points.
    pub size: f32,
}

/// What a text asks of the width it is given, in points.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Needs {
    /// Width at which nothing wraps.
    pub natural: f32,
    /// Width of the longest word.
    pub word: f32,
}

/// Measures and breaks text.
pub(super) struct Typesetter {
    faces: Faces,
}

impl Typesetter {
    /// Reads the bundled fonts.
    pub(super) fn new() -> Result<Self, ReportError> {
        Ok(Self { faces: Faces::new()? })
    }

    /// The font in the form the PDF writer wants.
    pub(super) fn font(&self, face: FaceId) -> krilla::text::Font {
        self.faces.font(face)
    }

    /// The lines of a text no wider than `width` points; at least one, which may be empty.
    ///
    /// A word wider than that is broken, after a sign like `/` or `-` if possible.
    pub(super) fn lines(&self, text: &str, style: Style, width: f32) -> Result<Vec<Line>, ReportError> {
        let blank = self.faces.blank(style)?;
        let mut lines = Vec::new();
        for hard in self.shape(text, style)? {
            for span in wrap::spans(&hard.clusters, width / style.size) {
                lines.push(hard.line(&span, &blank, style.size));
            }
        }
        Ok(lines)
    }

    /// A text on one line, however wide; forced line ends become blanks.
    pub(super) fn line(&self, text: &str, style: Style) -> Result<Line, ReportError> {
        let mut lines = self.lines(&text.replace('\n', " "), style, f32::INFINITY)?;
        Ok(lines.swap_remove(0))
    }

    /// What a text asks of the width it is given.
    pub(super) fn needs(&self, text: &str, style: Style) -> Result<Needs, ReportError> {
        let mut needs = Needs::default();
        for hard in self.shape(text, style)? {
            let (natural, word) = wrap::needs(&hard.clusters);
            needs.natural = needs.natural.max(natural * style.size);
            needs.word = needs.word.max(word * style.size);
        }
        Ok(needs)
    }

    fn shape(&self, text: &str, style: Style) -> Result<Vec<Shaped>, ReportError> {
        faces::clean(text).split('\n').map(|hard| self.faces.shape(hard, style)).collect()
    }
}

#[cfg(test)]
mod tests;
