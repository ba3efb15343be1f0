//! Does one standard decide the curve? Its leverage, and what happens without it.

use super::levels::{Level, levels};
use crate::fit::{Fit, Point, Request, Weights, estimate};
use crate::model::Family;

/// A level decides when its leverage exceeds this and [`MARGIN`] times that of an even design.
const HALF: f64 = 0.5;

/// How far above the even design a leverage must be.
const MARGIN: f64 = 1.3;

/// A level whose leverage stands out.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Deciding {
    /// The standard, input unit.
    pub x: f64,
    /// Its level leverage: the sum over its observations, 0 to 1.
    pub leverage: f64,
    /// The largest level leverage of the evenly spaced design, 0 to 1.
    pub even: f64,
}

/// What leaving out one level does where it matters most.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LeftOut {
    /// The standard left out, input unit.
    pub x: f64,
    /// Where the converted value moves most, input unit.
    pub at: f64,
    /// By how much it moves there, signed, input unit.
    pub shift: f64,
}

/// The level that decides by its place alone; `None` when none does, and where even spacing would
/// decide nearly as much (1.3·h_even ≥ 1).
///
/// # Formula
/// h_i = Σ_j h_ij over the level's observations; decides when h_i > ½ and h_i > 1.3·h_even, h_even the
/// largest of the evenly spaced design with as many levels over the same range, in the same family and
/// the same variances; for families that are neither polynomials nor lines through zero that of a
/// polynomial with as many coefficients.
///
/// # Shapes and units
/// Dimensionless. `counts(x)`: whether a level may be named at all (a pile of zeros is no standard).
///
/// # Source
/// Leverage: D. C. Hoaglin & R. E. Welsch (1978), Amer. Statist. 32, 17–22; from memory. The margin is
/// a definition of this program.
#[must_use]
pub fn deciding(fit: &Fit, counts: impl Fn(f64) -> bool) -> Option<Deciding> {
    let own = fit.levels().into_iter().map(|level| level.x).zip(fit.level_leverage());
    let (x, leverage) = own.filter(|(x, _)| counts(*x)).max_by(|a, b| a.1.total_cmp(&b.1))?;
    if leverage <= HALF {
        return None;
    }
    let even = even_leverage(fit)?;
    (leverage > MARGIN * even).then_some(Deciding { x, leverage, even })
}

/// The largest level leverage of the evenly spaced design that a fit is compared with.
fn even_leverage(fit: &Fit) -> Option<f64> {
    let (m, p) = (levels(&fit.points).len(), fit.coefficients.len());
    let same_family = matches!(fit.family, Family::Polynomial(_) | Family::LineThroughZero);
    if m < 2 || !same_family || (fit.weights == Weights::Equal && fit.family != Family::LineThroughZero) {
        return (p > 0).then(|| even_polynomial(m, p));
    }
    let xs = || fit.points.iter().map(|p| p.x);
    let (low, high) = (xs().fold(f64::INFINITY, f64::min), xs().fold(f64::NEG_INFINITY, f64::max));
    let step = (high - low) / (m - 1) as f64;
    let points: Vec<Point> =
        (0..m).map(|i| low + step * i as f64).map(|x| Point { x, y: fit.curve.value(x) }).collect();
    let u: Vec<f64> = points.iter().map(|p| libm::sqrt(fit.variance_at(p.x))).collect();
    let request = Request { reading_uncertainty: Some(&u), ..Request::new(&fit.family, &points, Weights::Typed) };
    estimate(&request).ok()?.leverage.into_iter().reduce(f64::max)
}

/// The largest leverage of m evenly spaced places under a polynomial with p coefficients.
///
/// # Formula
/// At the ends Σ_{k<p} (2k+1)·r_k, r_0 = 1/m, r_k = r_{k−1}·(m − k)/(m + k).
///
/// # Shapes and units
/// Dimensionless, 1 when p ≥ m.
///
/// # Source
/// Orthogonal polynomials on equidistant points (Gram, Chebyshev), norm and end value; from memory.
#[must_use]
pub fn even_polynomial(m: usize, p: usize) -> f64 {
    if p >= m {
        return 1.0;
    }
    let count = m as f64;
    let (mut r, mut sum) = (1.0 / count, 0.0);
    for k in 0..p {
        let k = k as f64;
        if k > 0.0 {
            r *= (count - k) / (count + k);
        }
        sum += (2.0 * k + 1.0) * r;
    }
    sum
}

/// For every level that can be left out, where and how much the curve's values move most in units of
/// `scale` there; the worst of them.
///
/// # Formula
/// f̂ without level i: f̂(x) − Σ_{j∈i} ℓ_j(x)·e_j/(1 − h_i), exact for families linear in their
/// coefficients, first order for others; divided by f̂′(x).
///
/// # Shapes and units
/// `scale(x)`: the size that a shift is compared with at x, input unit. `counts(x)`: whether a level may
/// be left out. Looked for at the levels of the fit.
///
/// # Source
/// Deletion identity, R. D. Cook & S. Weisberg (1982), Residuals and Influence in Regression, A.2; from
/// memory.
#[must_use]
pub fn left_out(fit: &Fit, counts: impl Fn(f64) -> bool, scale: impl Fn(f64) -> Option<f64>) -> Option<(LeftOut, f64)> {
    let levels = levels(&fit.points);
    let places: Vec<(f64, f64, Vec<f64>)> =
        levels.iter().filter_map(|l| Some((l.x, scale(l.x)?, fit.influence(l.x)))).collect();
    let one = |level: &Level| -> Option<(LeftOut, f64)> {
        let rest = 1.0 - level.members.iter().map(|&i| fit.leverage[i]).sum::<f64>();
        let moved = |(at, size, influence): &(f64, f64, Vec<f64>)| {
            let pull: f64 = level.members.iter().map(|&i| influence[i] * fit.residuals[i]).sum();
            let shift = pull / rest / fit.curve.derivative(*at);
            (LeftOut { x: level.x, at: *at, shift }, shift.abs() / size)
        };
        if rest <= 1e-9 {
            return None;
        }
        places.iter().map(moved).filter(|m| m.1.is_finite()).max_by(|a, b| a.1.total_cmp(&b.1))
    };
    levels.iter().filter(|l| counts(l.x)).filter_map(one).max_by(|a, b| a.1.total_cmp(&b.1))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{fitted, simulated};
    use crate::fit::fit;
    use crate::numerics::streams::Stream;

    fn at(xs: &[f64]) -> Vec<Point> {
        xs.iter().map(|&x| Point { x, y: 2.0 * x + libm::sin(9.0 * x) }).collect()
    }

    /// Arithmetic: 6 points 0.5238, 11-point quadratic 0.5804; and against fitted designs.
    #[test]
    fn even_designs_have_the_leverage_of_their_fits() {
        assert!((even_polynomial(6, 2) - 0.523_809_523_8).abs() < 1e-9);
        assert!((even_polynomial(11, 3) - 0.580_419_580_4).abs() < 1e-9);
        for (m, degree) in [(5, 1), (6, 2), (9, 3), (20, 5)] {
            let xs: Vec<f64> = (0..m).map(|i| 3.0 + f64::from(i)).collect();
            let largest = fitted(Family::Polynomial(degree), &at(&xs)).leverage.into_iter().fold(0.0, f64::max);
            assert!((even_polynomial(xs.len(), usize::from(degree) + 1) - largest).abs() < 1e-9);
        }
        assert!((even_polynomial(3, 3) - 1.0).abs() < 1e-15);
    }

    #[test]
    fn doubling_steps_decide_and_even_ones_do_not() {
        let line = Family::Polynomial(1);
        let doubling = [1.0, 2.0, 4.0, 8.0, 16.0, 32.0];
        let found = deciding(&fitted(line.clone(), &at(&doubling)), |_| true).unwrap();
        assert!((found.leverage - 0.824).abs() < 5e-4 && found.x == 32.0, "{found:?}");
        let repeated: Vec<Point> = at(&doubling).into_iter().flat_map(|p| [p, p, p]).collect();
        assert!(deciding(&fitted(line.clone(), &repeated), |_| true).is_some());
        assert!(deciding(&fitted(line.clone(), &at(&doubling)), |x| x < 32.0).is_none());
        let even = [1.0, 2.0, 3.0, 4.0, 5.0, 6.0];
        for weights in [Weights::Equal, Weights::InverseX, Weights::InverseX2] {
            assert!(deciding(&fit(&line, &at(&even), weights).unwrap(), |_| true).is_none(), "{weights}");
        }
        assert!(deciding(&fitted(Family::LineThroughZero, &at(&[1.0, 2.0, 3.0])), |_| true).is_none());
        assert!(deciding(&fitted(Family::LineThroughZero, &at(&[1.0, 2.0, 3.0, 4.0, 5.0, 60.0])), |_| true).is_some());
        assert!(deciding(&fitted(Family::Polynomial(3), &at(&even)), |_| true).is_none());
    }

    #[test]
    fn leaving_out_a_level_is_what_a_fit_without_it_gives() {
        let points = simulated(&mut Stream::new(5, 5), (6, 2), |x| 3.0 * x + 0.2 * x * x, |_| 0.5);
        let whole = fitted(Family::Polynomial(2), &points);
        let (worst, ratio) = left_out(&whole, |_| true, |_| Some(1.0)).unwrap();
        let rest: Vec<Point> = points.iter().filter(|p| p.x != worst.x).copied().collect();
        let without = fitted(Family::Polynomial(2), &rest);
        let by_hand = |x: f64| (whole.curve.value(x) - without.curve.value(x)) / whole.curve.derivative(x);
        assert!((by_hand(worst.at) - worst.shift).abs() < 1e-9, "{worst:?} {}", by_hand(worst.at));
        assert!((ratio - worst.shift.abs()).abs() < 1e-12);
        // A level without which there is no fit cannot be left out.
        let three = fitted(Family::Polynomial(2), &at(&[1.0, 2.0, 3.0]));
        assert_eq!(left_out(&three, |_| true, |_| Some(1.0)), None);
    }
}
