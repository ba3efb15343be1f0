//! Verdicts in words, each with its size: the captions over the plots and the reasons of the advice.

use super::{finding::Severity, types::Caption};
use crate::{
    fit::FitError,
    inference::{
        advice::{Because, Outcome, ShapeTest},
        departure::{Departure, LevelDeparture, Pattern, matters},
    },
    model::Family,
    project::plan::Plan,
    quantity::format::{p_value, significant, with_unit},
};

/// Above this share of the span a fit is called the wrong shape, not bowed.
const WRONG_SHAPE: f64 = 0.1;

/// What a residual caption is made of.
#[derive(Debug, Clone, Copy)]
pub struct ResidualFacts<'a> {
    /// The plan, for units and limits.
    pub plan: &'a Plan,
    /// The family.
    pub family: &'a Family,
    /// Departures.
    pub departure: &'a Departure,
    /// The shape test rejects.
    pub rejected: bool,
    /// Too few points to tell.
    pub too_few: bool,
    /// N − p.
    pub degrees_of_freedom: usize,
    /// Expanded uncertainty of one converted reading at the worst place, input unit.
    pub expanded: Option<f64>,
    /// Span of the standards, input unit.
    pub span: f64,
}

/// The caption over the residuals.
#[must_use]
pub fn residuals(facts: &ResidualFacts<'_>) -> Caption {
    let worst = worst(facts.departure);
    if *facts.family == Family::Declared {
        let size = worst.map_or_else(|| "no standard can be read back".to_owned(), |w| reads(facts.plan, w));
        return Caption::plain(format!("errors: {size}"));
    }
    if facts.degrees_of_freedom == 0 {
        return Caption::with(Severity::Look, "passes through every point because it has to: it cannot show its error");
    }
    if facts.too_few && !facts.rejected {
        return Caption::with(Severity::Note, "too few points to tell");
    }
    if !facts.rejected {
        return Caption::plain("cloud: only scatter is left");
    }
    let word = pattern_word(facts.departure.pattern);
    let Some(worst) = worst else {
        return Caption::with(Severity::Look, format!("{word}: some readings cannot be read back at all"));
    };
    let error = worst.read_back_error.unwrap_or(0.0);
    if error.abs() > WRONG_SHAPE * facts.span {
        return Caption::with(Severity::Look, format!("wrong shape: {}", reads(facts.plan, worst)));
    }
    let tiny = !matters(error, tolerance(facts.plan, worst.x), facts.expanded);
    if tiny {
        return Caption::with(Severity::Note, format!("{word}, real but tiny: {}", reads(facts.plan, worst)));
    }
    Caption::with(Severity::Look, format!("{word}: {}", reads(facts.plan, worst)))
}

/// The level with the largest read-back error.
#[must_use]
pub fn worst(departure: &Departure) -> Option<&LevelDeparture> {
    departure.levels.get(departure.worst_read_back?)
}

/// `reads up to 0.024 kN low at 5 kN`; *high* = read-back value above the certified one.
#[must_use]
pub fn reads(plan: &Plan, level: &LevelDeparture) -> String {
    let unit = plan.input.unit.as_str();
    let error = level.read_back_error.unwrap_or(0.0);
    let side = if error > 0.0 { "high" } else { "low" };
    let at = with_unit(&plain(level.x), unit);
    if error == 0.0 {
        return format!("reads right to the last digit, worst at {at}");
    }
    format!("reads up to {} {side} at {at}", with_unit(&significant(error.abs(), 2), unit))
}

fn pattern_word(pattern: Pattern) -> &'static str {
    match pattern {
        Pattern::BowUp | Pattern::BowDown => "bows",
        Pattern::S => "makes an S",
        Pattern::Wave => "waves",
        Pattern::Irregular | Pattern::None => "leaves more than scatter",
    }
}

/// Tolerance at a value where limits are set, input unit.
#[must_use]
pub fn tolerance(plan: &Plan, x: f64) -> Option<f64> {
    use crate::project::plan::Limits;
    match plan.limits.as_ref()? {
        Limits::NoVerdictWanted => None,
        Limits::Absolute(a) => Some(*a),
        Limits::PercentOfReading(p) => Some(x.abs() * p / 100.0),
        Limits::PercentOfSpan(p) => plan.interval.map(|(low, high)| (high - low) * p / 100.0),
    }
}

/// A standard's value as it was meant: at most 12 significant digits, trailing zeros dropped.
#[must_use]
pub fn plain(x: f64) -> String {
    let rounded: f64 = format!("{x:.11e}").parse().unwrap_or(x);
    if rounded != 0.0 && !(1e-4..1e9).contains(&rounded.abs()) {
        return significant(rounded, 6);
    }
    format!("{rounded}").replace('-', "−")
}

/// R² with two digits after its nines, so that it never reads 1 for a fit that is not exact.
#[must_use]
pub fn r_squared(r2: f64) -> String {
    let places = (libm::ceil(-libm::log10(1.0 - r2)) + 1.0).clamp(3.0, 15.0);
    crate::quantity::format::decimals(r2, places as usize)
}

/// One reason of the advice as a sentence.
#[must_use]
pub fn because(reason: &Because) -> String {
    match reason {
        Because::ShapeRejected { family, p, test, numbers } => {
            let what = match test {
                ShapeTest::NextTerm => "one more term would take more than chance out of its residuals",
                ShapeTest::NextButOne => "a further term would take more than chance out of its residuals",
                ShapeTest::LackOfFit => "repeats agree far better than the curve agrees with them",
            };
            let f = significant(numbers.f, 3);
            format!(
                "{}: {what} (F = {f} with {}, {} degrees of freedom; shape {})",
                family.plain_name(),
                numbers.df1,
                numbers.df2,
                p_value(*p)
            )
        }
        Because::ShapeAccepted { family, p } => {
            format!("{}: nothing but scatter is left (shape {})", family.plain_name(), p_value(*p))
        }
        Because::LowerAicc { family, aicc, over, other } => format!(
            "{} describes the data with less than {} (AICc {aicc:.1} against {other:.1})",
            family.plain_name(),
            over.plain_name()
        )
        .replace('-', "−"),
        Because::NotFitted { family, error } => {
            format!("{}: {}", family.plain_name(), fit_error(error))
        }
        Because::TooFew { family, numbers } => format!(
            "{}: too few points to tell ({} different standards, {} needed; {} degrees of freedom, {} needed)",
            family.plain_name(),
            numbers.levels,
            numbers.levels_needed,
            numbers.degrees_of_freedom,
            numbers.degrees_needed
        ),
        Because::Named { family } => {
            format!("{} is good enough, and the plan names it for this instrument", family.plain_name())
        }
        Because::WouldDo { family, p } => {
            format!("{} would do (shape {}), but the plan does not allow it", family.plain_name(), p_value(*p))
        }
    }
}

/// Why a family cannot be fitted, without the position of the reading, which the caller names.
#[must_use]
pub fn fit_error(error: &FitError) -> String {
    match error {
        FitError::OutsideDomain { what, x, .. } => {
            format!("{what} {} does not exist: choose another function, or set this row aside with a reason", plain(*x))
        }
        FitError::NotFinite { .. } => "this is not a finite number".to_owned(),
        FitError::BadWeight { reason, .. } => format!("these weights do not exist here: {reason}"),
        FitError::Undefined { x, .. } => {
            format!("the declared function has no value at {}", plain(*x))
        }
        FitError::TooFew { .. }
        | FitError::OutOfRange
        | FitError::TooClose { .. }
        | FitError::DegreeTooHigh { .. }
        | FitError::NoUncertainty
        | FitError::NoRepeats
        | FitError::IdenticalRepeats
        | FitError::NotConverged { .. }
        | FitError::NoStart { .. }
        | FitError::BothAxes { .. }
        | FitError::Units { .. }
        | FitError::Formula { .. }
        | FitError::NotFitted => error.to_string(),
    }
}

/// The outcome of the advice in a few words.
#[must_use]
pub fn outcome(outcome: &Outcome) -> String {
    match outcome {
        Outcome::Advised(family) => format!("{} is advised", family.plain_name()),
        Outcome::NoneGoodEnough => "none of these is good enough".to_owned(),
        Outcome::TooFewToTell(family, _) => {
            format!("nothing speaks against {}, but there are too few points to tell", family.plain_name())
        }
        Outcome::NothingToJudge => "there is nothing to judge yet".to_owned(),
    }
}
