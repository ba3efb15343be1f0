//! Colours come from tokens only.

use super::{none, short, sources};

#[test]
fn no_colour_is_made_outside_the_theme() {
    const MAKERS: [&str; 8] = [
        "Color32::from_",
        "Color32::RED",
        "Color32::BLACK",
        "Color32::WHITE",
        "Color32::GRAY",
        "Rgba::from",
        "hex_color!",
        "Hsva::",
    ];
    let mut offences = Vec::new();
    for (path, text) in sources("app/src") {
        if short(&path).starts_with("app/src/theme/") {
            continue;
        }
        for (n, line) in (1..).zip(text.lines()) {
            if let Some(maker) = MAKERS.iter().find(|m| line.contains(**m)) {
                offences.push(format!("{}:{n}: {maker}", short(&path)));
            }
        }
    }
    none(&offences, "colours are tokens of assets/theme, read by app/src/theme");
}
