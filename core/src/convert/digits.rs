//! How many digits of the coefficients must be handed on, proven from the printed text.

use super::root_near;
use crate::fit::Fit;
use crate::model::Curve;

/// A double holds no more.
const MOST: usize = 17;

/// A converted value may move by this share of its standard uncertainty.
const SHARE: f64 = 1.0 / 20.0;

/// Places over the range at which the printed coefficients are tried.
const PLACES: u32 = 64;

/// Coefficients as text, with the proof that the text is good enough.
#[derive(Debug, Clone, PartialEq)]
pub struct PrintedCoefficients {
    /// Common number of significant digits.
    pub digits: usize,
    /// One text a coefficient, in printed order.
    pub texts: Vec<String>,
    /// What the coefficients belong to.
    pub form: Form,
    /// The largest |x̂_printed − x̂|/u(x) over the range.
    pub worst: f64,
    /// Where, input unit.
    pub at: f64,
}

/// The variable of the printed coefficients.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Form {
    /// The input itself.
    Plain,
    /// t = (x − centre)/scale: powers of x itself would need more digits than a double has.
    Shifted {
        /// Centre, input unit, exactly this double.
        centre: f64,
        /// Scale, input unit, exactly this double.
        scale: f64,
    },
}

impl PrintedCoefficients {
    /// The value of the printed function at x: what a device that holds these texts computes.
    #[must_use]
    pub fn value(&self, fit: &Fit, x: f64) -> f64 {
        let b: Vec<f64> = self.texts.iter().map(|t| t.parse().unwrap_or(f64::NAN)).collect();
        fit.curve.with_coefficients(b).value(variable(self.form, x))
    }
}

fn variable(form: Form, x: f64) -> f64 {
    match form {
        Form::Plain => x,
        Form::Shifted { centre, scale } => (x - centre) / scale,
    }
}

/// The coefficients with the fewest common digits that move no converted value by more than u(x)/20.
///
/// # Formula
///
/// The smallest D ≤ 17 such that with D, D + 1 and D + 2 significant digits |x̂_printed(y) − x̂(y)| ≤ u(x)/20
/// at 65 places even over the range of the standards and next to every turning point inside it (D alone is
/// not enough: the error does not fall steadily); u(x) of one new reading, without the standards' part. The
/// printed text is read back for it. When a polynomial finds no D, it is printed in t = (x − centre)/scale.
///
/// # Errors
///
/// `None` while the scatter is not known, for a declared function, and when no form passes.
///
/// # Source
///
/// Definition of this program.
#[must_use]
pub fn printed(fit: &Fit) -> Option<PrintedCoefficients> {
    if fit.coefficients.is_empty() {
        return None;
    }
    let trial = Trial::new(fit)?;
    trial.fewest(&fit.coefficients, Form::Plain).or_else(|| {
        let Curve::Centred(c) = &fit.curve else {
            return None;
        };
        trial.fewest(&c.coefficients, Form::Shifted { centre: c.centre, scale: c.scale })
    })
}

/// Places with the reading, the allowed shift and u.
struct Trial<'a> {
    fit: &'a Fit,
    range: (f64, f64),
    /// (x, f̂(x), u(x)).
    places: Vec<(f64, f64, f64)>,
}

impl<'a> Trial<'a> {
    fn new(fit: &'a Fit) -> Option<Self> {
        let sd = fit.scatter_sd().filter(|s| *s > 0.0)?;
        let low = fit.points.iter().map(|p| p.x).fold(f64::INFINITY, f64::min);
        let high = fit.points.iter().map(|p| p.x).fold(f64::NEG_INFINITY, f64::max);
        let step = (high - low) / f64::from(PLACES);
        let mut xs: Vec<f64> = (0..=PLACES).map(|i| low + f64::from(i) * step).collect();
        // Right at a turning point nothing can be converted; a hundredth of the range beside it can.
        let turns = fit.curve.turning_points(low, high);
        xs.extend(turns.iter().flat_map(|t| [t - 0.64 * step, t + 0.64 * step]));
        let place = |x: f64| {
            let u = libm::sqrt(sd * sd * (fit.variance_at(x) + fit.variance_factor(x)));
            (x, fit.curve.value(x), u / fit.curve.derivative(x).abs())
        };
        let usable = |p: &(f64, f64, f64)| p.1.is_finite() && p.2.is_finite() && p.2 > 0.0;
        let places: Vec<_> = xs.into_iter().map(place).filter(usable).collect();
        (!places.is_empty()).then_some(Self { fit, range: (low, high), places })
    }

    fn fewest(&self, coefficients: &[f64], form: Form) -> Option<PrintedCoefficients> {
        let mut good: Vec<PrintedCoefficients> = Vec::new();
        for digits in 1..=MOST {
            let tried = self.with(coefficients, form, digits);
            if tried.worst <= SHARE {
                good.push(tried);
            } else {
                good.clear();
            }
            if good.len() == 3 {
                break;
            }
        }
        good.into_iter().next()
    }

    /// The coefficients with so many digits, and how far the worst value moves.
    fn with(&self, coefficients: &[f64], form: Form, digits: usize) -> PrintedCoefficients {
        let texts: Vec<String> = coefficients.iter().map(|b| format!("{b:.*e}", digits - 1)).collect();
        let read: Vec<f64> = texts.iter().map(|t| t.parse().unwrap_or(f64::NAN)).collect();
        let curve = self.fit.curve.with_coefficients(read);
        let mut out = PrintedCoefficients { digits, texts, form, worst: 0.0, at: self.range.0 };
        for (x, reading, u) in &self.places {
            let scale = match form {
                Form::Plain => 1.0,
                Form::Shifted { scale, .. } => scale,
            };
            let t = variable(form, *x);
            // Where rounding keeps the search from settling, the gap divided by the slope says the same.
            let back = root_near(&curve, *reading, t).unwrap_or(t - (curve.value(t) - reading) / curve.derivative(t));
            let shift = (back - t).abs() * scale / u;
            let shift = if shift.is_finite() { shift } else { f64::INFINITY };
            if shift > out.worst {
                (out.worst, out.at) = (shift, *x);
            }
            if out.worst > SHARE {
                // Too few digits: by how much no longer matters.
                break;
            }
        }
        out
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, pontius};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    /// The texts alone, read back here, move no value of the load cell by more than u/20; one digit fewer does.
    #[test]
    fn the_printed_text_alone_converts_well_enough() {
        let fit = fitted(Family::Polynomial(2), &pontius());
        let found = printed(&fit).unwrap();
        let shift = |texts: &[String]| {
            let b: Vec<f64> = texts.iter().map(|t| t.parse().unwrap()).collect();
            let sd = fit.residual_sd.unwrap();
            let mut worst: f64 = 0.0;
            for i in 0..=64 {
                let x = 150_000.0 + f64::from(i) * 2_850_000.0 / 64.0;
                let y = b[0] + x * (b[1] + x * b[2]);
                let slope = fit.coefficients[1] + 2.0 * x * fit.coefficients[2];
                let u = sd * libm::sqrt(1.0 + fit.variance_factor(x)) / slope;
                worst = worst.max((y - fit.curve.value(x)).abs() / slope / u);
            }
            worst
        };
        assert!(shift(&found.texts) <= SHARE * 1.01, "{found:?}");
        let fewer: Vec<String> = fit.coefficients.iter().map(|b| format!("{b:.*e}", found.digits - 2)).collect();
        assert!(shift(&fewer) > SHARE, "{} digits would do", found.digits - 1);
        assert!((4..=9).contains(&found.digits), "{}", found.digits);
    }

    /// Ten powers of x far from zero: 17 digits of the powers cannot carry it, the shifted form can.
    #[test]
    fn powers_far_from_zero_are_printed_about_their_middle() {
        let mut stream = Stream::new(9, 0);
        let points: Vec<Point> = (0..40)
            .map(|i| {
                let x = 1000.0 + f64::from(i) / 40.0;
                Point { x, y: libm::sin(3.0 * x) + 10.0 * x + 1e-6 * stream.normal() }
            })
            .collect();
        let fit = fitted(Family::Polynomial(9), &points);
        let found = printed(&fit).unwrap();
        assert!(matches!(found.form, Form::Shifted { .. }), "{found:?}");
        assert!(found.worst <= SHARE);
        for p in &points {
            assert!((found.value(&fit, p.x) - p.y).abs() < 1e-4, "{}", p.x);
        }
    }

    #[test]
    fn nothing_is_promised_without_a_known_scatter() {
        let two = [Point { x: 1.0, y: 1.0 }, Point { x: 2.0, y: 3.0 }];
        assert_eq!(printed(&fitted(Family::Polynomial(1), &two)), None);
    }
}
