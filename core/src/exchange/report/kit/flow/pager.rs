//! Deals slices out to pages.

use super::super::draw::Placed;
use super::super::error::ReportError;
use super::super::style::Sheet;
use super::{Keep, Page, Slice};

/// Puts slices on pages, at least one page.
///
/// A chain of slices that hold on to each other goes to the next page whole if it does not fit.
/// A chain higher than a page is taken apart, first where it is only held loosely, then anywhere.
///
/// # Errors
/// [`ReportError::TooTall`] for a single slice higher than a page.
pub(in super::super) fn paginate(slices: Vec<Slice>, sheet: &Sheet) -> Result<Vec<Page>, ReportError> {
    let room = sheet.room(1);
    for slice in &slices {
        let height = opened(slice);
        if height > room {
            return Err(ReportError::TooTall { height, room });
        }
    }
    let mut pager =
        Pager { sheet, done: Vec::new(), page: Page::default(), y: sheet.top(0), fresh: true, tail: Vec::new() };
    pager.chains(&slices, Keep::Together);
    pager.done.push(pager.page);
    Ok(pager.done)
}

struct Pager<'a> {
    sheet: &'a Sheet,
    done: Vec<Page>,
    page: Page,
    y: f32,
    fresh: bool,
    tail: Vec<Placed>,
}

/// Rounding slack in points: what exactly fits, fits.
const SLACK: f32 = 0.01;

impl Pager<'_> {
    /// Places slices chain by chain; a chain is what holds together at least as firmly as `keep`.
    fn chains(&mut self, slices: &[Slice], keep: Keep) {
        for chain in slices.chunk_by(|slice, _| slice.keep >= keep) {
            if !self.fits(chain) {
                if chain_height(chain) > self.sheet.room(self.done.len() + 1) + SLACK {
                    self.take_apart(chain, keep);
                    continue;
                }
                self.turn();
            }
            for slice in chain {
                self.place(slice);
            }
        }
    }

    fn take_apart(&mut self, chain: &[Slice], keep: Keep) {
        if keep == Keep::Together {
            return self.chains(chain, Keep::Bound);
        }
        for slice in chain {
            if !self.fits(std::slice::from_ref(slice)) {
                self.turn();
            }
            self.place(slice);
        }
    }

    fn fits(&self, chain: &[Slice]) -> bool {
        let height =
            if self.fresh { chain_height(chain) } else { chain.iter().map(|slice| slice.before + slice.height).sum() };
        self.y + height <= self.sheet.bottom() + SLACK
    }

    fn turn(&mut self) {
        if self.fresh {
            return;
        }
        self.page.drawings.append(&mut self.tail);
        self.done.push(std::mem::take(&mut self.page));
        self.y = self.sheet.top(self.done.len());
        self.fresh = true;
    }

    fn place(&mut self, slice: &Slice) {
        if self.fresh {
            if let Some(repeat) = &slice.repeat {
                let y = self.y;
                self.page.drawings.extend(moved(&repeat.drawings, y));
                self.y += repeat.height;
            }
        } else {
            self.y += slice.before;
        }
        self.fresh = false;
        let y = self.y;
        let down = |[left, top, right, bottom]: [f32; 4]| [left, top + y, right, bottom + y];
        let page = &mut self.page;
        page.drawings.extend(moved(&slice.drawings, y));
        page.boxes.extend(slice.boxes.iter().map(|(id, r)| (id.clone(), down(*r))));
        page.figures.extend(slice.figures.iter().map(|(id, r)| (*id, down(*r))));
        page.headings.extend(slice.heading.iter().map(|(level, text)| (*level, text.clone(), y)));
        self.y += slice.height;
        self.tail = moved(&slice.tail, self.y).collect();
    }
}

fn moved(drawings: &[Placed], dy: f32) -> impl Iterator<Item = Placed> + '_ {
    drawings.iter().map(move |p| Placed::new(p.owner, p.draw.clone().moved_down(dy)))
}

/// Height of a slice that opens a page.
fn opened(slice: &Slice) -> f32 {
    slice.height + slice.repeat.as_ref().map_or(0.0, |repeat| repeat.height)
}

/// Height of a chain that opens a page.
fn chain_height(chain: &[Slice]) -> f32 {
    let Some((first, rest)) = chain.split_first() else {
        return 0.0;
    };
    opened(first) + rest.iter().map(|s| s.before + s.height).sum::<f32>()
}
