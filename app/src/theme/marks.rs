//! The marks: each shape has one meaning, everywhere in the window.
//!
//! They are drawn by the painter, so they do not depend on a font.

use eframe::egui::{Color32, Painter, Pos2, Shape, Stroke, Vec2, vec2};

/// A shape with one meaning.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum MarkShape {
    /// ▲ filled: reading taken while the quantity was rising.
    Rising,
    /// ▽ open: reading taken while the quantity was falling.
    Falling,
    /// ● filled: reading without a direction.
    NoDirection,
    /// × drawn over another mark: reading set aside.
    SetAside,
    /// ■ filled: the finding stops what depends on it.
    Stop,
    /// ◆ filled: the finding wants a look.
    Look,
    /// ○ open: the finding is a note.
    Note,
}

impl MarkShape {
    /// Every mark, in the order a legend lists them.
    pub const ALL: [Self; 7] =
        [Self::Rising, Self::Falling, Self::NoDirection, Self::SetAside, Self::Stop, Self::Look, Self::Note];

    /// The one meaning of the shape, in words.
    #[must_use]
    pub fn meaning(self) -> &'static str {
        match self {
            Self::Rising => "rising",
            Self::Falling => "falling",
            Self::NoDirection => "no direction",
            Self::SetAside => "set aside",
            Self::Stop => "Stop",
            Self::Look => "Look",
            Self::Note => "Note",
        }
    }

    /// The character that looks like the shape, for text outside the window.
    #[must_use]
    pub fn character(self) -> char {
        match self {
            Self::Rising => '▲',
            Self::Falling => '▽',
            Self::NoDirection => '●',
            Self::SetAside => '×',
            Self::Stop => '■',
            Self::Look => '◆',
            Self::Note => '○',
        }
    }

    /// Appends the shapes of the mark to `out`; `size` is the width of its box in points.
    pub fn shapes(self, centre: Pos2, size: f32, colour: Color32, out: &mut Vec<Shape>) {
        let r = size / 2.0;
        let line = Stroke::new((size / 7.0).clamp(1.0, 2.5), colour);
        let polygon = |corners: &[Vec2]| -> Vec<Pos2> { corners.iter().map(|corner| centre + *corner).collect() };
        let filled = |corners: &[Vec2]| Shape::convex_polygon(polygon(corners), colour, Stroke::NONE);
        match self {
            Self::Rising => out.push(filled(&[vec2(0.0, -r), vec2(r, 0.85 * r), vec2(-r, 0.85 * r)])),
            Self::Falling => {
                // The line lies inside the box, so that ▲ and ▽ look equally large.
                let s = r - line.width / 2.0;
                let corners = [vec2(0.0, s), vec2(-s, -0.85 * s), vec2(s, -0.85 * s)];
                out.push(Shape::closed_line(polygon(&corners), line));
            }
            Self::NoDirection => out.push(Shape::circle_filled(centre, 0.9 * r, colour)),
            Self::SetAside => {
                for arm in [vec2(r, r), vec2(r, -r)] {
                    out.push(Shape::line_segment([centre - arm, centre + arm], line));
                }
            }
            Self::Stop => {
                let s = 0.85 * r;
                out.push(filled(&[vec2(-s, -s), vec2(s, -s), vec2(s, s), vec2(-s, s)]));
            }
            Self::Look => out.push(filled(&[vec2(0.0, -r), vec2(r, 0.0), vec2(0.0, r), vec2(-r, 0.0)])),
            Self::Note => {
                out.push(Shape::circle_stroke(centre, 0.9 * r - line.width / 2.0, line));
            }
        }
    }
}

/// Paints a mark; `size` is the width of its box in points.
pub fn paint_mark(painter: &Painter, shape: MarkShape, centre: Pos2, size: f32, colour: Color32) {
    let mut shapes = Vec::with_capacity(2);
    shape.shapes(centre, size, colour, &mut shapes);
    painter.extend(shapes);
}

#[cfg(test)]
mod tests {
    use std::collections::BTreeSet;

    use super::*;

    #[test]
    fn every_mark_has_its_own_meaning_and_character() {
        let meanings: BTreeSet<_> = MarkShape::ALL.map(MarkShape::meaning).into();
        let characters: BTreeSet<_> = MarkShape::ALL.map(MarkShape::character).into();
        assert_eq!(meanings.len(), MarkShape::ALL.len());
        assert_eq!(characters.len(), MarkShape::ALL.len());
    }

    #[test]
    fn every_mark_stays_within_its_box() {
        for mark in MarkShape::ALL {
            let mut shapes = Vec::new();
            mark.shapes(Pos2::new(50.0, 50.0), 10.0, Color32::BLACK, &mut shapes);
            assert!(!shapes.is_empty(), "{mark:?}");
            for shape in &shapes {
                let bounds = shape.visual_bounding_rect();
                assert!(bounds.width() <= 13.0 && bounds.height() <= 13.0, "{mark:?} {bounds:?}");
                assert!(bounds.width() >= 7.0 && bounds.height() >= 7.0, "{mark:?} {bounds:?}");
            }
        }
    }
}
