//! A hundred thousand wild data sets: each gives a fit of finite numbers or an error that names the place.
//! Families that are searched for take longer and see fewer.

use super::*;
use crate::numerics::streams::Stream;

/// Data sets for the families linear in their coefficients.
const CASES: u64 = 100_000;

/// Data sets for the others.
const SEARCHED_CASES: u64 = 2_500;

const NUMBERS: [f64; 14] = [
    f64::NAN,
    f64::INFINITY,
    f64::NEG_INFINITY,
    0.0,
    -0.0,
    1e300,
    -1e300,
    1e-300,
    -1e-300,
    f64::MAX,
    5e-324,
    1.0,
    -1.0,
    1e16,
];

const WEIGHTS: [Weights; 11] = [
    Weights::Equal,
    Weights::InverseX,
    Weights::InverseX2,
    Weights::InverseY,
    Weights::InverseY2,
    Weights::Replicates,
    Weights::ReplicatesConstant,
    Weights::ReplicatesProportional,
    Weights::Raw,
    Weights::Typed,
    Weights::Fitted,
];

fn pick<T: Clone>(stream: &mut Stream, from: &[T]) -> T {
    from[usize::try_from(stream.below(from.len() as u64)).unwrap()].clone()
}

/// How wild the numbers of one data set are.
#[derive(Clone, Copy)]
enum Kind {
    /// Round numbers of one sign or both: repeats, levels, exact fits.
    Whole { negative: bool },
    /// Ordinary, of one size.
    Ordinary { size: f64 },
    /// Any size and sign.
    AnySize,
    /// Mostly the awkward ones.
    Awkward,
    /// All the same.
    Same(f64),
}

impl Kind {
    fn draw(stream: &mut Stream) -> Self {
        match stream.below(14) {
            0..=5 => Self::Whole { negative: stream.below(3) == 0 },
            6..=10 => Self::Ordinary { size: f64::powi(10.0, i32::try_from(stream.below(300)).unwrap() - 150) },
            11 => Self::AnySize,
            12 => Self::Awkward,
            _ => Self::Same(stream.normal()),
        }
    }

    fn number(self, stream: &mut Stream) -> f64 {
        match self {
            Self::Whole { negative } => stream.below(6) as f64 + if negative { -3.0 } else { 0.5 },
            Self::Ordinary { size } => size * (5.0 + stream.normal()),
            Self::AnySize => stream.normal() * libm::exp(300.0 * stream.normal()),
            Self::Awkward if stream.below(3) == 0 => pick(stream, &NUMBERS),
            Self::Awkward => 10.0 * stream.uniform(),
            Self::Same(value) => value,
        }
    }
}

/// Linear in their coefficients, the usual ones more often.
fn linear() -> Vec<Family> {
    let others = [Family::Declared, Family::LineThroughZero, Family::OnePoint, Family::Log];
    let usual = [1, 1, 1, 2, 2, 3].map(Family::Polynomial);
    others.into_iter().chain((0..=11).map(Family::Polynomial)).chain(usual).collect()
}

/// Found by a search.
fn searched() -> Vec<Family> {
    vec![
        Family::Power,
        Family::Exponential,
        Family::Hyperbola,
        Family::Rational,
        Family::Logistic4,
        Family::Logistic5,
        Family::SteinhartHart,
        Family::Beta,
        Family::CallendarVanDusen,
    ]
}

/// The place that an error names is there, and is to blame.
fn names_a_place(error: &FitError, points: &[Point]) {
    let blamed = |index: usize| points[index];
    match error {
        FitError::NotFinite { index } => {
            let point = blamed(*index);
            assert!(!(point.x.is_finite() && point.y.is_finite()));
        }
        FitError::OutsideDomain { index, x, .. } | FitError::Undefined { index, x } => {
            assert!(blamed(*index).x.to_bits() == x.to_bits());
        }
        FitError::BadWeight { index, reason } => {
            let _ = blamed(*index);
            assert!(!reason.is_empty());
        }
        FitError::TooFew { needed, found, .. } => assert!(found < needed),
        _ => {}
    }
    assert!(!error.to_string().is_empty());
}

/// What is not finite in a fit; every other question has an answer that does not panic.
fn offence(fit: &Fit, x: f64) -> Option<&'static str> {
    let finite = |list: &[f64]| list.iter().all(|v| v.is_finite());
    let good = [
        ("coefficients", finite(&fit.coefficients)),
        ("residuals", finite(&fit.residuals)),
        ("leverages", finite(&fit.leverage)),
        ("variances", finite(&fit.variance_ratio)),
        ("covariance", fit.covariance.iter().all(|row| finite(row))),
        ("sum of squares", fit.residual_ss.is_finite() && fit.residual_ss >= 0.0),
        ("s", fit.residual_sd.is_none_or(f64::is_finite) && fit.scatter_sd().is_none_or(f64::is_finite)),
        ("standard uncertainties", fit.standard_uncertainties().is_none_or(finite)),
        ("R²", fit.r_squared().is_none_or(|r| r <= 1.0)),
    ];
    let _ = (fit.variance_at(x), fit.mean_variance(x), fit.slope_variance(x), fit.influence(x), fit.variances(x, 3));
    let _ = (fit.aicc(), fit.bic(), fit.press_rmse(), fit.level_out_rmse(), fit.condition(), fit.fitted());
    let _ = (fit.standardised(), fit.studentised(), fit.cooks_distance(), fit.level_leverage(), fit.chi_square());
    let _ = (fit.curve.value(x), fit.curve.derivative(x), fit.curve.gradient(x), fit.curve.slope_gradient(x));
    good.into_iter().find(|(_, good)| !good).map(|(what, _)| what)
}

/// How many data sets gave a fit, and how many an error.
fn try_all(families: &[Family], seed: u64, cases: u64) -> (u32, u32) {
    let (mut fits, mut errors) = (0_u32, 0_u32);
    let mut offences = Vec::new();
    for case in 0..cases {
        let mut stream = Stream::new(seed, case);
        let (kind_x, kind_y) = (Kind::draw(&mut stream), Kind::draw(&mut stream));
        let count = stream.below(13).max(stream.below(13));
        let points: Vec<Point> =
            (0..count).map(|_| Point { x: kind_x.number(&mut stream), y: kind_y.number(&mut stream) }).collect();
        let kind_u = Kind::draw(&mut stream);
        let u: Vec<f64> = points.iter().map(|_| kind_u.number(&mut stream)).collect();
        let (family, weights) = (pick(&mut stream, families), pick(&mut stream, &WEIGHTS));
        let reading_uncertainty = (stream.below(4) > 0).then_some(u.as_slice());
        let request = Request { reading_uncertainty, ..Request::new(&family, &points, weights) };
        match estimate(&request) {
            Ok(fit) => {
                fits += 1;
                let kind = Kind::draw(&mut stream);
                let what = offence(&fit, kind.number(&mut stream));
                offences.extend(what.map(|what| format!("{case}: {family}, weights {weights}: {what}")));
            }
            Err(error) => {
                errors += 1;
                names_a_place(&error, &points);
            }
        }
    }
    assert!(offences.is_empty(), "not finite:\n{}", offences.join("\n"));
    (fits, errors)
}

// Both happen often, or the data would not be wild, or only be wild.

#[test]
fn a_hundred_thousand_wild_sets_fit_or_say_why() {
    let (fits, errors) = try_all(&linear(), 97, CASES);
    assert!(fits > 20_000 && errors > 20_000, "{fits} fits, {errors} errors");
}

#[test]
fn wild_sets_do_not_upset_a_search() {
    let (fits, errors) = try_all(&searched(), 98, SEARCHED_CASES);
    assert!(fits > 100 && errors > 100, "{fits} fits, {errors} errors");
}
