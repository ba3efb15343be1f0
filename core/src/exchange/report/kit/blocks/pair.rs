//! Two texts on one level: one from the left edge, one to the right edge.

use super::super::error::ReportError;
use super::super::style::{GUTTER, LEFT, MEASURE, RIGHT, Style};
use super::super::text::{Line, Typesetter};

/// Two texts, broken into lines that do not meet.
pub(in super::super) struct Pair {
    /// Lines from the left edge.
    pub left: Vec<Line>,
    /// Lines to the right edge.
    pub right: Vec<Line>,
}

/// Breaks two texts so that they stand side by side within the measure. The right one gets the
/// width it needs, at most two fifths of the measure; the left one gets the rest.
pub(in super::super) fn pair(
    setter: &Typesetter,
    (left, left_style): (&str, Style),
    (right, right_style): (&str, Style),
) -> Result<Pair, ReportError> {
    let wanted = setter.needs(right, right_style)?.natural;
    let right_width = wanted.min(MEASURE * 0.4);
    let left_width = MEASURE - right_width - GUTTER;
    Ok(Pair {
        left: setter.lines(left, left_style, left_width)?,
        right: setter.lines(right, right_style, right_width)?,
    })
}

/// Left end of a line that ends at the right edge.
pub(in super::super) fn flush_right(line: &Line) -> f32 {
    (RIGHT - line.width).max(LEFT)
}
