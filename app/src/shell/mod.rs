//! What stands around every room: masthead, column of rooms, findings strip, dialogs.

pub mod dialogs;
mod findings;
mod glyph;
pub mod head;
mod masthead;
mod rooms_column;
mod row;
mod sheet;
pub mod status;
pub mod strip;

pub use findings::{StripState, findings};
pub use masthead::masthead;
pub use rooms_column::rooms_column;
pub use row::row;
pub use sheet::sheet;

use crate::{command::Does, rooms::Wish, widgets};
use assize_core::project::evaluate;
use eframe::egui::{Context, vec2};

/// What a person asked of the shell in one frame.
#[derive(Debug, Default)]
pub struct Asked {
    /// Commands.
    pub does: Vec<Does>,
    /// Wishes, as rooms have them.
    pub wishes: Vec<Wish>,
    /// Messages closed, by their text.
    pub closed: Vec<String>,
}

/// How much room the window has.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Extent {
    /// Everything fits.
    Full,
    /// Under 700 points of height or 1000 of width: one line of masthead, less air.
    Small,
}

impl Extent {
    /// The extent of the window.
    #[must_use]
    pub fn of(ctx: &Context) -> Self {
        let size = ctx.content_rect().size();
        if size.y < 700.0 || size.x < 1000.0 { Self::Small } else { Self::Full }
    }

    /// Space inside panels, left-right and top-bottom, in points.
    #[must_use]
    pub fn air(self) -> eframe::egui::Vec2 {
        match self {
            Self::Full => vec2(20.0, 10.0),
            Self::Small => vec2(12.0, 4.0),
        }
    }
}

/// A severity as the widgets know it.
#[must_use]
pub fn shape_of(severity: evaluate::Severity) -> widgets::Severity {
    match severity {
        evaluate::Severity::Stop => widgets::Severity::Stop,
        evaluate::Severity::Look => widgets::Severity::Look,
        evaluate::Severity::Note => widgets::Severity::Note,
    }
}
