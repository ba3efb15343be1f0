//! Small signs on buttons, drawn so that they depend on no font.

use crate::theme::Theme;
use eframe::egui::{Color32, Pos2, Response, Role, Sense, Shape, Stroke, Ui, Vec2, WidgetInfo, vec2};

/// A sign.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Glyph {
    /// An arrow bending to the left: take back.
    Back,
    /// An arrow bending to the right: put back.
    Forth,
    /// A disc, half of it filled: light and dark.
    HalfDisc,
    /// A cross: close.
    Cross,
}

/// A button with a sign; `name` is what a screen reader says.
pub fn button(ui: &mut Ui, glyph: Glyph, name: &str, enabled: bool) -> Response {
    let theme = Theme::of(ui);
    // The cross stands at the end of a line of text and is no higher than it.
    let side = if glyph == Glyph::Cross { 18.0 } else { theme.spacing.control };
    let size = Vec2::splat(side);
    let sense = if enabled { Sense::click() } else { Sense::hover() };
    let (rect, response) = ui.allocate_exact_size(size, sense);
    response.widget_info(|| WidgetInfo::labeled(Role::Button, enabled, name));
    if ui.is_rect_visible(rect) {
        let corner = f32::from(theme.spacing.corner);
        if enabled && response.hovered() {
            ui.painter().rect_filled(rect, corner, theme.hover);
        }
        let colour = if enabled { theme.ink } else { theme.rule };
        let mut shapes = Vec::new();
        glyph.shapes(rect.center(), 7.0, colour, &mut shapes);
        ui.painter().extend(shapes);
        if response.has_focus() {
            let ring = Stroke::new(theme.spacing.focus, theme.focus);
            ui.painter().rect_stroke(rect, corner, ring, eframe::egui::StrokeKind::Inside);
        }
    }
    response
}

impl Glyph {
    /// Appends the shapes of the sign; `r` is its radius in points.
    fn shapes(self, centre: Pos2, r: f32, colour: Color32, out: &mut Vec<Shape>) {
        let line = Stroke::new(1.6, colour);
        match self {
            Self::Back => arrow(centre, r, -1.0, line, out),
            Self::Forth => arrow(centre, r, 1.0, line, out),
            Self::HalfDisc => {
                let half: Vec<Pos2> = arc(centre, r * 0.8, -90.0, 90.0).collect();
                out.push(Shape::convex_polygon(half, colour, Stroke::NONE));
                out.push(Shape::circle_stroke(centre, r * 0.8, line));
            }
            Self::Cross => {
                let s = r * 0.55;
                for arm in [vec2(s, s), vec2(s, -s)] {
                    out.push(Shape::line_segment([centre - arm, centre + arm], line));
                }
            }
        }
    }
}

/// A bent arrow whose head is at the side `toward` (−1 left, +1 right).
fn arrow(centre: Pos2, r: f32, toward: f32, line: Stroke, out: &mut Vec<Shape>) {
    let middle = centre + vec2(0.0, 1.0);
    let bow = arc(middle, r * 0.8, 20.0, 190.0)
        .map(|p| Pos2::new(middle.x + toward * (middle.x - p.x), 2.0 * middle.y - p.y));
    let points: Vec<Pos2> = bow.collect();
    let Some(&tip) = points.last() else { return };
    out.push(Shape::line(points, line));
    let head = [vec2(-toward * 4.5, -1.0), vec2(toward * 0.6, -4.6)];
    out.extend(head.map(|arm| Shape::line_segment([tip, tip + arm], line)));
}

/// Points of an arc between two angles in degrees, clockwise from the right.
fn arc(centre: Pos2, r: f32, from: f32, to: f32) -> impl Iterator<Item = Pos2> {
    const STEPS: u8 = 16;
    (0..=STEPS).map(move |k| {
        let t = from + (to - from) * f32::from(k) / f32::from(STEPS);
        centre + r * Vec2::angled(t.to_radians())
    })
}
