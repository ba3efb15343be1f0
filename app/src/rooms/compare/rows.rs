//! Rows one over the other: their shares of the height, and which are folded.

use super::state::State;
use eframe::egui::Rangef;

/// Height of a caption, of the numbers under a plot, of a folded row, points.
const CAPTION: f32 = 22.0;
const AXIS: f32 = 22.0;
const FOLDED: f32 = 26.0;

/// A row of the grid.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Row {
    /// Readings, function, bands.
    Curve,
    /// Residuals.
    Residuals,
    /// Where the curve leaves zero.
    NearZero,
    /// Coefficients and figures.
    Numbers,
}

impl Row {
    /// All rows from top to bottom.
    pub const ALL: [Self; 4] = [Self::Curve, Self::Residuals, Self::NearZero, Self::Numbers];

    /// Name at the left.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Curve => "Curve",
            Self::Residuals => "Residuals",
            Self::NearZero => "Near zero",
            Self::Numbers => "Numbers",
        }
    }

    /// Share of the height.
    fn share(self) -> f32 {
        match self {
            Self::Curve => 0.20,
            Self::Residuals => 0.38,
            Self::NearZero => 0.24,
            Self::Numbers => 0.18,
        }
    }
}

/// A row where it stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct RowPlace {
    /// Which.
    pub(super) row: Row,
    /// Folded to its captions.
    pub(super) folded: bool,
    /// Heights of its captions (all of it, when folded).
    pub(super) caption: Rangef,
    /// Heights of its plots.
    pub(super) plot: Rangef,
}

/// Which row is open when only one can be.
fn open_row(state: &State, alone: bool) -> Option<Row> {
    if alone { Some(state.open.unwrap_or(Row::Residuals)) } else { state.open }
}

/// Rows from top to bottom inside a range of heights; `tall` tells which need captions of two lines.
pub(super) fn rows(state: &State, alone: bool, space: Rangef, tall: impl Fn(Row) -> bool) -> Vec<RowPlace> {
    let open = open_row(state, alone);
    // A near-zero row without plots, or folded by itself, gives its height to the residuals.
    let idle = state.near().is_none_or(|f| f.folded && !state.near_zero_asked);
    let folded = |row: Row| match open {
        Some(one) => row != one,
        None => row == Row::NearZero && idle,
    };
    let share = |row: Row| match row {
        Row::Residuals if idle && open.is_none() => row.share() + Row::NearZero.share(),
        row => row.share(),
    };
    let fixed = Row::ALL.iter().filter(|r| folded(**r)).count() as f32 * FOLDED;
    let total: f32 = Row::ALL.iter().filter(|r| !folded(**r)).map(|r| share(*r)).sum();
    let free = (space.span() - fixed).max(0.0);
    let mut top = space.min;
    let mut all = Vec::with_capacity(Row::ALL.len());
    for row in Row::ALL {
        let folded = folded(row);
        let height = if folded { FOLDED } else { free * share(row) / total.max(0.01) };
        let (from, to) = (top.round(), (top + height).round());
        top += height;
        let over = if folded { to - from } else { over(row, tall(row)) };
        let caption = Rangef::new(from, (from + over).min(to));
        let under = if row == Row::Numbers { 4.0 } else { AXIS };
        let plot = Rangef::new(caption.max, (to - under).max(caption.max + 1.0));
        all.push(RowPlace { row, folded, caption, plot });
    }
    all
}

/// Height of the captions over the plots of a row.
fn over(row: Row, tall: bool) -> f32 {
    match row {
        Row::Curve => 0.0,
        Row::Residuals | Row::NearZero if tall => 2.0 * CAPTION - 6.0,
        Row::Residuals | Row::NearZero => CAPTION,
        Row::Numbers => 6.0,
    }
}
