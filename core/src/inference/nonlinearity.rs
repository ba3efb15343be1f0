//! Departure of the level means from a straight line, in the three customary senses.

use super::levels::Level;

/// Signed largest deviations of the level means from three straight lines, output unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Nonlinearity {
    /// From the line that makes the largest deviation as small as possible. Its two extremes are
    /// equal in size; the sign is that of the one that stands alone between its two partners
    /// (positive: the middle lies above).
    pub independent: f64,
    /// From the line through the two end means.
    pub terminal: f64,
    /// From the line through the mean at the low end whose slope makes the largest deviation as
    /// small as possible.
    pub zero_based: f64,
    /// The span of the level means, |last − first|, output unit: what percentages refer to.
    pub span: f64,
}

/// Non-linearity of an instrument from its level means.
///
/// # Formula
/// independent: min over (a, b) of max|ȳᵢ − a − b·xᵢ|, exact: the best line is parallel to an edge of
/// the convex hull of the means. terminal: a line through both end means. zero-based: min over b of
/// max|ȳᵢ − ȳ₁ − b(xᵢ − x₁)|, exact by cutting lines.
///
/// # Shapes and units
/// m ≥ 3 levels ascending in x (two means always lie on a line: `None`). Output unit.
///
/// # Source
/// IEC 61298-2, conformity and linearity: independent, terminal-based, zero-based; from memory.
#[must_use]
pub fn nonlinearity(levels: &[Level]) -> Option<Nonlinearity> {
    if levels.len() < 3 {
        return None;
    }
    let means: Vec<(f64, f64)> = levels.iter().map(|level| (level.x, level.mean)).collect();
    let (x1, y1) = means[0];
    let (xm, ym) = means[means.len() - 1];
    let from_start: Vec<(f64, f64)> = means.iter().map(|(x, y)| (x - x1, y - y1)).collect();
    let terminal_slope = (ym - y1) / (xm - x1);
    let zero_slope = least_largest_slope(&from_start);
    Some(Nonlinearity {
        independent: independent(&from_start),
        terminal: largest(&from_start, terminal_slope),
        zero_based: largest(&from_start, zero_slope),
        span: (ym - y1).abs(),
    })
}

/// The signed largest deviation from the line of the given slope through the origin.
fn largest(points: &[(f64, f64)], slope: f64) -> f64 {
    points.iter().map(|(x, y)| y - slope * x).fold(0.0, |worst: f64, d| if d.abs() > worst.abs() { d } else { worst })
}

/// Half the smallest vertical width of the points, signed by the lone contact.
fn independent(points: &[(f64, f64)]) -> f64 {
    let mut best: Option<f64> = None;
    for (sign, side) in [(1.0, hull(points, 1.0)), (-1.0, hull(points, -1.0))] {
        // An edge of the lower hull carries two contacts below; the lone contact is above it (+).
        for edge in side.windows(2) {
            let slope = (edge[1].1 - edge[0].1) / (edge[1].0 - edge[0].0);
            let width =
                points.iter().map(|(x, y)| sign * ((y - edge[0].1) - slope * (x - edge[0].0))).fold(0.0, f64::max);
            if best.is_none_or(|b| width < 2.0 * b.abs()) {
                best = Some(sign * width / 2.0);
            }
        }
    }
    best.unwrap_or(0.0)
}

/// Lower (`sign` 1) or upper (−1) convex hull of points ascending in x.
fn hull(points: &[(f64, f64)], sign: f64) -> Vec<(f64, f64)> {
    let mut chain: Vec<(f64, f64)> = Vec::new();
    for &point in points {
        while chain.len() >= 2 {
            let (a, b) = (chain[chain.len() - 2], chain[chain.len() - 1]);
            let turn = (b.0 - a.0) * (point.1 - a.1) - (b.1 - a.1) * (point.0 - a.0);
            if sign * turn > 0.0 {
                break;
            }
            chain.pop();
        }
        chain.push(point);
    }
    chain
}

/// The slope through the origin that makes the largest deviation smallest.
///
/// The largest deviation is the upper envelope of the lines ±(y − b·x) in b; walking from one active
/// line to the crossing with the steepest on the other side ends after finitely many steps.
fn least_largest_slope(points: &[(f64, f64)]) -> f64 {
    let slopes = points.iter().filter(|(x, _)| *x != 0.0).map(|(x, y)| y / x);
    let (mut low, mut high) = slopes.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), s| (l.min(s), h.max(s)));
    let active = |b: f64| {
        points
            .iter()
            .flat_map(|&(x, y)| [(y, -x), (-y, x)])
            .max_by(|p, q| (p.0 + p.1 * b).total_cmp(&(q.0 + q.1 * b)))
            .unwrap_or((0.0, 0.0))
    };
    let (mut falling, mut rising) = (active(low), active(high));
    for _ in 0..4 * points.len() {
        if high <= low || falling.1 >= 0.0 || rising.1 <= 0.0 {
            break;
        }
        let crossing = (rising.0 - falling.0) / (falling.1 - rising.1);
        let line = active(crossing);
        let known = falling.0 + falling.1 * crossing;
        if line.0 + line.1 * crossing <= known + 4.0 * f64::EPSILON * known.abs() {
            return crossing;
        }
        if line.1 < 0.0 {
            (falling, low) = (line, crossing);
        } else {
            (rising, high) = (line, crossing);
        }
    }
    0.5 * (low + high)
}

#[cfg(test)]
mod tests {
    use super::super::levels::levels;
    use super::*;
    use crate::fit::Point;

    fn of(f: impl Fn(f64) -> f64, xs: &[f64]) -> Nonlinearity {
        let points: Vec<Point> = xs.iter().map(|&x| Point { x, y: f(x) }).collect();
        nonlinearity(&levels(&points)).unwrap()
    }

    const XS: [f64; 9] = [0.0, 0.5, 1.0, 1.5, 2.0, 2.5, 3.0, 3.5, 4.0];

    /// A parabola c·x(L − x) departs by c·L²/4 from its chord; the best line halves that; through
    /// its start the best line leaves c·L²·(√2 − 1)²: arithmetic.
    #[test]
    fn a_parabola_gives_the_textbook_values() {
        let n = of(|x| 3.0 * x + 0.1 * x * (4.0 - x), &XS);
        assert!((n.terminal - 0.4).abs() < 1e-12);
        assert!((n.independent - 0.2).abs() < 1e-12);
        let continuous = 0.1 * 16.0 * (2.0_f64.sqrt() - 1.0).powi(2);
        let fine: Vec<f64> = (0..=4000).map(|i| f64::from(i) * 1e-3).collect();
        let n = of(|x| 3.0 * x + 0.1 * x * (4.0 - x), &fine);
        assert!((n.zero_based.abs() - continuous).abs() < 1e-6, "{}", n.zero_based);
    }

    #[test]
    fn the_sign_follows_the_bow() {
        assert!(of(|x| -0.1 * x * (4.0 - x), &XS).independent < 0.0);
        assert!(of(|x| 0.1 * x * (4.0 - x), &XS).independent > 0.0);
        assert!(of(|x| -5.0 * x + 0.1 * x * (4.0 - x), &XS).independent > 0.0);
    }

    #[test]
    fn no_line_does_better_than_the_independent_one() {
        let f = |x: f64| libm::sin(2.3 * x) + 0.3 * x * x;
        let best = of(f, &XS).independent.abs();
        for step in -400..400 {
            let slope = f64::from(step) * 0.01;
            let d: Vec<f64> = XS.iter().map(|&x| f(x) - slope * x).collect();
            let width = d.iter().copied().fold(f64::MIN, f64::max) - d.iter().copied().fold(f64::MAX, f64::min);
            assert!(width / 2.0 >= best - 1e-12);
        }
    }

    #[test]
    fn no_slope_through_the_start_does_better_than_the_zero_based_one() {
        let f = |x: f64| libm::sin(1.7 * x) + 0.3 * x;
        let best = of(f, &XS).zero_based.abs();
        for step in -4000..4000 {
            let slope = f64::from(step) * 0.001;
            let worst = XS.iter().map(|&x| (f(x) - slope * x).abs()).fold(0.0, f64::max);
            assert!(worst >= best - 1e-12);
        }
    }

    #[test]
    fn a_straight_line_has_none_and_two_levels_cannot_tell() {
        let n = of(|x| 2.0 + 0.25 * x, &XS);
        assert_eq!((n.independent, n.terminal, n.zero_based), (0.0, 0.0, 0.0));
        let two = [Point { x: 0.0, y: 1.0 }, Point { x: 1.0, y: 2.0 }];
        assert_eq!(nonlinearity(&levels(&two)), None);
    }
}
