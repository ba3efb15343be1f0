//! What stands on every page besides its content: running head, footer, the word across the page.

use super::blocks::{Pair, pair};
use super::document::{Block, Meta};
use super::draw::Draw;
use super::error::ReportError;
use super::style::{FOOT, HAIRLINE, Ink, LEFT, NOTICE, PAGE_HEIGHT, PAGE_WIDTH, RIGHT, Style, TITLE, Weight};
use super::text::{Line, Typesetter};

/// Top of the running head, and of the content of a page that begins with a title.
const TOP: f32 = 40.0;
/// Top of the running head.
const HEAD_TOP: f32 = 30.0;
/// Bottom of the footer.
const FOOT_BOTTOM: f32 = PAGE_HEIGHT - 28.0;
/// Between running head or footer and their rules.
const RULE_GAP: f32 = 5.0;
/// Between the rules and the content.
const CONTENT_GAP: f32 = 12.0;
/// Style of the number in the running head.
const HEAD_NUMBER: Style = Style { weight: Weight::SemiBold, ink: Ink::Black, ..FOOT };

/// The word across the page, in large letters.
pub(super) struct Across {
    /// The word.
    pub line: Line,
    /// Left end of its baseline.
    pub start: [f32; 2],
    /// Direction of its baseline: cosine and sine, the sine upwards.
    pub turn: [f32; 2],
}

/// What stands on every page besides its content.
pub(super) struct Furniture {
    head: Pair,
    foot: Pair,
    titled: bool,
    word: Option<Line>,
    /// The word across the page.
    pub across: Option<Across>,
}

impl Furniture {
    /// Measures the furniture of a document.
    pub(super) fn new(setter: &Typesetter, meta: &Meta, blocks: &[Block]) -> Result<Self, ReportError> {
        let foot =
            if meta.footer.is_empty() { meta.number.clone() } else { format!("{} · {}", meta.number, meta.footer) };
        let (word, across) = match meta.watermark.as_deref() {
            None | Some("") => (None, None),
            Some(word) => (Some(setter.line(word, NOTICE)?), Some(across(setter, word)?)),
        };
        Ok(Self {
            head: pair(setter, (&meta.title, FOOT), (&meta.number, HEAD_NUMBER))?,
            foot: pair(setter, (&foot, FOOT), ("page 8888 of 8888", FOOT))?,
            titled: matches!(blocks.first(), Some(Block::Title { .. })),
            word,
            across,
        })
    }

    /// Where the content of the first page starts.
    pub(super) fn top_first(&self) -> f32 {
        if self.titled { TOP } else { self.top_later() }
    }

    /// Where the content of all other pages starts.
    pub(super) fn top_later(&self) -> f32 {
        self.head_rule() + CONTENT_GAP
    }

    /// Where the content of every page ends.
    pub(super) fn bottom(&self) -> f32 {
        self.foot_rule() - CONTENT_GAP
    }

    fn head_rule(&self) -> f32 {
        let rows = self.head.left.len().max(self.head.right.len());
        HEAD_TOP + rows as f32 * FOOT.leading + RULE_GAP
    }

    fn foot_rule(&self) -> f32 {
        FOOT_BOTTOM - self.foot.left.len() as f32 * FOOT.leading - RULE_GAP
    }

    /// What stands at the head of a page, counted from 0.
    pub(super) fn head(&self, page: usize) -> Vec<Draw> {
        let mut draws = Vec::new();
        if let Some(word) = &self.word {
            let left = (PAGE_WIDTH - word.width) / 2.0;
            draws.push(Draw::text(left, 16.0, word.clone(), NOTICE));
        }
        if page == 0 && self.titled {
            return draws;
        }
        for (i, line) in self.head.left.iter().enumerate() {
            let top = HEAD_TOP + i as f32 * FOOT.leading;
            draws.push(Draw::text(LEFT, top, line.clone(), FOOT));
        }
        for (i, line) in self.head.right.iter().enumerate() {
            let top = HEAD_TOP + i as f32 * FOOT.leading;
            let left = RIGHT - line.width;
            draws.push(Draw::text(left, top, line.clone(), HEAD_NUMBER));
        }
        draws.push(hairline(self.head_rule()));
        draws
    }

    /// What stands at the foot of every page.
    pub(super) fn foot(&self) -> Vec<Draw> {
        let top = self.foot_rule() + RULE_GAP;
        let mut draws = vec![hairline(self.foot_rule())];
        for (i, line) in self.foot.left.iter().enumerate() {
            let top = top + i as f32 * FOOT.leading;
            draws.push(Draw::text(LEFT, top, line.clone(), FOOT));
        }
        draws.push(Draw::PageCount { right: RIGHT, y: top + FOOT.baseline(), style: FOOT });
        draws
    }
}

fn hairline(y: f32) -> Draw {
    Draw::rule(LEFT, RIGHT, y, Ink::Hair, HAIRLINE)
}

/// Sets a word along the diagonal of the page, as large as two thirds of it allow.
fn across(setter: &Typesetter, word: &str) -> Result<Across, ReportError> {
    const LARGEST: f32 = 170.0;
    let diagonal = libm::hypotf(PAGE_WIDTH, PAGE_HEIGHT);
    let unit = setter.needs(word, Style { size: 1.0, ..TITLE })?.natural;
    let size = (diagonal * 0.66 / unit.max(1e-3)).min(LARGEST);
    let line = setter.line(word, Style { size, ..TITLE })?;
    let turn = [PAGE_WIDTH / diagonal, PAGE_HEIGHT / diagonal];
    let (along, up) = (-line.width / 2.0, -size * 0.3636);
    let start = [PAGE_WIDTH / 2.0 + along * turn[0] - up * turn[1], PAGE_HEIGHT / 2.0 - along * turn[1] - up * turn[0]];
    Ok(Across { line, start, turn })
}
