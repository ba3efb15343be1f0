//! A corner of a plot in which words collide with nothing.

use eframe::egui::{Align2, Pos2, Rect, Vec2};

/// Distance of the words from the frame, points.
const INSET: f32 = 7.0;

/// The first of the corners in which a text of `size` covers none of the `obstacles`.
pub(super) fn free(frame: Rect, size: Vec2, corners: &[Align2], obstacles: &[Pos2]) -> Option<Rect> {
    let inner = frame.shrink2(Vec2::new(INSET, INSET - 2.0));
    let at = |corner: &Align2| corner.align_size_within_rect(size, inner);
    let fits = size.x <= inner.width() && size.y <= inner.height();
    let clear = |rect: &Rect| !obstacles.iter().any(|p| rect.expand(4.0).contains(*p));
    corners.iter().map(at).find(clear).filter(|_| fits)
}

#[cfg(test)]
mod tests {
    use super::*;
    use eframe::egui::{pos2, vec2};

    #[test]
    fn words_go_where_nothing_stands() {
        let frame = Rect::from_min_max(pos2(0.0, 0.0), pos2(200.0, 100.0));
        let corners = [Align2::LEFT_TOP, Align2::RIGHT_BOTTOM];
        let rising = [pos2(10.0, 95.0), pos2(100.0, 50.0), pos2(190.0, 5.0)];
        let found = free(frame, vec2(40.0, 14.0), &corners, &rising).unwrap();
        assert!(found.left() < 20.0 && found.top() < 20.0);
        let falling = [pos2(10.0, 5.0), pos2(190.0, 95.0)];
        assert_eq!(free(frame, vec2(40.0, 14.0), &corners, &falling), None);
        assert_eq!(free(frame, vec2(400.0, 14.0), &corners, &[]), None);
    }
}
