//! Groups of labels and values, side by side.

use super::super::document::FactColumn;
use super::super::draw::{Draw, Owner, Placed};
use super::super::error::ReportError;
use super::super::flow::{Galley, Keep, Slice};
use super::super::style::{FACT_HEADING, FACT_LABEL, FACT_VALUE, GUTTER, LEFT, MEASURE, Style};
use super::super::tags::Role;
use super::super::text::{Line, Typesetter};

/// Least width of the labels, so that groups beneath each other line up.
const LABEL: f32 = 74.0;
/// Gap between label and value.
const GAP: f32 = 8.0;
/// Largest part of a group that labels may take.
const SHARE: f32 = 0.42;

/// A line of text with its place.
struct Piece {
    left: f32,
    line: Line,
    style: Style,
    owner: Owner,
}

/// A group, cut into lines: the heading's, then those of labels and values.
#[derive(Default)]
struct Group {
    heading: Vec<Piece>,
    rows: Vec<Vec<Piece>>,
}

/// Groups of labels and values. Each group runs down on its own; all share the height of a line,
/// so that the whole can be broken between lines if a page is too short for it.
pub(super) fn facts(setter: &Typesetter, columns: &[FactColumn], galley: &mut Galley) -> Result<(), ReportError> {
    let count = columns.len().max(1) as f32;
    let width = (MEASURE - GUTTER * (count - 1.0)) / count;
    let mut groups = Vec::with_capacity(columns.len());
    for (i, facts) in columns.iter().enumerate() {
        let left = LEFT + i as f32 * (width + GUTTER);
        groups.push(group(setter, facts, (left, width), galley)?);
    }
    let first = galley.len();
    galley.space(6.0);
    let headed = groups.iter().map(|g| g.heading.len()).max().unwrap_or(0);
    if headed > 0 {
        let mut slice = Slice { height: headed as f32 * FACT_HEADING.leading + 1.5, ..Slice::default() };
        for group in &mut groups {
            for (i, piece) in group.heading.drain(..).enumerate() {
                let top = i as f32 * FACT_HEADING.leading;
                slice.drawings.push(piece.at(top));
            }
        }
        galley.push(slice);
        galley.bind_last();
    }
    let rows = groups.iter().map(|g| g.rows.len()).max().unwrap_or(0);
    for row in 0..rows {
        let pieces = groups.iter_mut().filter_map(|g| g.rows.get_mut(row));
        galley.push(Slice {
            height: FACT_VALUE.leading,
            drawings: pieces.flat_map(|p| p.drain(..)).map(|p| p.at(0.0)).collect(),
            ..Slice::default()
        });
    }
    galley.hold(first, Keep::Together);
    Ok(())
}

fn group(
    setter: &Typesetter,
    facts: &FactColumn,
    (left, width): (f32, f32),
    galley: &mut Galley,
) -> Result<Group, ReportError> {
    let mut widest = 0.0_f32;
    for (label, _) in &facts.rows {
        widest = widest.max(setter.needs(label, FACT_LABEL)?.natural);
    }
    let indent = (widest + GAP).max(LABEL).min(width * SHARE);
    let tags = &mut galley.tags;
    let place = tags.add(None, Role::Group);
    let mut group = Group::default();
    if !facts.heading.is_empty() {
        let owner = Owner::Content(tags.add(Some(place), Role::Text));
        let lines = setter.lines(&facts.heading, FACT_HEADING, width)?;
        group.heading = pieces(lines, left, FACT_HEADING, owner);
    }
    if facts.rows.is_empty() {
        return Ok(group);
    }
    let list = tags.add(Some(place), Role::List);
    for (label, value) in &facts.rows {
        let item = tags.add(Some(list), Role::Item);
        let label_owner = Owner::Content(tags.add(Some(item), Role::Label));
        let value_owner = Owner::Content(tags.add(Some(item), Role::Value));
        let labels = setter.lines(label, FACT_LABEL, indent - GAP)?;
        let values = setter.lines(value, FACT_VALUE, width - indent)?;
        let first = group.rows.len();
        let count = labels.len().max(values.len());
        group.rows.resize_with(first + count, Vec::new);
        let labels = pieces(labels, left, FACT_LABEL, label_owner);
        let values = pieces(values, left + indent, FACT_VALUE, value_owner);
        for side in [labels, values] {
            for (row, piece) in group.rows[first..].iter_mut().zip(side) {
                row.push(piece);
            }
        }
    }
    Ok(group)
}

fn pieces(lines: Vec<Line>, left: f32, style: Style, owner: Owner) -> Vec<Piece> {
    lines.into_iter().map(|line| Piece { left, line, style, owner }).collect()
}

impl Piece {
    fn at(self, top: f32) -> Placed {
        Placed::new(self.owner, Draw::text(self.left, top, self.line, self.style))
    }
}
