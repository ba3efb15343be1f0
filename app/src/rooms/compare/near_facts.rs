//! What the near-zero row is about: readings of nothing (or of the lowest standard), their band,
//! thresholds, and the window of the plots. Knows no window.

use super::{dots::extent, ticks::Range};
use assize_core::{
    distributions::t_quantile,
    fit::Fit,
    project::evaluate::{Evaluation, FitEvaluation, NearZero, NearZeroOutcome, Observation, SideLimits, ZeroFacts},
    zero::{asked::Basis, band::ZeroBand},
};

/// Readings of nothing, or of the lowest standard where there is no state of nothing.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct NearFacts {
    /// The standard around which the smallest change is sought, input unit; `None`: zero.
    pub(super) around: Option<f64>,
    /// Application means, output unit.
    pub(super) means: Vec<f64>,
    /// Position of each in the observations.
    pub(super) seats: Vec<usize>,
    /// Their band.
    pub(super) band: ZeroBand,
    /// Where the next reading (the mean of the k asked for) will lie, output unit.
    pub(super) edges: Range,
    /// Level of the band, e.g. 0.95.
    pub(super) level: f64,
    /// How many readings of the unknown are averaged.
    pub(super) k: usize,
    /// Decision thresholds, output unit; the first is where the cursor starts.
    pub(super) thresholds: Vec<f64>,
    /// Between zero and the lowest standard nothing was measured, input unit.
    pub(super) gap: Option<Range>,
    /// Window of the plots at first, input unit.
    pub(super) x: Range,
    /// Window of the plots at first, output unit.
    pub(super) y: Range,
    /// Folded unless asked.
    pub(super) folded: bool,
}

/// What the row shows: plots, or one line.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum NearRow {
    /// Plots with band and cursor.
    Plots(Box<NearFacts>),
    /// One line; its height goes to the residuals.
    Line(String),
}

impl NearRow {
    /// The facts, when there are plots.
    pub(super) fn facts(&self) -> Option<&NearFacts> {
        match self {
            Self::Plots(facts) => Some(facts),
            Self::Line(_) => None,
        }
    }

    /// What the evaluation asks this row to show.
    pub(super) fn new(evaluation: &Evaluation, level: f64) -> Self {
        let zeros = &evaluation.zeros;
        match &evaluation.near_zero {
            NearZero::OneLine(words) => Self::Line(words.clone()),
            NearZero::Band { gap, folded, .. } => match &zeros.band {
                Some(band) => {
                    let thresholds = zero_thresholds(evaluation, band);
                    let mut facts = NearFacts::of(None, &zeros.means, band, (level, zeros));
                    facts.thresholds = thresholds;
                    facts.gap = *gap;
                    facts.folded = *folded;
                    facts.frame(evaluation);
                    Self::Plots(Box::new(facts))
                }
                None => Self::Line("a zero band needs 3 zero readings".to_owned()),
            },
            NearZero::SmallestChange { at, means } => match ZeroBand::new(means, level) {
                Some(band) => {
                    let mut facts = NearFacts::of(Some(*at), means, &band, (level, zeros));
                    let half = one_sided(&band, zeros);
                    facts.thresholds = vec![band.mean + half, band.mean - half];
                    facts.frame(evaluation);
                    Self::Plots(Box::new(facts))
                }
                None => Self::Line(format!(
                    "{} readings at the lowest standard: 3 are needed to say what change is seen",
                    means.len()
                )),
            },
        }
    }
}

/// t_{1−α}·s₀·√(1/k + 1/n), output unit.
fn one_sided(band: &ZeroBand, zeros: &ZeroFacts) -> f64 {
    let share = 1.0 / zeros.asked.k.max(1) as f64 + 1.0 / band.n as f64;
    t_quantile(1.0 - zeros.asked.alpha, band.degrees_of_freedom) * band.sd * share.sqrt()
}

/// Thresholds of the speaking column, else of the first that has some, else of a rising output.
fn zero_thresholds(evaluation: &Evaluation, band: &ZeroBand) -> Vec<f64> {
    let speaking = evaluation.speaking_column().into_iter();
    let found = speaking.chain(&evaluation.columns).find_map(|c| {
        let limits = sides(c.outcome.as_ref().ok()?);
        (!limits.is_empty()).then(|| limits.iter().map(|s| s.limits.decision_threshold).collect())
    });
    found.unwrap_or_else(|| vec![band.mean + one_sided(band, &evaluation.zeros)])
}

/// Limits of a fit, one a side; none when there are none.
pub(super) fn sides(e: &FitEvaluation) -> &[SideLimits] {
    match &e.near_zero {
        NearZeroOutcome::Limits(all) => all,
        NearZeroOutcome::Change(_) | NearZeroOutcome::Absent(_) => &[],
    }
}

impl NearFacts {
    fn of(around: Option<f64>, means: &[f64], band: &ZeroBand, (level, zeros): (f64, &ZeroFacts)) -> Self {
        let edges = band.mean_of(zeros.asked.k);
        Self {
            around,
            means: means.to_vec(),
            seats: Vec::new(),
            edges: (edges.low, edges.high),
            level,
            k: zeros.asked.k,
            thresholds: Vec::new(),
            gap: None,
            x: (-1.0, 1.0),
            y: (-1.0, 1.0),
            folded: false,
            band: band.clone(),
        }
    }

    /// Half the band, never 0, output unit.
    fn half(&self) -> f64 {
        let reach = self.thresholds.iter().map(|t| (t - self.band.mean).abs());
        let half = reach.fold(self.edges.1 - self.band.mean, f64::max);
        if half > 0.0 { half } else { (self.band.mean.abs() * 1e-3).max(f64::MIN_POSITIVE) }
    }

    /// One step of the arrow keys: 0.1 SD, output unit.
    pub(super) fn step(&self) -> f64 {
        if self.band.sd > 0.0 { 0.1 * self.band.sd } else { 0.02 * self.half() }
    }

    /// Finds the readings among the observations, and chooses the window: band, thresholds and the
    /// limits of those fits that are not far off.
    fn frame(&mut self, evaluation: &Evaluation) {
        let here = |o: &Observation| match self.around {
            Some(at) => !o.is_zero() && o.x.total_cmp(&at).is_eq(),
            None => o.is_zero(),
        };
        let all = evaluation.observations.iter().enumerate();
        self.seats = all.filter(|(_, o)| here(o)).map(|(i, _)| i).collect();
        let fits = || evaluation.columns.iter().filter_map(|c| c.outcome.as_ref().ok());
        let (half, mean) = (self.half(), self.band.mean);
        let signals = fits().flat_map(|e| {
            let at = sides(e).iter().filter_map(|s| s.limits.detection_limit);
            at.map(|x| e.fit.curve.value(x) - mean).collect::<Vec<_>>()
        });
        let near: Vec<f64> = signals.filter(|s| s.abs() <= 4.0 * half).collect();
        let reach = |sense: f64| {
            let leaves = self.thresholds.iter().any(|t| sense * (t - mean) > 0.0);
            let limits = near.iter().map(|s| 1.35 * sense * s);
            limits.fold(if leaves { 1.9 * half } else { 1.45 * half }, f64::max)
        };
        self.y = (mean - reach(-1.0), mean + reach(1.0));
        self.x = match self.around {
            Some(at) => self.beside(at, fits().map(|e| e.fit.curve.derivative(at))),
            None => self.across(fits().map(|e| &e.fit)),
        };
    }

    /// The window around a standard by the flattest slope.
    fn beside(&self, at: f64, slopes: impl Iterator<Item = f64>) -> Range {
        let slope = slopes.map(f64::abs).filter(|s| *s > 0.0 && s.is_finite()).fold(f64::INFINITY, f64::min);
        let half = 0.5 * (self.y.1 - self.y.0) / slope;
        if half > 0.0 && half.is_finite() { (at - half, at + half) } else { (at - 1.0, at + 1.0) }
    }

    /// The values at which the curves cross the window's height; curves far wider than the
    /// narrowest do not stretch it.
    fn across<'a>(&self, fits: impl Iterator<Item = &'a Fit>) -> Range {
        let fits: Vec<&Fit> = fits.collect();
        let crossings = |fit: &&Fit| {
            let slope = fit.curve.derivative(0.0);
            let at = |y: f64| (y - fit.curve.value(0.0)) / slope;
            extent([at(self.y.0), at(self.y.1), 0.0].into_iter()).filter(|_| slope.is_finite() && slope != 0.0)
        };
        let all: Vec<Range> = fits.iter().filter_map(crossings).collect();
        let narrowest = all.iter().map(|(a, b)| b - a).fold(f64::INFINITY, f64::min);
        let kept = all.iter().filter(|(a, b)| b - a <= 3.0 * narrowest);
        let (low, high) = extent(kept.flat_map(|(a, b)| [*a, *b])).unwrap_or_else(|| {
            let far = extent(fits.iter().flat_map(|f| f.points.iter().map(|p| p.x)));
            let size = far.map_or(1.0, |(a, b)| a.abs().max(b.abs()) / 50.0);
            (-size, size)
        });
        let pad = 0.04 * (high - low);
        if pad > 0.0 { (low - pad, high + pad) } else { (-1.0, 1.0) }
    }

    /// Places at which PageUp and PageDown stop, ascending.
    pub(super) fn stops(&self) -> Vec<f64> {
        let mut all = self.thresholds.clone();
        all.extend([self.edges.0, self.band.mean, self.edges.1]);
        all.retain(|v| v.is_finite());
        all.sort_by(f64::total_cmp);
        all.dedup();
        all
    }

    /// The next stop above (or below) a signal; the signal itself beyond the last.
    pub(super) fn next_stop(&self, from: f64, up: bool) -> f64 {
        let hair = 1e-6 * self.half();
        let stops = self.stops();
        let found =
            if up { stops.iter().find(|s| **s > from + hair) } else { stops.iter().rev().find(|s| **s < from - hair) };
        found.copied().unwrap_or(from)
    }

    /// Whether a signal lies on the decision threshold where the cursor starts.
    pub(super) fn on_threshold(&self, signal: f64) -> bool {
        let start = self.thresholds.first().copied().unwrap_or(f64::NAN);
        (signal - start).abs() <= 1e-9 * self.half()
    }

    /// The name of the line a signal lies on, if it lies on one.
    pub(super) fn stop_name(&self, signal: f64) -> Option<&'static str> {
        let on = |at: f64| (signal - at).abs() <= 1e-9 * self.half();
        if self.thresholds.iter().any(|t| on(*t)) {
            Some("decision threshold")
        } else if on(self.band.mean) {
            Some(if self.around.is_some() { "mean" } else { "zero mean" })
        } else if on(self.edges.0) || on(self.edges.1) {
            Some("edge of the zero band").filter(|_| self.around.is_none()).or(Some("edge of the band"))
        } else {
            None
        }
    }

    /// What the band is, in words.
    pub(super) fn band_words(&self) -> String {
        let level = assize_core::quantity::format::significant(100.0 * self.level, 3);
        let level = level.trim_end_matches('0').trim_end_matches('.');
        let what = if self.around.is_some() { "band" } else { "zero band" };
        match self.k {
            0 | 1 => format!("{what}, next single reading, {level} %"),
            k => format!("{what}, next mean of {k}, {level} %"),
        }
    }

    /// Whether thresholds rest on these readings (else on the scatter about each curve).
    pub(super) fn rests_on_zeros(zeros: &ZeroFacts) -> bool {
        zeros.asked.basis == Basis::Zeros
    }
}
