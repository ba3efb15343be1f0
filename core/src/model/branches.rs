//! Where a curve rises and falls, and where it takes a given value.

use super::{Curve, log, polynomial};
use crate::numerics::roots::sign_changes;

/// Steps of the scan for a typed formula, whose turning points nobody knows beforehand.
const SCAN: u32 = 512;

/// A stretch on which a curve only rises or only falls.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Branch {
    /// Lower end, input unit.
    pub lo: f64,
    /// Upper end, input unit.
    pub hi: f64,
    /// Whether the curve rises from `lo` to `hi`.
    pub rising: bool,
}

impl Branch {
    /// Whether `x` lies on this branch, ends included.
    #[must_use]
    pub fn contains(&self, x: f64) -> bool {
        (self.lo..=self.hi).contains(&x)
    }
}

impl Curve {
    /// Where the curve has a pole, ascending, input unit; a typed formula is not searched for any.
    #[must_use]
    pub fn poles(&self) -> Vec<f64> {
        match self {
            Self::Shape(shape) => shape.poles(),
            Self::Polynomial(_) | Self::Centred(_) | Self::Log(_) | Self::Formula(_) => Vec::new(),
        }
    }

    /// Where the slope changes sign inside (lo, hi), ascending, input unit.
    ///
    /// Complete for polynomials and logarithms, for infinite intervals too; a formula is scanned in 512
    /// steps of a finite interval.
    #[must_use]
    pub fn turning_points(&self, lo: f64, hi: f64) -> Vec<f64> {
        match self {
            Self::Polynomial(b) => polynomial::turning_points(b, lo, hi),
            Self::Centred(c) => c.turning_points(lo, hi),
            Self::Log(_) => Vec::new(),
            Self::Shape(_) | Self::Formula(_) => sign_changes(|x| self.derivative(x), lo, hi, SCAN),
        }
    }

    /// The monotone branches on [lo, hi], ascending. A constant has none; stretches where the curve has no
    /// value at an end, or jumps, are left out. The interval of a logarithm is cut at zero.
    #[must_use]
    pub fn branches(&self, lo: f64, hi: f64) -> Vec<Branch> {
        let lo = match self {
            Self::Log(_) => lo.max(f64::MIN_POSITIVE),
            Self::Polynomial(_) | Self::Centred(_) | Self::Shape(_) | Self::Formula(_) => lo,
        };
        if lo.is_nan() || hi.is_nan() || lo >= hi {
            return Vec::new();
        }
        let mut cuts = vec![lo];
        cuts.extend(self.turning_points(lo, hi).into_iter().filter(|x| lo < *x && *x < hi));
        cuts.push(hi);
        cuts.windows(2).filter_map(|pair| self.branch(pair[0], pair[1])).collect()
    }

    /// The branch between two neighbouring cuts.
    fn branch(&self, lo: f64, hi: f64) -> Option<Branch> {
        // The slope may touch zero in the middle, but not in the middle of a half too.
        let middle = polynomial::inside(lo, hi);
        let places = [middle, polynomial::inside(lo, middle)];
        let slopes = places.map(|x| self.derivative(x));
        let slope = slopes.into_iter().find(|s| *s != 0.0 && !s.is_nan())?;
        let rising = slope > 0.0;
        // A formula that falls everywhere and yet ends higher has a pole in between.
        let rise = self.value(hi) - self.value(lo);
        let jumps = match self {
            Self::Shape(_) | Self::Formula(_) => rise.is_nan() || (rise > 0.0) != rising,
            Self::Polynomial(_) | Self::Centred(_) | Self::Log(_) => false,
        };
        (!jumps).then_some(Branch { lo, hi, rising })
    }

    /// Every x in [lo, hi] with f(x) = y, ascending, input unit.
    ///
    /// Complete for polynomials and logarithms, for infinite intervals too; a formula is scanned in 512
    /// steps of a finite interval, and two roots within one step are not seen.
    #[must_use]
    pub fn solve(&self, y: f64, lo: f64, hi: f64) -> Vec<f64> {
        if !y.is_finite() {
            return Vec::new();
        }
        match self {
            Self::Polynomial(b) => polynomial::solve(b, y, lo, hi),
            Self::Centred(c) => c.solve(y, lo, hi),
            Self::Log(ab) => {
                let root = log::solve(*ab, y);
                root.filter(|x| (lo..=hi).contains(x)).into_iter().collect()
            }
            Self::Shape(shape) if matches!(shape.family(), super::Family::Formula(_)) => {
                sign_changes(|x| self.value(x) - y, lo, hi, SCAN)
            }
            Self::Shape(shape) => shape.solve(y).filter(|x| (lo..=hi).contains(x)).into_iter().collect(),
            Self::Formula(_) => sign_changes(|x| self.value(x) - y, lo, hi, SCAN),
        }
    }
}
