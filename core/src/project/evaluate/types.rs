//! What an evaluation holds. Three presentations read it: window, command line, report.

use super::{
    finding::{Finding, Severity},
    near_zero::{NearZeroOutcome, ZeroFacts},
    observe::Observation,
};
use crate::{
    convert::{FlippedDifference, digits::PrintedCoefficients},
    fit::Fit,
    inference::{departure::Departure, ftest::FTest, shape::Shape},
    project::{columns::ColumnSpec, figures::Figure, plan::ZeroState},
    readings::Stage,
    zero::quantification::Quantification,
};

/// Everything computed from a project.
#[derive(Debug, Clone)]
pub struct Evaluation {
    /// Counts.
    pub data: DataSummary,
    /// Observations of the fitted stage.
    pub observations: Vec<Observation>,
    /// Zero readings, their band, and the question asked of them.
    pub zeros: ZeroFacts,
    /// What the near-zero row shows.
    pub near_zero: NearZero,
    /// Shown columns in their order.
    pub columns: Vec<ColumnEvaluation>,
    /// Advice.
    pub advice: Advice,
    /// Position of the chosen column in `columns`, when something is chosen.
    pub chosen: Option<usize>,
    /// Position of the column that speaks for the record: chosen, else advised, else none.
    pub speaking: Option<usize>,
    /// Findings on data, record and the speaking column; those of other columns stay in their column.
    pub findings: Vec<Finding>,
    /// Figures that belong to no column: counts, zero band.
    pub figures: Vec<Figure>,
    /// Whether the number of the speaking column needs the words "as advised, not yet chosen".
    pub provisional: bool,
}

impl Evaluation {
    /// The column that speaks, if any.
    #[must_use]
    pub fn speaking_column(&self) -> Option<&ColumnEvaluation> {
        self.columns.get(self.speaking?)
    }
}

/// Counts of what was entered.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct DataSummary {
    /// The stage that is fitted.
    pub stage: Stage,
    /// Readings of standards that count, looks counted one by one.
    pub readings: usize,
    /// Applications of standards.
    pub applications: usize,
    /// Different standards.
    pub distinct_standards: usize,
    /// Zero readings that count.
    pub zero_readings: usize,
    /// Zero applications.
    pub zeros: usize,
    /// Readings set aside.
    pub set_aside: usize,
    /// Readings corrected.
    pub corrected: usize,
}

/// What the near-zero row shows, by the plan and the data.
#[derive(Debug, Clone, PartialEq)]
pub enum NearZero {
    /// Band, cursor, trace and read-outs.
    Band {
        /// Zero state of the plan.
        state: ZeroState,
        /// Zero lies inside the measuring interval: both directions.
        both_sides: bool,
        /// Gap between 0 and the lowest standard that carries no reading, input unit, when worth a word.
        gap: Option<(f64, f64)>,
        /// Folded unless asked (live zero).
        folded: bool,
    },
    /// No state of nothing: the smallest change near the lower end.
    SmallestChange {
        /// At which standard, input unit.
        at: f64,
        /// Means of its applications, output unit.
        means: Vec<f64>,
    },
    /// One line, the height goes to the residuals.
    OneLine(String),
}

/// A column with its fit, or why there is none.
#[derive(Debug, Clone)]
pub struct ColumnEvaluation {
    /// What was asked.
    pub spec: ColumnSpec,
    /// Head, e.g. `Line · 1/x²`.
    pub head: String,
    /// Printed formula, e.g. `y = b₀ + b₁ x`.
    pub formula: String,
    /// Captions over the rows.
    pub captions: Captions,
    /// Figures in the order of the numbers row; empty without a fit.
    pub figures: Vec<Figure>,
    /// Findings of this column.
    pub findings: Vec<Finding>,
    /// The fit, or the reason in words.
    pub outcome: Result<Box<FitEvaluation>, String>,
    /// Whether the plan lets it be chosen.
    pub allowed: bool,
}

/// Verdicts in words over the plots.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Captions {
    /// Over the curve.
    pub curve: Caption,
    /// Over the residuals: `bows: reads up to 0.024 kN low at 5 kN`.
    pub residuals: Caption,
    /// Over the near-zero plot.
    pub near_zero: Caption,
}

/// A caption and how much it matters.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Caption {
    /// The words; may be empty.
    pub text: String,
    /// Shape before the words, if any.
    pub severity: Option<Severity>,
}

impl Caption {
    /// A caption without a shape.
    #[must_use]
    pub fn plain(text: impl Into<String>) -> Self {
        Self { text: text.into(), severity: None }
    }

    /// A caption with a shape.
    #[must_use]
    pub fn with(severity: Severity, text: impl Into<String>) -> Self {
        Self { text: text.into(), severity: Some(severity) }
    }
}

/// A fit with what was inferred from it.
#[derive(Debug, Clone)]
pub struct FitEvaluation {
    /// The fit.
    pub fit: Fit,
    /// Positions in [`Evaluation::observations`], in the order of `fit.points`.
    pub used: Vec<usize>,
    /// Coefficients.
    pub coefficients: Vec<Coefficient>,
    /// Shape test.
    pub shape: Shape,
    /// Lack of fit where there are replicates.
    pub lack_of_fit: Option<FTest>,
    /// Where and how far the curve is off.
    pub departure: Departure,
    /// Residual SD in the input unit at mid-range.
    pub residual_sd_input: Option<f64>,
    /// Leave-one-standard-out RMS, output unit.
    pub level_out_rmse: Option<f64>,
    /// Whether the zeros take part in the fit.
    pub zeros_fitted: bool,
    /// The coefficients as texts good enough to hand on; `None` while the scatter is not known.
    pub printed: Option<PrintedCoefficients>,
    /// How far the flipped fit lies from the inverted one; `None` where there is none.
    pub flipped: Option<FlippedDifference>,
    /// From where on a value is known to the plan's relative uncertainty; `None` without a true zero.
    pub quantification: Option<Quantification>,
    /// Zero band traced through this curve: thresholds and limits, or the reason why not.
    pub near_zero: NearZeroOutcome,
}

/// A coefficient with its doubt.
#[derive(Debug, Clone, PartialEq)]
pub struct Coefficient {
    /// Its name: `b0`.
    pub name: String,
    /// Its name as printed: `b₀`.
    pub printed: String,
    /// Unit.
    pub unit: String,
    /// Value.
    pub value: f64,
    /// Standard uncertainty; `None` without degrees of freedom.
    pub standard_uncertainty: Option<f64>,
    /// Ends of the interval at the plan's level.
    pub interval: Option<(f64, f64)>,
}

/// Which function is advised, and why.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Advice {
    /// The advised column; `None`: none of these is good enough, or too few data.
    pub column: Option<ColumnSpec>,
    /// Reasons, one sentence each.
    pub because: Vec<String>,
}
