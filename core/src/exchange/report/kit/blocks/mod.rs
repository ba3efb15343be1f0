//! One file for each kind of block: from its description to slices.

mod boxes;
mod facts;
mod pair;
mod plots;
mod prose;
mod strips;
mod table;

use super::document::{Block, ParagraphStyle};
use super::draw::{Draw, Owner, Placed};
use super::error::ReportError;
use super::flow::{Galley, Keep, Slice};
use super::style::{HAIRLINE, Ink, LEFT, RIGHT};
use super::text::Typesetter;
pub(super) use pair::{Pair, pair};

/// Sets blocks one after the other.
pub(super) fn set(setter: &Typesetter, blocks: &[Block], galley: &mut Galley) -> Result<(), ReportError> {
    blocks.iter().try_for_each(|block| set_one(setter, block, galley))
}

fn set_one(setter: &Typesetter, block: &Block, galley: &mut Galley) -> Result<(), ReportError> {
    match block {
        Block::Title { text, right } => prose::title(setter, text, right.as_deref().unwrap_or(""), galley),
        Block::Byline { left, notice } => prose::byline(setter, left, notice.as_deref(), galley),
        Block::Heading { level, text } => prose::heading(setter, *level, text, galley),
        Block::Paragraph { text, style } => match style {
            ParagraphStyle::Caution => prose::caution(setter, text, galley),
            plain => prose::paragraph(setter, text, *plain, galley),
        },
        Block::Facts { columns } => facts::facts(setter, columns, galley),
        Block::Table(table) => table::table(setter, table, galley),
        Block::Plots(plots) => plots::plots(setter, plots, galley),
        Block::SignatureBoxes(boxes) => boxes::boxes(setter, boxes, galley),
        Block::EndMark(text) => prose::end_mark(setter, text, galley),
        Block::Rule => {
            galley.push(rule());
            Ok(())
        }
        Block::Space(points) => {
            galley.space(*points);
            Ok(())
        }
        Block::KeepTogether(inner) => {
            let first = galley.len();
            set(setter, inner, galley)?;
            galley.hold(first, Keep::Together);
            Ok(())
        }
    }
}

fn rule() -> Slice {
    let draw = Draw::rule(LEFT, RIGHT, 0.0, Ink::Hair, HAIRLINE);
    Slice { before: 7.0, height: HAIRLINE, drawings: vec![Placed::new(Owner::Ornament, draw)], ..Slice::default() }
}
