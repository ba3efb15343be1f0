//! The readings as marks: where they stand, which shape they have, how far each fit leaves them.
//! Knows no window.

use super::ticks::Range;
use crate::theme::MarkShape;
use assize_core::{
    fit::Fit,
    project::{
        Project,
        evaluate::{Evaluation, FitEvaluation},
    },
    readings::{Applied, Direction, Reading},
};

/// At most this many marks are drawn in one plot; a marker costs microseconds, and more than this
/// nobody tells apart.
pub(super) const MOST: usize = 2000;

/// What the residuals are measured in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Measure {
    /// Output units: the indication minus the curve.
    #[default]
    Output,
    /// Input units: the same divided by the local slope; positive *reads high*.
    Input,
    /// Divided by their own standard deviation.
    Standardised,
}

impl Measure {
    /// The next one when the key is pressed.
    #[must_use]
    pub fn next(self) -> Self {
        match self {
            Self::Output => Self::Input,
            Self::Input => Self::Standardised,
            Self::Standardised => Self::Output,
        }
    }

    /// In words.
    #[must_use]
    pub fn words(self) -> &'static str {
        match self {
            Self::Output => "output units",
            Self::Input => "input units",
            Self::Standardised => "their own SD",
        }
    }
}

/// One reading as a mark.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Dot {
    /// Position in the observations; `None` when it is set aside.
    pub(super) observation: Option<usize>,
    /// Certified value, input unit; 0 for a zero.
    pub(super) x: f64,
    /// Indication, output unit.
    pub(super) y: f64,
    /// Place in run order, else in order of entry.
    pub(super) order: f64,
    /// Shape.
    pub(super) shape: MarkShape,
    /// Whether it is set aside.
    pub(super) aside: bool,
    /// Whether nothing was applied.
    pub(super) zero: bool,
    /// Sideways shift among replicates, −1 to 1.
    pub(super) jitter: f32,
    /// What hovering says.
    pub(super) words: String,
}

/// All marks: observations in their order, then what is set aside.
pub(super) fn dots(project: &Project, evaluation: &Evaluation) -> Vec<Dot> {
    let mut all: Vec<Dot> = Vec::new();
    for (i, o) in evaluation.observations.iter().enumerate() {
        let first = o.readings.first().and_then(|id| project.reading(*id));
        all.push(Dot {
            observation: Some(i),
            x: o.x,
            y: o.y,
            order: o.order.unwrap_or(i as f64 + 1.0),
            shape: shape(o.direction),
            aside: false,
            zero: o.is_zero(),
            jitter: 0.0,
            words: first.map(|r| words(project, r, o.x)).unwrap_or_default(),
        });
    }
    let stage = evaluation.data.stage;
    let aside = project.readings.iter().filter(|r| r.stage == stage && r.set_aside.is_some());
    all.extend(aside.filter_map(|r| set_aside(project, r)));
    spread(&mut all);
    all
}

fn set_aside(project: &Project, reading: &Reading) -> Option<Dot> {
    let x = match reading.applied {
        Applied::Standard(id) => project.standard(id)?.value,
        Applied::Nothing { .. } => 0.0,
    };
    reading.value.is_finite().then(|| Dot {
        observation: None,
        x,
        y: reading.value,
        order: reading.order.map_or(f64::from(reading.id.0), f64::from),
        shape: shape(reading.direction),
        aside: true,
        zero: reading.is_zero(),
        jitter: 0.0,
        words: words(project, reading, x),
    })
}

fn shape(direction: Direction) -> MarkShape {
    match direction {
        Direction::Rising => MarkShape::Rising,
        Direction::Falling => MarkShape::Falling,
        Direction::TurningPoint | Direction::None => MarkShape::NoDirection,
    }
}

/// `reading 12: 1.187 mV/V at 3 kN, falling`.
fn words(project: &Project, reading: &Reading, x: f64) -> String {
    use assize_core::{project::evaluate::words::plain, quantity::format::with_unit};
    let plan = &project.plan;
    let at = if reading.is_zero() {
        "nothing applied".to_owned()
    } else {
        format!("at {}", with_unit(&plain(x), plan.input.unit.as_str()))
    };
    let direction = match reading.direction {
        Direction::Rising => ", rising",
        Direction::Falling => ", falling",
        Direction::TurningPoint => ", turning point",
        Direction::None => "",
    };
    let aside = if reading.set_aside.is_some() { ", set aside" } else { "" };
    let value = with_unit(&reading.raw, plan.output.unit.as_str());
    format!("reading {}: {value} {at}{direction}{aside}", reading.id.0)
}

/// Replicates stand side by side in the order of their entry, always the same way.
fn spread(dots: &mut [Dot]) {
    let mut order: Vec<(f64, usize)> = dots.iter().enumerate().map(|(i, d)| (d.x, i)).collect();
    order.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.cmp(&b.1)));
    for level in order.chunk_by(|a, b| a.0.total_cmp(&b.0).is_eq()) {
        let n = level.len();
        for (place, &(_, i)) in level.iter().enumerate().filter(|_| n > 1) {
            dots[i].jitter = 2.0 * place as f32 / (n - 1) as f32 - 1.0;
        }
    }
}

/// How far a fit leaves each mark, in the measure asked for; `None` where the fit did not see it, or
/// the measure does not exist there. What is set aside is measured too, so that it can be judged.
pub(super) fn residuals(dots: &[Dot], e: &FitEvaluation, measure: Measure) -> Vec<Option<f64>> {
    let mut seat = vec![None; dots.len()];
    for (k, &i) in e.used.iter().enumerate() {
        if let Some(slot) = seat.get_mut(i) {
            *slot = Some(k);
        }
    }
    let zeros = e.zeros_fitted;
    dots.iter()
        .enumerate()
        .map(|(i, dot)| match dot.observation {
            Some(_) => seat[i].and_then(|k| of_point(&e.fit, k, measure)),
            None if dot.zero && !zeros => None,
            None => of_aside(&e.fit, dot, measure),
        })
        .map(|r| r.filter(|r| r.is_finite()))
        .collect()
}

fn of_point(fit: &Fit, k: usize, measure: Measure) -> Option<f64> {
    let raw = *fit.residuals.get(k)?;
    match measure {
        Measure::Output => Some(raw),
        Measure::Input => Some(raw / fit.curve.derivative(fit.points.get(k)?.x)),
        Measure::Standardised => {
            let share = fit.variance_ratio.get(k)? * (1.0 - fit.leverage.get(k)?);
            Some(raw / (fit.residual_sd? * share.sqrt()))
        }
    }
}

fn of_aside(fit: &Fit, dot: &Dot, measure: Measure) -> Option<f64> {
    let raw = dot.y - fit.curve.value(dot.x);
    match measure {
        Measure::Output => Some(raw),
        Measure::Input => Some(raw / fit.curve.derivative(dot.x)),
        Measure::Standardised => Some(raw / (fit.residual_sd? * fit.variance_at(dot.x).sqrt())),
    }
}

/// The largest size among those that count; 0 when there is none.
pub(super) fn largest(dots: &[Dot], residuals: &[Option<f64>]) -> f64 {
    let counting = dots.iter().zip(residuals).filter(|(dot, _)| !dot.aside);
    counting.filter_map(|(_, r)| *r).fold(0.0, |most: f64, r| most.max(r.abs()))
}

/// Lowest and highest of some numbers; `None` without a finite one.
pub(super) fn extent(values: impl Iterator<Item = f64>) -> Option<Range> {
    values
        .filter(|v| v.is_finite())
        .fold(None, |range: Option<Range>, v| Some(range.map_or((v, v), |(low, high)| (low.min(v), high.max(v)))))
}

/// Positions of the marks to draw: all of them up to [`MOST`], else of each of `MOST / 2` equal
/// slices of the places the lowest and the highest, so that no extreme is lost.
pub(super) fn thinned(places: &[(f64, f64)]) -> Vec<usize> {
    if places.len() <= MOST {
        return (0..places.len()).collect();
    }
    let Some((low, high)) = extent(places.iter().map(|p| p.0)) else {
        return Vec::new();
    };
    let slices = MOST / 2;
    let mut ends: Vec<Option<(usize, usize)>> = vec![None; slices];
    for (i, (x, y)) in places.iter().enumerate() {
        let share = if high > low { (x - low) / (high - low) } else { 0.0 };
        let slice = ((share * slices as f64) as usize).min(slices - 1);
        let (least, most) = ends[slice].unwrap_or((i, i));
        let least = if *y < places[least].1 { i } else { least };
        let most = if *y > places[most].1 { i } else { most };
        ends[slice] = Some((least, most));
    }
    let mut kept: Vec<usize> = ends.into_iter().flatten().flat_map(|(a, b)| [a, b]).collect();
    kept.sort_unstable();
    kept.dedup();
    kept
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn thinning_keeps_the_extremes_and_the_bound() {
        let mut places: Vec<(f64, f64)> = (0..50_000).map(|i| (f64::from(i), f64::from(i * 7919 % 1000))).collect();
        places[31_234].1 = 1e6;
        places[77].1 = -1e6;
        let kept = thinned(&places);
        assert!(kept.len() <= MOST && kept.contains(&31_234) && kept.contains(&77));
        assert_eq!(thinned(&places[..300]).len(), 300);
        let same = vec![(1.0, 2.0); 5000];
        assert!(!thinned(&same).is_empty());
    }

    #[test]
    fn the_extent_leaves_out_what_is_no_number() {
        assert_eq!(extent([f64::NAN, 2.0, -1.0, f64::INFINITY].into_iter()), Some((-1.0, 2.0)));
        assert_eq!(extent(std::iter::empty()), None);
    }

    #[test]
    fn the_measures_follow_each_other() {
        let mut seen = vec![Measure::default()];
        seen.push(seen[0].next());
        seen.push(seen[1].next());
        assert_eq!(seen, [Measure::Output, Measure::Input, Measure::Standardised]);
        assert_eq!(seen[2].next(), Measure::Output);
    }
}
