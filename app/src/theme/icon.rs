//! The picture of the program in the task bar, drawn here so that it follows the tokens.

use eframe::egui::IconData;

use super::Theme;

/// Side of the icon in pixels.
const SIDE: u16 = 64;

/// A bent calibration line leaving the brass zero band, on slate.
#[must_use]
pub fn icon() -> IconData {
    let theme = Theme::dark();
    let pixels = usize::from(SIDE) * usize::from(SIDE);
    let mut rgba = Vec::with_capacity(4 * pixels);
    for y in 0..SIDE {
        for x in 0..SIDE {
            let [red, green, blue] = pixel(theme, f32::from(x), f32::from(y));
            rgba.extend([red, green, blue, u8::MAX]);
        }
    }
    IconData { rgba, width: u32::from(SIDE), height: u32::from(SIDE) }
}

/// Colour at a pixel; the origin is the upper left corner.
fn pixel(theme: &Theme, x: f32, y: f32) -> [u8; 3] {
    let curve = 52.0 - 0.42 * x - 0.0045 * x * x;
    let colour = if (y - curve).abs() < 2.6 {
        theme.ink
    } else if (44.0..48.0).contains(&y) {
        theme.brass
    } else if y >= 48.0 {
        theme.hover
    } else {
        theme.panel
    };
    [colour.r(), colour.g(), colour.b()]
}
