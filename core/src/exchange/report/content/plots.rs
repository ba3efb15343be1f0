//! Curve, residuals and near-zero plot of the speaking column, as vectors.

use super::Source;
use crate::{
    exchange::report::kit::{Axis, Band, Block, Dash, Limit, Line, Mark, MarkShape, Plot},
    inference::bands::Bands,
    project::{
        Project,
        evaluate::{ColumnEvaluation, Evaluation, FitEvaluation, NearZero, NearZeroOutcome},
    },
    quantity::{
        format::{decimals, exponent, significant},
        unit::{Scale, Unit, scale_for},
    },
    readings::{Applied, Direction, Reading},
};

const STEPS: usize = 120;
const HEIGHT: f32 = 150.0;

pub(super) fn blocks(source: &Source<'_>) -> Vec<Block> {
    let Some(column) = source.evaluation.speaking_column() else { return Vec::new() };
    let Ok(e) = &column.outcome else { return Vec::new() };
    let mut plots = vec![curve(source, column, e), residuals(source, column, e)];
    plots.extend(near_zero(source, column, e));
    let mut rows = Vec::new();
    let third = if plots.len() > 2 { plots.pop() } else { None };
    rows.push(Block::Plots(plots));
    rows.extend(third.map(|p| Block::Plots(vec![p])));
    rows
}

/// 1–2–5 ticks over a range, in the scale of the axis.
fn axis(range: (f64, f64), unit: &Unit, scale: &Scale) -> Axis {
    let (low, high) = (range.0 * scale.factor, range.1 * scale.factor);
    let step = nice_step((high - low) / 5.0);
    let places = usize::try_from(-exponent(step, 1)).unwrap_or(0);
    let (first, last) = (libm::ceil(low / step - 1e-9), libm::floor(high / step + 1e-9));
    let mut ticks = Vec::new();
    let mut n = first;
    while n <= last && ticks.len() < 20 {
        ticks.push((n * step / scale.factor, decimals(n * step, places)));
        n += 1.0;
    }
    let _ = unit;
    Axis { label: scale.unit.clone(), ticks, range }
}

fn titled(what: &str, unit: &str) -> String {
    if unit.is_empty() { what.to_owned() } else { format!("{what}, {unit}") }
}

fn nice_step(raw: f64) -> f64 {
    if raw.is_nan() || raw <= 0.0 || raw.is_infinite() {
        return 1.0;
    }
    let power = libm::pow(10.0, libm::floor(libm::log10(raw)));
    let ratio = raw / power;
    let nice = [1.0, 2.0, 5.0, 10.0].into_iter().find(|n| ratio <= *n * 1.000_001).unwrap_or(10.0);
    nice * power
}

fn padded(values: impl Iterator<Item = f64>) -> (f64, f64) {
    let (low, high) =
        values.filter(|v| v.is_finite()).fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), v| (a.min(v), b.max(v)));
    if low > high {
        return (0.0, 1.0);
    }
    let pad = if high > low { 0.06 * (high - low) } else { high.abs().max(1.0) * 0.1 };
    (low - pad, high + pad)
}

fn shape(r: &Reading) -> MarkShape {
    match (r.set_aside.is_some(), r.direction) {
        (true, _) => MarkShape::CrossedOut,
        (_, Direction::Rising) => MarkShape::Rising,
        (_, Direction::Falling) => MarkShape::Falling,
        _ => MarkShape::Dot,
    }
}

/// Value of what was applied, for readings that belong in the plots.
fn place(project: &Project, e: &FitEvaluation, r: &Reading) -> Option<f64> {
    match r.applied {
        Applied::Standard(id) => project.standard(id).map(|s| s.value),
        Applied::Nothing { .. } => e.zeros_fitted.then_some(0.0),
    }
}

fn curve(source: &Source<'_>, column: &ColumnEvaluation, e: &FitEvaluation) -> Plot {
    let project = source.project();
    let marks: Vec<Mark> = project
        .readings
        .iter()
        .filter_map(|r| Some(Mark { x: place(project, e, r)?, y: r.value, shape: shape(r) }))
        .collect();
    let xs = padded(marks.iter().map(|m| m.x));
    let samples: Vec<f64> = sample(e, xs);
    let bands = Bands::new(&e.fit, project.plan.level, 1);
    let line = Line {
        points: samples.iter().map(|&x| [x, e.fit.curve.value(x)]).filter(|p| p[1].is_finite()).collect(),
        dash: Dash::Solid,
        width: 1.1,
        grey: 0.0,
    };
    let ys = padded(marks.iter().map(|m| m.y));
    let scale = scale_for(&project.plan.output.unit, ys.1.abs().max(ys.0.abs()));
    let x_scale = scale_for(&project.plan.input.unit, xs.1.abs());
    Plot {
        title: titled("Curve", &scale.unit),
        alt: format!("{} through the readings: {}", column.head, column.captions.curve.text),
        x: axis(xs, &project.plan.input.unit, &x_scale),
        y: axis(ys, &project.plan.output.unit, &scale),
        height_pt: HEIGHT,
        bands: band(&samples, bands.as_ref(), 0.88, |at| at.prediction),
        lines: vec![line],
        marks,
        hlines: Vec::new(),
        vlines: Vec::new(),
        key: Vec::new(),
    }
}

/// Places where the curve is drawn: from a little below the lowest standard to a little above the highest.
fn sample(e: &FitEvaluation, range: (f64, f64)) -> Vec<f64> {
    let xs = || e.fit.points.iter().map(|p| p.x);
    let (low, high) = (xs().fold(f64::INFINITY, f64::min), xs().fold(f64::NEG_INFINITY, f64::max));
    let spare = 0.03 * (high - low);
    let (from, to) = ((low - spare).max(range.0), (high + spare).min(range.1));
    let at = |i: usize| from + (to - from) * i as f64 / STEPS as f64;
    (0..=STEPS).map(at).filter(|x| e.fit.family.has_value_at(*x)).collect()
}

fn band(
    xs: &[f64],
    bands: Option<&Bands<'_>>,
    grey: f32,
    half: impl Fn(&crate::inference::bands::BandsAt) -> f64,
) -> Vec<Band> {
    let Some(bands) = bands else { return Vec::new() };
    let at: Vec<(f64, f64, f64)> =
        xs.iter().filter_map(|&x| bands.at(x).map(|b| (x, b.value - half(&b), b.value + half(&b)))).collect();
    vec![Band {
        xs: at.iter().map(|a| a.0).collect(),
        lo: at.iter().map(|a| a.1).collect(),
        hi: at.iter().map(|a| a.2).collect(),
        grey,
    }]
}

fn residuals(source: &Source<'_>, column: &ColumnEvaluation, e: &FitEvaluation) -> Plot {
    let project = source.project();
    let marks: Vec<Mark> = project
        .readings
        .iter()
        .filter_map(|r| {
            let x = place(project, e, r)?;
            let y = r.value - e.fit.curve.value(x);
            y.is_finite().then(|| Mark { x, y, shape: shape(r) })
        })
        .collect();
    let means = e.departure.levels.iter().map(|l| [l.x, l.output]).collect();
    let (low, high) = padded(marks.iter().map(|m| m.y));
    let reach = low.abs().max(high.abs());
    let xs = padded(marks.iter().map(|m| m.x));
    let scale = scale_for(&project.plan.output.unit, reach);
    let x_scale = scale_for(&project.plan.input.unit, xs.1.abs());
    let directions = project.readings.iter().any(|r| r.direction != Direction::None);
    Plot {
        title: format!("{}{}", titled("Residuals", &scale.unit), if directions { "; ▲ rising ▽ falling" } else { "" }),
        alt: format!("residuals of {}: {}", column.head, column.captions.residuals.text),
        x: axis(xs, &project.plan.input.unit, &x_scale),
        y: axis((-reach, reach), &project.plan.output.unit, &scale),
        height_pt: HEIGHT,
        bands: Vec::new(),
        lines: vec![Line { points: means, dash: Dash::Solid, width: 0.6, grey: 0.45 }],
        marks,
        hlines: vec![Limit { at: 0.0, label: String::new(), dash: Dash::Solid }],
        vlines: Vec::new(),
        key: Vec::new(),
    }
}

fn near_zero(source: &Source<'_>, column: &ColumnEvaluation, e: &FitEvaluation) -> Option<Plot> {
    let Evaluation { zeros, near_zero: NearZero::Band { .. }, .. } = source.evaluation else { return None };
    let band = zeros.band.as_ref()?;
    let NearZeroOutcome::Limits(all) = &e.near_zero else { return None };
    let limits = &all.first()?.limits;
    let limit = limits.detection_limit?;
    let project = source.project();
    let reach = 1.6 * limit.abs();
    let xs = if all.len() > 1 { (-reach, reach) } else { (-0.4 * reach * limit.signum(), reach * limit.signum()) };
    let xs = (xs.0.min(xs.1), xs.0.max(xs.1));
    let points: Vec<[f64; 2]> = (0..=60)
        .map(|i| xs.0 + (xs.1 - xs.0) * f64::from(i) / 60.0)
        .map(|x| [x, e.fit.curve.value(x)])
        .filter(|p| p[1].is_finite())
        .collect();
    let interval = band.next_reading;
    let ys = padded(points.iter().map(|p| p[1]).chain([interval.low, interval.high, limits.decision_threshold]));
    let scale = scale_for(&project.plan.output.unit, ys.1.abs().max(ys.0.abs()));
    let x_scale = scale_for(&project.plan.input.unit, limit.abs());
    let y_limit = e.fit.curve.value(limit);
    Some(Plot {
        title: titled("Near zero", &scale.unit),
        alt: format!("{} near zero: {}", column.head, column.captions.near_zero.text),
        x: axis(xs, &project.plan.input.unit, &x_scale),
        y: axis(ys, &project.plan.output.unit, &scale),
        height_pt: HEIGHT,
        bands: vec![Band { xs: vec![xs.0, xs.1], lo: vec![interval.low; 2], hi: vec![interval.high; 2], grey: 0.88 }],
        lines: vec![
            Line { points, dash: Dash::Solid, width: 1.1, grey: 0.0 },
            Line { points: vec![[limit, ys.0], [limit, y_limit]], dash: Dash::Dotted, width: 0.8, grey: 0.0 },
        ],
        marks: vec![Mark { x: limit, y: y_limit, shape: MarkShape::Square }],
        hlines: vec![Limit {
            at: limits.decision_threshold,
            label: format!("decision threshold {}", significant(limits.decision_threshold * scale.factor, 3)),
            dash: Dash::Dashed,
        }],
        vlines: vec![Limit { at: 0.0, label: String::new(), dash: Dash::Dotted }],
        key: Vec::new(),
    })
}
