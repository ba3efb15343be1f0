//! The key of a plot: signs and what they mean, on as few lines as needed.

use super::curves::pen;
use super::marks;
use crate::exchange::report::kit::document::{Key, KeySign};
use crate::exchange::report::kit::draw::Draw;
use crate::exchange::report::kit::error::ReportError;
use crate::exchange::report::kit::style::{Ink, PLOT_LABEL};
use crate::exchange::report::kit::text::{Line, Typesetter};

/// Between sign and text.
const GAP: f32 = 3.5;
/// Between entries.
const APART: f32 = 11.0;

/// An entry on its line.
struct Entry {
    x: f32,
    sign: KeySign,
    lines: Vec<Line>,
}

/// The entries of a key, dealt out to lines.
pub(super) struct KeyLines {
    rows: Vec<Vec<Entry>>,
    width: f32,
    lines: usize,
}

impl KeyLines {
    /// Deals entries out to lines no wider than `room` points.
    pub(super) fn new(setter: &Typesetter, keys: &[Key], room: f32) -> Result<Self, ReportError> {
        let mut rows: Vec<Vec<Entry>> = Vec::new();
        let (mut x, mut width) = (0.0, 0.0_f32);
        for key in keys {
            let indent = sign_width(key.sign) + GAP;
            let lines = setter.lines(&key.text, PLOT_LABEL, room - indent)?;
            let text = lines.iter().fold(0.0_f32, |w, line| w.max(line.width));
            if x > 0.0 && x + indent + text > room {
                x = 0.0;
            }
            if x == 0.0 {
                rows.push(Vec::new());
            }
            if let Some(row) = rows.last_mut() {
                row.push(Entry { x, sign: key.sign, lines });
            }
            width = width.max(x + indent + text);
            x += indent + text + APART;
        }
        let lines = rows.iter().map(|row| height(row)).sum();
        Ok(Self { rows, width, lines })
    }

    /// How many lines of text the key takes.
    pub(super) fn len(&self) -> usize {
        self.lines
    }

    /// Width of the widest line in points.
    pub(super) fn width(&self) -> f32 {
        self.width
    }

    /// Draws the key so that it ends at `right`.
    pub(super) fn draw_flush_right(&self, right: f32, top: f32, draws: &mut Vec<Draw>) {
        self.draw_from_left(right - self.width, top, draws);
    }

    /// Draws the key from `left` on.
    pub(super) fn draw_from_left(&self, left: f32, top: f32, draws: &mut Vec<Draw>) {
        let mut top = top;
        for row in &self.rows {
            for entry in row {
                draw_entry(entry, left + entry.x, top, draws);
            }
            top += height(row) as f32 * PLOT_LABEL.leading;
        }
    }
}

fn height(row: &[Entry]) -> usize {
    row.iter().map(|entry| entry.lines.len()).max().unwrap_or(0)
}

fn sign_width(sign: KeySign) -> f32 {
    match sign {
        KeySign::Mark(_) => 6.0,
        KeySign::Line { .. } => 17.0,
        KeySign::Band { .. } => 11.0,
    }
}

fn draw_entry(entry: &Entry, left: f32, top: f32, draws: &mut Vec<Draw>) {
    let width = sign_width(entry.sign);
    let middle = top + PLOT_LABEL.leading / 2.0;
    match entry.sign {
        KeySign::Mark(shape) => marks::sign(shape, [left + width / 2.0, middle], draws),
        KeySign::Line { dash, width: stroke, grey } => {
            let pen = pen(dash, stroke, Ink::Grey(grey));
            draws.push(Draw::stroke([left, middle], [left + width, middle], pen));
        }
        KeySign::Band { grey } => {
            let rect = [left, middle - 2.8, left + width, middle + 2.8];
            draws.push(Draw::filled(rect, Ink::Grey(grey)));
        }
    }
    for (i, line) in entry.lines.iter().enumerate() {
        let top = top + i as f32 * PLOT_LABEL.leading;
        draws.push(Draw::text(left + width + GAP, top, line.clone(), PLOT_LABEL));
    }
}
