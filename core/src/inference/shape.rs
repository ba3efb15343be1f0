//! Is the shape right? The next two terms and the repeats are asked together.

use super::added::{Added, Term};
use super::ftest::{FTest, simes};
use super::lack_of_fit::lack_of_fit;
use crate::distributions::{noncentrality, t_quantile};
use crate::fit::Fit;
use crate::model::Family;

/// A p_S at or below this rejects the shape.
pub const SHAPE_LEVEL: f64 = 0.05;

/// What the data say about the shape of a fit.
#[derive(Debug, Clone, PartialEq)]
pub struct Shape {
    /// The next term of the family's ladder, added alone.
    pub next: Option<FTest>,
    /// The term after it, added after the next one.
    pub next_but_one: Option<FTest>,
    /// Lack of fit against pure error.
    pub lack_of_fit: Option<FTest>,
    /// p_S, the Simes combination of those that exist.
    pub p: Option<f64>,
    /// Why the shape cannot be told, when it cannot.
    pub too_few: Option<TooFew>,
    /// The largest departure by a next term that a 5 % test finds 8 times in 10, output unit.
    pub detectable_bend: Option<f64>,
}

/// Too few points to tell the shape.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct TooFew {
    /// Distinct standards present.
    pub levels: usize,
    /// Distinct standards needed, p + 2.
    pub levels_needed: usize,
    /// Degrees of freedom present.
    pub degrees_of_freedom: usize,
    /// Degrees of freedom needed, 3.
    pub degrees_needed: usize,
}

impl Shape {
    /// Whether the shape test rejects: p_S ≤ 0.05.
    #[must_use]
    pub fn rejected(&self) -> bool {
        self.p.is_some_and(|p| p <= SHAPE_LEVEL)
    }
}

/// Fewer than p + 2 levels or 3 degrees of freedom; `None` when there are enough.
#[must_use]
pub fn too_few(levels: usize, coefficients: usize, degrees_of_freedom: usize) -> Option<TooFew> {
    let levels_needed = coefficients + 2;
    (levels < levels_needed || degrees_of_freedom < 3).then_some(TooFew {
        levels,
        levels_needed,
        degrees_of_freedom,
        degrees_needed: 3,
    })
}

/// Tests the shape of a fit.
///
/// # Formula
/// p_S = Simes{next term, next-but-one term, lack of fit}. For a polynomial of degree d the terms are
/// x^(d+1) and x^(d+2); for a + b·ln x they are (ln x)² and (ln x)³. Each is an extra-sum-of-squares F
/// with one numerator degree of freedom, in the fit's weights, the second after the first. For
/// line → quadratic the first is Mandel's test.
///
/// # Shapes and units
/// p dimensionless; the detectable bend in output units: max|z⊥|·δ·s/‖z⊥‖ with δ the
/// noncentrality at which a two-sided 5 % t test rejects 8 times in 10.
/// A declared function has no next term: only the repeats can speak.
///
/// # Source
/// J. Mandel (1964), The Statistical Analysis of Experimental Data; ISO 8466-1:1990; ISO 11095:1996;
/// all from memory.
#[must_use]
pub fn shape(fit: &Fit) -> Shape {
    let added = Added::new(fit);
    let nu = fit.degrees_of_freedom;
    let terms = next_terms(fit, &added);
    let (ss, floor) = (added.residual_ss(), added.floor());
    let mut left = ss;
    let mut tests = [None, None];
    for (index, term) in terms.iter().enumerate() {
        left = (left - term.explained).max(0.0);
        tests[index] = FTest::new(term.explained, 1, left, nu.saturating_sub(index + 1), floor);
    }
    let lack_of_fit = lack_of_fit(fit);
    let p: Vec<f64> = [tests[0], tests[1], lack_of_fit].iter().flatten().map(|t| t.p).collect();
    Shape {
        next: tests[0],
        next_but_one: tests[1],
        lack_of_fit,
        p: simes(&p),
        too_few: too_few(added.levels().len(), fit.coefficients.len(), nu),
        detectable_bend: terms.first().and_then(|term| detectable(term, ss, nu)),
    }
}

/// The next and the next-but-one term of the fit's ladder, as far as the levels carry them.
pub(crate) fn next_terms(fit: &Fit, added: &Added) -> Vec<Term> {
    let spare = added.levels().len().saturating_sub(fit.coefficients.len());
    let mut terms: Vec<Term> = Vec::new();
    let Some(ladder) = Ladder::new(fit) else {
        return terms;
    };
    for step in 1..=spare.min(2) {
        let column: Vec<f64> = fit.points.iter().map(|p| ladder.at(step, p.x)).collect();
        let before: Vec<&Term> = terms.iter().collect();
        match added.term(&column, &before) {
            Some(term) => terms.push(term),
            None => break,
        }
    }
    terms
}

/// The terms that follow a family's own, as functions of x scaled to about 1.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Ladder {
    /// Degree of the family in its own abscissa.
    degree: usize,
    /// The abscissa is ln x.
    logarithmic: bool,
    /// Added to x before its logarithm is taken, where a standard of zero takes part.
    offset: f64,
    /// Lowest abscissa.
    low: f64,
    /// Highest abscissa.
    high: f64,
}

impl Ladder {
    /// `None` for a declared function, which has no next term.
    pub(crate) fn new(fit: &Fit) -> Option<Self> {
        let (degree, logarithmic) = match fit.family {
            Family::Declared => return None,
            Family::Polynomial(d) => (usize::from(d), false),
            // The term after b₁x is x²; the missing constant is another question.
            Family::LineThroughZero | Family::OnePoint => (1, false),
            // Any other family: what a polynomial with as many coefficients could not follow.
            _ => (fit.coefficients.len() - 1, fit.family.logarithmic()),
        };
        let positive = fit.points.iter().map(|p| p.x).filter(|x| *x > 0.0).fold(f64::INFINITY, f64::min);
        let offset = if fit.points.iter().all(|p| p.x > 0.0) { 0.0 } else { positive };
        let mut ladder = Self { degree, logarithmic, offset, low: f64::INFINITY, high: f64::NEG_INFINITY };
        for point in &fit.points {
            let a = ladder.abscissa(point.x);
            ladder.low = ladder.low.min(a);
            ladder.high = ladder.high.max(a);
        }
        (ladder.high > ladder.low).then_some(ladder)
    }

    fn abscissa(&self, x: f64) -> f64 {
        if self.logarithmic { libm::log(x + self.offset) } else { x }
    }

    /// The `step`-th term after the family's last one (1: the next), at x.
    pub(crate) fn at(&self, step: usize, x: f64) -> f64 {
        let t = 2.0 * ((self.abscissa(x) - self.low) / (self.high - self.low)) - 1.0;
        legendre(self.degree + step, t)
    }
}

/// The Legendre polynomial of degree n at t in [−1, 1].
pub(crate) fn legendre(n: usize, t: f64) -> f64 {
    let (mut previous, mut current) = (1.0, t);
    if n == 0 {
        return previous;
    }
    for k in 1..n {
        let k = k as f64;
        (previous, current) = (current, ((2.0 * k + 1.0) * t * current - k * previous) / (k + 1.0));
    }
    current
}

/// The bend of the next term that would be found with probability 0.8.
fn detectable(term: &Term, residual_ss: f64, nu: usize) -> Option<f64> {
    let left = nu.checked_sub(1).filter(|left| *left > 0)? as f64;
    // With the term in the model, s² estimates the scatter alone.
    let s2 = (residual_ss - term.explained).max(0.0) / left;
    let delta = noncentrality(t_quantile(0.975, left), left, 0.2);
    let largest = term.column.iter().fold(0.0, |m: f64, z| m.max(z.abs()));
    Some(delta * largest * libm::sqrt(s2 / term.length2)).filter(|bend| bend.is_finite())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, pontius, simulated};
    use crate::numerics::streams::Stream;

    /// NIST/SEMATECH e-Handbook 4.6.1.5 and 4.6.1.9 (load cell): line 214.7464 with (18, 20) as
    /// printed in single precision, 214.7469 recomputed; quadratic 0.8107 with (17, 20).
    #[test]
    fn the_load_cell_refuses_a_line_and_takes_a_quadratic() {
        let line = shape(&fitted(Family::Polynomial(1), &pontius()));
        let lof = line.lack_of_fit.unwrap();
        assert!((lof.f - 214.746_923_65).abs() < 1e-6, "{}", lof.f);
        assert_eq!((lof.df1, lof.df2), (18, 20));
        assert!(line.rejected() && line.p.unwrap() < 1e-15);

        let quadratic = shape(&fitted(Family::Polynomial(2), &pontius()));
        let lof = quadratic.lack_of_fit.unwrap();
        assert!((lof.f - 0.810_723_900).abs() < 1e-6, "{}", lof.f);
        assert_eq!((lof.df1, lof.df2), (17, 20));
        assert!(!quadratic.rejected());
    }

    /// F of an added term is the squared t of its coefficient in the larger fit: here B2 of NIST/ITL
    /// StRD Pontius, certified estimate and SD.
    #[test]
    fn the_next_term_is_mandels_test() {
        let next = shape(&fitted(Family::Polynomial(1), &pontius())).next.unwrap();
        let t: f64 = -0.316_081_871_345_029e-14 / 0.486_652_849_992_036e-16;
        assert!((next.f / (t * t) - 1.0).abs() < 1e-9, "{} {}", next.f, t * t);
        assert_eq!((next.df1, next.df2), (1, 37));
    }

    #[test]
    fn both_terms_are_the_extra_sums_of_squares_of_larger_fits() {
        let mut stream = Stream::new(3, 0);
        let points = simulated(&mut stream, (7, 1), |x| x + 0.02 * x * x, |_| 0.3);
        let [a, b, c] = [1, 2, 3].map(|d| fitted(Family::Polynomial(d), &points).residual_ss);
        let shape = shape(&fitted(Family::Polynomial(1), &points));
        let f1 = (a - b) / (b / 4.0);
        let f2 = (b - c) / (c / 3.0);
        assert!((shape.next.unwrap().f / f1 - 1.0).abs() < 1e-9);
        assert!((shape.next_but_one.unwrap().f / f2 - 1.0).abs() < 1e-9);
    }

    #[test]
    fn rising_and_falling_give_the_same_p() {
        let mut stream = Stream::new(4, 0);
        let points = simulated(&mut stream, (6, 2), |x| x * x, |_| 0.3);
        let fallen: Vec<_> = points.iter().map(|p| crate::fit::Point { x: p.x, y: 7.0 - 3.0 * p.y }).collect();
        let p = |points| shape(&fitted(Family::Polynomial(1), points)).p.unwrap();
        assert!((p(&points) / p(&fallen) - 1.0).abs() < 1e-9);
    }

    /// Rejections of clean lines, 5 × 3: 0.043; of a bend of 1 SD: 0.70; of an S of 1 SD: 0.52. Own
    /// simulation with another program.
    #[test]
    fn size_and_power_of_the_combined_test() {
        const RUNS: usize = 2000;
        let rejected = |number: u64, f: &dyn Fn(f64) -> f64| {
            let mut stream = Stream::new(11, number);
            let mut one = || shape(&fitted(Family::Polynomial(1), &simulated(&mut stream, (5, 3), f, |_| 1.0)));
            (0..RUNS).filter(|_| one().rejected()).count()
        };
        assert_rate(rejected(0, &|x| 2.0 * x), RUNS, 0.043);
        // t² − 1/2 departs from its best line (five points: mean ½) by at most ½ at the ends and middle.
        assert_rate(rejected(1, &|x| 2.0 * ((x - 3.0) / 2.0).powi(2)), RUNS, 0.705);
    }

    /// Bend found with probability 0.8 (SD = 1): 5 × 1 3.0, 6 × 1 2.3, 8 × 1 1.9, 11 × 1 1.6, 5 × 3
    /// 0.94, 11 × 3 0.86. Own calculation from the noncentral F.
    #[test]
    fn what_so_few_points_could_have_found() {
        for (design, bend) in
            [((5, 1), 3.0), ((6, 1), 2.3), ((8, 1), 1.9), ((11, 1), 1.6), ((5, 3), 0.94), ((11, 3), 0.86)]
        {
            let mut stream = Stream::new(5, 0);
            let points = simulated(&mut stream, design, |x| x, |_| 1.0);
            let fit = fitted(Family::Polynomial(1), &points);
            let added = Added::new(&fit);
            let term = &next_terms(&fit, &added)[0];
            let nu = fit.degrees_of_freedom;
            // An SD of exactly 1 with the term in the model.
            let found = detectable(term, term.explained + (nu - 1) as f64, nu).unwrap();
            assert!((found / bend - 1.0).abs() < 0.03, "{design:?}: {found}");
        }
    }

    #[test]
    fn few_levels_and_perfect_fits_are_said_so() {
        let exact = |xs: &[f64], f: fn(f64) -> f64| -> Vec<crate::fit::Point> {
            xs.iter().map(|&x| crate::fit::Point { x, y: f(x) }).collect()
        };
        let three = shape(&fitted(Family::Polynomial(1), &exact(&[1.0, 2.0, 3.0], |x| x * x)));
        assert_eq!(three.too_few.unwrap().levels_needed, 4);
        assert_eq!(three.p, None);

        let xs = [0.1, 0.2, 0.3, 0.4, 0.5, 0.6];
        let perfect = shape(&fitted(Family::Polynomial(1), &exact(&xs, |x| 0.7 + 0.3 * x)));
        assert_eq!(perfect.p, Some(1.0));
        let bent = shape(&fitted(Family::Polynomial(1), &exact(&xs, |x| x * x)));
        assert!(bent.rejected() && bent.next.unwrap().f.is_finite());
    }

    #[test]
    fn log_data_refuse_a_line_and_take_a_log() {
        let mut stream = Stream::new(6, 0);
        let points = simulated(&mut stream, (8, 2), |x| 1.0 + 2.0 * libm::log(x), |_| 0.01);
        assert!(shape(&fitted(Family::Polynomial(1), &points)).rejected());
        assert!(!shape(&fitted(Family::Log, &points)).rejected());
    }
}
