//! The question "how small is more than nothing", for the plan and for each column.

use super::{
    finding::Severity,
    observe::Observation,
    types::{Caption, FitEvaluation, NearZero},
    words::plain,
};
use crate::{
    fit::Fit,
    project::{
        Project,
        figures::Figure,
        plan::{DetectionBasis, Plan, ZeroState, ZerosPart},
    },
    quantity::{
        format::{place_of, significant, to_place, with_unit},
        unit::scale_for,
    },
    zero::{
        asked::{Absent, Asked, Basis, Side, Zeros},
        band::ZeroBand,
        detection::{Detection, Limits, sides},
        disagreement::{self, Disagreement, disagreement},
        smallest_change::SmallestChange,
        trial::Trial,
    },
};

/// Zero readings and the question asked of them.
#[derive(Debug, Clone)]
pub struct ZeroFacts {
    /// Means of the zero applications, output unit, in order.
    pub means: Vec<f64>,
    /// Their band; `None` with fewer than 3.
    pub band: Option<ZeroBand>,
    /// Error rates, repeats and basis.
    pub asked: Asked,
    /// The lowest standard and its application means, for plans without a state of nothing.
    pub lowest: Option<(f64, Vec<f64>)>,
}

/// Thresholds and limits on one side of zero.
#[derive(Debug, Clone, PartialEq)]
pub struct SideLimits {
    /// Which side.
    pub side: Side,
    /// The numbers.
    pub limits: Limits,
    /// Why the detection limit is missing, if it is.
    pub absent: Option<Absent>,
    /// The decision threshold put on trial: what it traces to.
    pub at_threshold: Trial,
}

/// What the near-zero row of a column comes to.
#[derive(Debug, Clone, PartialEq)]
pub enum NearZeroOutcome {
    /// Limits, one entry a side.
    Limits(Vec<SideLimits>),
    /// Smallest change near the lowest standard.
    Change(Box<SmallestChange>),
    /// Neither, and why.
    Absent(Absent),
}

impl ZeroFacts {
    /// Gathers the zeros and the question.
    #[must_use]
    pub fn new(project: &Project, observations: &[Observation]) -> Self {
        let means: Vec<f64> = observations.iter().filter(|o| o.is_zero()).map(|o| o.y).collect();
        let question = project.plan.detection;
        let low = observations.iter().filter(|o| !o.is_zero()).map(|o| o.x).min_by(f64::total_cmp);
        let lowest = low.map(|x| {
            let same = |o: &&Observation| !o.is_zero() && o.x.total_cmp(&x).is_eq();
            (x, observations.iter().filter(same).map(|o| o.y).collect())
        });
        Self {
            band: ZeroBand::new(&means, project.plan.level),
            means,
            asked: Asked {
                alpha: question.alpha,
                beta: question.beta,
                k: question.k as usize,
                basis: match question.basis {
                    DetectionBasis::Zeros => Basis::Zeros,
                    DetectionBasis::Calibration => Basis::Calibration,
                },
            },
            lowest,
        }
    }

    /// The zeros as the zero layer takes them.
    #[must_use]
    pub fn zeros(&self) -> Zeros<'_> {
        Zeros { count: self.means.len(), band: self.band.as_ref() }
    }

    /// The detection question put to a fit, one answer a side.
    ///
    /// # Errors
    /// [`Absent`] with the reason.
    pub fn detections<'a>(&'a self, fit: &'a Fit) -> Result<Vec<Detection<'a>>, Absent> {
        sides(fit).into_iter().map(|side| Detection::new(fit, self.zeros(), self.asked, side)).collect()
    }
}

/// What the near-zero row shows at all.
#[must_use]
pub fn row(project: &Project, observations: &[Observation], zeros: &ZeroFacts) -> NearZero {
    let plan = &project.plan;
    match plan.zero_state {
        ZeroState::NotAsked => NearZero::OneLine("how small is more than nothing is not asked in this plan".to_owned()),
        ZeroState::None => match &zeros.lowest {
            Some((at, means)) => NearZero::SmallestChange { at: *at, means: means.clone() },
            None => NearZero::OneLine("no readings yet".to_owned()),
        },
        state if zeros.band.is_none() => NearZero::OneLine(too_few(state, zeros.means.len())),
        state => NearZero::Band {
            state,
            both_sides: plan.interval.is_some_and(|(low, high)| low < 0.0 && high > 0.0),
            gap: gap(plan, observations),
            folded: state == ZeroState::LiveZero,
        },
    }
}

fn too_few(state: ZeroState, n: usize) -> String {
    let what = if state == ZeroState::LiveZero { "readings with nothing applied" } else { "zero readings" };
    format!("{n} {what}: a band needs 3, a dependable one 10")
}

/// Between 0 and the lowest standard nothing was measured, worth a word above 2 % of the span.
fn gap(plan: &Plan, observations: &[Observation]) -> Option<(f64, f64)> {
    let xs = || observations.iter().filter(|o| !o.is_zero()).map(|o| o.x);
    let (low, high) = (xs().fold(f64::INFINITY, f64::min), xs().fold(f64::NEG_INFINITY, f64::max));
    let starts_above = plan.interval.is_some_and(|(low, _)| low > 0.0);
    (starts_above && low > 0.02 * (high - low)).then_some((0.0, low))
}

/// Limits of one fit, by the plan.
#[must_use]
pub fn detection(project: &Project, fit: &Fit, zeros: &ZeroFacts) -> NearZeroOutcome {
    let asked = zeros.asked;
    match project.plan.zero_state {
        ZeroState::NotAsked => NearZeroOutcome::Absent(Absent::NotAsked),
        ZeroState::None => {
            let Some((at, means)) = &zeros.lowest else {
                return NearZeroOutcome::Absent(Absent::NoTrueZero);
            };
            match SmallestChange::new(fit, *at, means, (asked.alpha, asked.beta, asked.k), project.plan.level) {
                Ok(change) => NearZeroOutcome::Change(Box::new(change)),
                Err(absent) => NearZeroOutcome::Absent(absent),
            }
        }
        ZeroState::Zero | ZeroState::LiveZero => match zeros.detections(fit) {
            Err(absent) => NearZeroOutcome::Absent(absent),
            Ok(all) => NearZeroOutcome::Limits(
                all.into_iter()
                    .map(|d| SideLimits {
                        side: d.side,
                        limits: d.limits,
                        absent: d.absent,
                        at_threshold: d.trial(d.limits.decision_threshold),
                    })
                    .collect(),
            ),
        },
    }
}

/// Why there is no limit, in words.
#[must_use]
pub fn absent_words(project: &Project, absent: Absent) -> String {
    let unit = project.plan.input.unit.as_str();
    match absent {
        Absent::NotAsked => "not asked in this plan".to_owned(),
        Absent::NoTrueZero => "no state of nothing".to_owned(),
        Absent::NoZeros => "no zero readings".to_owned(),
        Absent::TooFewZeros { n } => {
            let what = match (project.plan.zero_state, n) {
                (ZeroState::None, 1) => "reading at the lowest standard",
                (ZeroState::None, _) => "readings at the lowest standard",
                (_, 1) => "zero reading",
                _ => "zero readings",
            };
            format!("{n} {what}, 3 are needed")
        }
        Absent::IdenticalZeros => "identical zeros: the display is coarser than the scatter".to_owned(),
        Absent::NoValueAtZero => "no value: this curve has no zero".to_owned(),
        Absent::NoScatter => "no scatter is known".to_owned(),
        Absent::TurnsBack => "the curve turns back near zero".to_owned(),
        Absent::NotReached { up_to } => {
            format!("not reached up to {}", with_unit(&plain(up_to), unit))
        }
    }
}

/// A size near zero in the unit that reads well, e.g. `12 N` for 0.012 kN.
#[must_use]
pub fn near(project: &Project, value: f64, digits: usize) -> String {
    let scale = scale_for(&project.plan.input.unit, value.abs());
    with_unit(&significant(value * scale.factor, digits), &scale.unit)
}

/// `12 N (7 … 23)`: a limit with its range from the doubt of the SD, all in one unit.
#[must_use]
pub fn limit_text(project: &Project, limits: &Limits) -> Option<String> {
    limits.detection_limit.map(|limit| sized(project, limit, limits.low, limits.high))
}

/// A size with its range, all in the unit and to the place that suit the size.
fn sized(project: &Project, size: f64, low: Option<f64>, high: Option<f64>) -> String {
    let scale = scale_for(&project.plan.input.unit, size.abs());
    let at = |v: f64| to_place(v * scale.factor, place_of(size.abs() * scale.factor));
    let main = with_unit(&at(size), &scale.unit);
    match (low, high) {
        (Some(low), Some(high)) => format!("{main} ({} … {})", at(low), at(high)),
        (Some(low), None) => format!("{main} ({} …)", at(low)),
        _ => main,
    }
}

/// `1 in 20` for 0.05; otherwise per cent.
#[must_use]
pub fn odds(p: f64) -> String {
    let n = 1.0 / p;
    if (n - libm::round(n)).abs() < 1e-9 * n {
        format!("1 in {n:.0}")
    } else {
        with_unit(&significant(100.0 * p, 2), "%")
    }
}

/// Whether curve and measured zero disagree by more than chance, and by how much.
#[must_use]
pub fn zero_disagreement(project: &Project, e: &FitEvaluation, zeros: &ZeroFacts) -> Option<Disagreement> {
    let band = zeros.band.as_ref()?;
    let part = match (project.plan.zeros_part, e.zeros_fitted) {
        (ZerosPart::Fitted, true) => disagreement::ZerosPart::Fitted,
        _ => disagreement::ZerosPart::CheckOnly,
    };
    disagreement(&e.fit, band, part)
}

/// The caption over the near-zero plot with the cursor on the decision threshold.
#[must_use]
pub fn caption(project: &Project, e: &FitEvaluation, zeros: &ZeroFacts) -> Caption {
    match &e.near_zero {
        NearZeroOutcome::Absent(absent) => Caption::with(Severity::Note, absent_words(project, *absent)),
        NearZeroOutcome::Change(change) => {
            let (low, high) = change.range;
            let size = sized(project, change.smallest_change, Some(low), Some(high));
            Caption::plain(format!("changes of {size} are missed {}", odds(zeros.asked.beta)))
        }
        NearZeroOutcome::Limits(all) => limits_caption(project, e, zeros, all),
    }
}

fn limits_caption(project: &Project, e: &FitEvaluation, zeros: &ZeroFacts, all: &[SideLimits]) -> Caption {
    let Some(first) = all.first() else {
        return Caption::with(Severity::Note, absent_words(project, Absent::NoZeros));
    };
    let trial = first.at_threshold;
    if zero_disagreement(project, e, zeros).is_some_and(|d| d.p < 0.01) {
        let at = trial.traced.map_or_else(|| "no value".to_owned(), |x| format!("traces to {}", near(project, x, 2)));
        return Caption::with(Severity::Look, format!("{at}: the curve misses the measured zero"));
    }
    match first.absent {
        None => Caption::plain(trial_words(project, &trial, zeros.asked.beta, limit_text(project, &first.limits))),
        Some(absent) => Caption::with(Severity::Note, absent_words(project, absent)),
    }
}

/// `traces to 3.3 N; 1 in 20 missed at 12 N (7 … 23)`: the two read-outs of a threshold on trial.
///
/// `limit` replaces the plain size by one with its range, where the threshold is the decision threshold.
#[must_use]
pub fn trial_words(project: &Project, trial: &Trial, beta: f64, limit: Option<String>) -> String {
    let traced =
        trial.traced.map_or_else(|| "meets no value".to_owned(), |x| format!("traces to {}", near(project, x, 2)));
    let missed = limit.or_else(|| trial.missed_at_most.map(|x| near(project, x, 2)));
    match missed {
        Some(at) => format!("{traced}; {} missed at {at}", odds(beta)),
        None => format!("{traced}; no value here is missed as rarely as {}", odds(beta)),
    }
}

/// Figures of the near-zero row.
#[must_use]
pub fn figures(project: &Project, e: &FitEvaluation, zeros: &ZeroFacts) -> Vec<Figure> {
    let text = |key: &str, label: &str, value: Option<f64>, text: String| Figure::new(key, label, value, text, "");
    match &e.near_zero {
        NearZeroOutcome::Absent(absent) => {
            let words = match absent {
                Absent::NoValueAtZero => "no zero".to_owned(),
                other => absent_words(project, *other),
            };
            vec![text("detection_limit", "detection limit", None, words)]
        }
        NearZeroOutcome::Change(change) => vec![text(
            "smallest_change",
            "smallest change",
            Some(change.smallest_change),
            format!(
                "{} at {}",
                near(project, change.smallest_change, 2),
                with_unit(&plain(change.at), project.plan.input.unit.as_str())
            ),
        )],
        NearZeroOutcome::Limits(all) => {
            all.iter().flat_map(|side| side_figures(project, side, all.len() > 1, zeros)).collect()
        }
    }
}

/// A signal to the second digit of the zeros' SD.
#[must_use]
pub fn signal(y: f64, zeros: &ZeroFacts) -> String {
    match zeros.band.as_ref().filter(|b| !b.identical()) {
        Some(band) => to_place(y, place_of(band.sd)),
        None => significant(y, 4),
    }
}

fn side_figures(project: &Project, side: &SideLimits, two: bool, zeros: &ZeroFacts) -> Vec<Figure> {
    let suffix = match (two, side.side) {
        (false, _) => "",
        (true, Side::Above) => " above",
        (true, Side::Below) => " below",
    };
    let key = |name: &str| format!("{name}{}", suffix.replace(' ', "."));
    let limits = &side.limits;
    let shown =
        limit_text(project, limits).unwrap_or_else(|| absent_words(project, side.absent.unwrap_or(Absent::NoScatter)));
    let output = project.plan.output.unit.as_str();
    let size = |v: Option<f64>| v.map_or_else(|| crate::quantity::format::ABSENT.to_owned(), |v| near(project, v, 2));
    let label = |name: &str| format!("{name}{suffix}");
    vec![
        Figure::new(&key("detection_limit"), &label("detection limit"), limits.detection_limit, shown, ""),
        Figure::new(
            &key("decision_threshold"),
            &label("decision threshold"),
            Some(limits.decision_threshold),
            signal(limits.decision_threshold, zeros),
            output,
        ),
        Figure::new(
            &key("critical_value"),
            &label("critical value"),
            limits.critical_value,
            size(limits.critical_value),
            "",
        ),
        Figure::new(&key("assured"), &label("assured detection limit"), limits.assured, size(limits.assured), ""),
        Figure::new(&key("traced"), &label("traced limit"), limits.traced, size(limits.traced), ""),
        Figure::new(&key("simple"), &label("simple limit"), limits.simple, size(limits.simple), ""),
    ]
}
