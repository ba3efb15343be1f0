//! The look of the window: colours, sizes, typefaces and marks.
//!
//! Every colour and size comes from `assets/theme/tokens.ron`; no other module makes a colour.
//! A painter asks `Theme::of(ui)` and takes what it needs by name.

mod fonts;
mod icon;
mod lines;
mod marks;
mod style;
mod tokens;

#[cfg(test)]
mod contrast_tests;

use std::sync::LazyLock;

use eframe::egui::{self, Color32, FontFamily, FontId};

pub use fonts::{MATH, SEMIBOLD};
pub use icon::icon;
pub use lines::{FitMarker, LinePattern};
pub use marks::{MarkShape, paint_mark};
pub use style::{CAPTION, PROMPT, TITLE};
pub use tokens::{FIT_COUNT, Sizes, Spacing};

use tokens::{Colours, FILE, Hex, TokenFile, Veil};

/// The colours of one theme, and the sizes both share.
#[derive(Debug, Clone, PartialEq)]
pub struct Theme {
    /// Whether this is the theme of the night.
    pub dark: bool,
    /// Background of a room.
    pub ground: Color32,
    /// Background of masthead, strip, plots and tables.
    pub panel: Color32,
    /// Background of a place to type.
    pub field: Color32,
    /// Background under the pointer.
    pub hover: Color32,
    /// Background of what is selected.
    pub selected: Color32,
    /// Text and reading marks.
    pub ink: Color32,
    /// Secondary text: units, hints, axis numbers.
    pub soft_ink: Color32,
    /// Frames.
    pub rule: Color32,
    /// Lines inside a frame: grid lines, rows.
    pub hair: Color32,
    /// Outline of a control.
    pub edge: Color32,
    /// The zero band's edge and its cursor.
    pub brass: Color32,
    /// The zero band, laid over a plot.
    pub brass_fill: Color32,
    /// The focus ring, and selected text.
    pub focus: Color32,
    /// ■ Stop and ◆ Look.
    pub alert: Color32,
    /// ○ Note.
    pub note: Color32,
    /// Veil over the window behind a question.
    pub backdrop: Color32,
    /// Shadow of what floats.
    pub shadow: Color32,
    /// How each fit is drawn, by its place in the comparison.
    pub fits: [FitLook; FIT_COUNT],
    /// Sizes of text, points.
    pub sizes: Sizes,
    /// Distances, points.
    pub spacing: Spacing,
}

/// How one fit is drawn: colour, line and marker always go together.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FitLook {
    /// Colour of its line and marks.
    pub colour: Color32,
    /// The same hue, dark or light enough for its name as text.
    pub text: Color32,
    /// Pattern of its line.
    pub pattern: LinePattern,
    /// Marker in legends.
    pub marker: FitMarker,
}

static LIGHT: LazyLock<Theme> = LazyLock::new(|| Theme::from_tokens(&FILE.light, &FILE));
static DARK: LazyLock<Theme> = LazyLock::new(|| Theme::from_tokens(&FILE.dark, &FILE));

impl Theme {
    /// The theme the context shows at present; a `Ui` can be given as well.
    #[must_use]
    pub fn of(ctx: &egui::Context) -> &'static Self {
        match ctx.theme() {
            egui::Theme::Light => Self::light(),
            egui::Theme::Dark => Self::dark(),
        }
    }

    /// The theme of the day, also for pictures that leave the window.
    #[must_use]
    pub fn light() -> &'static Self {
        &LIGHT
    }

    /// The theme of the night.
    #[must_use]
    pub fn dark() -> &'static Self {
        &DARK
    }

    /// How the fit in column `place` (from 0) is drawn; places beyond the last start again.
    #[must_use]
    pub fn fit(&self, place: usize) -> &FitLook {
        &self.fits[place % FIT_COUNT]
    }

    /// Body text.
    #[must_use]
    pub fn body(&self) -> FontId {
        FontId::new(self.sizes.body, FontFamily::Proportional)
    }

    /// Units, hints and axis numbers.
    #[must_use]
    pub fn small(&self) -> FontId {
        FontId::new(self.sizes.small, FontFamily::Proportional)
    }

    /// Semibold text of `size` points.
    #[must_use]
    pub fn semibold(&self, size: f32) -> FontId {
        FontId::new(size, FontFamily::Name(SEMIBOLD.into()))
    }

    /// Colour and shape of a mark: findings in their colours, the others in ink.
    #[must_use]
    pub fn mark_colour(&self, shape: MarkShape) -> Color32 {
        match shape {
            MarkShape::Stop | MarkShape::Look => self.alert,
            MarkShape::Note => self.note,
            MarkShape::Rising | MarkShape::Falling | MarkShape::NoDirection | MarkShape::SetAside => self.ink,
        }
    }

    fn from_tokens(colours: &Colours, file: &TokenFile) -> Self {
        Self {
            dark: colours.dark,
            ground: opaque(colours.ground),
            panel: opaque(colours.panel),
            field: opaque(colours.field),
            hover: opaque(colours.hover),
            selected: opaque(colours.selected),
            ink: opaque(colours.ink),
            soft_ink: opaque(colours.soft_ink),
            rule: opaque(colours.rule),
            hair: opaque(colours.hair),
            edge: opaque(colours.edge),
            brass: opaque(colours.brass),
            brass_fill: veil(&colours.brass_fill),
            focus: opaque(colours.focus),
            alert: opaque(colours.alert),
            note: opaque(colours.note),
            backdrop: veil(&colours.backdrop),
            shadow: veil(&colours.shadow),
            fits: std::array::from_fn(|place| FitLook {
                colour: opaque(colours.fits[place].colour),
                text: opaque(colours.fits[place].text),
                pattern: file.fit_lines[place].pattern,
                marker: file.fit_lines[place].marker,
            }),
            sizes: file.sizes,
            spacing: file.spacing,
        }
    }
}

fn opaque(Hex([red, green, blue]): Hex) -> Color32 {
    Color32::from_rgb(red, green, blue)
}

fn veil(veil: &Veil) -> Color32 {
    opaque(veil.colour).gamma_multiply(veil.opacity)
}

/// Gives a context the typefaces and both themes; call once, before the first frame.
pub fn install(ctx: &egui::Context) {
    ctx.set_fonts(fonts::definitions());
    for theme in [Theme::light(), Theme::dark()] {
        let name = if theme.dark { egui::Theme::Dark } else { egui::Theme::Light };
        ctx.set_style_of(name, style::style(theme));
    }
}
