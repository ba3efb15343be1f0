//! Can everything be read, also by eyes that see colours differently? Computed from the tokens.

use super::tokens::{Colours, FILE, Hex};

/// Least ratio for text.
///
/// Source: W3C, Web Content Accessibility Guidelines (WCAG) 2.1, success criterion 1.4.3
/// (from memory).
const TEXT: f64 = 4.5;
/// Least ratio for marks, lines and outlines of controls.
///
/// Source: WCAG 2.1, success criterion 1.4.11 (from memory).
const MARK: f64 = 3.0;

/// Linear red, green, blue, 0 to 1.
///
/// Source: IEC 61966-2-1 (sRGB transfer function; from memory).
fn linear(Hex(bytes): Hex) -> [f64; 3] {
    bytes.map(|byte| {
        let c = f64::from(byte) / 255.0;
        if c <= 0.040_45 { c / 12.92 } else { ((c + 0.055) / 1.055).powf(2.4) }
    })
}

fn luminance(colour: Hex) -> f64 {
    let [r, g, b] = linear(colour);
    0.2126 * r + 0.7152 * g + 0.0722 * b
}

/// Contrast ratio, 1 to 21. Source: WCAG 2.1, definition "contrast ratio" (from memory).
fn ratio(a: Hex, b: Hex) -> f64 {
    let (a, b) = (luminance(a), luminance(b));
    (a.max(b) + 0.05) / (a.min(b) + 0.05)
}

fn themes() -> [(&'static str, &'static Colours); 2] {
    [("light", &FILE.light), ("dark", &FILE.dark)]
}

#[test]
fn the_ratio_agrees_with_the_known_ends() {
    let (black, white) = (Hex([0; 3]), Hex([255; 3]));
    assert!((ratio(black, white) - 21.0).abs() < 1e-9);
    assert!((ratio(white, white) - 1.0).abs() < 1e-12);
    // A value everybody quotes: #767676 on white is just above 4.5 (common practice).
    assert!((ratio(Hex([0x76; 3]), white) - 4.54).abs() < 0.01);
}

#[test]
fn text_can_be_read_on_every_surface_it_stands_on() {
    for (name, c) in themes() {
        let mut texts = vec![
            ("ink", c.ink),
            ("soft ink", c.soft_ink),
            ("brass", c.brass),
            ("alert", c.alert),
            ("note", c.note),
            ("focus", c.focus),
        ];
        texts.extend(c.fits.iter().map(|fit| ("fit", fit.text)));
        for (what, text) in texts {
            for (surface, ground) in [("ground", c.ground), ("panel", c.panel), ("field", c.field)] {
                let ratio = ratio(text, ground);
                assert!(ratio >= TEXT, "{name}: {what} {text:?} on {surface}: {ratio:.2}");
            }
        }
        // Text under the pointer and in a selection.
        for (what, text, ground) in [
            ("ink, hovered", c.ink, c.hover),
            ("soft ink, hovered", c.soft_ink, c.hover),
            ("ink, selected", c.ink, c.selected),
            ("soft ink, selected", c.soft_ink, c.selected),
            ("selected text", c.focus, c.selected),
        ] {
            assert!(ratio(text, ground) >= TEXT, "{name}: {what}: {:.2}", ratio(text, ground));
        }
    }
}

#[test]
fn marks_and_outlines_can_be_seen() {
    for (name, c) in themes() {
        let mut marks =
            vec![("edge", c.edge), ("brass", c.brass), ("focus", c.focus), ("alert", c.alert), ("note", c.note)];
        marks.extend(c.fits.iter().map(|fit| ("fit", fit.colour)));
        for (what, mark) in marks {
            for ground in [c.ground, c.panel] {
                let ratio = ratio(mark, ground);
                assert!(ratio >= MARK, "{name}: {what} {mark:?} on {ground:?}: {ratio:.2}");
            }
        }
    }
}

/// Full protanopia, deuteranopia and tritanopia on linear red, green, blue.
///
/// Source: G. M. Machado, M. M. Oliveira, L. A. F. Fernandes, "A Physiologically-based Model for
/// Simulation of Color Vision Deficiency", IEEE Transactions on Visualization and Computer
/// Graphics 15(6), 2009, severity 1.0 (from memory; every row sums to one).
const EYES: [(&str, [[f64; 3]; 3]); 4] = [
    ("usual", [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]]),
    (
        "protanopia",
        [[0.152_286, 1.052_583, -0.204_868], [0.114_503, 0.786_281, 0.099_216], [-0.003_882, -0.048_116, 1.051_998]],
    ),
    (
        "deuteranopia",
        [[0.367_322, 0.860_646, -0.227_968], [0.280_085, 0.672_501, 0.047_413], [-0.011_820, 0.042_940, 0.968_881]],
    ),
    (
        "tritanopia",
        [[1.255_528, -0.076_749, -0.178_779], [-0.078_411, 0.930_809, 0.147_602], [0.004_733, 0.691_367, 0.303_900]],
    ),
];

fn times(matrix: &[[f64; 3]; 3], v: [f64; 3]) -> [f64; 3] {
    matrix.map(|row| row[0] * v[0] + row[1] * v[1] + row[2] * v[2])
}

/// Oklab coordinates of linear red, green, blue.
///
/// Source: B. Ottosson, "A perceptual color space for image processing", 2020 (from memory).
fn oklab(rgb: [f64; 3]) -> [f64; 3] {
    const TO_LMS: [[f64; 3]; 3] = [
        [0.412_221_470_8, 0.536_332_536_3, 0.051_445_992_9],
        [0.211_903_498_2, 0.680_699_545_1, 0.107_396_956_6],
        [0.088_302_461_9, 0.281_718_837_6, 0.629_978_700_5],
    ];
    const TO_LAB: [[f64; 3]; 3] = [
        [0.210_454_255_3, 0.793_617_785_0, -0.004_072_046_8],
        [1.977_998_495_1, -2.428_592_205_0, 0.450_593_709_9],
        [0.025_904_037_1, 0.782_771_766_2, -0.808_675_766_0],
    ];
    let inside = rgb.map(|c| c.clamp(0.0, 1.0));
    times(&TO_LAB, times(&TO_LMS, inside).map(f64::cbrt))
}

fn distance(a: Hex, b: Hex, eyes: &[[f64; 3]; 3]) -> f64 {
    let lab = |colour| oklab(times(eyes, linear(colour)));
    let (a, b) = (lab(a), lab(b));
    (0..3).map(|k| (a[k] - b[k]).powi(2)).sum::<f64>().sqrt()
}

#[test]
fn fits_differ_for_every_kind_of_eye() {
    // About 0.02 is a difference just seen side by side; pattern and marker differ besides.
    const SEEN: f64 = 0.03;
    for (name, c) in themes() {
        for (eyes, matrix) in &EYES {
            for (i, a) in c.fits.iter().enumerate() {
                for (j, b) in c.fits.iter().enumerate().skip(i + 1) {
                    let apart = distance(a.colour, b.colour, matrix);
                    assert!(apart > SEEN, "{name}, {eyes}: fits {i} and {j}: {apart:.3}");
                }
            }
        }
    }
    for (i, a) in FILE.fit_lines.iter().enumerate() {
        for b in &FILE.fit_lines[i + 1..] {
            assert!(a.pattern != b.pattern && a.marker != b.marker);
        }
    }
}

#[test]
fn a_fits_colour_is_used_for_nothing_else() {
    for (name, c) in themes() {
        let others = [c.ink, c.soft_ink, c.brass, c.focus, c.alert, c.note, c.edge];
        for fit in &c.fits {
            assert!(!others.contains(&fit.colour), "{name}: {:?}", fit.colour);
        }
    }
}
