//! How certain the fitted function is, split by cause, and what each datum did to it.

use super::{DistanceFit, Observed};
use crate::numerics::Dd;
use crate::numerics::distance::{Function, Linearised, place};

/// The covariance of the coefficients and its two parts.
pub(super) struct Parts {
    pub whole: Vec<Vec<f64>>,
    pub readings: Vec<Vec<f64>>,
    pub standards: Vec<Vec<f64>>,
}

/// What each datum contributes to the fitted function at one place, to first order.
#[derive(Debug, Clone, PartialEq)]
pub struct Influence {
    /// ∂f̂(x)/∂y_i for the N readings.
    pub readings: Vec<f64>,
    /// ∂f̂(x)/∂x_j for the m standards, output unit per input unit.
    pub standards: Vec<f64>,
}

impl DistanceFit {
    /// (V_s, V_x): the variance of f̂(x) that the scatter of the readings and that the standards cause.
    ///
    /// # Formula
    ///
    /// V_s + V_x = gᵀCov(β)g with g = ∂f/∂β at x. As sums of squares Σ u²ℓ² and ‖LᵀFℓ‖² over the
    /// influences ℓ of the readings, so that nothing cancels.
    ///
    /// # Shapes and units
    ///
    /// `function` is the one that was fitted; x in the input unit, results in the output unit squared.
    ///
    /// # Errors
    ///
    /// None; not numbers where the function has no value.
    ///
    /// # Source
    ///
    /// Propagation to first order, JCGM 102:2011 6.2.1.3; the split after cause is common practice.
    #[must_use]
    pub fn variance_at<F: Function>(&self, function: &F, x: f64) -> (f64, f64) {
        let Some(h) = self.directions(function, x) else {
            return (f64::NAN, f64::NAN);
        };
        let from_readings = combine(&self.links.readings, &h);
        let weighted = from_readings.iter().zip(&self.observed).map(|(l, o)| l.square() * o.variance);
        let from_standards: Dd = combine(&self.links.standards, &h).iter().map(|v| v.square()).sum();
        (weighted.sum::<Dd>().to_f64(), from_standards.to_f64())
    }

    /// What each reading and each standard contributes to f̂(x).
    ///
    /// # Formula
    ///
    /// ℓ = V⁻¹G(GᵀV⁻¹G)⁻¹g for the mean readings of the standards, shared out by 1/u² among the readings
    /// of one standard; −f′(ξ_j)ℓ_j for standard j. Standards without readings contribute nothing, and so
    /// do exact ones.
    ///
    /// # Shapes and units
    ///
    /// As [`Self::variance_at`].
    ///
    /// # Errors
    ///
    /// `None` where the function has no value.
    ///
    /// # Source
    ///
    /// Generalised least squares of the linearised problem, common practice.
    #[must_use]
    pub fn influence_at<F: Function>(&self, function: &F, x: f64) -> Option<Influence> {
        let means: Vec<f64> =
            combine(&self.links.readings, &self.directions(function, x)?).iter().map(|v| v.to_f64()).collect();
        let readings = self.shares.iter().map(|(place, share)| means[*place] * share).collect();
        let mut standards = vec![0.0; self.latent.len()];
        for ((o, slope), mean) in self.observed.iter().zip(&self.links.slopes).zip(&means) {
            standards[o.standard] = -slope.to_f64() * mean;
        }
        Some(Influence { readings, standards })
    }

    /// R with Cov(β) = R⁻¹R⁻ᵀ, p rows of p, upper triangle.
    #[must_use]
    pub fn triangle(&self) -> Vec<Vec<f64>> {
        self.links.r.iter().map(|row| row.iter().map(|v| v.to_f64()).collect()).collect()
    }

    /// Standard uncertainties of the p coefficients, in their units.
    #[must_use]
    pub fn standard_uncertainties(&self) -> Vec<f64> {
        self.covariance.iter().enumerate().map(|(j, row)| libm::sqrt(row[j])).collect()
    }

    /// h = R⁻ᵀg, by forward substitution.
    fn directions<F: Function>(&self, function: &F, x: f64) -> Option<Vec<Dd>> {
        let place = place(function, &self.exact, Dd::from(x), false)?;
        let r = &self.links.r;
        let mut h: Vec<Dd> = Vec::with_capacity(r.len());
        for (k, g) in place.gradient.iter().enumerate() {
            let known: Dd = h.iter().enumerate().map(|(i, h)| r[i][k] * *h).sum();
            h.push((*g - known) / r[k][k]);
        }
        Some(h)
    }
}

/// Σ_k column_k·h_k.
fn combine(columns: &[Vec<Dd>], h: &[Dd]) -> Vec<Dd> {
    let rows = columns.first().map_or(0, Vec::len);
    (0..rows).map(|i| columns.iter().zip(h).map(|(c, h)| c[i] * *h).sum()).collect()
}

/// Cov = R⁻¹R⁻ᵀ; its parts R⁻¹MR⁻ᵀ with M the products of the influences of readings and of standards.
pub(super) fn parts(links: &Linearised, observed: &[Observed]) -> Parts {
    let p = links.r.len();
    let inverse = inverse_triangle(&links.r);
    let inside = |i: usize, j: usize| -> (Dd, Dd) {
        let rows = links.readings[i].iter().zip(&links.readings[j]).zip(observed);
        let readings = rows.map(|((a, b), o)| *a * *b * o.variance).sum();
        let standards = links.standards[i].iter().zip(&links.standards[j]).map(|(a, b)| *a * *b).sum();
        (readings, standards)
    };
    let middle: Vec<Vec<(Dd, Dd)>> = (0..p).map(|i| (0..p).map(|j| inside(i, j)).collect()).collect();
    let fill = |core: &dyn Fn(usize, usize) -> Dd| -> Vec<Vec<f64>> {
        let entry = |a: usize, b: usize| -> f64 {
            let mut sum = Dd::ZERO;
            for i in a..p {
                for j in b..p {
                    sum += inverse[a][i] * core(i, j) * inverse[b][j];
                }
            }
            sum.to_f64()
        };
        (0..p).map(|a| (0..p).map(|b| entry(a.min(b), a.max(b))).collect()).collect()
    };
    Parts {
        whole: fill(&|i, j| if i == j { Dd::ONE } else { Dd::ZERO }),
        readings: fill(&|i, j| middle[i][j].0),
        standards: fill(&|i, j| middle[i][j].1),
    }
}

/// R⁻¹ of an upper triangle, row by row from the last.
fn inverse_triangle(r: &[Vec<Dd>]) -> Vec<Vec<Dd>> {
    let p = r.len();
    let mut out: Vec<Vec<Dd>> = vec![vec![Dd::ZERO; p]; p];
    for (i, row) in r.iter().enumerate().rev() {
        let cell = |k: usize| {
            let unit = if i == k { Dd::ONE } else { Dd::ZERO };
            let known: Dd = (i + 1..=k).map(|j| row[j] * out[j][k]).sum();
            (unit - known) / row[i]
        };
        let filled: Vec<Dd> = (0..p).map(|k| if k < i { Dd::ZERO } else { cell(k) }).collect();
        out[i] = filled;
    }
    out
}
