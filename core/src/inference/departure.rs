//! How far, where and in which way the level means leave the curve: the numbers behind the caption
//! of a residual plot.

use super::added::{Added, Term, dot};
use super::levels::Level;
use super::shape::{Ladder, Shape, next_terms};
use crate::convert::root_near;
use crate::fit::Fit;

/// The figure that the level means of the residuals make.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Pattern {
    /// Nothing that chance would not make.
    None,
    /// The middle lies above the curve, the ends below.
    BowUp,
    /// The middle lies below the curve, the ends above.
    BowDown,
    /// Three changes of sign.
    S,
    /// Four or more changes of sign, still smooth.
    Wave,
    /// The repeats agree better than the curve does, in no smooth figure.
    Irregular,
}

/// One level against the curve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LevelDeparture {
    /// The standard, input unit.
    pub x: f64,
    /// Applications at this standard.
    pub count: usize,
    /// Mean indication minus f̂(x), output unit.
    pub output: f64,
    /// The same divided by the local slope, input unit; `None` where the curve is flat.
    pub input: Option<f64>,
    /// f̂⁻¹(mean indication) − x, input unit: positive *reads high*; `None` where no value belongs to
    /// the mean indication.
    pub read_back_error: Option<f64>,
}

/// The size of the next term over the range of the standards.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LeftoverBend {
    /// Largest size, output unit.
    pub output: f64,
    /// Where, input unit.
    pub at: f64,
    /// The largest size divided by the local slope anywhere in the range, input unit.
    pub input: Option<f64>,
}

/// Root mean square of the errors at standards that were left out of the fit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LeftOut {
    /// Output unit.
    pub output: f64,
    /// Each divided by the local slope first, input unit.
    pub input: Option<f64>,
}

/// How a fit departs from its level means.
#[derive(Debug, Clone, PartialEq)]
pub struct Departure {
    /// The figure, `None` unless the shape test rejects.
    pub pattern: Pattern,
    /// Every level, ascending in x.
    pub levels: Vec<LevelDeparture>,
    /// Position in `levels` of the largest departure in output units.
    pub largest: Option<usize>,
    /// Position in `levels` of the largest read-back error.
    pub worst_read_back: Option<usize>,
    /// The next term; `None` when the levels cannot carry one.
    pub leftover_bend: Option<LeftoverBend>,
    /// Leave-one-standard-out error; `None` when a level cannot be left out.
    pub left_out: Option<LeftOut>,
}

/// Describes the departures of a fit, given what its shape test said.
///
/// # Formula
/// read-back error f̂⁻¹(ȳᵢ) − xᵢ, the root nearest to xᵢ; leftover bend max|b·z⊥(x)| over the range,
/// b·z⊥ the next term made orthogonal to the model; left out: eᵢⱼ + Σℓe/(1 − Σℓ), ℓ the influence of
/// the level on f̂ at its own x. The figure is read from the two next terms together.
///
/// # Shapes and units
/// As named at each field.
///
/// # Source
/// R. D. Cook & S. Weisberg (1982), Residuals and Influence in Regression, 2.2 (case deletion); from
/// memory. Otherwise definitions.
#[must_use]
pub fn departure(fit: &Fit, shape: &Shape) -> Departure {
    let added = Added::new(fit);
    let terms = next_terms(fit, &added);
    let found: Vec<LevelDeparture> = added.levels().iter().map(|level| at_level(fit, level)).collect();
    Departure {
        pattern: pattern(fit, shape, &added, &terms),
        largest: largest(&found, |level| Some(level.output)),
        worst_read_back: largest(&found, |level| level.read_back_error),
        leftover_bend: terms.first().and_then(|term| leftover(fit, term)),
        left_out: left_out(fit, added.levels()),
        levels: found,
    }
}

/// Whether an effect is worth more than a note.
///
/// # Formula
/// |effect| ≥ tolerance/20 where limits are set, else ≥ U/5; without either, always.
///
/// # Shapes and units
/// All three in one unit. `expanded`: U of one converted value at that place.
///
/// # Source
/// Definitions of this program.
#[must_use]
pub fn matters(effect: f64, tolerance: Option<f64>, expanded: Option<f64>) -> bool {
    let gate = tolerance.map(|t| t / 20.0).or(expanded.map(|u| u / 5.0));
    gate.is_none_or(|gate| effect.abs() >= gate)
}

fn at_level(fit: &Fit, level: &Level) -> LevelDeparture {
    let output = level.mean - fit.curve.value(level.x);
    let slope = fit.curve.derivative(level.x);
    LevelDeparture {
        x: level.x,
        count: level.count(),
        output,
        input: finite(output / slope),
        read_back_error: root_near(&fit.curve, level.mean, level.x).map(|x| x - level.x),
    }
}

fn finite(value: f64) -> Option<f64> {
    value.is_finite().then_some(value)
}

fn largest(levels: &[LevelDeparture], size: impl Fn(&LevelDeparture) -> Option<f64>) -> Option<usize> {
    let sizes = levels.iter().enumerate().filter_map(|(i, l)| size(l).map(|s| (i, s.abs())));
    sizes.max_by(|a, b| a.1.total_cmp(&b.1)).map(|(i, _)| i)
}

/// The figure made by the two next terms at the levels.
fn pattern(fit: &Fit, shape: &Shape, added: &Added, terms: &[Term]) -> Pattern {
    if !shape.rejected() {
        return Pattern::None;
    }
    let told = [shape.next, shape.next_but_one].iter().flatten().any(|t| t.p <= 0.05);
    if !told {
        return Pattern::Irregular;
    }
    let curve: Vec<f64> = added
        .levels()
        .iter()
        .map(|level| {
            let first = level.members[0];
            terms.iter().map(|term| term.coefficient * term.column[first]).sum()
        })
        .collect();
    debug_assert_eq!(fit.points.len(), terms.first().map_or(0, |t| t.column.len()));
    let signs: Vec<f64> = curve.iter().filter(|v| **v != 0.0).map(|v| v.signum()).collect();
    let changes = signs.windows(2).filter(|w| w[0] != w[1]).count();
    match changes {
        0..=2 if bends_up(&curve) => Pattern::BowUp,
        0..=2 => Pattern::BowDown,
        3 => Pattern::S,
        _ => Pattern::Wave,
    }
}

/// Whether the middle third lies above the two ends.
fn bends_up(curve: &[f64]) -> bool {
    let n = curve.len();
    let inner = &curve[n / 3..(n - n / 3).max(n / 3 + 1)];
    let middle = inner.iter().sum::<f64>() / inner.len() as f64;
    middle > 0.5 * (curve[0] + curve[n - 1])
}

/// The next term over the range of the standards.
fn leftover(fit: &Fit, term: &Term) -> Option<LeftoverBend> {
    const STEPS: u32 = 64;
    let ladder = Ladder::new(fit)?;
    let raw: Vec<f64> = fit.points.iter().map(|p| ladder.at(1, p.x)).collect();
    let xs = || fit.points.iter().map(|p| p.x);
    let (low, high) = (xs().fold(f64::INFINITY, f64::min), xs().fold(f64::NEG_INFINITY, f64::max));
    let mut bend = LeftoverBend { output: 0.0, at: low, input: None };
    for step in 0..=STEPS {
        let x = low + (high - low) * f64::from(step) / f64::from(STEPS);
        let size = (term.coefficient * (ladder.at(1, x) - dot(&fit.influence(x), &raw))).abs();
        if size > bend.output {
            bend.output = size;
            bend.at = x;
        }
        if let Some(input) = finite(size / fit.curve.derivative(x).abs()) {
            bend.input = Some(bend.input.map_or(input, |known| known.max(input)));
        }
    }
    Some(bend)
}

/// The error at each standard when the fit does not know it.
fn left_out(fit: &Fit, levels: &[Level]) -> Option<LeftOut> {
    if fit.coefficients.is_empty() {
        return None;
    }
    let (mut output, mut input) = (0.0, 0.0);
    for level in levels {
        let influence = fit.influence(level.x);
        let hold: f64 = level.members.iter().map(|&i| influence[i]).sum();
        let pull: f64 = level.members.iter().map(|&i| influence[i] * fit.residuals[i]).sum();
        if hold >= 1.0 - 1e-9 {
            return None;
        }
        let slope = fit.curve.derivative(level.x);
        for &i in &level.members {
            let error = fit.residuals[i] + pull / (1.0 - hold);
            output += error * error;
            input += (error / slope).powi(2);
        }
    }
    let n = fit.points.len() as f64;
    Some(LeftOut { output: libm::sqrt(output / n), input: finite(libm::sqrt(input / n)) })
}
