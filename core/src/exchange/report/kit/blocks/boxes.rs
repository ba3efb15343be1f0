//! Boxes to sign, two in a row.

use super::super::document::SignatureBox;
use super::super::draw::{Draw, Owner, Pen, Placed, rounded};
use super::super::error::ReportError;
use super::super::flow::{Galley, Slice};
use super::super::style::{GUTTER, Ink, LEFT, MEASURE, SIGN_HEADING, SIGN_LINE};
use super::super::tags::Role;
use super::super::text::{Line, Typesetter};
use super::prose::stack;

const PADDING: f32 = 8.0;
const WIDTH: f32 = (MEASURE - GUTTER) / 2.0;

/// Boxes to sign; the two of a row are equally high.
pub(super) fn boxes(setter: &Typesetter, boxes: &[SignatureBox], galley: &mut Galley) -> Result<(), ReportError> {
    for row in boxes.chunks(2) {
        let texts = row.iter().map(|one| Text::new(setter, one)).collect::<Result<Vec<_>, _>>()?;
        let inside = texts.iter().fold(0.0_f32, |h, text| h.max(text.height()));
        let height = inside + 2.0 * PADDING;
        let mut slice = Slice { before: 12.0, height, ..Slice::default() };
        for (i, (one, text)) in row.iter().zip(&texts).enumerate() {
            let left = LEFT + i as f32 * (WIDTH + GUTTER);
            let rect = [left, 0.0, left + WIDTH, height];
            draw(text, rect, galley, &mut slice);
            slice.boxes.push((one.id.clone(), rect));
        }
        galley.push(slice);
    }
    galley.space(6.0);
    Ok(())
}

struct Text {
    heading: Vec<Line>,
    lines: Vec<Line>,
}

impl Text {
    fn new(setter: &Typesetter, one: &SignatureBox) -> Result<Self, ReportError> {
        let width = WIDTH - 2.0 * PADDING;
        let mut lines = Vec::new();
        for line in &one.lines {
            lines.extend(setter.lines(line, SIGN_LINE, width)?);
        }
        Ok(Self { heading: setter.lines(&one.heading, SIGN_HEADING, width)?, lines })
    }

    fn height(&self) -> f32 {
        self.heading.len() as f32 * SIGN_HEADING.leading + self.lines.len() as f32 * SIGN_LINE.leading
    }
}

fn draw(text: &Text, rect: [f32; 4], galley: &mut Galley, slice: &mut Slice) {
    let group = galley.tags.add(None, Role::Group);
    let heading = Owner::Content(galley.tags.add(Some(group), Role::Text));
    let frame = Draw::Shape { path: rounded(rect, 2.5), fill: None, pen: Some(Pen::new(Ink::Black, 0.7)) };
    slice.drawings.push(Placed::new(Owner::Ornament, frame));
    let left = rect[0] + PADDING;
    let below = PADDING + text.heading.len() as f32 * SIGN_HEADING.leading;
    stack(&mut slice.drawings, heading, &text.heading, SIGN_HEADING, (left, PADDING));
    if !text.lines.is_empty() {
        let lines = Owner::Content(galley.tags.add(Some(group), Role::Text));
        stack(&mut slice.drawings, lines, &text.lines, SIGN_LINE, (left, below));
    }
}
