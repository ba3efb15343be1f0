//! The description of a document: all that the typesetter is told.

mod plot;
mod table;

pub use plot::{Axis, Band, Dash, Key, KeySign, Limit, Line, Mark, MarkShape, Plot};
pub use table::{Align, Cell, Column, Row, Table};

/// A whole document: what is printed, and what is attached.
#[derive(Debug, Clone, PartialEq)]
pub struct Document {
    /// What stands on every page and in the file's metadata.
    pub meta: Meta,
    /// The content, from top to bottom.
    pub blocks: Vec<Block>,
    /// Files carried inside the PDF.
    pub attachments: Vec<Attachment>,
}

/// What stands on every page and in the file's metadata.
#[derive(Debug, Clone, PartialEq)]
pub struct Meta {
    /// Title of the document: metadata, and running head from the second page on.
    pub title: String,
    /// Unique number, printed at head and foot of every page.
    pub number: String,
    /// Text at the foot of every page, after the number. May be empty.
    pub footer: String,
    /// A word across every page, as "Draft". Printed pale beneath the content and small at the head.
    pub watermark: Option<String>,
    /// Time of issue; written as the file's creation and modification date, in UTC.
    pub issued: jiff::Timestamp,
    /// Language of the text as an RFC 3066 tag, as "en".
    pub language: String,
    /// Identifier of the document, the same for every version of it.
    pub document_id: String,
    /// Who answers for the content. May be empty.
    pub author: String,
    /// Program and version that described the document. May be empty.
    pub creator: String,
}

/// One file carried inside the PDF.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Attachment {
    /// File name, unique within the document.
    pub name: String,
    /// Media type, as "text/csv".
    pub mime: String,
    /// What the file is, for people. Not empty.
    pub description: String,
    /// What the file is to the printed pages.
    pub relationship: Relationship,
    /// When the file was last changed.
    pub modified: jiff::Timestamp,
    /// The bytes of the file.
    pub data: Vec<u8>,
}

/// What an attached file is to the printed pages.
///
/// # Source
/// ISO 19005-3:2012, AFRelationship.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Relationship {
    /// The pages were made from this file.
    Source,
    /// Figures on the pages were derived from this file.
    Data,
    /// The same content in another form.
    Alternative,
    /// Something further.
    Supplement,
}

/// One piece of content. Every text may hold `\n` to force a new line.
#[derive(Debug, Clone, PartialEq)]
pub enum Block {
    /// The title of the document over a strong rule. "page n of N" is printed beneath `right`.
    Title {
        /// The title.
        text: String,
        /// Text at the right edge, usually the number.
        right: Option<String>,
    },
    /// A quiet line with a notice at its right, as an address and a warning.
    Byline {
        /// Text at the left.
        left: String,
        /// Notice at the right edge, in the cautioning ink.
        notice: Option<String>,
    },
    /// A heading; it stays with what follows.
    Heading {
        /// 1 or 2; anything higher is taken as 2, 0 as 1.
        level: u8,
        /// The heading.
        text: String,
    },
    /// A paragraph.
    Paragraph {
        /// The text.
        text: String,
        /// How it looks.
        style: ParagraphStyle,
    },
    /// Groups of labels and values, side by side.
    Facts {
        /// The groups, from left to right.
        columns: Vec<FactColumn>,
    },
    /// A table; it may run over several pages, its head is repeated.
    Table(Table),
    /// One to three plots side by side.
    Plots(Vec<Plot>),
    /// Boxes to sign, two in a row.
    SignatureBoxes(Vec<SignatureBox>),
    /// A hairline across the page.
    Rule,
    /// Empty height in points; lost at the top of a page.
    Space(f32),
    /// Blocks that stay on one page as long as a page holds them.
    KeepTogether(Vec<Block>),
    /// The mark that says nothing follows.
    EndMark(String),
}

/// How a paragraph looks.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ParagraphStyle {
    /// Running text.
    Body,
    /// Notes and conditions: smaller and softer.
    Small,
    /// A statement that must be seen.
    Strong,
    /// A warning: strong, in the cautioning ink, with a bar at its left.
    Caution,
}

/// A group of labels and values.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct FactColumn {
    /// What the group is about. May be empty.
    pub heading: String,
    /// Label and value of each line.
    pub rows: Vec<(String, String)>,
}

/// A box over which a signature field will lie.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SignatureBox {
    /// Comes back in [`super::BoxPlace::id`].
    pub id: String,
    /// First line.
    pub heading: String,
    /// Further lines.
    pub lines: Vec<String>,
}
