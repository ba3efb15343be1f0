//! What is asked of a fit, and whether its answer holds the truth.

use super::{LEVEL, scenario::Scenario};
use assize_core::{
    convert::{Conversion, Converter, Repeats},
    fit::Fit,
    inference::bands::Bands,
    numerics::streams::Stream,
};

/// One kind of interval; asked at every place of its scenario.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Question {
    /// Does the interval of each coefficient hold the true one?
    Coefficients,
    /// Does the mean band hold the true curve?
    Mean,
    /// Does the prediction band hold the mean of so many further readings?
    Next(usize),
    /// Does the interval of a converted mean of so many readings hold the true value?
    Convert(usize),
    /// The same, with the scatter of those readings pooled with the fit's.
    ConvertPooled(usize),
}

/// One question with the rates at which it should hold, place by place.
#[derive(Debug, Clone, PartialEq)]
pub struct Row {
    /// The question.
    pub question: Question,
    /// Expected rates, one for each place (for each coefficient).
    pub expected: Vec<f64>,
}

impl Question {
    /// The words of the table.
    #[must_use]
    pub fn words(self) -> String {
        match self {
            Self::Coefficients => "coefficients b0, b1 …".to_owned(),
            Self::Mean => "mean band".to_owned(),
            Self::Next(1) => "prediction band, next reading".to_owned(),
            Self::Next(k) => format!("prediction band, mean of {k}"),
            Self::Convert(1) => "converted reading".to_owned(),
            Self::Convert(k) => format!("converted mean of {k}"),
            Self::ConvertPooled(k) => format!("converted mean of {k}, scatter pooled"),
        }
    }

    /// One answer for each place (coefficient); an interval that does not exist does not hold.
    #[must_use]
    pub fn holds(self, fit: &Fit, scenario: &Scenario, stream: &mut Stream) -> Vec<bool> {
        let places = scenario.places.iter().copied();
        match self {
            Self::Coefficients => coefficients(fit, scenario),
            Self::Mean => {
                let bands = Bands::new(fit, LEVEL, 1);
                let inside = |x: f64| {
                    let at = bands.as_ref().and_then(|bands| bands.at(x));
                    at.is_some_and(|at| ((scenario.truth.f)(x) - at.value).abs() <= at.mean)
                };
                places.map(inside).collect()
            }
            Self::Next(k) => {
                let bands = Bands::new(fit, LEVEL, k);
                let mut inside = |x: f64| {
                    let (mean, _) = readings(scenario, x, k, stream);
                    let at = bands.as_ref().and_then(|bands| bands.at(x));
                    at.is_some_and(|at| (mean - at.value).abs() <= at.prediction)
                };
                places.map(&mut inside).collect()
            }
            Self::Convert(k) | Self::ConvertPooled(k) => {
                let converter = Converter::new(fit, k, LEVEL);
                let mut inside = |x: f64| {
                    let (mean, sd) = readings(scenario, x, k, stream);
                    let convert = |c: &Converter| match self {
                        Self::ConvertPooled(_) => c.convert_repeats(mean, Repeats { sd }),
                        _ => c.convert(mean),
                    };
                    converter.as_ref().is_some_and(|c| contains(&convert(c), x))
                };
                places.map(&mut inside).collect()
            }
        }
    }
}

fn coefficients(fit: &Fit, scenario: &Scenario) -> Vec<bool> {
    let factor = fit.coverage_factor(LEVEL);
    let truth = scenario.truth.coefficients.iter();
    let Some(u) = fit.standard_uncertainties() else {
        return truth.map(|_| false).collect();
    };
    let found = fit.coefficients.iter().zip(u);
    found.zip(truth).map(|((b, u), truth)| (b - truth).abs() <= factor * u).collect()
}

fn contains(conversion: &Conversion, x: f64) -> bool {
    conversion.pieces.iter().any(|piece| piece.contains(x))
}

/// Mean and SD of k further readings at x.
fn readings(scenario: &Scenario, x: f64, k: usize, stream: &mut Stream) -> (f64, f64) {
    let draws: Vec<f64> = (0..k).map(|_| scenario.sd(x) * stream.normal()).collect();
    let mean = draws.iter().sum::<f64>() / k as f64;
    let squares: f64 = draws.iter().map(|d| (d - mean) * (d - mean)).sum();
    ((scenario.truth.f)(x) + mean, (squares / (k as f64 - 1.0)).sqrt())
}
