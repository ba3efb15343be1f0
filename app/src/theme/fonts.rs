//! Typefaces: which font draws which text, and in which order they help each other out.

use std::sync::Arc;

use eframe::egui::{FontData, FontDefinitions, FontFamily};

/// Name of the semibold family: `FontFamily::Name(SEMIBOLD.into())`.
pub const SEMIBOLD: &str = "semibold";

/// Name of the family for symbols with a hat or a bar over a tall letter (β̂, θ̂).
///
/// A combining mark is only placed right when one font holds letter and mark together.
pub const MATH: &str = "math";

/// Inter with tabular digits; see `assets/theme/fonts/README.md`.
const REGULAR: &[u8] =
    include_bytes!(concat!(env!("CARGO_MANIFEST_DIR"), "/../assets/theme/fonts/AssizeSans-Regular.otf"));
const SEMIBOLD_DATA: &[u8] =
    include_bytes!(concat!(env!("CARGO_MANIFEST_DIR"), "/../assets/theme/fonts/AssizeSans-SemiBold.otf"));
/// For the mathematical signs the text face lacks.
const DEJAVU: &[u8] = include_bytes!(concat!(env!("CARGO_MANIFEST_DIR"), "/../assets/fonts/DejaVuSans.ttf"));

/// All fonts and families of the window.
pub(super) fn definitions() -> FontDefinitions {
    // egui's own Ubuntu-Light, Hack and icons stay as helpers.
    let mut fonts = FontDefinitions::default();
    for (name, data) in [("regular", REGULAR), ("semibold", SEMIBOLD_DATA), ("dejavu", DEJAVU)] {
        fonts.font_data.insert(name.to_owned(), Arc::new(FontData::from_static(data)));
    }
    let families: [(FontFamily, &[&str]); 4] = [
        (FontFamily::Proportional, &["regular", "Ubuntu-Light", "egui-icons", "dejavu"]),
        (FontFamily::Monospace, &["Hack", "dejavu", "egui-icons"]),
        (FontFamily::Name(SEMIBOLD.into()), &["semibold", "regular", "Ubuntu-Light", "egui-icons", "dejavu"]),
        (FontFamily::Name(MATH.into()), &["dejavu", "regular", "egui-icons"]),
    ];
    for (family, chain) in families {
        let chain = chain.iter().map(|name| (*name).to_owned()).collect();
        fonts.families.insert(family, chain);
    }
    fonts
}

#[cfg(test)]
mod tests {
    use eframe::egui::{self, FontId};

    use super::*;

    /// Runs `check` with the window's fonts loaded.
    fn with_fonts(check: impl Fn(&egui::Context)) {
        let ctx = egui::Context::default();
        super::super::install(&ctx);
        // The fonts become available with the first pass, and are looked at in the second.
        for _ in 0..2 {
            ctx.run_ui(egui::RawInput::default(), |_| ()).drop_without_applying_deltas();
        }
        check(&ctx);
    }

    #[test]
    fn all_digits_have_one_width() {
        with_fonts(|ctx| {
            for family in [FontFamily::Proportional, FontFamily::Name(SEMIBOLD.into())] {
                let font = FontId::new(13.0, family);
                let width = |digit| ctx.fonts_mut(|fonts| fonts.glyph_width(&font, digit));
                let zero = width('0');
                assert!(zero > 0.0);
                for digit in '1'..='9' {
                    assert!((width(digit) - zero).abs() < 1e-3, "{digit} in {font:?}");
                }
            }
        });
    }

    #[test]
    fn the_signs_of_metrology_can_be_drawn() {
        // Greek, signs, superscripts and subscripts that units and formulas need.
        let needed = "αβγδεθλμνπρσφχωΔΣΩµ°±×·−≤≥≈≠√∑∞∂‰→←⇒≡∝∇∈⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺₀₁₂₉ᵢⱼₖₓ…“”’–";
        with_fonts(|ctx| {
            for family in [FontFamily::Proportional, FontFamily::Name(SEMIBOLD.into())] {
                let font = FontId::new(13.0, family);
                for sign in needed.chars() {
                    assert!(ctx.fonts_mut(|fonts| fonts.has_glyph(&font, sign)), "{sign} in {font:?}");
                }
            }
        });
    }
}
