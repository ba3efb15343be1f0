//! Pages of a PDF as images.

use eframe::egui::ColorImage;
use hayro::{
    RenderCache, RenderSettings, hayro_interpret::InterpreterSettings, hayro_syntax::Pdf, render,
    vello_cpu::color::palette::css::WHITE,
};

/// Draws page after page, `width` pixels wide; `take` says whether to go on.
///
/// # Errors
/// When the bytes are no PDF that can be read.
pub fn draw(pdf: &[u8], width: u16, mut take: impl FnMut(ColorImage) -> bool) -> Result<(), String> {
    let pdf = Pdf::new(pdf.to_vec()).map_err(|why| format!("the PDF cannot be read: {why:?}"))?;
    let cache = RenderCache::new();
    let interpreter = InterpreterSettings::default();
    for page in pdf.pages().iter() {
        let scale = f32::from(width) / page.render_dimensions().0.max(1.0);
        let settings = RenderSettings { x_scale: scale, y_scale: scale, bg_color: WHITE, ..RenderSettings::default() };
        let drawn = render(page, &cache, &interpreter, &settings);
        let size = [usize::from(drawn.width()), usize::from(drawn.height())];
        // On a white ground every pixel is opaque, so premultiplied and plain values are the same.
        if !take(ColorImage::from_rgba_premultiplied(size, drawn.data_as_u8_slice())) {
            return Ok(());
        }
    }
    Ok(())
}
