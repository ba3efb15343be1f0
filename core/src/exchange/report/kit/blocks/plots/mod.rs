//! Plots side by side: titles above, frames on one level, labels below.

mod axes;
mod curves;
mod frame;
mod key;
mod marks;

use super::super::document::Plot;
use super::super::draw::{Draw, Owner, Placed};
use super::super::error::{PlotProblem, ReportError};
use super::super::flow::{Galley, Slice};
use super::super::style::{GUTTER, LEFT, MEASURE, PLOT_LABEL, PLOT_TITLE};
use super::super::tags::Role;
use super::super::text::{Line, Typesetter};
use super::prose::stack;
use axes::Labels;
use frame::Frame;
use key::KeyLines;

/// Between the lines above a frame and the frame.
const ABOVE: f32 = 3.0;

/// A plot with its texts measured, before it is known how far down the frame begins.
struct Measured<'a> {
    plot: &'a Plot,
    left: f32,
    width: f32,
    labels: Labels,
    title: Vec<Line>,
    unit: Vec<Line>,
    key: KeyLines,
}

/// One to three plots side by side.
pub(super) fn plots(setter: &Typesetter, plots: &[Plot], galley: &mut Galley) -> Result<(), ReportError> {
    let count = plots.len();
    if !(1..=3).contains(&count) {
        return Err(ReportError::Plot {
            title: plots.first().map_or(String::new(), |p| p.title.clone()),
            problem: PlotProblem::Count { count },
        });
    }
    let width = (MEASURE - GUTTER * (count as f32 - 1.0)) / count as f32;
    let mut measured = Vec::with_capacity(count);
    for (i, plot) in plots.iter().enumerate() {
        let left = LEFT + i as f32 * (width + GUTTER);
        measured.push(Measured::new(setter, plot, left, width)?);
    }
    let title = highest(&measured, |m| m.title.len()) as f32 * PLOT_TITLE.leading;
    let head = highest(&measured, |m| m.head_lines()) as f32 * PLOT_LABEL.leading;
    let mut slice = Slice { before: 9.0, ..Slice::default() };
    for one in &measured {
        one.draw((title, head), galley, &mut slice)?;
    }
    galley.push(slice);
    galley.space(3.0);
    Ok(())
}

fn highest(measured: &[Measured<'_>], of: impl Fn(&Measured<'_>) -> usize) -> usize {
    measured.iter().map(of).max().unwrap_or(0)
}

impl<'a> Measured<'a> {
    fn new(setter: &Typesetter, plot: &'a Plot, left: f32, width: f32) -> Result<Self, ReportError> {
        frame::check(plot)?;
        let labels = Labels::new(setter, plot, width)?;
        let inner = width - labels.left;
        let unit = match plot.y.label.as_str() {
            "" => Vec::new(),
            label => setter.lines(label, PLOT_LABEL, inner)?,
        };
        Ok(Self {
            plot,
            left,
            width,
            title: setter.lines(&plot.title, PLOT_TITLE, inner)?,
            unit,
            key: KeyLines::new(setter, &plot.key, inner)?,
            labels,
        })
    }

    /// Whether the key finds room at the right of the unit.
    fn key_beside(&self) -> bool {
        let unit = self.unit.first().map_or(0.0, |line| line.width);
        let inner = self.width - self.labels.left;
        self.unit.len() <= 1 && self.key.len() <= 1 && unit + self.key.width() + 12.0 <= inner
    }

    /// Lines of unit and key.
    fn head_lines(&self) -> usize {
        if self.key_beside() { self.unit.len().max(self.key.len()) } else { self.unit.len() + self.key.len() }
    }

    fn draw(&self, (title, head): (f32, f32), galley: &mut Galley, slice: &mut Slice) -> Result<(), ReportError> {
        let role = Role::Figure { alt: self.plot.alt.clone() };
        let place = galley.tags.add(None, role);
        let owner = Owner::Content(place);
        let left = self.left + self.labels.left;
        let right = self.left + self.width;
        let top = title + head + ABOVE;
        let bottom = top + self.plot.height_pt;
        let title_top = title - self.title.len() as f32 * PLOT_TITLE.leading;
        let into = &mut slice.drawings;
        stack(into, owner, &self.title, PLOT_TITLE, (left, title_top));
        let head_top = title + head - self.head_lines() as f32 * PLOT_LABEL.leading;
        stack(into, owner, &self.unit, PLOT_LABEL, (left, head_top));
        let mut draws = Vec::new();
        if self.key_beside() {
            self.key.draw_flush_right(right, head_top, &mut draws);
        } else {
            let below = head_top + self.unit.len() as f32 * PLOT_LABEL.leading;
            self.key.draw_from_left(left, below, &mut draws);
        }
        let frame = Frame::new([left, top, right, bottom], self.plot);
        self.labels.draw_grid(self.plot, &frame, &mut draws);
        curves::draw(self.plot, &frame, &self.labels, &mut draws)?;
        marks::draw(self.plot, &frame, &mut draws)?;
        let end = self.labels.draw(self.plot, &frame, (self.left, right), &mut draws);
        into.extend(draws.into_iter().map(|draw: Draw| Placed::new(owner, draw)));
        slice.height = slice.height.max(end);
        slice.figures.push((place, [self.left, 0.0, right, end]));
        Ok(())
    }
}
