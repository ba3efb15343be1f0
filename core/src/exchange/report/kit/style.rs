//! The look: page, inks and type scale. All lengths are PDF points.
//!
//! Ink is black on white and everything else a grey, so that nothing is lost on a printer without
//! colour. One reddish brown is kept for warnings, which are also set apart by weight.

/// Width of A4 (210 mm, ISO 216:2007).
pub(super) const PAGE_WIDTH: f32 = 595.276;
/// Height of A4 (297 mm, ISO 216:2007).
pub(super) const PAGE_HEIGHT: f32 = 841.89;
/// Left edge of the content.
pub(super) const LEFT: f32 = 48.0;
/// Right edge of the content.
pub(super) const RIGHT: f32 = PAGE_WIDTH - LEFT;
/// Width of the content.
pub(super) const MEASURE: f32 = RIGHT - LEFT;
/// Gap between things that stand side by side.
pub(super) const GUTTER: f32 = 20.0;

/// A colour on paper.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Ink {
    /// Text, curves and strong rules.
    Black,
    /// Labels and notes; contrast on white about 7:1.
    Soft,
    /// Hairlines and grids.
    Hair,
    /// Ground under shaded rows.
    Shade,
    /// The word across the page.
    Pale,
    /// Warnings.
    Caution,
    /// Paper.
    White,
    /// A grey from 0 (black) to 1 (white).
    Grey(f32),
}

impl Ink {
    /// Red, green and blue, 0 to 255.
    pub(super) fn rgb(self) -> [u8; 3] {
        match self {
            Self::Black => [0x12, 0x12, 0x12],
            Self::Soft => [0x57, 0x57, 0x57],
            Self::Hair => [0xCB, 0xCB, 0xCB],
            Self::Shade => [0xF4, 0xF4, 0xF4],
            Self::Pale => [0xEF, 0xEF, 0xEF],
            Self::Caution => [0x8E, 0x35, 0x1E],
            Self::White => [0xFF, 0xFF, 0xFF],
            Self::Grey(grey) => [(grey.clamp(0.0, 1.0) * 255.0).round() as u8; 3],
        }
    }
}

/// Weight of the letters.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Weight {
    /// Running text.
    Regular,
    /// Titles and headings.
    SemiBold,
}

/// How a piece of text is set.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Style {
    /// Weight of the letters.
    pub weight: Weight,
    /// Size of the letters.
    pub size: f32,
    /// Height of a line.
    pub leading: f32,
    /// Colour.
    pub ink: Ink,
    /// Whether all digits are equally wide.
    pub tabular: bool,
}

impl Style {
    const fn new(weight: Weight, size: f32, leading: f32, ink: Ink) -> Self {
        Self { weight, size, leading, ink, tabular: false }
    }

    const fn tabular(self) -> Self {
        Self { tabular: true, ..self }
    }

    /// The same in another ink.
    pub(super) fn in_ink(self, ink: Ink) -> Self {
        Self { ink, ..self }
    }

    /// The same, `factor` times as large.
    pub(super) fn scaled(self, factor: f32) -> Self {
        Self { size: self.size * factor, leading: self.leading * factor, ..self }
    }

    /// From the top of a line to its baseline: capitals stand in the middle of the line
    /// (capital height of Inter: 0.727 of the size).
    pub(super) fn baseline(self) -> f32 {
        self.leading * 0.5 + self.size * 0.3636
    }
}

use Weight::{Regular, SemiBold};

pub(super) const TITLE: Style = Style::new(SemiBold, 18.0, 22.0, Ink::Black);
pub(super) const NUMBER: Style = Style::new(SemiBold, 9.6, 12.4, Ink::Black);
pub(super) const H1: Style = Style::new(SemiBold, 11.6, 15.0, Ink::Black);
pub(super) const H2: Style = Style::new(SemiBold, 8.8, 12.0, Ink::Black);
pub(super) const BODY: Style = Style::new(Regular, 8.6, 12.6, Ink::Black);
pub(super) const SMALL: Style = Style::new(Regular, 7.2, 10.2, Ink::Soft);
pub(super) const STRONG: Style = Style::new(SemiBold, 8.6, 12.6, Ink::Black);
pub(super) const CAUTION: Style = Style::new(SemiBold, 8.4, 12.2, Ink::Caution);
pub(super) const BYLINE: Style = Style::new(Regular, 8.0, 11.2, Ink::Soft);
pub(super) const NOTICE: Style = Style::new(SemiBold, 8.0, 11.2, Ink::Caution);
pub(super) const FACT_HEADING: Style = Style::new(SemiBold, 8.6, 12.6, Ink::Black);
pub(super) const FACT_LABEL: Style = Style::new(Regular, 7.8, 12.2, Ink::Soft);
pub(super) const FACT_VALUE: Style = Style::new(Regular, 8.2, 12.2, Ink::Black).tabular();
pub(super) const CAPTION: Style = Style::new(SemiBold, 8.6, 12.0, Ink::Black);
pub(super) const CELL: Style = Style::new(Regular, 8.0, 10.8, Ink::Black).tabular();
pub(super) const CELL_HEAD: Style = Style::new(Regular, 7.2, 9.4, Ink::Soft);
pub(super) const NOTE: Style = Style::new(Regular, 7.0, 9.8, Ink::Soft);
pub(super) const PLOT_TITLE: Style = Style::new(SemiBold, 8.2, 11.4, Ink::Black);
pub(super) const PLOT_LABEL: Style = Style::new(Regular, 6.8, 9.2, Ink::Soft).tabular();
pub(super) const SIGN_HEADING: Style = Style::new(SemiBold, 8.8, 12.4, Ink::Black);
pub(super) const SIGN_LINE: Style = Style::new(Regular, 7.6, 10.6, Ink::Black).tabular();
pub(super) const END: Style = Style::new(SemiBold, 7.6, 10.6, Ink::Soft);
pub(super) const FOOT: Style = Style::new(Regular, 7.0, 9.6, Ink::Soft).tabular();

/// Width of a strong rule.
pub(super) const RULE: f32 = 0.8;
/// Width of a hairline.
pub(super) const HAIRLINE: f32 = 0.5;

/// The part of each page that content may use: y runs down from the top edge of the page.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Sheet {
    top_first: f32,
    top_later: f32,
    bottom: f32,
}

impl Sheet {
    /// A sheet whose content starts at `top_first` on the first and `top_later` on every other
    /// page, and ends at `bottom`.
    pub(super) fn new(top_first: f32, top_later: f32, bottom: f32) -> Self {
        Self { top_first, top_later, bottom }
    }

    /// Where the content of a page, counted from 0, starts.
    pub(super) fn top(&self, page: usize) -> f32 {
        if page == 0 { self.top_first } else { self.top_later }
    }

    /// Where the content of a page ends.
    pub(super) fn bottom(&self) -> f32 {
        self.bottom
    }

    /// Height a page offers.
    pub(super) fn room(&self, page: usize) -> f32 {
        self.bottom - self.top(page)
    }
}
