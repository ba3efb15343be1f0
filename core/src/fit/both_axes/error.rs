//! What stands in the way of a fit in both axes, each with its place.

use super::BothAxes;
use crate::numerics::distance::Observed;
use crate::numerics::semidefinite::SemidefiniteError;

/// Smallest uncertainty whose square and its products double-double can hold.
const SMALLEST: f64 = 1e-60;

/// Largest number that it can.
const LARGEST: f64 = 1e60;

/// Why there is no fit. Positions count from 0, in messages from 1.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum DistanceError {
    /// Lists that do not belong together.
    #[error("{what}: {found} given, {expected} needed")]
    Length {
        /// Which list.
        what: &'static str,
        /// Its length.
        found: usize,
        /// The length it should have.
        expected: usize,
    },
    /// A standard or a starting coefficient that is not a finite number.
    #[error("{what} {} is not a finite number", .index + 1)]
    NotFinite {
        /// "standard", "reading" or "starting coefficient".
        what: &'static str,
        /// Its position.
        index: usize,
    },
    /// A reading of a standard that does not exist.
    #[error("reading {} belongs to standard {}, but there are {standards}", .reading + 1, .standard + 1)]
    NoSuchStandard {
        /// Position of the reading.
        reading: usize,
        /// The standard it names.
        standard: usize,
        /// Number of standards.
        standards: usize,
    },
    /// A reading whose uncertainty is zero, negative or not finite.
    #[error("the uncertainty of reading {} is {found}; it must be a number above zero", .index + 1)]
    BadUncertainty {
        /// Position of the reading.
        index: usize,
        /// Its uncertainty.
        found: f64,
    },
    /// U_x is no covariance matrix.
    #[error("standards: {0}")]
    Covariance(#[from] SemidefiniteError),
    /// Fewer distinct standards with readings than coefficients.
    #[error("{needed} different standards are needed for as many coefficients; {found} have readings")]
    TooFew {
        /// Distinct levels needed: p.
        needed: usize,
        /// Distinct levels with readings.
        found: usize,
    },
    /// The function, its slope or its gradient has no value at a standard with the starting coefficients.
    #[error("with the starting coefficients the function has no value or no slope at {x} (standard {})", .standard + 1)]
    Undefined {
        /// Position of the standard.
        standard: usize,
        /// Its certified value, input unit.
        x: f64,
    },
    /// The coefficients cannot be told apart at the minimum.
    #[error("these standards cannot tell {coefficients} coefficients apart")]
    Undetermined {
        /// p.
        coefficients: usize,
    },
    /// The most plausible place of a standard is where the function ends: there is no minimum.
    #[error(
        "the uncertainty of standard {} at {x} reaches beyond where the function ends, and the readings pull it \
         there: choose another family, or set this standard aside with a reason", .standard + 1
    )]
    Edge {
        /// Position of the standard.
        standard: usize,
        /// Its certified value, input unit.
        x: f64,
    },
    /// The search did not settle.
    #[error(
        "no minimum found in {steps} steps (sum of squares reached {reached}); tried: from the ordinary fit, and \
         with the uncertainties of the standards brought in by quarters"
    )]
    NotConverged {
        /// Steps, both ways together.
        steps: usize,
        /// The least sum of squares reached from the ordinary fit.
        reached: f64,
    },
    /// Numbers too large or too small.
    #[error("the numbers are too large or too small to fit; use another unit")]
    OutOfRange,
}

/// Edge cases in the order in which a person would name them.
pub(super) fn check(data: &BothAxes<'_>, start: &[f64], p: usize) -> Result<(), DistanceError> {
    let (m, n) = (data.x.len(), data.y.len());
    let lengths = [
        ("rows of the standards' covariance", data.x_covariance.len(), m),
        ("uncertainties of readings", data.y_uncertainty.len(), n),
        ("standards of readings", data.standard_of.len(), n),
        ("starting coefficients", start.len(), p),
    ];
    if let Some((what, found, expected)) = lengths.into_iter().find(|(_, found, expected)| found != expected) {
        return Err(DistanceError::Length { what, found, expected });
    }
    for (what, values) in [("standard", data.x), ("reading", data.y), ("starting coefficient", start)] {
        if let Some(index) = values.iter().position(|v| !v.is_finite()) {
            return Err(DistanceError::NotFinite { what, index });
        }
    }
    for (index, found) in data.y_uncertainty.iter().copied().enumerate() {
        let usable = found.is_finite() && found > 0.0;
        if !usable {
            return Err(DistanceError::BadUncertainty { index, found });
        }
    }
    for (reading, standard) in data.standard_of.iter().copied().enumerate() {
        if standard >= m {
            return Err(DistanceError::NoSuchStandard { reading, standard, standards: m });
        }
    }
    let variances = data.x_covariance.iter().enumerate().filter_map(|(i, row)| row.get(i));
    let deviations = variances.filter(|v| **v > 0.0).map(|v| libm::sqrt(*v));
    let narrow = |v: f64| !(SMALLEST..=LARGEST).contains(&v);
    let wide = data.x.iter().chain(data.y).any(|v| v.abs() > LARGEST);
    if wide || data.y_uncertainty.iter().copied().chain(deviations).any(narrow) {
        return Err(DistanceError::OutOfRange);
    }
    Ok(())
}

/// As many distinct standards with readings as coefficients.
pub(super) fn check_levels(data: &BothAxes<'_>, observed: &[Observed], p: usize) -> Result<(), DistanceError> {
    // Adding zero turns −0 into 0.
    let mut levels: Vec<f64> = observed.iter().map(|o| data.x[o.standard] + 0.0).collect();
    levels.sort_by(f64::total_cmp);
    levels.dedup();
    if levels.len() < p {
        return Err(DistanceError::TooFew { needed: p, found: levels.len() });
    }
    Ok(())
}
