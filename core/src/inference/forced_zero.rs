//! Does the free line pass through zero?

use crate::distributions::t_upper;
use crate::fit::Fit;

/// Where a free line meets zero input, with its doubt.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ForcedZero {
    /// The constant a of the free line, output unit.
    pub constant: f64,
    /// Its standard uncertainty, output unit.
    pub uncertainty: f64,
    /// Slope of the free line, output per input unit.
    pub slope: f64,
    /// Two-sided p that the constant is 0.
    pub p: f64,
}

/// Tests whether a line with a free constant misses zero by more than chance allows.
///
/// # Formula
/// t = a/u(a) against Student with the freedom of the scatter.
///
/// # Shapes and units
/// `free`: a straight line with a constant. `None` for other fits, and while its scatter is not known
/// (two points).
///
/// # Source
/// Draper & Smith, Applied Regression Analysis, 3rd ed., 1.4; from memory.
#[must_use]
pub fn forced_zero(free: &Fit) -> Option<ForcedZero> {
    let (&[constant, slope], Some(&[uncertainty, _])) = (free.coefficients.as_slice(), free.standard_uncertainties())
    else {
        return None;
    };
    // Rounding alone leaves a constant of this size on data that lie exactly on a line through zero.
    let largest = free.points.iter().fold(0.0, |top: f64, p| top.max(p.y.abs()));
    let rounding = 8.0 * f64::EPSILON * largest;
    let p = if constant.abs() <= rounding {
        1.0
    } else {
        2.0 * t_upper(constant.abs() / uncertainty.max(rounding), free.scatter_freedom())
    };
    Some(ForcedZero { constant, uncertainty, slope, p })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, pontius, simulated};
    use crate::fit::Point;
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    const LINE: Family = Family::Polynomial(1);

    /// NIST/SEMATECH e-Handbook 4.6.1.5, the line through the load-cell data: constant 0.00614968974,
    /// standard deviation 0.000713219, 38 degrees of freedom; from memory of the printed table.
    #[test]
    fn the_load_cell_misses_zero() {
        let found = forced_zero(&fitted(LINE, &pontius())).unwrap();
        assert!((found.constant / 0.006_149_689_74 - 1.0).abs() < 1e-6, "{found:?}");
        assert!((found.constant / found.uncertainty - 8.6).abs() < 0.05 && found.p < 1e-9, "{found:?}");
    }

    #[test]
    fn a_line_through_zero_is_refused_five_times_in_a_hundred() {
        const RUNS: usize = 4000;
        let mut stream = Stream::new(31, 0);
        let mut p = || forced_zero(&fitted(LINE, &simulated(&mut stream, (5, 3), |x| 7.0 * x, |_| 1.0))).unwrap().p;
        assert_rate((0..RUNS).filter(|_| p() <= 0.05).count(), RUNS, 0.05);
    }

    #[test]
    fn exact_data_and_too_few() {
        let on = |a: f64, xs: &[f64]| -> Vec<Point> { xs.iter().map(|&x| Point { x, y: a + 0.3 * x }).collect() };
        let xs = [0.1, 0.2, 0.3, 0.7];
        assert_eq!(forced_zero(&fitted(LINE, &on(0.0, &xs))).unwrap().p, 1.0);
        assert!(forced_zero(&fitted(LINE, &on(0.1, &xs))).unwrap().p < 1e-12);
        assert_eq!(forced_zero(&fitted(LINE, &on(0.1, &xs[..2]))), None);
        assert_eq!(forced_zero(&fitted(Family::Polynomial(2), &on(0.1, &xs))), None);
    }
}
