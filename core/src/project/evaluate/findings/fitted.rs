//! Findings on one fitted column. Those with a significance test are judged as one family.

use super::finding;
use crate::{
    fit::Fit,
    inference::{
        departure::matters,
        holm::{FAMILY_LEVEL, Judged, holm},
        hysteresis::{Hysteresis, hysteresis},
        order::{Drift, DriftTest, Settling, drift, settling},
        outlier::outlier,
        shape::Shape,
        spread::{Spread, SpreadReference, spread},
    },
    model::Family as Model,
    project::{
        Project,
        evaluate::{
            column::{ends, expanded_at},
            finding::{Finding, Place, Severity},
            observe::Observation,
            types::ColumnEvaluation,
            words::{plain, tolerance},
        },
    },
    quantity::format::{p_value, significant, with_unit},
    readings::Direction,
};

/// Draws of the reference of the spread test, and of a first look that decides whether they are worth while.
const DRAWS: usize = 999;
const LOOK: usize = 39;

/// The tests that are judged together.
#[derive(Debug, Clone, Default)]
pub struct Family {
    spread: Option<Spread>,
    drift: Option<DriftTest>,
    settling: Option<Settling>,
    hysteresis: Option<Hysteresis>,
    shape: Option<f64>,
}

struct Judging {
    spread: Option<Judged>,
    drift: Option<Judged>,
    settling: Option<Judged>,
    hysteresis: Option<Judged>,
}

/// Findings of a column, most serious first.
#[must_use]
pub fn of_column(project: &Project, observations: &[Observation], column: &ColumnEvaluation) -> Vec<Finding> {
    let Ok(e) = &column.outcome else {
        return Vec::new();
    };
    let fit = &e.fit;
    let at = || Place::Column(column.head.clone());
    let mut found = Vec::new();
    if let Some(severity) = column.captions.residuals.severity {
        let message = format!("{} {}", column.head, column.captions.residuals.text);
        let hint = "compare the residual plots; a cloud around zero is what a good fit leaves";
        found.push(finding("shape", severity, at(), message, hint));
    }
    if fit.family == Model::Declared {
        return found;
    }
    let seen: Vec<&Observation> = e.used.iter().map(|&i| &observations[i]).collect();
    let family = Family::of(fit, &seen, &e.shape);
    let judged = family.judge();
    let context = Context { project, fit, head: &column.head };
    found.extend(family.spread.and_then(|s| context.spread(&s, judged.spread?)));
    found.extend(family.drift.as_ref().and_then(|d| context.drift(d, judged.drift?)));
    found.extend(family.settling.as_ref().and_then(|s| context.settling(s, judged.settling?)));
    found.extend(family.hysteresis.and_then(|h| context.hysteresis(&h, judged.hysteresis?)));
    found.extend(context.turning());
    found.extend(context.outlier(&seen));
    found.sort_by_key(|f| f.severity);
    found
}

impl Family {
    fn of(fit: &Fit, seen: &[&Observation], shape: &Shape) -> Self {
        let order: Option<Vec<f64>> = seen.iter().map(|o| o.order).collect();
        let approach: Vec<Direction> = seen.iter().map(|o| o.direction).collect();
        let drift = match drift(fit, order.as_deref()) {
            Drift::Tested(test) => Some(test),
            Drift::Confounded | Drift::NoOrder | Drift::TooFew => None,
        };
        Self {
            // Residuals of the wrong shape say nothing about the scatter.
            spread: if shape.rejected() { None } else { funnel(fit) },
            drift,
            settling: settling(fit, order.as_deref()),
            hysteresis: hysteresis(&fit.points, &approach),
            shape: shape.p,
        }
    }

    fn judge(&self) -> Judging {
        let p = [
            self.shape,
            self.spread.map(|s| s.p),
            self.drift.as_ref().map(|d| d.test.p),
            self.settling.as_ref().map(|s| s.test.p),
            self.hysteresis.and_then(|h| h.p),
        ];
        let judged = holm(&p, FAMILY_LEVEL);
        Judging { spread: judged[1], drift: judged[2], settling: judged[3], hysteresis: judged[4] }
    }
}

/// The spread test; its reference is drawn only when a first look suggests a funnel.
fn funnel(fit: &Fit) -> Option<Spread> {
    let first = spread(fit, &SpreadReference::new(fit, LOOK, 1)?)?;
    if first.p > 0.2 {
        return Some(first);
    }
    spread(fit, &SpreadReference::new(fit, DRAWS, 1)?)
}

/// Look when the family rejects and the effect matters, Note when it is tiny or stands alone, else nothing.
fn weigh(judged: Judged, big: bool) -> Option<Severity> {
    match (judged.rejected, judged.alone) {
        (true, _) if big => Some(Severity::Look),
        (true, _) | (false, true) => Some(Severity::Note),
        (false, false) => None,
    }
}

struct Context<'a> {
    project: &'a Project,
    fit: &'a Fit,
    head: &'a str,
}

impl Context<'_> {
    fn place(&self) -> Place {
        Place::Column(self.head.to_owned())
    }

    fn unit(&self) -> &str {
        self.project.plan.input.unit.as_str()
    }

    /// An output size at x as an input size, in words.
    fn input(&self, output: f64, x: f64) -> (f64, String) {
        let size = (output / self.fit.curve.derivative(x)).abs();
        (size, with_unit(&significant(size, 2), self.unit()))
    }

    fn big(&self, size: f64, x: f64) -> bool {
        matters(size, tolerance(&self.project.plan, x), expanded_at(self.project, self.fit, x))
    }

    fn spread(&self, s: &Spread, judged: Judged) -> Option<Finding> {
        let severity = weigh(judged, s.end_ratio >= 2.0 || s.end_ratio <= 0.5)?;
        let (word, ratio) = if s.end_ratio >= 1.0 { ("grows", s.end_ratio) } else { ("shrinks", 1.0 / s.end_ratio) };
        let message = format!(
            "scatter {word} with the signal, about {} times over the range ({})",
            significant(ratio, 2),
            p_value(s.p)
        );
        Some(finding(
            "spread",
            severity,
            self.place(),
            message,
            "weights such as 1/x or 1/x² give each level its due say",
        ))
    }

    fn drift(&self, d: &DriftTest, judged: Judged) -> Option<Finding> {
        let (_, high) = ends(self.fit)?;
        let size = d.over_run_input.abs();
        let severity = weigh(judged, self.big(size, high))?;
        let message = format!(
            "it moved while you worked: about {} from first to last ({})",
            with_unit(&significant(size, 2), self.unit()),
            p_value(d.test.p)
        );
        Some(finding(
            "drift",
            severity,
            self.place(),
            message,
            "repeat the zero and one standard at start, middle and end",
        ))
    }

    fn settling(&self, s: &Settling, judged: Judged) -> Option<Finding> {
        let (low, high) = ends(self.fit)?;
        let (size, text) = self.input(s.per_step, f64::midpoint(low, high));
        let severity = weigh(judged, self.big(size, high))?;
        let message = format!("repeats of a standard still moved one way, {text} a step ({})", p_value(s.test.p));
        Some(finding("settling", severity, self.place(), message, "wait longer before a reading is taken as settled"))
    }

    fn hysteresis(&self, h: &Hysteresis, judged: Judged) -> Option<Finding> {
        let (size, text) = self.input(h.largest, h.at);
        let severity = weigh(judged, self.big(size, h.at))?;
        let at = with_unit(&plain(h.at), self.unit());
        let message = format!("rising and falling runs differ by up to {text} at {at}");
        Some(finding(
            "hysteresis",
            severity,
            self.place(),
            message,
            "say from which side it will be used, or count the difference",
        ))
    }

    fn turning(&self) -> Option<Finding> {
        let (low, high) = ends(self.fit)?;
        let spare = 0.05 * (high - low);
        let turns = self.fit.curve.turning_points(low - spare, high + spare);
        let at = with_unit(&significant(*turns.first()?, 3), self.unit());
        let message = format!("{} turns round at {at}: one reading would mean two values", self.head);
        Some(finding(
            "not-one-to-one",
            Severity::Stop,
            self.place(),
            message,
            "choose a function that rises or falls throughout",
        ))
    }

    fn outlier(&self, seen: &[&Observation]) -> Option<Finding> {
        let far = outlier(self.fit).filter(|o| o.beyond)?;
        let reading = seen.get(far.index)?.readings.first()?;
        let message = format!(
            "reading {} lies {} residual SDs from the curve: unlike its neighbours",
            reading.0,
            significant(far.studentised.abs(), 2)
        );
        Some(finding(
            "outlier",
            Severity::Note,
            Place::Reading(reading.0),
            message,
            "find out why before anything else",
        ))
    }
}
