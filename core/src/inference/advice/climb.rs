//! Climbing the ladder of families.

use super::{Advice, Because, HIGHEST_DEGREE, Outcome, Rules, ShapeTest, Tried};
use crate::fit::{self, Point, Request, Weights};
use crate::inference::ftest::FTest;
use crate::inference::levels::levels;
use crate::inference::shape::{Shape, TooFew, shape, too_few};
use crate::model::Family;

/// Advises a function for the points under the given weights.
///
/// # Formula
/// Climb line → quadratic → … to degree min(5, m − 2) through the allowed degrees; the first with
/// p_S > 0.05 stands. Beside it compete, when they are good enough and need no more coefficients: the
/// families that the plan names; the logarithm when the line did not stand; the logistic when not even
/// the quadratic did. The lower AICc wins; a thermistor family, whose errors are of another quantity,
/// wins because the plan names it. When nothing stands: none is good enough. A line through zero is
/// never advised.
///
/// # Shapes and units
/// `points`: N observations. Spread decides the weights and drift decides warnings; neither enters.
///
/// # Source
/// Definitions of this program; on clean straight data (5 × 3) the line is advised in 95 %.
#[must_use]
pub fn advise(points: &[Point], weights: Weights, rules: &Rules) -> Advice {
    let mut advice = Advice { outcome: Outcome::NothingToJudge, because: Vec::new(), tried: Vec::new() };
    let m = levels(points).len();
    let mut untold = None;
    let mut best = advice.climb(points, weights, rules, m, &mut untold);
    for family in contenders(&advice, rules, best) {
        let index = advice.attempt(points, weights, rules, family).filter(|&i| advice.tried[i].good_enough());
        best = match (best, index) {
            (Some(a), Some(b)) => Some(advice.better(a, b)),
            (a, b) => a.or(b),
        };
    }
    advice.outcome = match best {
        Some(i) => Outcome::Advised(advice.tried[i].family.clone()),
        None => advice.nothing_stands(points, weights, rules, m, untold),
    };
    advice
}

/// The families that compete with the degree that stands, if one does.
fn contenders(advice: &Advice, rules: &Rules, ladder: Option<usize>) -> Vec<Family> {
    let degree = ladder.map(|i| advice.tried[i].coefficients - 1);
    let ladder_has = |family: &Family| matches!(family, Family::Polynomial(_) | Family::LineThroughZero);
    let mut all: Vec<Family> = rules.suggested.iter().filter(|f| !ladder_has(f)).cloned().collect();
    if degree != Some(1) {
        all.push(Family::Log);
    }
    if degree.is_none_or(|d| d > 2) {
        all.push(Family::Logistic4);
    }
    all.retain(|family| allows(rules, family));
    all.dedup();
    all
}

fn allows(rules: &Rules, family: &Family) -> bool {
    rules.allowed.contains(family) || rules.suggested.contains(family)
}

impl Advice {
    /// Climbs the allowed degrees; the place in `tried` of the first good enough.
    fn climb(
        &mut self,
        points: &[Point],
        weights: Weights,
        rules: &Rules,
        m: usize,
        untold: &mut Option<(Family, TooFew)>,
    ) -> Option<usize> {
        for degree in 1..=HIGHEST_DEGREE {
            let family = Family::Polynomial(degree as u8);
            if !allows(rules, &family) {
                continue;
            }
            if degree > m.saturating_sub(2) {
                let coefficients = degree + 1;
                let nu = points.len().saturating_sub(coefficients);
                if let (None, Some(numbers)) = (&untold, too_few(m, coefficients, nu)) {
                    *untold = Some((family, numbers));
                }
                return None;
            }
            let Some(index) = self.attempt(points, weights, rules, family.clone()) else {
                continue;
            };
            if self.tried[index].good_enough() {
                return Some(index);
            }
            if let Some(numbers) = self.tried[index].untold() {
                *untold = Some((family, numbers));
                return None;
            }
        }
        None
    }

    /// Fits and tests one family, noting the reason it gives.
    fn attempt(&mut self, points: &[Point], weights: Weights, rules: &Rules, family: Family) -> Option<usize> {
        let request = Request {
            units: rules.units,
            reading_uncertainty: rules.reading_uncertainty.as_deref(),
            ..Request::new(&family, points, weights)
        };
        let fit = match fit::estimate(&request) {
            Ok(fit) => fit,
            Err(error) => {
                self.because.push(Because::NotFitted { family, error });
                return None;
            }
        };
        let shape = shape(&fit);
        let allowed = allows(rules, &family);
        if allowed {
            self.because.extend(reason(&family, &shape));
        }
        self.tried.push(Tried { family, allowed, coefficients: fit.coefficients.len(), shape, aicc: fit.aicc() });
        Some(self.tried.len() - 1)
    }

    /// The better of two that are good enough: with no more coefficients, the lower AICc.
    fn better(&mut self, stands: usize, other: usize) -> usize {
        let (a, b) = (&self.tried[stands], &self.tried[other]);
        if b.family.fitted_in_measurand() != a.family.fitted_in_measurand() {
            let named = if b.family.fitted_in_measurand() { other } else { stands };
            let family = self.tried[named].family.clone();
            self.because.push(Because::Named { family });
            return named;
        }
        if b.coefficients > a.coefficients {
            return stands;
        }
        let (preferred, beaten) = match (a.aicc, b.aicc) {
            (Some(x), Some(y)) if y < x => (other, stands),
            // Without AICc the smaller number of coefficients decides.
            (None, _) if b.coefficients < a.coefficients => (other, stands),
            _ => (stands, other),
        };
        let (winner, loser) = (&self.tried[preferred], &self.tried[beaten]);
        if let (Some(aicc), Some(other)) = (winner.aicc, loser.aicc) {
            let (family, over) = (winner.family.clone(), loser.family.clone());
            self.because.push(Because::LowerAicc { family, aicc, over, other });
        }
        preferred
    }

    /// Nothing allowed stands: too few points, or none good enough (and what would be).
    fn nothing_stands(
        &mut self,
        points: &[Point],
        weights: Weights,
        rules: &Rules,
        m: usize,
        untold: Option<(Family, TooFew)>,
    ) -> Outcome {
        if let Some((family, numbers)) = untold {
            let reason = Because::TooFew { family: family.clone(), numbers };
            if !self.because.contains(&reason) {
                self.because.push(reason);
            }
            return Outcome::TooFewToTell(family, numbers);
        }
        if self.tried.iter().all(|tried| tried.shape.p.is_none()) {
            return Outcome::NothingToJudge;
        }
        let highest = HIGHEST_DEGREE.min(m.saturating_sub(2));
        let others = (1..=highest).map(|d| Family::Polynomial(d as u8)).chain([Family::Log]);
        for family in others.filter(|family| !allows(rules, family)) {
            let before = self.because.len();
            let attempt = self.attempt(points, weights, rules, family.clone());
            self.because.truncate(before);
            let Some(tried) = attempt.map(|i| &self.tried[i]).filter(|tried| tried.good_enough()) else {
                continue;
            };
            if let Some(p) = tried.shape.p {
                self.because.push(Because::WouldDo { family, p });
                break;
            }
        }
        Outcome::NoneGoodEnough
    }
}

/// The reason that a shape test gives.
fn reason(family: &Family, shape: &Shape) -> Option<Because> {
    let family = family.clone();
    let p = shape.p?;
    if shape.rejected() {
        let (test, numbers) = strongest(shape)?;
        return Some(Because::ShapeRejected { family, p, test, numbers });
    }
    Some(match shape.too_few {
        Some(numbers) => Because::TooFew { family, numbers },
        None => Because::ShapeAccepted { family, p },
    })
}

/// The combined test with the smallest p.
fn strongest(shape: &Shape) -> Option<(ShapeTest, FTest)> {
    [
        (ShapeTest::LackOfFit, shape.lack_of_fit),
        (ShapeTest::NextTerm, shape.next),
        (ShapeTest::NextButOne, shape.next_but_one),
    ]
    .into_iter()
    .filter_map(|(which, test)| test.map(|test| (which, test)))
    .min_by(|a, b| a.1.p.total_cmp(&b.1.p))
}
