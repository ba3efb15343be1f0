//! Rising and falling runs: what their difference and their repeats show.

use super::levels::{levels, mean_of};
use crate::distributions::t_upper;
use crate::fit::Point;
use crate::readings::Direction;

/// Rising against falling, level by level.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hysteresis {
    /// The largest difference of the means, rising − falling, signed, output unit.
    pub largest: f64,
    /// The standard where it occurs, input unit.
    pub at: f64,
    /// Mean of the differences over the levels, output unit.
    pub mean: f64,
    /// Levels read in both directions.
    pub levels: usize,
    /// Two-sided p of the paired t test that the mean difference is 0; `None` with one level.
    pub p: Option<f64>,
    /// √max(0, mean d² − its expectation without hysteresis): the size free of scatter, output unit;
    /// `None` when no repeat tells the scatter.
    pub free_of_scatter: Option<f64>,
}

/// Hysteresis of the readings; `None` unless a level was read in both directions.
///
/// # Formula
/// dᵢ = mean rising − mean falling at standard i; largest |dᵢ|; t = d̄/(s_d/√L) with L − 1;
/// scatter-free size: h² = max(0, mean d² − s²·mean(1/nᵣ + 1/n_f)), s² pooled within direction.
///
/// # Shapes and units
/// `direction`: one entry an observation. Output unit.
///
/// # Source
/// IEC 61298-2, hysteresis; from memory. The largest of several differences is biased upwards even
/// without hysteresis, hence the scatter-free size.
#[must_use]
pub fn hysteresis(points: &[Point], direction: &[Direction]) -> Option<Hysteresis> {
    if direction.len() != points.len() {
        return None;
    }
    let mut pairs: Vec<(f64, f64)> = Vec::new();
    let mut scatter = Pool::default();
    let mut shares = Vec::new();
    for level in levels(points) {
        let [up, down] = [Direction::Rising, Direction::Falling].map(|wanted| {
            let ys: Vec<f64> = members(&level.members, direction, wanted).map(|i| points[i].y).collect();
            scatter.add(&ys);
            ys
        });
        if !up.is_empty() && !down.is_empty() {
            let difference = mean_of(up.iter().copied()) - mean_of(down.iter().copied());
            pairs.push((level.x, difference));
            shares.push(1.0 / up.len() as f64 + 1.0 / down.len() as f64);
        }
    }
    let n = pairs.len() as f64;
    let (at, largest) = pairs.iter().copied().reduce(|a, b| if b.1.abs() > a.1.abs() { b } else { a })?;
    let mean = pairs.iter().map(|p| p.1).sum::<f64>() / n;
    let mean_square = pairs.iter().map(|p| p.1 * p.1).sum::<f64>() / n;
    let mean_share = shares.iter().sum::<f64>() / n;
    Some(Hysteresis {
        largest,
        at,
        mean,
        levels: pairs.len(),
        p: paired_p(&pairs, mean),
        free_of_scatter: scatter.variance().map(|s2| libm::sqrt((mean_square - s2 * mean_share).max(0.0))),
    })
}

/// Two-sided p of the mean difference.
fn paired_p(pairs: &[(f64, f64)], mean: f64) -> Option<f64> {
    let nu = pairs.len().checked_sub(1).filter(|nu| *nu > 0)? as f64;
    let ss: f64 = pairs.iter().map(|p| (p.1 - mean).powi(2)).sum();
    let se = libm::sqrt(ss / nu / (nu + 1.0));
    if se > 0.0 {
        Some(2.0 * t_upper((mean / se).abs(), nu))
    } else {
        // All differences alike: certainly there, or certainly not.
        Some(if mean == 0.0 { 1.0 } else { 0.0 })
    }
}

/// The members of a level directioned in the wanted way.
fn members<'a>(all: &'a [usize], direction: &'a [Direction], wanted: Direction) -> impl Iterator<Item = usize> + 'a {
    all.iter().copied().filter(move |&i| direction[i] == wanted)
}

/// Scatter pooled over groups.
#[derive(Debug, Default)]
struct Pool {
    ss: f64,
    nu: usize,
}

impl Pool {
    fn add(&mut self, group: &[f64]) {
        let mean = mean_of(group.iter().copied());
        if group.len() > 1 {
            self.ss += group.iter().map(|y| (y - mean).powi(2)).sum::<f64>();
            self.nu += group.len() - 1;
        }
    }

    fn variance(&self) -> Option<f64> {
        (self.nu > 0).then(|| self.ss / self.nu as f64)
    }
}

/// Repeatability: the largest spread of repeats at one standard in one direction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Repeatability {
    /// max − min of those repeats, output unit.
    pub spread: f64,
    /// The standard where it occurs, input unit.
    pub at: f64,
}

/// Every direction: repeats are compared within one.
const ALL: [Direction; 4] = [Direction::Rising, Direction::Falling, Direction::TurningPoint, Direction::None];

/// Repeatability of the readings; `None` without repeats in one direction.
///
/// # Formula
/// max over standards and directions of (max y − min y).
///
/// # Shapes and units
/// `direction`: one entry an observation; readings without a direction form their own group.
///
/// # Source
/// IEC 61298-2, repeatability; from memory.
#[must_use]
pub fn repeatability(points: &[Point], direction: &[Direction]) -> Option<Repeatability> {
    if direction.len() != points.len() {
        return None;
    }
    let mut worst: Option<Repeatability> = None;
    for level in levels(points) {
        for wanted in ALL {
            let ys: Vec<f64> = members(&level.members, direction, wanted).map(|i| points[i].y).collect();
            if ys.len() < 2 {
                continue;
            }
            let high = ys.iter().copied().fold(f64::NEG_INFINITY, f64::max);
            let low = ys.iter().copied().fold(f64::INFINITY, f64::min);
            if worst.is_none_or(|w| high - low > w.spread) {
                worst = Some(Repeatability { spread: high - low, at: level.x });
            }
        }
    }
    worst
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Two up–down cycles over 1…5 with the turning point at 5; rising readings lie `h` higher.
    fn cycles(h: f64) -> (Vec<Point>, Vec<Direction>) {
        let mut points = Vec::new();
        let mut direction = Vec::new();
        let wobble = [0.01, -0.02, 0.015, -0.005, 0.0, 0.02, -0.01];
        for i in 0..18_i32 {
            let step = i % 9;
            let (x, way) = match step {
                0..=3 => (step + 1, Direction::Rising),
                4 => (5, Direction::TurningPoint),
                _ => (9 - step, Direction::Falling),
            };
            let lift = if way == Direction::Rising { h } else { 0.0 };
            points.push(Point { x: f64::from(x), y: 2.0 * f64::from(x) + lift + wobble[i as usize % 7] });
            direction.push(way);
        }
        (points, direction)
    }

    #[test]
    fn rising_above_falling_is_positive() {
        let (points, direction) = cycles(0.5);
        let found = hysteresis(&points, &direction).unwrap();
        assert_eq!(found.levels, 4);
        assert!((found.mean - 0.5).abs() < 0.02 && found.largest > 0.48);
        assert!(found.p.unwrap() < 1e-3);
        assert!((found.free_of_scatter.unwrap() - 0.5).abs() < 0.02);
        let (points, direction) = cycles(-0.5);
        assert!(hysteresis(&points, &direction).unwrap().largest < -0.48);
    }

    #[test]
    fn no_hysteresis_no_significance() {
        let (points, direction) = cycles(0.0);
        let found = hysteresis(&points, &direction).unwrap();
        assert!(found.p.unwrap() > 0.05 && found.free_of_scatter.unwrap() < 0.02);
    }

    #[test]
    fn needs_both_directions() {
        let (points, _) = cycles(0.5);
        let all = vec![Direction::Rising; points.len()];
        assert_eq!(hysteresis(&points, &all), None);
        assert_eq!(hysteresis(&points, &[]), None);
    }

    #[test]
    fn repeatability_stays_within_a_direction() {
        let (points, direction) = cycles(0.5);
        let found = repeatability(&points, &direction).unwrap();
        assert!(found.spread < 0.05, "{found:?}");
        let mixed = vec![Direction::TurningPoint; points.len()];
        assert!(repeatability(&points, &mixed).unwrap().spread > 0.45);
        assert_eq!(repeatability(&points[..4], &direction[..4]), None);
    }
}
