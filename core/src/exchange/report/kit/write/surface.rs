//! Drawing on a page of the PDF writer.

use std::ops::Range;

use krilla::color::{luma, rgb};
use krilla::geom::{Path, PathBuilder, Point, Transform};
use krilla::num::NormalizedF32;
use krilla::paint::{Fill, FillRule, LineCap, LineJoin, Paint, Stroke, StrokeDash};
use krilla::surface::{Location, Surface};
use krilla::tagging::{ContentTag, Identifier};
use krilla::text::GlyphId;

use super::super::draw::{Draw, Pen, Segment, rectangle};
use super::super::error::ReportError;
use super::super::furniture::Across;
use super::super::style::Ink;
use super::super::text::{Glyph, Line, Typesetter};

/// A page being drawn.
pub(super) struct Easel<'a, 's> {
    setter: &'a Typesetter,
    surface: Surface<'s>,
    page: usize,
    pages: usize,
}

impl<'a, 's> Easel<'a, 's> {
    /// Page `page` of `pages`, counted from 1.
    pub(super) fn new(setter: &'a Typesetter, surface: Surface<'s>, (page, pages): (usize, usize)) -> Self {
        Self { setter, surface, page, pages }
    }

    /// Opens a marked piece; what is drawn until [`Easel::end`] belongs to it.
    pub(super) fn start(&mut self, tag: ContentTag<'_>) -> Identifier {
        self.surface.start_tagged(tag)
    }

    /// Closes the marked piece.
    pub(super) fn end(&mut self) {
        self.surface.end_tagged();
    }

    /// Draws one thing after the other.
    pub(super) fn draw_all<'d>(&mut self, draws: impl IntoIterator<Item = &'d Draw>) -> Result<(), ReportError> {
        draws.into_iter().try_for_each(|draw| self.draw(draw))
    }

    fn draw(&mut self, draw: &Draw) -> Result<(), ReportError> {
        match draw {
            Draw::Text { x, y, line, ink } => self.text(line, [*x, *y], *ink, false),
            Draw::Shape { path, fill, pen } => self.shape(path, *fill, pen.as_ref()),
            Draw::ClipIn(rect) => {
                if let Some(path) = outline(&rectangle(*rect)) {
                    self.surface.push_clip_path(&path, &FillRule::NonZero);
                }
            }
            Draw::ClipOut => self.surface.pop(),
            Draw::PageCount { right, y, style } => {
                let text = format!("page {} of {}", self.page, self.pages);
                let line = self.setter.line(&text, *style)?;
                self.text(&line, [right - line.width, *y], style.ink, false);
            }
        }
        Ok(())
    }

    /// Draws the word across the page as outlines: it is no text that could get in between when
    /// text is taken out of the file.
    pub(super) fn draw_across(&mut self, across: &Across) {
        let [cos, sin] = across.turn;
        let [x, y] = across.start;
        let turned = Transform::from_row(cos, -sin, sin, cos, x, y);
        self.surface.push_transform(&turned);
        self.text(&across.line, [0.0, 0.0], Ink::Pale, true);
        self.surface.pop();
    }

    fn text(&mut self, line: &Line, [x, y]: [f32; 2], ink: Ink, outlined: bool) {
        self.surface.set_stroke(None);
        self.surface.set_fill(Some(fill(ink)));
        for run in &line.runs {
            let start = Point::from_xy(x + run.x, y);
            let font = self.setter.font(run.face);
            self.surface.draw_glyphs(start, &run.glyphs, font, &run.text, line.size, outlined);
        }
    }

    fn shape(&mut self, path: &[Segment], inside: Option<Ink>, pen: Option<&Pen>) {
        if let Some(path) = outline(path) {
            self.surface.set_fill(inside.map(fill));
            self.surface.set_stroke(pen.map(stroke));
            self.surface.draw_path(&path);
        }
    }
}

impl krilla::text::Glyph for Glyph {
    fn glyph_id(&self) -> GlyphId {
        GlyphId::new(self.id)
    }
    fn text_range(&self) -> Range<usize> {
        self.text.clone()
    }
    fn x_advance(&self, size: f32) -> f32 {
        self.advance * size
    }
    fn x_offset(&self, size: f32) -> f32 {
        self.right * size
    }
    fn y_offset(&self, size: f32) -> f32 {
        self.up * size
    }
    fn y_advance(&self, _size: f32) -> f32 {
        0.0
    }
    fn location(&self) -> Option<Location> {
        None
    }
}

fn paint(ink: Ink) -> Paint {
    let [red, green, blue] = ink.rgb();
    if red == green && green == blue { luma::Color::new(red).into() } else { rgb::Color::new(red, green, blue).into() }
}

fn fill(ink: Ink) -> Fill {
    Fill { paint: paint(ink), opacity: NormalizedF32::ONE, rule: FillRule::NonZero }
}

fn stroke(pen: &Pen) -> Stroke {
    let (line_cap, line_join) =
        if pen.round { (LineCap::Round, LineJoin::Round) } else { (LineCap::Butt, LineJoin::Miter) };
    Stroke {
        paint: paint(pen.ink),
        width: pen.width,
        miter_limit: 4.0,
        line_cap,
        line_join,
        opacity: NormalizedF32::ONE,
        dash: (!pen.dash.is_empty()).then(|| StrokeDash { array: pen.dash.clone(), offset: 0.0 }),
    }
}

/// The outline in the writer's form, or nothing if it is empty.
fn outline(path: &[Segment]) -> Option<Path> {
    let mut builder = PathBuilder::new();
    for segment in path {
        match *segment {
            Segment::Move([x, y]) => builder.move_to(x, y),
            Segment::Line([x, y]) => builder.line_to(x, y),
            Segment::Cubic([ax, ay], [bx, by], [x, y]) => builder.cubic_to(ax, ay, bx, by, x, y),
            Segment::Close => builder.close(),
        }
    }
    builder.finish()
}
