//! Invented data of a known truth.

use super::question::{Question, Row};
use assize_core::{
    fit::{self, Fit, FitError, Point, Request, StandardsDoubt, Weights},
    model::Family,
    numerics::streams::Stream,
};

/// A known function and the family that is fitted to it.
#[derive(Debug, Clone)]
pub struct Truth {
    /// The family that is fitted.
    pub family: Family,
    /// The true function, output unit out of input unit.
    pub f: fn(f64) -> f64,
    /// The true coefficients in the order of the family's.
    pub coefficients: Vec<f64>,
}

/// y = 1 + 2x.
#[must_use]
pub fn line() -> Truth {
    Truth { family: Family::Polynomial(1), f: |x| 1.0 + 2.0 * x, coefficients: vec![1.0, 2.0] }
}

/// y = 2x, through zero.
#[must_use]
pub fn line_through_zero() -> Truth {
    Truth { family: Family::LineThroughZero, f: |x| 2.0 * x, coefficients: vec![2.0] }
}

/// y = 1 + 2x + 0.05x².
#[must_use]
pub fn quadratic() -> Truth {
    let f = |x: f64| 1.0 + x * (2.0 + 0.05 * x);
    Truth { family: Family::Polynomial(2), f, coefficients: vec![1.0, 2.0, 0.05] }
}

/// y = 1 + 2 ln x.
#[must_use]
pub fn logarithm() -> Truth {
    let f = |x: f64| 1.0 + 2.0 * x.ln();
    Truth { family: Family::Log, f, coefficients: vec![1.0, 2.0] }
}

/// A logistic from 0.05 to 2 with its middle at 40, even on a scale of ratios.
#[must_use]
pub fn logistic() -> Truth {
    let f = |x: f64| 2.0 - 1.95 / (1.0 + (x / 40.0).powf(1.2));
    Truth { family: Family::Logistic4, f, coefficients: vec![0.05, 1.2, 40.0, 2.0] }
}

/// Standards in equal steps or equal ratios.
#[derive(Debug, Clone, Copy)]
pub struct Design {
    /// Number of standards.
    pub levels: usize,
    /// Applications of each.
    pub repeats: usize,
    /// Lowest and highest, input unit.
    pub range: (f64, f64),
    /// Equal ratios instead of equal steps.
    pub ratios: bool,
}

impl Design {
    /// `levels` standards from 1 to 10, each applied `repeats` times.
    #[must_use]
    pub const fn new(levels: usize, repeats: usize) -> Self {
        Self { levels, repeats, range: (1.0, 10.0), ratios: false }
    }

    /// The same over another range.
    #[must_use]
    pub const fn over(self, low: f64, high: f64) -> Self {
        Self { range: (low, high), ..self }
    }

    /// The same in equal ratios.
    #[must_use]
    pub const fn in_ratios(self) -> Self {
        Self { ratios: true, ..self }
    }

    /// The certified values, ascending.
    #[must_use]
    pub fn values(&self) -> Vec<f64> {
        let ends = if self.ratios { (self.range.0.ln(), self.range.1.ln()) } else { self.range };
        let step = (ends.1 - ends.0) / (self.levels - 1) as f64;
        let place = |i: usize| ends.0 + step * i as f64;
        (0..self.levels).map(place).map(|v| if self.ratios { v.exp() } else { v }).collect()
    }
}

/// How one application scatters.
#[derive(Debug, Clone, Copy)]
pub enum Scatter {
    /// The same SD everywhere, output unit.
    Even(f64),
    /// SD = share · |f(x)|: follows the signal.
    OfSignal(f64),
    /// SD = share · x: follows the value.
    OfValue(f64),
}

/// Errors of the standards, as standard uncertainties; drawn anew in every run.
#[derive(Debug, Clone, Copy)]
pub enum Common {
    /// None: the standards are exact.
    Nothing,
    /// A share of the value: true value = certified · (1 + share · normal); the fit is told.
    Relative(f64),
    /// The same, without telling the fit.
    RelativeUntold(f64),
    /// Each standard has an error of its own, input unit; the fit is told.
    Own(f64),
}

/// Data of a known truth, the fit made from them, and what is asked of it.
#[derive(Debug, Clone)]
pub struct Scenario {
    /// Name in the table; it also chooses the random numbers, so that other scenarios do not change them.
    pub name: &'static str,
    /// The truth.
    pub truth: Truth,
    /// The standards.
    pub design: Design,
    /// The scatter of the readings.
    pub scatter: Scatter,
    /// The weights of the fit.
    pub weights: Weights,
    /// The errors of the standards.
    pub common: Common,
    /// The SD of the readings is told to the fit.
    pub told: bool,
    /// The fit is made in both axes.
    pub both_axes: bool,
    /// Low, middle and high place, input unit.
    pub places: Vec<f64>,
    /// The questions, one row of the table each.
    pub rows: Vec<Row>,
}

impl Scenario {
    /// Even scatter, equal weights, exact standards, and every usual question at three places.
    #[must_use]
    pub fn new(name: &'static str, truth: Truth, design: Design, places: [f64; 3]) -> Self {
        let usual = [
            Question::Coefficients,
            Question::Mean,
            Question::Next(1),
            Question::Next(3),
            Question::Convert(1),
            Question::Convert(3),
        ];
        let places = places.to_vec();
        let scenario = Self {
            name,
            truth,
            design,
            scatter: Scatter::Even(0.2),
            weights: Weights::Equal,
            common: Common::Nothing,
            told: false,
            both_axes: false,
            places,
            rows: Vec::new(),
        };
        scenario.asking(&usual)
    }

    /// The same with these questions only, each expected to hold at the level asked for.
    #[must_use]
    pub fn asking(mut self, questions: &[Question]) -> Self {
        let count = |q: &Question| match q {
            Question::Coefficients => self.truth.coefficients.len(),
            _ => self.places.len(),
        };
        self.rows = questions.iter().map(|q| Row { question: *q, expected: vec![super::LEVEL; count(q)] }).collect();
        self
    }

    /// The same with one more question whose expected rates are others.
    #[must_use]
    pub fn expecting(mut self, question: Question, rates: &[f64]) -> Self {
        self.rows.push(Row { question, expected: rates.to_vec() });
        self
    }

    /// The same at other places; the rows so far are dropped.
    #[must_use]
    pub fn at(mut self, places: &[f64]) -> Self {
        self.places = places.to_vec();
        self.rows.clear();
        self
    }

    /// The same with another scatter.
    #[must_use]
    pub fn scatter(self, scatter: Scatter) -> Self {
        Self { scatter, ..self }
    }

    /// The same with other weights.
    #[must_use]
    pub fn weights(self, weights: Weights) -> Self {
        Self { weights, ..self }
    }

    /// The same with the SD of the readings told: absolute weights.
    #[must_use]
    pub fn told(self) -> Self {
        Self { told: true, weights: Weights::Typed, ..self }
    }

    /// The same fitted in both axes.
    #[must_use]
    pub fn in_both_axes(self) -> Self {
        Self { both_axes: true, ..self }
    }

    /// The same with errors of the standards.
    #[must_use]
    pub fn common(self, common: Common) -> Self {
        Self { common, ..self }
    }

    /// SD of one application at x, output unit.
    #[must_use]
    pub fn sd(&self, x: f64) -> f64 {
        match self.scatter {
            Scatter::Even(sd) => sd,
            Scatter::OfSignal(share) => share * (self.truth.f)(x).abs(),
            Scatter::OfValue(share) => share * x,
        }
    }

    /// Draws one data set: the observations, and the standard behind each.
    #[must_use]
    pub fn observe(&self, stream: &mut Stream) -> (Vec<Point>, Vec<Option<usize>>) {
        let (share, own) = match self.common {
            Common::Nothing => (0.0, 0.0),
            Common::Relative(share) | Common::RelativeUntold(share) => (share, 0.0),
            Common::Own(u) => (0.0, u),
        };
        let stretch = if share == 0.0 { 1.0 } else { 1.0 + share * stream.normal() };
        let (mut points, mut standard_of) = (Vec::new(), Vec::new());
        for (standard, certified) in self.design.values().into_iter().enumerate() {
            let real = certified * stretch + if own == 0.0 { 0.0 } else { own * stream.normal() };
            for _ in 0..self.design.repeats {
                let y = (self.truth.f)(real) + self.sd(real) * stream.normal();
                points.push(Point { x: certified, y });
                standard_of.push(Some(standard));
            }
        }
        (points, standard_of)
    }

    /// Draws one data set and fits it.
    ///
    /// # Errors
    ///
    /// As [`fit::fit`].
    pub fn draw(&self, stream: &mut Stream) -> Result<Fit, FitError> {
        let (points, standard_of) = self.observe(stream);
        let stated: Vec<f64> = points.iter().map(|p| self.sd(p.x)).collect();
        let request = Request {
            reading_uncertainty: self.told.then_some(&stated),
            ..Request::new(&self.truth.family, &points, self.weights)
        };
        let doubt = self.doubt(standard_of);
        match (self.both_axes, doubt) {
            (true, Some(doubt)) => fit::fit_both_axes(&request, &doubt),
            (false, Some(doubt)) => fit::estimate(&request).map(|fit| fit.with_standards(doubt)),
            (_, None) => fit::estimate(&request),
        }
    }

    /// What the fit is told of the standards.
    fn doubt(&self, standard_of: Vec<Option<usize>>) -> Option<StandardsDoubt> {
        let values = self.design.values();
        let (share, own) = match self.common {
            Common::Nothing | Common::RelativeUntold(_) => return None,
            Common::Relative(share) => (share, 0.0),
            Common::Own(u) => (0.0, u),
        };
        let row = |a: &f64| values.iter().map(|b| share * a * share * b).collect();
        let common = values.iter().map(row).collect();
        let independent = vec![own * own; values.len()];
        Some(StandardsDoubt { standard_of, independent, common, values })
    }
}
