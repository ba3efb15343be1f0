//! One scale for all residual plots, unless one is far worse than the best. Knows no window.

use super::ticks::raised;

/// A column this many times worse than the best gets a scale of its own.
const WORSE: f64 = 5.0;

/// The shared scale and who leaves it.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Scales {
    /// Half the shared window, in the measure shown; never 0.
    pub(super) half: f64,
    /// Times coarser, by column; 1 = shared.
    pub(super) coarser: Vec<f64>,
}

impl Scales {
    /// From the largest residual of each column; `None` for a column without residuals.
    ///
    /// Perfect fits (0) have no scale and decide nothing.
    pub(super) fn new(largest: &[Option<f64>], one_scale: bool) -> Self {
        let sizes = || largest.iter().flatten().copied().filter(|v| v.is_finite() && *v > 0.0);
        let best = sizes().fold(f64::INFINITY, f64::min);
        let worst = sizes().fold(0.0, f64::max);
        let shared = |v: &f64| one_scale || *v <= WORSE * best;
        let half = sizes().filter(shared).fold(0.0, f64::max);
        let half = if half > 0.0 { half } else { 1.0 };
        let coarser = |v: &Option<f64>| match v {
            Some(v) if worst > 0.0 && *v > 0.0 && !shared(v) => raised(v / half),
            _ => 1.0,
        };
        Self { half, coarser: largest.iter().map(coarser).collect() }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_column_five_times_worse_leaves_the_shared_scale() {
        let scales = Scales::new(&[Some(8.0), Some(2.0), Some(300.0), None], false);
        assert_eq!(scales, Scales { half: 8.0, coarser: vec![1.0, 1.0, 40.0, 1.0] });
        let forced = Scales::new(&[Some(8.0), Some(2.0), Some(300.0), None], true);
        assert_eq!(forced, Scales { half: 300.0, coarser: vec![1.0; 4] });
    }

    #[test]
    fn perfect_fits_and_no_fits_have_a_scale_too() {
        assert_eq!(Scales::new(&[Some(0.0), None], false), Scales { half: 1.0, coarser: vec![1.0; 2] });
        assert_eq!(Scales::new(&[Some(0.0), Some(3.0)], false).half, 3.0);
        assert_eq!(Scales::new(&[], false).half, 1.0);
    }
}
