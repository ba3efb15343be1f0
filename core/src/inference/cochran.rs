//! Is one level's scatter too large for the others?

use super::levels::{Level, levels};
use super::sphere::whitened;
use crate::distributions::f_upper;
use crate::fit::Fit;
use crate::numerics::roots::bracketed_root;

/// The level with the largest variance against the others.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cochran {
    /// The standard whose repeats scatter most, input unit.
    pub x: f64,
    /// Its SD, in the fit's weights (where v = 1), output unit.
    pub sd: f64,
    /// The statistic.
    pub statistic: Statistic,
    /// Upper-tail probability, Bonferroni over the levels, at most 1.
    pub p: f64,
}

/// Which form of the test applied.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Statistic {
    /// Equal numbers of repeats: Cochran's C.
    C {
        /// Largest variance over the sum of all.
        c: f64,
        /// Levels with repeats.
        levels: usize,
        /// Repeats of each.
        repeats: usize,
        /// C that 5 in 100 clean sets exceed.
        limit: f64,
    },
    /// Unequal numbers: the largest variance over the pooled variance of the others.
    F {
        /// Ratio of the variances.
        f: f64,
        /// Degrees of freedom of the largest.
        df1: usize,
        /// Degrees of freedom of the others together.
        df2: usize,
        /// Levels with repeats.
        levels: usize,
    },
}

impl Statistic {
    /// The method's name for results.
    #[must_use]
    pub const fn method(&self) -> &'static str {
        match self {
            Self::C { .. } => "Cochran's C, p by F with Bonferroni over the levels",
            Self::F { .. } => "largest variance against the others by F, Bonferroni over the levels",
        }
    }
}

/// Tests the level with the largest variance.
///
/// # Formula
/// sᵢ² = Σⱼ(yᵢⱼ − ȳᵢ)²/(v(xᵢ)(nᵢ − 1)) over levels with nᵢ ≥ 2. Equal nᵢ = n, m levels:
/// C = max s²/Σs², p = m·P(F_{n−1, (m−1)(n−1)} ≥ C(m − 1)/(1 − C)). Otherwise F = max s²/(pooled s² of
/// the others), p = m·P(F_{ν_max, Σν−ν_max} ≥ F). Both forms are the same test for equal nᵢ.
///
/// # Shapes and units
/// Dimensionless. `None` with fewer than two levels with repeats, or without scatter beyond rounding.
///
/// # Source
/// W. G. Cochran (1941), Ann. Eugenics 11, 47–52; ISO 5725-2, 7.3.3; from memory.
#[must_use]
pub fn cochran(fit: &Fit) -> Option<Cochran> {
    whitened(fit)?;
    let groups: Vec<Group> =
        levels(&fit.points).iter().filter(|l| l.count() >= 2).map(|level| Group::new(fit, level)).collect();
    let total_ss: f64 = groups.iter().map(|g| g.ss).sum();
    if groups.len() < 2 || total_ss <= 0.0 {
        return None;
    }
    let top = groups.iter().max_by(|a, b| a.variance().total_cmp(&b.variance()))?;
    let df2 = groups.iter().map(|g| g.df).sum::<usize>() - top.df;
    let f = (top.variance() / ((total_ss - top.ss).max(f64::MIN_POSITIVE) / df2 as f64)).min(f64::MAX);
    let m = groups.len();
    let p = (m as f64 * f_upper(f, top.df as f64, df2 as f64)).min(1.0);
    let statistic = if groups.iter().all(|g| g.df == top.df) {
        let repeats = top.df + 1;
        Statistic::C { c: top.ss / total_ss, levels: m, repeats, limit: cochran_limit(0.05, m, repeats)? }
    } else {
        Statistic::F { f, df1: top.df, df2, levels: m }
    };
    Some(Cochran { x: top.x, sd: libm::sqrt(top.variance()), statistic, p })
}

/// Bonferroni's bound for the probability of a C this large; exact for C > ½, at most 1.
///
/// # Shapes and units
/// `levels` ≥ 2 variances of `repeats` ≥ 2 values each; not a number otherwise.
#[must_use]
pub fn cochran_p(c: f64, levels: usize, repeats: usize) -> f64 {
    bound(c, levels, repeats).clamp(0.0, 1.0)
}

/// The C that is exceeded with probability `alpha` at most.
///
/// # Shapes and units
/// 0 < `alpha` < 1, at least two variances of at least two values; `None` otherwise.
#[must_use]
pub fn cochran_limit(alpha: f64, levels: usize, repeats: usize) -> Option<f64> {
    let valid = levels >= 2 && repeats >= 2 && alpha > 0.0 && alpha < 1.0;
    let surplus = |c: f64| bound(c, levels, repeats) - alpha;
    if valid { bracketed_root(surplus, 1.0 / levels as f64, 1.0).ok() } else { None }
}

fn bound(c: f64, levels: usize, repeats: usize) -> f64 {
    if levels < 2 || repeats < 2 {
        return f64::NAN;
    }
    let (m, df) = (levels as f64, repeats as f64 - 1.0);
    let f = if c < 1.0 { c * (m - 1.0) / (1.0 - c) } else { f64::INFINITY };
    m * f_upper(f, df, df * (m - 1.0))
}

/// The scatter of one level.
struct Group {
    x: f64,
    df: usize,
    /// Σ(y − ȳ)²/v.
    ss: f64,
}

impl Group {
    fn new(fit: &Fit, level: &Level) -> Self {
        let inside: f64 = level.members.iter().map(|&i| (fit.points[i].y - level.mean).powi(2)).sum();
        Self { x: level.x, df: level.count() - 1, ss: inside / fit.variance_at(level.x) }
    }

    fn variance(&self) -> f64 {
        self.ss / self.df as f64
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;
    use serde_json::Value;

    /// Critical values of C, tests/published/cochran/SOURCE.md.
    #[test]
    fn published_critical_values() {
        let table: Value =
            serde_json::from_str(include_str!("../../../tests/published/cochran/critical-values.json")).unwrap();
        for row in table["rows"].as_array().unwrap() {
            let whole = |i: usize| row[i].as_u64().unwrap() as usize;
            for (place, alpha, tolerance) in [(2, 0.05, 0.0005), (3, 0.01, 0.0015)] {
                let printed: f64 = row[place].as_str().unwrap().parse().unwrap();
                let found = cochran_limit(alpha, whole(0), whole(1)).unwrap();
                assert!((found - printed).abs() <= tolerance, "{row}: {found}");
                assert!((cochran_p(found, whole(0), whole(1)) / alpha - 1.0).abs() < 1e-9);
            }
        }
    }

    /// Own simulation with another program: 0.047 to 0.050 for 5 × 3, 0.050 for 11 × 3; unequal repeats too.
    #[test]
    fn clean_sets_are_suspected_five_times_in_a_hundred() {
        const RUNS: usize = 4000;
        for (number, (design, drop)) in (0..).zip([((5, 3), 0), ((11, 3), 0), ((6, 4), 3)]) {
            let mut stream = Stream::new(76, number);
            let mut hits = [0, 0];
            for _ in 0..RUNS {
                let points = simulated(&mut stream, design, |x| x, |_| 1.0);
                let found = cochran(&fitted(Family::Polynomial(1), &points[drop / 2..points.len() - drop])).unwrap();
                assert_eq!(matches!(found.statistic, Statistic::F { .. }), drop > 0);
                hits[0] += usize::from(found.p <= 0.05);
                hits[1] += usize::from(found.p <= 0.01);
            }
            println!("{design:?} without {drop}: {:?}", hits.map(|h| h as f64 / RUNS as f64));
            // Only one of the levels can exceed the limit at a time, nearly: the bound is all but exact.
            assert_rate(hits[0], RUNS, 0.0485);
            assert_rate(hits[1], RUNS, 0.0099);
        }
    }

    #[test]
    fn the_wild_level_is_named() {
        let sd = |x: f64| if x == 4.0 { 3.0 } else { 0.1 };
        let points = simulated(&mut Stream::new(77, 0), (6, 4), |x| 10.0 * x, sd);
        let found = cochran(&fitted(Family::Polynomial(1), &points)).unwrap();
        let Statistic::C { c, levels, repeats, limit } = found.statistic else { panic!("equal repeats") };
        assert!(found.x == 4.0 && found.p < 1e-4 && c > limit && (levels, repeats) == (6, 4));
        assert!((found.p / cochran_p(c, 6, 4) - 1.0).abs() < 1e-9);
        assert!(found.sd > 1.0 && found.sd < 6.0);
    }

    #[test]
    fn one_level_or_perfect_repeats_tell_nothing() {
        let line = |ys: &[(f64, f64)]| -> Option<Cochran> {
            let points: Vec<Point> = ys.iter().map(|&(x, y)| Point { x, y }).collect();
            cochran(&fitted(Family::Polynomial(1), &points))
        };
        assert_eq!(line(&[(1.0, 1.0), (1.0, 1.5), (2.0, 3.0), (3.0, 3.1)]), None);
        assert_eq!(line(&[(1.0, 1.0), (1.0, 1.0), (2.0, 3.0), (2.0, 3.0), (3.0, 3.5)]), None);
        // One level scatters, the other not at all: certain, and still finite.
        let found = line(&[(1.0, 1.0), (1.0, 1.5), (2.0, 3.0), (2.0, 3.0), (3.0, 3.5)]).unwrap();
        assert!(found.p < 1e-6 && found.x == 1.0);
        assert_eq!(cochran_limit(0.05, 1, 3), None);
        assert!(cochran_p(0.5, 2, 1).is_nan());
    }
}
