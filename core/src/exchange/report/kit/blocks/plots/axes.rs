//! Grid, frame and labels of a plot.

use super::frame::Frame;
use crate::exchange::report::kit::document::{Limit, Plot};
use crate::exchange::report::kit::draw::{Draw, Pen, rectangle};
use crate::exchange::report::kit::error::ReportError;
use crate::exchange::report::kit::style::{HAIRLINE, Ink, PLOT_LABEL, Style};
use crate::exchange::report::kit::text::{Line, Typesetter};

/// Between a label and the frame.
const GAP: f32 = 4.0;
/// Least gap between neighbouring labels. A label that comes closer is left out, and so is one
/// that is higher than the frame.
const APART: f32 = 4.0;
/// Length of the ticks beneath the frame.
const TICK: f32 = 2.4;

/// The texts around a frame, measured.
pub(super) struct Labels {
    /// Width of the strip at the left of the frame, in points.
    pub left: f32,
    x: Vec<Vec<Line>>,
    y: Vec<Vec<Line>>,
    name: Vec<Line>,
    /// Labels of the horizontal limits.
    pub hlines: Vec<Line>,
    /// Labels of the vertical limits.
    pub vlines: Vec<Line>,
}

impl Labels {
    /// Measures the texts of a plot that is `width` points wide, labels included.
    pub(super) fn new(setter: &Typesetter, plot: &Plot, width: f32) -> Result<Self, ReportError> {
        let most = width * 0.4;
        let broken = |texts: &[(f64, String)]| {
            texts.iter().map(|(_, text)| setter.lines(text, PLOT_LABEL, most - GAP)).collect::<Result<Vec<_>, _>>()
        };
        let single = |limits: &[Limit]| {
            limits.iter().map(|limit| setter.line(&limit.label, PLOT_LABEL)).collect::<Result<Vec<_>, _>>()
        };
        let y = broken(&plot.y.ticks)?;
        let widest = y.iter().flatten().fold(0.0_f32, |w, line| w.max(line.width));
        let left = widest + GAP;
        let name =
            if plot.x.label.is_empty() { Vec::new() } else { setter.lines(&plot.x.label, PLOT_LABEL, width - left)? };
        Ok(Self {
            left,
            x: broken(&plot.x.ticks)?,
            y,
            name,
            hlines: single(&plot.hlines)?,
            vlines: single(&plot.vlines)?,
        })
    }

    /// Draws the frame and a hairline at each tick of the vertical axis.
    pub(super) fn draw_grid(&self, plot: &Plot, frame: &Frame, draws: &mut Vec<Draw>) {
        let [left, _, right, _] = frame.rect;
        for (at, _) in &plot.y.ticks {
            if frame.holds_y(*at) {
                draws.push(Draw::rule(left, right, frame.at_y(*at), Ink::Hair, 0.35));
            }
        }
        draws.push(Draw::Shape { path: rectangle(frame.rect), fill: None, pen: Some(Pen::new(Ink::Hair, HAIRLINE)) });
    }

    /// Draws the labels of both axes between the `edges` of the plot; gives back the y below all.
    pub(super) fn draw(&self, plot: &Plot, frame: &Frame, edges: (f32, f32), draws: &mut Vec<Draw>) -> f32 {
        self.draw_y(plot, frame, draws);
        let rows = self.draw_x(plot, frame, edges, draws);
        let [left, _, right, bottom] = frame.rect;
        let mut top = bottom + TICK + 1.0 + rows as f32 * PLOT_LABEL.leading;
        for line in &self.name {
            let x = (left + right - line.width) / 2.0;
            draws.push(Draw::text(x, top, line.clone(), PLOT_LABEL));
            top += PLOT_LABEL.leading;
        }
        top
    }

    fn draw_y(&self, plot: &Plot, frame: &Frame, draws: &mut Vec<Draw>) {
        let right = frame.rect[0] - GAP;
        let mut taken: Vec<(f32, f32)> = Vec::new();
        for ((at, _), lines) in plot.y.ticks.iter().zip(&self.y) {
            let height = lines.len() as f32 * PLOT_LABEL.leading;
            let least = frame.rect[1] - PLOT_LABEL.leading / 2.0;
            let most = frame.rect[3] + PLOT_LABEL.leading / 2.0 - height;
            let top = (frame.at_y(*at) - height / 2.0).min(most);
            let strip = (top + 1.5, top + height - 1.5);
            if !frame.holds_y(*at) || top < least - 0.1 || meets(&taken, strip, 0.0) {
                continue;
            }
            taken.push(strip);
            for (i, line) in lines.iter().enumerate() {
                let top = top + i as f32 * PLOT_LABEL.leading;
                draws.push(Draw::text(right - line.width, top, line.clone(), PLOT_LABEL));
            }
        }
    }

    /// Draws ticks and labels of the horizontal axis; gives back the most lines a label has.
    fn draw_x(&self, plot: &Plot, frame: &Frame, (least, most): (f32, f32), draws: &mut Vec<Draw>) -> usize {
        let bottom = frame.rect[3];
        let mut taken: Vec<(f32, f32)> = Vec::new();
        let mut rows = 0;
        for ((at, _), lines) in plot.x.ticks.iter().zip(&self.x) {
            if !frame.holds_x(*at) {
                continue;
            }
            let x = frame.at_x(*at);
            let tick = Pen::new(Ink::Soft, HAIRLINE);
            draws.push(Draw::stroke([x, bottom], [x, bottom + TICK], tick));
            let width = lines.iter().fold(0.0_f32, |w, line| w.max(line.width));
            let left = (x - width / 2.0).min(most - width).max(least);
            if meets(&taken, (left, left + width), APART) {
                continue;
            }
            taken.push((left, left + width));
            rows = rows.max(lines.len());
            for (i, line) in lines.iter().enumerate() {
                let top = bottom + TICK + 1.0 + i as f32 * PLOT_LABEL.leading;
                let x = left + (width - line.width) / 2.0;
                draws.push(Draw::text(x, top, line.clone(), PLOT_LABEL));
            }
        }
        rows
    }
}

/// Whether a strip comes closer than `apart` to one that is taken.
fn meets(taken: &[(f32, f32)], (from, to): (f32, f32), apart: f32) -> bool {
    taken.iter().any(|&(start, end)| from < end + apart && to > start - apart)
}

/// A label on a white ground, its left top corner given.
pub(super) fn on_ground(x: f32, top: f32, line: &Line, draws: &mut Vec<Draw>) {
    let style: Style = PLOT_LABEL;
    let ground = [x - 1.5, top + 0.8, x + line.width + 1.5, top + style.leading - 0.8];
    draws.push(Draw::filled(ground, Ink::White));
    draws.push(Draw::text(x, top, line.clone(), style));
}
