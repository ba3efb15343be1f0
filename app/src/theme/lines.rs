//! How a fit's line is drawn besides its colour: pattern and marker.
//!
//! Colour alone never tells two fits apart; none of these markers is one of the marks of
//! `marks`, which have a meaning of their own.

use eframe::egui::{Color32, Pos2, Shape, Stroke, Vec2, vec2};
use serde::Deserialize;

/// Pattern of a fit's line.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize)]
pub enum LinePattern {
    /// Unbroken.
    Solid,
    /// Even dashes.
    Dashed,
    /// Dots.
    Dotted,
    /// A dash and a dot in turn.
    DashDot,
    /// Long dashes with short gaps.
    LongDash,
    /// A dash and two dots in turn.
    DashDotDot,
}

impl LinePattern {
    /// Dashes and the gaps after them, in widths of the line; `None` for an unbroken line.
    #[must_use]
    pub fn dashes(self) -> Option<(&'static [f32], &'static [f32])> {
        match self {
            Self::Solid => None,
            Self::Dashed => Some((&[3.5], &[2.0])),
            Self::Dotted => Some((&[1.0], &[1.6])),
            Self::DashDot => Some((&[4.5, 1.0], &[1.8, 1.8])),
            Self::LongDash => Some((&[8.0], &[2.0])),
            Self::DashDotDot => Some((&[4.5, 1.0, 1.0], &[1.6, 1.6, 1.6])),
        }
    }

    /// Appends the shapes of a line through `points` (screen points) to `out`.
    pub fn shapes(self, points: &[Pos2], stroke: Stroke, out: &mut Vec<Shape>) {
        let Some((dashes, gaps)) = self.dashes() else {
            out.push(Shape::line(points.to_vec(), stroke));
            return;
        };
        let scaled = |widths: &[f32]| -> Vec<f32> { widths.iter().map(|w| w * stroke.width.max(1.0)).collect() };
        out.extend(Shape::dashed_line_with_offset(points, stroke, &scaled(dashes), &scaled(gaps), 0.0));
    }
}

/// Marker of a fit, in legends and where a line passes a point of interest.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize)]
pub enum FitMarker {
    /// +
    Plus,
    /// Two triangles meeting at their tips, one over the other.
    Hourglass,
    /// Three strokes crossing.
    Asterisk,
    /// Two triangles meeting at their tips, side by side.
    Bowtie,
    /// A filled pentagon.
    Pentagon,
    /// Two upright bars.
    Bars,
}

impl FitMarker {
    /// Appends the shapes of the marker to `out`; `size` is its width in points.
    pub fn shapes(self, centre: Pos2, size: f32, colour: Color32, out: &mut Vec<Shape>) {
        let r = size / 2.0;
        let stroke = Stroke::new((size / 5.0).max(1.5), colour);
        let bar = |a: Vec2, b: Vec2| Shape::line_segment([centre + a, centre + b], stroke);
        let fill = |corners: &[Vec2]| {
            let points = corners.iter().map(|corner| centre + *corner).collect();
            Shape::convex_polygon(points, colour, Stroke::NONE)
        };
        match self {
            Self::Plus => {
                out.push(bar(vec2(-r, 0.0), vec2(r, 0.0)));
                out.push(bar(vec2(0.0, -r), vec2(0.0, r)));
            }
            Self::Hourglass => {
                out.push(fill(&[vec2(-r, -r), vec2(r, -r), Vec2::ZERO]));
                out.push(fill(&[vec2(-r, r), Vec2::ZERO, vec2(r, r)]));
            }
            Self::Asterisk => out.extend((0..3_u8).map(|arm| {
                let tip = r * Vec2::angled(std::f32::consts::FRAC_PI_3 * (f32::from(arm) + 0.5));
                bar(-tip, tip)
            })),
            Self::Bowtie => {
                out.push(fill(&[vec2(-r, -r), Vec2::ZERO, vec2(-r, r)]));
                out.push(fill(&[vec2(r, -r), vec2(r, r), Vec2::ZERO]));
            }
            Self::Pentagon => {
                let corner = |k: u8| r * Vec2::angled(std::f32::consts::TAU * (f32::from(k) / 5.0 - 0.25));
                out.push(fill(&[0, 1, 2, 3, 4].map(corner)));
            }
            Self::Bars => {
                out.push(bar(vec2(-0.4 * r, -r), vec2(-0.4 * r, r)));
                out.push(bar(vec2(0.4 * r, -r), vec2(0.4 * r, r)));
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_dash_has_its_gap() {
        use LinePattern::{DashDot, DashDotDot, Dashed, Dotted, LongDash};
        for pattern in [Dashed, Dotted, DashDot, LongDash, DashDotDot] {
            let (dashes, gaps) = pattern.dashes().expect("broken");
            assert_eq!(dashes.len(), gaps.len(), "{pattern:?}");
            assert!(dashes.iter().chain(gaps).all(|width| *width >= 1.0));
        }
    }

    #[test]
    fn a_line_without_points_draws_nothing_but_does_not_fail() {
        let mut out = Vec::new();
        LinePattern::Dashed.shapes(&[], Stroke::new(2.0, Color32::BLACK), &mut out);
        assert!(out.is_empty());
    }
}
