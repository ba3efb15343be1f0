//! Observations gathered by standard: the levels that most checks of a fit reason about.

use crate::fit::Point;
use crate::numerics::sums::Deviations;

/// All observations of one standard.
#[derive(Debug, Clone, PartialEq)]
pub struct Level {
    /// Certified value of the standard, input unit.
    pub x: f64,
    /// Positions of its observations in the fit's points.
    pub members: Vec<usize>,
    /// Mean indication, output unit.
    pub mean: f64,
}

impl Level {
    /// How many applications this standard received.
    #[must_use]
    pub fn count(&self) -> usize {
        self.members.len()
    }
}

/// The distinct standards in ascending order, each with its observations.
///
/// # Formula
/// Two observations share a level exactly when their certified values are the same number.
///
/// # Shapes and units
/// `points`: N observations, input and output units. Returns m ≤ N levels, ascending in x.
///
/// # Source
/// Common practice.
#[must_use]
pub fn levels(points: &[Point]) -> Vec<Level> {
    let mut order: Vec<usize> = (0..points.len()).collect();
    order.sort_by(|&a, &b| points[a].x.total_cmp(&points[b].x));
    let mut found: Vec<Level> = Vec::new();
    for index in order {
        let x = points[index].x;
        match found.last_mut() {
            Some(level) if level.x == x => level.members.push(index),
            _ => found.push(Level { x, members: vec![index], mean: 0.0 }),
        }
    }
    for level in &mut found {
        level.members.sort_unstable();
        level.mean = mean_of(level.members.iter().map(|&i| points[i].y));
    }
    found
}

/// Mean of a run of values, summed in double-double so that large offsets keep their digits; not a number
/// without values, or with one that is not finite.
pub(crate) fn mean_of(values: impl Iterator<Item = f64>) -> f64 {
    let values: Vec<f64> = values.collect();
    Deviations::new(&values).map_or(f64::NAN, |found| found.mean())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn gathers_repeats_in_ascending_order() {
        let points = [(2.0, 5.0), (1.0, 3.0), (2.0, 7.0)].map(|(x, y)| Point { x, y });
        let found = levels(&points);
        assert_eq!(found.len(), 2);
        assert_eq!(found[0].members, [1]);
        assert_eq!(found[1].members, [0, 2]);
        assert_eq!(found[1].mean, 6.0);
    }

    #[test]
    fn the_mean_keeps_digits_behind_a_large_offset() {
        let mean = mean_of([1e15 + 1.0, 1e15 + 2.0, 1e15 + 3.0].into_iter());
        assert_eq!(mean, 1e15 + 2.0);
    }
}
