//! What can be read back through the curve: one value, with limits, from standards that can be trusted.

use super::{context::Context, finding};
use crate::{
    convert::{Converter, EndState},
    fit::Fit,
    inference::leverage::{deciding, even_polynomial, left_out},
    model::Family,
    project::{
        columns::Axes,
        evaluate::finding::{Finding, Severity},
    },
    quantity::format::{significant, with_unit},
};

/// `funnel`: the scatter was found to grow, which makes far standards move the curve.
pub(super) fn findings(c: &Context<'_>, funnel: bool) -> Vec<Finding> {
    let mut found = Vec::new();
    found.extend(turning(c));
    found.extend(one_decides(c, funnel));
    found.extend(weak_slope(c));
    found.extend(flipped(c));
    found.extend(doubtful_standards(c));
    found
}

fn turning(c: &Context<'_>) -> Option<Finding> {
    let (low, high) = c.ends()?;
    let spare = 0.05 * (high - low);
    let turns = c.fit().curve.turning_points(low - spare, high + spare);
    let at = with_unit(&significant(*turns.first()?, 3), c.unit());
    let message = format!("{} turns round at {at}: one reading would mean two values", c.head());
    let hint = "choose a function that rises or falls throughout";
    Some(finding("not-one-to-one", Severity::Stop, c.place(), message, hint))
}

/// One standard decides the curve, by its place or by its reading.
fn one_decides(c: &Context<'_>, funnel: bool) -> Option<Finding> {
    let fit = c.fit();
    // A wrong shape moves with every standard: one cause, one finding.
    if fit.family == Family::OnePoint || fit.degrees_of_freedom == 0 || c.e.shape.rejected() {
        return None;
    }
    // A pile of zeros is no single standard.
    let counts = |x: f64| !c.seen.iter().any(|o| o.is_zero() && o.x.total_cmp(&x).is_eq());
    let k = c.project.plan.detection.k;
    let by_place = deciding(fit, counts);
    let hint = "add standards around it";
    if let Some(d) = by_place {
        let moved = left_out(fit, |x| x.total_cmp(&d.x).is_eq(), |x| c.expanded(x, k));
        let without = moved.map_or(String::new(), |(l, _)| {
            format!("; without it values move by {} at {}", c.size(l.shift), c.at(l.at))
        });
        let percent = |h: f64| significant(100.0 * h, 2);
        let message = format!(
            "the standard at {} decides the curve there alone ({} %, evenly spaced ones at most {} %){without}",
            c.at(d.x),
            percent(d.leverage),
            percent(d.even)
        );
        let severity = moved.map_or(Severity::Look, |(l, _)| c.look_or_note(l.shift, l.at));
        return Some(finding("one-standard-decides", severity, c.place(), message, hint));
    }
    // Where even spacing lets one standard decide, too many terms are said instead.
    let crowded = even_polynomial(fit.levels().len(), fit.coefficients.len()) * 1.3 >= 1.0;
    if funnel || crowded {
        return None;
    }
    let (moved, _) = left_out(fit, counts, |x| c.expanded(x, k)).filter(|(_, ratio)| *ratio > 1.0)?;
    let message = format!(
        "without the standard at {} values move by {} at {}, more than their uncertainty {}",
        c.at(moved.x),
        c.size(moved.shift),
        c.at(moved.at),
        c.size(c.expanded(moved.at, k)?)
    );
    Some(finding("one-standard-decides", Severity::Look, c.place(), message, hint))
}

/// g above which limits are visibly lopsided.
const LOPSIDED: f64 = 0.05;

/// The slope itself is in doubt: limits are lopsided, or there are none.
fn weak_slope(c: &Context<'_>) -> Option<Finding> {
    let (fit, (low, high)) = (c.fit(), c.ends()?);
    let factor = fit.coverage_factor(c.project.plan.level);
    let g = |x: f64| {
        let slope = fit.curve.derivative(x);
        factor * factor * fit.slope_variance(x) / (slope * slope)
    };
    let places = [f64::midpoint(low, high), low, high];
    let (at, worst) =
        places.map(|x| (x, g(x))).into_iter().filter(|p| p.1 > LOPSIDED).max_by(|a, b| a.1.total_cmp(&b.1))?;
    let doubt = significant(100.0 * libm::sqrt(worst), 2);
    if let Some(message) = no_limit(c, &places) {
        let message = format!("{message}: the slope itself is known to ±{doubt} % only");
        return Some(finding("no-limits", Severity::Stop, c.place(), message, "add standards, or spread them wider"));
    }
    // Residuals of the wrong shape make every doubt look larger.
    if c.e.shape.rejected() {
        return None;
    }
    let message = format!("the slope at {} is known to ±{doubt} % only: limits of values are lopsided", c.at(at));
    Some(finding("weak-slope", Severity::Note, c.place(), message, "add standards, or spread them wider"))
}

/// A reading in range whose value has no limit on some side.
fn no_limit(c: &Context<'_>, places: &[f64]) -> Option<String> {
    let plan = &c.project.plan;
    let converter = Converter::new(c.fit(), plan.detection.k.max(1) as usize, plan.level)?;
    places.iter().find_map(|x| {
        let conversion = converter.convert(c.fit().curve.value(*x));
        let side = match (conversion.low_state, conversion.high_state) {
            (EndState::Unbounded, EndState::Unbounded) => "on either side",
            (EndState::Unbounded, _) => "below",
            (_, EndState::Unbounded) => "above",
            _ => return None,
        };
        Some(format!("the data set no limit {side} to the value that reads as {}", c.at(*x)))
    })
}

/// R² below which scatter, not the difference of the two functions, parts the flipped fit from the inverted one.
const LOOSE: f64 = 0.99;

/// The difference from the flipped fit, in units of u, that is worth a word.
const APART: f64 = 0.5;

fn flipped(c: &Context<'_>) -> Option<Finding> {
    let fit: &Fit = c.fit();
    let r2 = fit.r_squared().filter(|r2| *r2 < LOOSE)?;
    if c.e.shape.rejected() || fit.degrees_of_freedom == 0 {
        return None;
    }
    let far = c.e.flipped?;
    (far.relative > APART).then(|| {
        let message = format!(
            "values fitted directly to the readings would differ by {} at {}, {} of their u (R² = {}): the scatter is \
             in the readings",
            c.size(far.difference),
            with_unit(&significant(far.at, 3), c.unit()),
            significant(far.relative, 2),
            significant(r2, 3)
        );
        let hint = "nothing to do: values come from the curve of the readings, turned round";
        finding("flipped-differs", Severity::Note, c.place(), message, hint)
    })
}

/// Standards about as uncertain as the readings, in a fit that takes them as exact.
fn doubtful_standards(c: &Context<'_>) -> Option<Finding> {
    let fit = c.fit();
    if c.column.spec.axes != Axes::ReadingsOnly {
        return None;
    }
    let doubt = fit.standards()?;
    let s = fit.scatter_sd()?;
    let worst = |i: usize| {
        let (x, u) = (doubt.values[i], doubt.uncertainty(i));
        let applied = doubt.standard_of.iter().filter(|of| **of == Some(i)).count();
        let scatter = s * libm::sqrt(fit.variance_at(x) / applied as f64) / fit.curve.derivative(x).abs();
        (x, u, applied, scatter)
    };
    let all = (0..doubt.values.len()).map(worst).filter(|(.., applied, scatter)| *applied > 0 && scatter.is_finite());
    let (x, u, applied, scatter) = all.max_by(|a, b| (a.1 / a.3).total_cmp(&(b.1 / b.3)))?;
    (u > scatter / 3.0).then(|| {
        let readings = if applied == 1 {
            "its reading scatters".to_owned()
        } else {
            format!("the mean of its {applied} readings scatters")
        };
        let message = format!(
            "the standard at {} is itself uncertain by {}, while {readings} by {}",
            c.at(x),
            c.size(u),
            c.size(scatter)
        );
        let hint = "choose the fit with errors in both axes, or better standards";
        finding("standards-uncertain", c.look_or_note(u, x), c.place(), message, hint)
    })
}
