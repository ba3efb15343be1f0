//! What is drawn: text, outlines and clips, in points from the top left corner of the page.

use super::style::{Ink, Style};
use super::tags::NodeId;
use super::text::Line;

/// A piece of an outline.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Segment {
    /// Begin at a point.
    Move([f32; 2]),
    /// A straight line to a point.
    Line([f32; 2]),
    /// A cubic Bézier curve: two handles, then the end.
    Cubic([f32; 2], [f32; 2], [f32; 2]),
    /// Back to the beginning.
    Close,
}

/// How an outline is stroked.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Pen {
    /// Colour.
    pub ink: Ink,
    /// Width in points.
    pub width: f32,
    /// Lengths of strokes and gaps in points, empty for an unbroken line.
    pub dash: Vec<f32>,
    /// Whether ends and corners are round.
    pub round: bool,
}

impl Pen {
    /// An unbroken pen with square ends.
    pub(super) fn new(ink: Ink, width: f32) -> Self {
        Self { ink, width, dash: Vec::new(), round: false }
    }
}

/// One thing to draw.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Draw {
    /// A line of text, its left end on the baseline.
    Text {
        /// Left end.
        x: f32,
        /// Baseline.
        y: f32,
        /// The text, measured.
        line: Line,
        /// Colour.
        ink: Ink,
    },
    /// An outline, filled, stroked or both.
    Shape {
        /// The outline.
        path: Vec<Segment>,
        /// Colour of the inside.
        fill: Option<Ink>,
        /// Stroke along the outline.
        pen: Option<Pen>,
    },
    /// From here on only what lies in the rectangle shows: left, top, right, bottom.
    ClipIn([f32; 4]),
    /// Ends the innermost clip.
    ClipOut,
    /// "page n of N", set when the number of pages is known; ends at `right`.
    PageCount {
        /// Right end.
        right: f32,
        /// Baseline.
        y: f32,
        /// How it is set.
        style: Style,
    },
}

/// What a drawing belongs to, in the order in which a page draws them.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Owner {
    /// Grounds that lie beneath everything, the word across the page included.
    Ground,
    /// Rules and frames that carry no meaning of their own.
    Ornament,
    /// Text repeated for the reader's comfort, as the head of a table on its second page.
    Repeated,
    /// Content, at a place in the structure.
    Content(NodeId),
}

/// A drawing and what it belongs to.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Placed {
    /// What it belongs to.
    pub owner: Owner,
    /// The drawing.
    pub draw: Draw,
}

impl Placed {
    /// A drawing that belongs to `owner`.
    pub(super) fn new(owner: Owner, draw: Draw) -> Self {
        Self { owner, draw }
    }
}

impl Draw {
    /// The same drawing, `dy` points further down.
    pub(super) fn moved_down(self, dy: f32) -> Self {
        match self {
            Self::Text { x, y, line, ink } => Self::Text { x, y: y + dy, line, ink },
            Self::Shape { path, fill, pen } => {
                Self::Shape { path: path.into_iter().map(|s| s.moved_down(dy)).collect(), fill, pen }
            }
            Self::ClipIn([left, top, right, bottom]) => Self::ClipIn([left, top + dy, right, bottom + dy]),
            Self::ClipOut => Self::ClipOut,
            Self::PageCount { right, y, style } => Self::PageCount { right, y: y + dy, style },
        }
    }

    /// A straight stroke.
    pub(super) fn stroke(from: [f32; 2], to: [f32; 2], pen: Pen) -> Self {
        Self::Shape { path: vec![Segment::Move(from), Segment::Line(to)], fill: None, pen: Some(pen) }
    }

    /// A horizontal stroke from `left` to `right`.
    pub(super) fn rule(left: f32, right: f32, y: f32, ink: Ink, width: f32) -> Self {
        Self::stroke([left, y], [right, y], Pen::new(ink, width))
    }

    /// A filled rectangle: left, top, right, bottom.
    pub(super) fn filled([left, top, right, bottom]: [f32; 4], ink: Ink) -> Self {
        Self::Shape { path: rectangle([left, top, right, bottom]), fill: Some(ink), pen: None }
    }

    /// A line of text whose box starts at `top`.
    pub(super) fn text(x: f32, top: f32, line: Line, style: Style) -> Self {
        Self::Text { x, y: top + style.baseline(), line, ink: style.ink }
    }
}

impl Segment {
    fn moved_down(self, dy: f32) -> Self {
        let down = |[x, y]: [f32; 2]| [x, y + dy];
        match self {
            Self::Move(p) => Self::Move(down(p)),
            Self::Line(p) => Self::Line(down(p)),
            Self::Cubic(a, b, p) => Self::Cubic(down(a), down(b), down(p)),
            Self::Close => Self::Close,
        }
    }
}

/// The outline of a rectangle: left, top, right, bottom.
pub(super) fn rectangle([left, top, right, bottom]: [f32; 4]) -> Vec<Segment> {
    polygon(&[[left, top], [right, top], [right, bottom], [left, bottom]])
}

/// The outline through the points and back to the first.
pub(super) fn polygon(points: &[[f32; 2]]) -> Vec<Segment> {
    let mut path = open(points);
    path.push(Segment::Close);
    path
}

/// The outline from the first point to the last.
pub(super) fn open(points: &[[f32; 2]]) -> Vec<Segment> {
    points.iter().enumerate().map(|(i, &p)| if i == 0 { Segment::Move(p) } else { Segment::Line(p) }).collect()
}

/// Length of a handle that turns a quarter circle of radius 1 into a Bézier curve: 4(√2 − 1)/3.
const QUARTER: f32 = 0.552_285;

/// The outline of a rectangle with round corners: left, top, right, bottom, and their radius.
pub(super) fn rounded([l, t, r, b]: [f32; 4], radius: f32) -> Vec<Segment> {
    let h = radius * (1.0 - QUARTER);
    vec![
        Segment::Move([l + radius, t]),
        Segment::Line([r - radius, t]),
        Segment::Cubic([r - h, t], [r, t + h], [r, t + radius]),
        Segment::Line([r, b - radius]),
        Segment::Cubic([r, b - h], [r - h, b], [r - radius, b]),
        Segment::Line([l + radius, b]),
        Segment::Cubic([l + h, b], [l, b - h], [l, b - radius]),
        Segment::Line([l, t + radius]),
        Segment::Cubic([l, t + h], [l + h, t], [l + radius, t]),
        Segment::Close,
    ]
}

/// The outline of a circle.
pub(super) fn circle([x, y]: [f32; 2], radius: f32) -> Vec<Segment> {
    rounded([x - radius, y - radius, x + radius, y + radius], radius)
}
