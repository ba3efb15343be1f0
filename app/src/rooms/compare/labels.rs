//! Names of the lines near zero, each once, where nothing else stands.

use super::{corner, lines, near_column::NearColumn, near_ends, near_facts::NearFacts};
use crate::theme::Theme;
use assize_core::{project::evaluate::words::plain, quantity::format::with_unit};
use eframe::egui::{Align2, Galley, Pos2, Rangef, Rect, Shape, Ui, Vec2, pos2, vec2};
use egui_plot::{PlotBounds, PlotTransform};
use std::sync::Arc;

/// A name and the line it belongs to.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Label {
    text: String,
    /// Height of the line, output unit.
    at: f64,
    /// Another line under (over) which it can stand as well: it names what lies between.
    other: Option<f64>,
    /// Over the line, else under it.
    over: bool,
    /// Ink instead of brass.
    soft: bool,
}

impl Label {
    /// Names of the lines that run through all plots.
    pub(super) fn of_lines(facts: &NearFacts, cursor: f64) -> Vec<Self> {
        let mut all = Vec::new();
        let rises = facts.thresholds.first().is_none_or(|t| *t >= facts.band.mean);
        let named = facts.stop_name(cursor);
        if let Some(name) = named {
            let over = cursor >= facts.band.mean;
            all.push(Self { text: format!("cursor on the {name}"), at: cursor, other: None, over, soft: false });
        }
        if named != Some("decision threshold") {
            let at = facts.thresholds.first().copied().unwrap_or(facts.band.mean);
            all.push(Self { text: "decision threshold".to_owned(), at, other: None, over: rises, soft: false });
        }
        let (low, high) = facts.edges;
        let (near, far) = if rises { (low, high) } else { (high, low) };
        all.push(Self { text: facts.band_words(), at: near, other: Some(far), over: rises, soft: false });
        all
    }

    /// What the hatching means.
    pub(super) fn of_gap(facts: &NearFacts, unit: &str) -> Option<Self> {
        let (_, to) = facts.gap?;
        let text = format!("no standard below {}", with_unit(&plain(to), unit));
        Some(Self { text, at: f64::NAN, other: None, over: true, soft: true })
    }

    /// Where it would stand, best place first; `lines` are the heights of all drawn lines.
    fn places(&self, transform: &PlotTransform, size: Vec2, lines: &[f32]) -> Vec<Rect> {
        let frame = *transform.frame();
        let right = frame.right() - 8.0 - size.x;
        let rect = |x: f32, y: f32| Rect::from_min_size(pos2(x, y), size);
        if self.at.is_nan() {
            return vec![rect(right, frame.top() + 4.0), rect(right, frame.bottom() - size.y - 4.0)];
        }
        let line = |v: f64| transform.position_from_point_y(v);
        let mut heights = vec![beside(line(self.at), self.over, size.y, lines)];
        heights.extend(self.other.map(|v| beside(line(v), !self.over, size.y, lines)));
        heights.push(beside(line(self.at), !self.over, size.y, lines));
        heights.retain(|y| *y >= frame.top() + 1.0 && *y + size.y <= frame.bottom() - 1.0);
        let steps = ((right - frame.left() - 8.0) / 12.0).max(0.0) as u16;
        let row = |y: f32| (0..=steps).map(move |i| rect(right - 12.0 * f32::from(i), y));
        heights.into_iter().flat_map(row).collect()
    }
}

/// A name with where it stands, and whether it stands free there.
struct Placed {
    galley: Arc<Galley>,
    rect: Option<Rect>,
    free: bool,
}

/// Where names stand in a plot: the first free place of each, else the one that covers least.
fn placed(ui: &Ui, transform: &PlotTransform, column: &NearColumn<'_>, labels: &[Label], theme: &Theme) -> Vec<Placed> {
    let mut taken = obstacles(transform, column);
    let lines: Vec<f32> = column.drawn_lines().iter().map(|v| transform.position_from_point_y(*v)).collect();
    let mut all = Vec::new();
    for label in labels {
        let colour = if label.soft { theme.soft_ink } else { theme.brass };
        let galley = ui.painter().layout_no_wrap(label.text.clone(), theme.small(), colour);
        let covered = |r: &Rect| {
            let points = taken.iter().filter(|p| r.expand2(vec2(6.0, 1.0)).contains(**p)).count();
            points + 4 * lines.iter().filter(|y| r.y_range().contains(**y)).count()
        };
        let places = label.places(transform, galley.size(), &lines);
        let best = places.into_iter().map(|r| (covered(&r), r)).min_by_key(|(covered, _)| *covered);
        let (free, rect) = best.map_or((false, None), |(covered, rect)| (covered == 0, Some(rect)));
        taken.extend(rect.iter().flat_map(|r| dense(&[r.left_center(), r.right_center()])));
        all.push(Placed { galley, rect, free });
    }
    all
}

/// Places that words must leave free: the curve, and the lines from the ends of the traces down.
fn obstacles(transform: &PlotTransform, column: &NearColumn<'_>) -> Vec<Pos2> {
    let ends = near_ends::ends(column, transform);
    let bottom = transform.frame().bottom();
    let stems = [ends.circle, ends.square, ends.square_other].into_iter().flatten();
    let curve = column.pieces().iter().flat_map(|piece| lines::cut(transform, piece));
    let all = stems.map(|end| vec![end, pos2(end.x, bottom)]).chain(curve);
    all.flat_map(|run| dense(&run)).collect()
}

/// The plot that carries the names of the lines: the last one in which all of them stand free, else the
/// last one.
pub(super) fn carrier(
    ui: &Ui,
    columns: &[NearColumn<'_>],
    y: Rangef,
    labels: &[Label],
    theme: &Theme,
) -> Option<usize> {
    let free = |column: &&NearColumn<'_>| {
        let ((left, right), (bottom, top)) = column.window();
        let bounds = PlotBounds::from_min_max([left, bottom], [right, top]);
        let transform = PlotTransform::new(Rect::from_x_y_ranges(column.x, y), bounds, false);
        placed(ui, &transform, column, labels, theme).iter().all(|p| p.free)
    };
    columns.iter().rev().find(free).or(columns.last()).map(|c| c.index)
}

/// Draws names; a soft one that finds no free place is left out.
pub(super) fn draw(
    ui: &Ui,
    transform: &PlotTransform,
    column: &NearColumn<'_>,
    labels: &[Label],
    theme: &Theme,
    shapes: &mut Vec<Shape>,
) {
    for (label, placed) in labels.iter().zip(placed(ui, transform, column, labels, theme)) {
        if let Some(rect) = placed.rect.filter(|_| placed.free || !label.soft) {
            shapes.push(Shape::galley(rect.min, placed.galley, theme.brass));
        }
    }
}

/// The height of a text over (or under) a line that no other line crosses.
fn beside(line: f32, over: bool, height: f32, lines: &[f32]) -> f32 {
    let mut at = line;
    for _ in 0..lines.len() {
        let rect = |at: f32| {
            if over { (at - height - 1.0, at - 1.0) } else { (at + 1.0, at + 1.0 + height) }
        };
        let (top, bottom) = rect(at);
        let crossing = lines.iter().copied().filter(|y| *y > top && *y < bottom);
        let next = if over { crossing.reduce(f32::min) } else { crossing.reduce(f32::max) };
        match next {
            Some(next) => at = next,
            None => break,
        }
    }
    if over { at - height - 1.0 } else { at + 1.0 }
}

/// Places along a line, close enough that no word slips between them.
fn dense(line: &[Pos2]) -> Vec<Pos2> {
    let between = |pair: &[Pos2]| {
        let steps = (pair[0].distance(pair[1]) / 6.0).ceil().clamp(1.0, 400.0);
        let (from, to) = (pair[0], pair[1]);
        (0..=steps as u16).map(move |i| from.lerp(to, f32::from(i) / steps)).collect::<Vec<_>>()
    };
    line.windows(2).flat_map(between).collect()
}

/// The output's unit, in a corner where nothing else stands.
pub(super) fn unit(
    ui: &Ui,
    transform: &PlotTransform,
    (column, unit): (&NearColumn<'_>, &str),
    theme: &Theme,
    shapes: &mut Vec<Shape>,
) {
    let galley = ui.painter().layout_no_wrap(unit.to_owned(), theme.small(), theme.soft_ink);
    let corners = [Align2::LEFT_TOP, Align2::LEFT_BOTTOM, Align2::RIGHT_TOP, Align2::RIGHT_BOTTOM];
    let found = corner::free(*transform.frame(), galley.size(), &corners, &obstacles(transform, column));
    if let Some(rect) = found {
        shapes.push(Shape::galley(rect.min, galley, theme.soft_ink));
    }
}
