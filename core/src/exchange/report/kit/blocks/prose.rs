//! Title, headings, paragraphs, end mark.

use super::super::document::ParagraphStyle;
use super::super::draw::{Draw, Owner, Placed};
use super::super::error::ReportError;
use super::super::flow::{Galley, Keep, Slice};
use super::super::style::{
    BODY, BYLINE, CAUTION, END, FOOT, H1, H2, HAIRLINE, Ink, LEFT, MEASURE, NOTICE, NUMBER, RIGHT, RULE, SMALL, STRONG,
    Style, TITLE,
};
use super::super::tags::Role;
use super::super::text::{Line, Typesetter};
use super::pair::{flush_right, pair};

/// The title over a strong rule, with the number and "page n of N" at its right.
pub(super) fn title(setter: &Typesetter, text: &str, right: &str, galley: &mut Galley) -> Result<(), ReportError> {
    let sides = pair(setter, (text, TITLE), (right, NUMBER))?;
    let heading = Owner::Content(galley.tags.add(None, Role::Title));
    let number = Owner::Content(galley.tags.add(None, Role::Text));
    let count = FOOT;
    let left_height = sides.left.len() as f32 * TITLE.leading;
    let right_height = sides.right.len() as f32 * NUMBER.leading + count.leading;
    let height = left_height.max(right_height);
    let mut drawings = Vec::new();
    stack(&mut drawings, heading, &sides.left, TITLE, (LEFT, height - left_height));
    for (i, line) in sides.right.into_iter().enumerate() {
        let top = height - right_height + i as f32 * NUMBER.leading;
        let draw = Draw::text(flush_right(&line), top, line, NUMBER);
        drawings.push(Placed::new(number, draw));
    }
    let count_draw = Draw::PageCount { right: RIGHT, y: height - count.leading + count.baseline(), style: count };
    drawings.push(Placed::new(Owner::Ornament, count_draw));
    let rule = Draw::rule(LEFT, RIGHT, height + 7.0, Ink::Black, RULE);
    drawings.push(Placed::new(Owner::Ornament, rule));
    galley.push(Slice { height: height + 7.0 + RULE, keep: Keep::Bound, drawings, ..Slice::default() });
    galley.space(6.0);
    Ok(())
}

/// A quiet line with a notice at its right.
pub(super) fn byline(
    setter: &Typesetter,
    left: &str,
    notice: Option<&str>,
    galley: &mut Galley,
) -> Result<(), ReportError> {
    let sides = pair(setter, (left, BYLINE), (notice.unwrap_or(""), NOTICE))?;
    let rows = sides.left.len().max(sides.right.len());
    let words = Owner::Content(galley.tags.add(None, Role::Text));
    let mut drawings = Vec::new();
    stack(&mut drawings, words, &sides.left, BYLINE, (LEFT, 0.0));
    if notice.is_some() {
        let warning = Owner::Content(galley.tags.add(None, Role::Text));
        for (i, line) in sides.right.into_iter().enumerate() {
            let top = i as f32 * NOTICE.leading;
            let draw = Draw::text(flush_right(&line), top, line, NOTICE);
            drawings.push(Placed::new(warning, draw));
        }
    }
    galley.push(Slice { before: 2.0, height: rows as f32 * BYLINE.leading, drawings, ..Slice::default() });
    galley.space(4.0);
    Ok(())
}

/// A heading, bound to what follows.
pub(super) fn heading(setter: &Typesetter, level: u8, text: &str, galley: &mut Galley) -> Result<(), ReportError> {
    let level = level.clamp(1, 2);
    let (style, before, after) = if level == 1 { (H1, 13.0, 4.0) } else { (H2, 9.0, 2.0) };
    let role = Role::Heading { level, text: text.to_owned() };
    let owner = Owner::Content(galley.tags.add(None, role));
    let lines = setter.lines(text, style, MEASURE)?;
    let mut drawings = Vec::new();
    stack(&mut drawings, owner, &lines, style, (LEFT, 0.0));
    galley.push(Slice {
        before,
        height: lines.len() as f32 * style.leading,
        keep: Keep::Bound,
        drawings,
        heading: Some((level, text.to_owned())),
        ..Slice::default()
    });
    galley.space(after);
    Ok(())
}

/// A paragraph; a page never ends after its first line or before its last.
pub(super) fn paragraph(
    setter: &Typesetter,
    text: &str,
    style: ParagraphStyle,
    galley: &mut Galley,
) -> Result<(), ReportError> {
    let style = match style {
        ParagraphStyle::Body => BODY,
        ParagraphStyle::Small => SMALL,
        ParagraphStyle::Strong => STRONG,
        ParagraphStyle::Caution => CAUTION,
    };
    let lines = setter.lines(text, style, MEASURE)?;
    flow_lines(lines, style, LEFT, &[], galley);
    Ok(())
}

/// A warning with a bar at its left.
pub(super) fn caution(setter: &Typesetter, text: &str, galley: &mut Galley) -> Result<(), ReportError> {
    const INDENT: f32 = 9.0;
    let lines = setter.lines(text, CAUTION, MEASURE - INDENT)?;
    let bar = Draw::filled([LEFT, 0.0, LEFT + 2.2, CAUTION.leading], Ink::Caution);
    let bar = Placed::new(Owner::Ornament, bar);
    galley.space(3.0);
    flow_lines(lines, CAUTION, LEFT + INDENT, &[bar], galley);
    galley.space(3.0);
    Ok(())
}

/// The mark that says nothing follows, bound to what stands before it.
pub(super) fn end_mark(setter: &Typesetter, text: &str, galley: &mut Galley) -> Result<(), ReportError> {
    galley.bind_last();
    let owner = Owner::Content(galley.tags.add(None, Role::Text));
    let lines = setter.lines(text, END, MEASURE * 0.7)?;
    let height = lines.len() as f32 * END.leading;
    let widest = lines.iter().fold(0.0_f32, |w, line| w.max(line.width));
    let middle = LEFT + MEASURE / 2.0;
    let mut drawings = Vec::new();
    for (left, right) in [(LEFT, middle - widest / 2.0 - 10.0), (middle + widest / 2.0 + 10.0, RIGHT)] {
        let draw = Draw::rule(left, right, height / 2.0, Ink::Hair, HAIRLINE);
        drawings.push(Placed::new(Owner::Ornament, draw));
    }
    for (i, line) in lines.into_iter().enumerate() {
        let left = middle - line.width / 2.0;
        let draw = Draw::text(left, i as f32 * END.leading, line, END);
        drawings.push(Placed::new(owner, draw));
    }
    galley.push(Slice { before: 16.0, height, drawings, ..Slice::default() });
    Ok(())
}

/// Draws lines one beneath the other from a left top corner.
pub(super) fn stack(drawings: &mut Vec<Placed>, owner: Owner, lines: &[Line], style: Style, (left, top): (f32, f32)) {
    for (i, line) in lines.iter().enumerate() {
        let top = top + i as f32 * style.leading;
        let draw = Draw::text(left, top, line.clone(), style);
        drawings.push(Placed::new(owner, draw));
    }
}

/// One slice for each line, `beside` drawn with each.
fn flow_lines(lines: Vec<Line>, style: Style, left: f32, beside: &[Placed], galley: &mut Galley) {
    let owner = Owner::Content(galley.tags.add(None, Role::Text));
    let count = lines.len();
    for (i, line) in lines.into_iter().enumerate() {
        let first_or_last_but_one = i == 0 || i + 2 == count;
        let bound = i + 1 < count && first_or_last_but_one;
        let text = Placed::new(owner, Draw::text(left, 0.0, line, style));
        galley.push(Slice {
            before: if i == 0 { 4.0 } else { 0.0 },
            height: style.leading,
            keep: if bound { Keep::Bound } else { Keep::Free },
            drawings: beside.iter().cloned().chain([text]).collect(),
            ..Slice::default()
        });
    }
}
