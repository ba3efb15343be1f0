//! What the room remembers from frame to frame: nothing here belongs to the project.

use super::{cache::Cache, dots::Measure, near_facts::NearFacts, readout::Readout, rows::Row, ticks::Range};
use crate::{rooms::View, widgets::QuestionState};
use assize_core::project::columns::ColumnSpec;
use eframe::egui::Pos2;
use egui_plot::PlotTransform;

/// What the residuals stand against.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Against {
    /// The certified value.
    #[default]
    Value,
    /// The order in which the readings were taken.
    Order,
}

/// Which ends the near-zero plot painted in one column, in points of the screen.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct TraceEnds {
    /// Position of the column in the evaluation.
    pub column: usize,
    /// Open circle where the cursor meets the curve.
    pub circle: Option<Pos2>,
    /// Lower end of the dotted drop line.
    pub foot: Option<Pos2>,
    /// The ■ at the smallest value missed at most β times.
    pub square: Option<Pos2>,
    /// The other ■, where zero lies inside the interval.
    pub square_other: Option<Pos2>,
}

/// What the pointer holds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Drag {
    /// The cursor, with the distance from the pointer to its line at the press, points.
    Cursor {
        /// Pointer minus line, downwards.
        grip: f32,
        /// Position of the column in which it was taken.
        column: usize,
    },
    /// The ■ of a column.
    Square {
        /// Position of the column in the evaluation.
        column: usize,
    },
}

/// A true value on trial: the ■ dragged along a curve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Probe {
    /// Position of the column in the evaluation.
    pub column: usize,
    /// The true value (or, without a zero, the change), input unit.
    pub x: f64,
}

/// A choice about to be made.
#[derive(Debug, Clone, PartialEq)]
pub struct Choosing {
    /// What would be chosen.
    pub column: ColumnSpec,
    /// The question with the reason as typed so far.
    pub question: QuestionState,
}

/// Windows of the plots where a person moved them; `None` = chosen from the data.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Windows {
    /// Values, curves and residuals.
    pub value: Option<Range>,
    /// Run order, residuals.
    pub order: Option<Range>,
    /// Indications, curves.
    pub output: Option<Range>,
    /// Residuals in the measure shown; columns with a scale of their own follow in proportion.
    pub residual: Option<Range>,
    /// Values near zero.
    pub near_x: Option<Range>,
    /// Indications near zero.
    pub near_y: Option<Range>,
}

/// A near-zero plot of the last frame, for the pointer of this one.
#[derive(Debug, Clone, Copy)]
pub(super) struct NearPlot {
    /// Position of the column in the evaluation.
    pub(super) column: usize,
    /// Where its points lay.
    pub(super) transform: PlotTransform,
    /// Whether a ■ is there to be dragged.
    pub(super) square: Option<Pos2>,
}

/// The room from frame to frame.
#[derive(Debug, Default)]
pub struct State {
    /// What residuals are measured in.
    pub measure: Measure,
    /// What they stand against.
    pub against: Against,
    /// One scale for all residual plots, however bad one is.
    pub one_scale: bool,
    /// The threshold on trial, output unit; the decision threshold until it is moved.
    pub cursor: f64,
    /// The cursor was moved away from the decision threshold by a person.
    pub moved: bool,
    /// The observation under the pointer, shown in every row.
    pub hover: Option<usize>,
    /// The row that is open alone: in a small window always one, else where a person asked for it.
    pub open: Option<Row>,
    /// One row at a time, because the window is low; as drawn last.
    pub alone: bool,
    /// The near-zero row was asked for although it is folded by itself (live zero).
    pub near_zero_asked: bool,
    /// Columns asked for by a person, latest first; the others give way.
    pub asked: Vec<ColumnSpec>,
    /// What the pointer holds.
    pub drag: Option<Drag>,
    /// A true value on trial.
    pub probe: Option<Probe>,
    /// A choice about to be made.
    pub choosing: Option<Choosing>,
    /// The text in the cursor field while it is edited.
    pub typed: Option<String>,
    /// Windows of the plots.
    pub windows: Windows,
    /// Read-outs of the cursor, by column, as drawn last.
    pub readouts: Vec<Readout>,
    /// Ends of the traces as painted last.
    pub painted: Vec<TraceEnds>,
    /// Frames in which the read-outs were computed anew, for tests and measurements.
    pub computed: u64,
    pub(super) near_plots: Vec<NearPlot>,
    pub(super) cache: Cache,
    pub(super) seen: Option<u64>,
}

impl State {
    /// Takes a new revision: what rests on the old one is let go.
    pub(super) fn meet(&mut self, view: &View<'_>) {
        if self.seen == Some(view.revision) {
            return;
        }
        self.seen = Some(view.revision);
        self.cache = Cache::new(view);
        self.hover = None;
        self.probe = None;
        self.near_plots.clear();
        let facts = self.cache.near.facts();
        // A cursor that nobody moved follows its threshold; a moved one stays while there is a band.
        let start = facts.and_then(|f| f.thresholds.first().copied());
        if !self.moved || start.is_none() {
            self.moved = false;
            self.cursor = start.unwrap_or(f64::NAN);
        }
    }

    /// Moves the cursor to a signal, output unit; anything not finite is refused.
    pub(super) fn move_cursor(&mut self, signal: f64) {
        if !signal.is_finite() {
            return;
        }
        self.cursor = signal;
        self.probe = None;
        self.typed = None;
        self.moved = !self.cache.near.facts().is_some_and(|f| f.on_threshold(signal));
    }

    /// The facts of the near-zero row, when it has plots.
    pub(super) fn near(&self) -> Option<&NearFacts> {
        self.cache.near.facts()
    }
}
