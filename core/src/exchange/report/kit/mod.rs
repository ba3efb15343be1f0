//! A typesetter for printed records that knows nothing of what it prints.
//!
//! It takes a [`Document`] (blocks of text, tables, plots, boxes to sign, attached files) and gives
//! back one PDF/A-3b file on A4, tagged for screen readers, the same bytes for the same document.
//!
//! The way through: `blocks` turns each block into slices of drawing, `flow` puts the slices on
//! pages, `furniture` dresses the pages once their number is known, `write` hands all to the PDF
//! writer. `text` measures and breaks lines, `style` holds the type scale.

mod blocks;
mod document;
mod draw;
mod error;
mod flow;
pub mod fonts;
mod furniture;
mod style;
mod tags;
mod text;
mod write;

#[cfg(test)]
mod tests;

pub use document::{
    Align, Attachment, Axis, Band, Block, Cell, Column, Dash, Document, FactColumn, Key, KeySign, Limit, Line, Mark,
    MarkShape, Meta, ParagraphStyle, Plot, Relationship, Row, SignatureBox, Table,
};
pub use error::{PlotProblem, ReportError, TableProblem};

use flow::Galley;
use style::Sheet;
use text::Typesetter;

/// What [`render`] gives back.
#[derive(Debug, Clone, PartialEq)]
pub struct Rendered {
    /// The whole PDF file.
    pub pdf: Vec<u8>,
    /// Where the boxes to sign were printed, in the order of the document.
    pub boxes: Vec<BoxPlace>,
    /// How many pages there are, at least 1.
    pub pages: usize,
}

/// Where one box to sign was printed.
#[derive(Debug, Clone, PartialEq)]
pub struct BoxPlace {
    /// The `id` of the [`SignatureBox`].
    pub id: String,
    /// Page, counted from 0.
    pub page_index: usize,
    /// Left, bottom, right and top edge in PDF points, origin at the bottom left of the page.
    pub rect: [f32; 4],
}

/// Sets a document on A4 pages and writes it as PDF/A-3b.
///
/// The pages are laid out first and written second, so that "page n of N" is right on each.
/// The bytes depend on the document alone: no clock, no randomness.
///
/// # Shapes and units
/// Lengths are PDF points (1/72 inch). See [`Rendered`].
///
/// # Errors
/// [`ReportError::NoGlyph`] when a character is in none of the fonts, found before anything is
/// written; [`ReportError::Table`] and [`ReportError::Plot`] when a table or plot is malformed;
/// [`ReportError::TooTall`] when a piece that cannot be broken is higher than a page;
/// [`ReportError::Attachment`] when a file cannot be attached; [`ReportError::Export`] when the
/// PDF writer refuses.
///
/// # Source
/// ISO 19005-3:2012 (PDF/A-3), ISO 32000-1:2008 clause 14.8 (tagged PDF).
pub fn render(document: &Document) -> Result<Rendered, ReportError> {
    let setter = Typesetter::new()?;
    let furniture = furniture::Furniture::new(&setter, &document.meta, &document.blocks)?;
    let sheet = Sheet::new(furniture.top_first(), furniture.top_later(), furniture.bottom());
    let mut galley = Galley::new();
    blocks::set(&setter, &document.blocks, &mut galley)?;
    let (slices, tags) = galley.finish();
    let pages = flow::paginate(slices, &sheet)?;
    let boxes = flow::boxes(&pages);
    let pdf = write::write(&setter, document, &furniture, &pages, tags)?;
    Ok(Rendered { pdf, boxes, pages: pages.len() })
}
