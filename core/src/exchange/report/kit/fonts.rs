//! The fonts that report and window share, as bytes.
//!
//! Inter is under the SIL Open Font License 1.1, DejaVu Sans under the Bitstream Vera licence;
//! both texts lie beside the files in `assets/fonts/`.

/// Inter Regular, OpenType (CFF): running text and figures.
pub const INTER_REGULAR: &[u8] = include_bytes!("../../../../../assets/fonts/Inter-Regular.otf");
/// Inter SemiBold, OpenType (CFF): titles, headings, whatever must stand out.
pub const INTER_SEMIBOLD: &[u8] = include_bytes!("../../../../../assets/fonts/Inter-SemiBold.otf");
/// DejaVu Sans, TrueType: characters Inter has no glyph for.
pub const DEJAVU_SANS: &[u8] = include_bytes!("../../../../../assets/fonts/DejaVuSans.ttf");
