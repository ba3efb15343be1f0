//! What the doubt of the standards does to the fitted function.
//!
//! An error shared by all standards moves the whole curve and leaves no trace in the residuals: it has to
//! be carried beside the scatter.

use super::{Fit, Level, Scatter};
use crate::distributions::f_upper;
use crate::numerics::scale::as_f64;

/// The standards behind the observations of a fit, with the covariance of their values.
#[derive(Debug, Clone, PartialEq)]
pub struct StandardsDoubt {
    /// Which standard each observation belongs to, in the order of the points; `None` for zero readings and
    /// others without a standard, which are taken as exact.
    pub standard_of: Vec<Option<usize>>,
    /// Certified values, input unit.
    pub values: Vec<f64>,
    /// Variance of each standard's own error, input unit squared.
    pub independent: Vec<f64>,
    /// Covariance of the errors that standards share, input unit squared.
    pub common: Vec<Vec<f64>>,
}

impl StandardsDoubt {
    /// u(x_i), own and shared errors together, input unit.
    #[must_use]
    pub fn uncertainty(&self, standard: usize) -> f64 {
        libm::sqrt(self.independent[standard] + self.common[standard][standard])
    }

    /// Whether every standard is exact.
    #[must_use]
    pub fn is_nothing(&self) -> bool {
        (0..self.values.len()).all(|i| self.uncertainty(i) == 0.0)
    }

    /// The full covariance U_x, input unit squared.
    #[must_use]
    pub fn covariance(&self) -> Vec<Vec<f64>> {
        let mut full = self.common.clone();
        for (i, row) in full.iter_mut().enumerate() {
            row[i] += self.independent[i];
        }
        full
    }
}

/// The variances behind one converted value at a place, output unit squared.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Variances {
    /// Of the mean of k new readings.
    pub new: f64,
    /// Of the fitted function, from the scatter of the readings.
    pub curve: f64,
    /// Of the fitted function, from the standards.
    pub standards: f64,
    /// Degrees of freedom of the scatter behind the first two.
    pub freedom: f64,
}

impl Variances {
    /// All together.
    #[must_use]
    pub fn total(self) -> f64 {
        self.new + self.curve + self.standards
    }

    /// ν·(total)²/(part from the scatter)²: the standards' part is taken as known.
    #[must_use]
    pub fn effective_freedom(self) -> f64 {
        let scatter = self.new + self.curve;
        if self.standards == 0.0 || scatter == 0.0 {
            return self.freedom;
        }
        let ratio = self.total() / scatter;
        self.freedom * ratio * ratio
    }
}

impl Fit {
    /// The same fit with the doubt of its standards, which conversion then carries along.
    #[must_use]
    pub fn with_standards(mut self, doubt: StandardsDoubt) -> Self {
        self.standards = (!doubt.is_nothing()).then_some(doubt);
        self.repeats_alone = self.size_from_repeats();
        self
    }

    /// The doubt of the standards, where there is one.
    #[must_use]
    pub const fn standards(&self) -> Option<&StandardsDoubt> {
        self.standards.as_ref()
    }

    /// Var f̂(x) caused by the standards, with the whole of U_x or with its shared part only.
    ///
    /// # Formula
    ///
    /// LᵀDUDL, L_i(x) = Σ over the observations of standard i of ℓ(x), D = diag f̂′(x_i). All standards
    /// shifted by e shift a converted value by e; all scaled scale it.
    ///
    /// # Shapes and units
    ///
    /// Output unit squared; 0 for a declared function.
    ///
    /// # Source
    ///
    /// Law of propagation, JCGM 100:2008, 5.2.2.
    #[must_use]
    pub fn standards_variance(&self, x: f64, shared_only: bool) -> f64 {
        let Some(doubt) = &self.standards else {
            return 0.0;
        };
        let influence = self.influence(x);
        let mut pull = vec![0.0; doubt.values.len()];
        for (weight, standard) in influence.iter().zip(&doubt.standard_of) {
            if let Some(i) = standard {
                pull[*i] += weight;
            }
        }
        for (i, pull) in pull.iter_mut().enumerate() {
            let slope = self.curve.derivative(doubt.values[i]);
            // A standard that no observation used pulls nothing, wherever it lies.
            *pull = if *pull == 0.0 { 0.0 } else { *pull * slope };
        }
        let own: f64 = pull.iter().zip(&doubt.independent).map(|(l, u2)| l * l * u2).sum();
        let shared: f64 = pull.iter().zip(&doubt.common).map(|(l, row)| l * dot(&pull, row)).sum();
        if shared_only { shared } else { own + shared }
    }

    /// The variances of a value converted at x from the mean of k new readings; `None` while the scatter is
    /// not known.
    ///
    /// # Formula
    ///
    /// σ²v(x)/k, σ²·g(x)ᵀ(XᵀWX)⁻¹g(x), and the standards' part, nothing counted twice:
    /// with repeats σ² is the pure-error variance and U_x counts whole (s² where the level means leave the curve
    /// by more than repeats and the standards' own errors explain); with one application a standard s² holds
    /// their own errors already and only the shared part of U_x is added; a fit in both axes holds everything.
    #[must_use]
    pub fn variances(&self, x: f64, k: usize) -> Option<Variances> {
        let size = self.scatter_behind_conversion()?;
        let new = size.variance * self.variance_at(x) / as_f64(k);
        if let Some(both) = &self.both_axes {
            let (curve, standards) = both.split(x);
            return Some(Variances { new, curve, standards, freedom: size.freedom });
        }
        let curve = size.variance * self.variance_factor(x);
        let standards = self.standards_variance(x, size.shared_only);
        Some(Variances { new, curve, standards, freedom: size.freedom })
    }

    /// σ² for conversion with its degrees of freedom, and whether the standards' own errors are inside it.
    fn scatter_behind_conversion(&self) -> Option<Size> {
        let sd = self.scatter_sd()?;
        let plain = Size { variance: sd * sd, freedom: self.scatter_freedom(), shared_only: false };
        if self.standards.is_none() || self.scatter != Scatter::Residuals {
            return Some(plain);
        }
        Some(self.repeats_alone.unwrap_or(Size { shared_only: true, ..plain }))
    }

    /// σ² beside the standards' doubt when there are repeats: the pure-error variance; s² where the level means
    /// leave the curve by more than repeats and own errors of the standards together explain.
    fn size_from_repeats(&self) -> Option<Size> {
        let levels = self.levels();
        let (n, m, p) = (self.points.len(), levels.len(), self.coefficients.len());
        if n == m || self.basis.is_none() {
            return None;
        }
        let (freedom, pure): (f64, f64) = (as_f64(n - m), levels.iter().map(|level| self.pure_error(level)).sum());
        let size = Size { variance: pure / freedom, freedom, shared_only: false };
        if size.variance == 0.0 {
            return None;
        }
        if m > p {
            let misfit: f64 = levels.iter().map(|level| self.misfit(level, size.variance)).sum();
            let freedom_of_misfit = as_f64(m - p);
            if f_upper(misfit / freedom_of_misfit, freedom_of_misfit, freedom) <= REFUSED {
                let sd = self.residual_sd?;
                // Rather counted twice than not at all.
                return Some(Size { variance: sd * sd, freedom: as_f64(self.degrees_of_freedom), ..size });
            }
        }
        Some(size)
    }

    /// Σ(y − ȳ)²/v of one level.
    fn pure_error(&self, level: &Level) -> f64 {
        let (v, count) = (self.variance_at(level.x), as_f64(level.members.len()));
        let mean = level.members.iter().map(|i| self.points[*i].y).sum::<f64>() / count;
        level.members.iter().map(|i| (self.points[*i].y - mean) * (self.points[*i].y - mean) / v).sum()
    }

    /// (ȳ − f̂)² of one level over what repeats and the standard's own error make of it.
    fn misfit(&self, level: &Level, variance: f64) -> f64 {
        let count = as_f64(level.members.len());
        let gap = level.members.iter().map(|i| self.residuals[*i]).sum::<f64>() / count;
        let own = self.standards.as_ref().and_then(|doubt| {
            let standard = doubt.standard_of[*level.members.first()?]?;
            let slope = self.curve.derivative(level.x);
            Some(slope * slope * doubt.independent[standard])
        });
        gap * gap / (variance * self.variance_at(level.x) / count + own.unwrap_or(0.0))
    }
}

/// σ² behind a converted value.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Size {
    /// Variance where v = 1.
    variance: f64,
    /// Its degrees of freedom.
    freedom: f64,
    /// The standards' own errors are inside the variance already.
    shared_only: bool,
}

/// p of the lack of fit at and below which the repeats do not stand for all the scatter.
const REFUSED: f64 = 0.05;

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}
