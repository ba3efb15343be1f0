//! From blocks to pages: slices that a page takes whole, and the pager that deals them out.

mod pager;

use std::rc::Rc;

use super::BoxPlace;
use super::draw::Placed;
use super::style::PAGE_HEIGHT;
use super::tags::{NodeId, Tags};
pub(super) use pager::paginate;

/// How firmly a slice holds on to the next one.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default)]
pub(super) enum Keep {
    /// A page may end after it.
    #[default]
    Free,
    /// It should stay with the next as long as a page holds the whole chain.
    Together,
    /// It stays with the next: a heading with its text, a line with its neighbour.
    Bound,
}

/// A strip of a page, never broken. Heights run down from its top.
#[derive(Debug, Clone, Default)]
pub(super) struct Slice {
    /// Empty height above, lost at the top of a page.
    pub before: f32,
    /// Height in points.
    pub height: f32,
    /// How firmly it holds on to the next slice.
    pub keep: Keep,
    /// What is drawn.
    pub drawings: Vec<Placed>,
    /// What is drawn from its bottom down if the page ends after it.
    pub tail: Vec<Placed>,
    /// What is drawn above it if it opens a page.
    pub repeat: Option<Rc<Repeat>>,
    /// Boxes to sign: id; left, top, right, bottom.
    pub boxes: Vec<(String, [f32; 4])>,
    /// Figures: place in the structure; left, top, right, bottom.
    pub figures: Vec<(NodeId, [f32; 4])>,
    /// Level and text of the heading it is, for the outline.
    pub heading: Option<(u8, String)>,
}

/// A strip drawn again at the top of a page.
#[derive(Debug, Clone)]
pub(super) struct Repeat {
    /// Height in points.
    pub height: f32,
    /// What is drawn.
    pub drawings: Vec<Placed>,
}

/// A page with all its content in place, y from the top edge of the paper.
#[derive(Debug, Clone, Default)]
pub(super) struct Page {
    /// What is drawn.
    pub drawings: Vec<Placed>,
    /// Boxes to sign: id; left, top, right, bottom.
    pub boxes: Vec<(String, [f32; 4])>,
    /// Figures: place in the structure; left, top, right, bottom.
    pub figures: Vec<(NodeId, [f32; 4])>,
    /// Headings: level, text, y of the top.
    pub headings: Vec<(u8, String, f32)>,
}

/// Slices in the order of the document, and the structure they belong to.
pub(super) struct Galley {
    slices: Vec<Slice>,
    gap: f32,
    /// The structure.
    pub tags: Tags,
}

impl Galley {
    /// An empty galley.
    pub(super) fn new() -> Self {
        Self { slices: Vec::new(), gap: 0.0, tags: Tags::default() }
    }

    /// Adds a slice.
    pub(super) fn push(&mut self, mut slice: Slice) {
        slice.before += std::mem::take(&mut self.gap);
        self.slices.push(slice);
    }

    /// Adds empty height before the next slice.
    pub(super) fn space(&mut self, points: f32) {
        self.gap += points.max(0.0);
    }

    /// How many slices there are.
    pub(super) fn len(&self) -> usize {
        self.slices.len()
    }

    /// Holds the slices from number `first` on together, each with the next.
    pub(super) fn hold(&mut self, first: usize, keep: Keep) {
        let last = self.slices.len().saturating_sub(1);
        for slice in self.slices.iter_mut().take(last).skip(first) {
            slice.keep = slice.keep.max(keep);
        }
    }

    /// Holds the last slice to whatever comes next.
    pub(super) fn bind_last(&mut self) {
        self.amend_last(|last| last.keep = Keep::Bound);
    }

    /// Changes the last slice.
    pub(super) fn amend_last(&mut self, change: impl FnOnce(&mut Slice)) {
        if let Some(last) = self.slices.last_mut() {
            change(last);
        }
    }

    /// The slices and the structure.
    pub(super) fn finish(self) -> (Vec<Slice>, Tags) {
        (self.slices, self.tags)
    }
}

/// Where the boxes to sign lie, in PDF coordinates.
pub(super) fn boxes(pages: &[Page]) -> Vec<BoxPlace> {
    let flipped = |[left, top, right, bottom]: [f32; 4]| [left, PAGE_HEIGHT - bottom, right, PAGE_HEIGHT - top];
    pages
        .iter()
        .enumerate()
        .flat_map(|(page_index, page)| {
            page.boxes.iter().map(move |(id, rect)| BoxPlace { id: id.clone(), page_index, rect: flipped(*rect) })
        })
        .collect()
}
