//! The description of a plot.

/// A plot: a frame with axes, and what is drawn in it.
///
/// Greys run from 0 (black) to 1 (white). Bands are drawn first, then limits, lines and marks.
#[derive(Debug, Clone, PartialEq)]
pub struct Plot {
    /// Heading over the frame.
    pub title: String,
    /// What there is to see, in words, for those who cannot see it. Not empty.
    pub alt: String,
    /// The horizontal axis.
    pub x: Axis,
    /// The vertical axis.
    pub y: Axis,
    /// Height of the frame in points, without title and labels.
    pub height_pt: f32,
    /// Points.
    pub marks: Vec<Mark>,
    /// Curves.
    pub lines: Vec<Line>,
    /// Filled areas between two curves.
    pub bands: Vec<Band>,
    /// Straight lines across the frame at a position of y.
    pub hlines: Vec<Limit>,
    /// Straight lines down the frame at a position of x.
    pub vlines: Vec<Limit>,
    /// What the signs mean, printed between title and frame.
    pub key: Vec<Key>,
}

/// An axis.
#[derive(Debug, Clone, PartialEq)]
pub struct Axis {
    /// Name and unit. May be empty.
    pub label: String,
    /// Positions in the unit of the axis, with their text. Those outside the range are left out.
    pub ticks: Vec<(f64, String)>,
    /// Start and end in the unit of the axis, the end above the start.
    pub range: (f64, f64),
}

/// A point in a plot. It must lie within the frame.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Mark {
    /// Position in the unit of the horizontal axis.
    pub x: f64,
    /// Position in the unit of the vertical axis.
    pub y: f64,
    /// How it looks.
    pub shape: MarkShape,
}

/// How a point looks.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum MarkShape {
    /// ▲ filled.
    Rising,
    /// ▽ open.
    Falling,
    /// ● filled.
    Dot,
    /// × over a pale dot: set aside.
    CrossedOut,
    /// ■ filled.
    Square,
}

/// A curve, cut off at the frame.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// Positions in the units of the axes; at least two, else nothing is drawn.
    pub points: Vec<[f64; 2]>,
    /// Pattern of the stroke.
    pub dash: Dash,
    /// Width of the stroke in points.
    pub width: f32,
    /// Grey of the stroke, 0 to 1.
    pub grey: f32,
}

/// Pattern of a stroke.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Dash {
    /// Unbroken.
    Solid,
    /// Long strokes.
    Dashed,
    /// Round dots.
    Dotted,
}

/// A filled area between two curves over the same positions, cut off at the frame.
#[derive(Debug, Clone, PartialEq)]
pub struct Band {
    /// Positions in the unit of the horizontal axis.
    pub xs: Vec<f64>,
    /// Lower edge at each position, in the unit of the vertical axis.
    pub lo: Vec<f64>,
    /// Upper edge at each position, in the unit of the vertical axis.
    pub hi: Vec<f64>,
    /// Grey of the filling, 0 to 1.
    pub grey: f32,
}

/// A straight line from edge to edge of the frame. Outside the frame it is left out.
#[derive(Debug, Clone, PartialEq)]
pub struct Limit {
    /// Position in the unit of the axis it crosses.
    pub at: f64,
    /// Text beside the line. May be empty.
    pub label: String,
    /// Pattern of the stroke.
    pub dash: Dash,
}

/// One entry of the key of a plot.
#[derive(Debug, Clone, PartialEq)]
pub struct Key {
    /// The sign.
    pub sign: KeySign,
    /// What it means.
    pub text: String,
}

/// A sign in the key of a plot.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum KeySign {
    /// A point.
    Mark(MarkShape),
    /// A curve.
    Line {
        /// Pattern of the stroke.
        dash: Dash,
        /// Width of the stroke in points.
        width: f32,
        /// Grey of the stroke, 0 to 1.
        grey: f32,
    },
    /// A filled area.
    Band {
        /// Grey of the filling, 0 to 1.
        grey: f32,
    },
}
