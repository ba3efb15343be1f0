//! One linearised step with the latent places eliminated.

use super::{Problem, State, product};
use crate::numerics::Dd;

/// Part of a column that must be left beside the columns before it: half of the 106 bits.
const WHAT_MUST_REMAIN: f64 = 1.0 / 9_007_199_254_740_992.0;

/// A step from a state.
pub(super) struct Step {
    /// Change of the coefficients.
    pub delta: Vec<Dd>,
    /// New z.
    pub z: Vec<Dd>,
    /// The sum that the linearised problem promises.
    pub cost: Dd,
}

/// How the estimate hangs together with the data at the minimum, to first order.
///
/// # Formula
///
/// V = diag(v) + F U_x F with F = diag f′(ξ) is what scatters around the curve; V = C Cᵀ, C⁻¹G = Q R with
/// G the gradients. Cov(b) = R⁻¹R⁻ᵀ. For a gradient g at any place, h = R⁻ᵀg and ℓ = C⁻ᵀQ h is what each
/// mean reading contributes there; −Fℓ is what each standard contributes.
#[derive(Debug, Clone, PartialEq)]
pub struct Linearised {
    /// R, p rows of p, upper triangle.
    pub r: Vec<Vec<Dd>>,
    /// C⁻ᵀQ: p columns, one entry for each observed standard.
    pub readings: Vec<Vec<Dd>>,
    /// LᵀF C⁻ᵀQ: p columns of `rank` entries.
    pub standards: Vec<Vec<Dd>>,
    /// f′(ξ) at each observed standard.
    pub slopes: Vec<Dd>,
}

/// Cholesky factor of a matrix given by its lower triangle; rows begin at their first entry not zero.
struct Triangle<'a> {
    rows: Vec<Vec<Dd>>,
    first: &'a [usize],
}

impl<'a> Triangle<'a> {
    /// `None` unless positive definite and finite.
    fn new(mut rows: Vec<Vec<Dd>>, first: &'a [usize]) -> Option<Self> {
        for i in 0..rows.len() {
            let (above, rest) = rows.split_at_mut(i);
            let row = &mut rest[0];
            for j in first[i]..i {
                let start = first[i].max(first[j]);
                let known: Dd = (start..j).map(|k| row[k] * above[j][k]).sum();
                row[j] = (row[j] - known) / above[j][j];
            }
            let known: Dd = (first[i]..i).map(|k| row[k].square()).sum();
            let square = row[i] - known;
            if !(square.is_finite() && square.to_f64() > 0.0) {
                return None;
            }
            row[i] = square.sqrt();
        }
        Some(Self { rows, first })
    }

    /// C u = v.
    fn forward(&self, v: &[Dd]) -> Vec<Dd> {
        let mut u: Vec<Dd> = Vec::with_capacity(v.len());
        for (i, row) in self.rows.iter().enumerate() {
            let known: Dd = (self.first[i]..i).map(|k| row[k] * u[k]).sum();
            u.push((v[i] - known) / row[i]);
        }
        u
    }

    /// Cᵀ q = u.
    fn backward(&self, mut u: Vec<Dd>) -> Vec<Dd> {
        for (i, row) in self.rows.iter().enumerate().rev() {
            let q = u[i] / row[i];
            u[i] = q;
            for k in self.first[i]..i {
                u[k] -= row[k] * q;
            }
        }
        u
    }
}

/// Orthonormal columns and the triangle of a matrix, by modified Gram–Schmidt in double-double.
struct Orthogonal {
    q: Vec<Vec<Dd>>,
    r: Vec<Vec<Dd>>,
}

impl Orthogonal {
    /// `None` when a column depends on those before it.
    fn new(mut columns: Vec<Vec<Dd>>) -> Option<Self> {
        let p = columns.len();
        let mut r = vec![vec![Dd::ZERO; p]; p];
        let whole: Vec<f64> = columns.iter().map(|c| dot(c, c).to_f64()).collect();
        for k in 0..p {
            let square = dot(&columns[k], &columns[k]);
            let remains = square.to_f64() > whole[k] * (WHAT_MUST_REMAIN * WHAT_MUST_REMAIN);
            if !remains || !square.is_finite() {
                return None;
            }
            let norm = square.sqrt();
            let (done, rest) = columns.split_at_mut(k + 1);
            let unit = &mut done[k];
            unit.iter_mut().for_each(|v| *v /= norm);
            r[k][k] = norm;
            for (j, column) in rest.iter_mut().enumerate() {
                let part = dot(unit, column);
                r[k][k + 1 + j] = part;
                column.iter_mut().zip(&*unit).for_each(|(c, u)| *c -= part * *u);
            }
        }
        Some(Self { q: columns, r })
    }

    /// The b that brings Q R b closest to the vector.
    fn solve(&self, mut right: Vec<Dd>) -> Vec<Dd> {
        let mut parts = Vec::with_capacity(self.q.len());
        for column in &self.q {
            let part = dot(column, &right);
            right.iter_mut().zip(column).for_each(|(v, q)| *v -= part * *q);
            parts.push(part);
        }
        for i in (0..parts.len()).rev() {
            let known: Dd = (i + 1..parts.len()).map(|j| self.r[i][j] * parts[j]).sum();
            parts[i] = (parts[i] - known) / self.r[i][i];
        }
        parts
    }
}

fn dot(a: &[Dd], b: &[Dd]) -> Dd {
    a.iter().zip(b).map(|(a, b)| *a * *b).sum()
}

impl Problem<'_> {
    /// V = diag(v) + F U_x F/(1 + λ), factored.
    fn scatter(&self, state: &State, damping: f64) -> Option<Triangle<'_>> {
        let shrink = Dd::ONE / (Dd::ONE + Dd::from(damping));
        let slope = |i: usize| state.places[i].slope;
        let row = |(i, kernel): (usize, &Vec<Dd>)| -> Vec<Dd> {
            let outer = slope(i) * shrink;
            let cell = |(j, k): (usize, &Dd)| if *k == Dd::ZERO { Dd::ZERO } else { outer * *k * slope(j) };
            let mut cells: Vec<Dd> = kernel.iter().enumerate().map(cell).collect();
            cells[i] += self.observed[i].variance;
            cells
        };
        Triangle::new(self.kernel.iter().enumerate().map(row).collect(), &self.first)
    }

    /// C⁻¹ G, column by column.
    fn design(&self, state: &State, scatter: &Triangle<'_>) -> Vec<Vec<Dd>> {
        let column = |j: usize| scatter.forward(&state.places.iter().map(|p| p.gradient[j]).collect::<Vec<_>>());
        (0..state.b.len()).map(column).collect()
    }

    /// LᵀF times a vector over the observed standards.
    fn to_standards(&self, state: &State, vector: &[Dd]) -> Vec<Dd> {
        let mut out = vec![Dd::ZERO; self.rank()];
        for ((o, place), v) in self.observed.iter().zip(&state.places).zip(vector) {
            let pushed = place.slope * *v;
            let row = out.iter_mut().zip(&self.factor.rows[o.standard]);
            row.filter(|(_, l)| **l != Dd::ZERO).for_each(|(cell, l)| *cell += *l * pushed);
        }
        out
    }

    /// The minimum of the problem linearised at `state`, with both kinds of unknowns held back by `damping`.
    ///
    /// # Formula
    ///
    /// zᵀz + λ‖z − z₀‖² = (1 + λ)‖z − λz₀/(1 + λ)‖² + const: the damping only moves and shrinks the
    /// standards. With w = ȳ − f − FLz₀/(1 + λ) the coefficients solve ‖C⁻¹(w − Gδ)‖² + λ‖Dδ‖² → min, and
    /// z = [λz₀ − LᵀF V⁻¹(w − Gδ)]/(1 + λ). `lengths` is D: the largest column lengths met so far.
    pub(super) fn step(&self, state: &State, damping: f64, lengths: &mut [f64]) -> Option<Step> {
        let shrink = Dd::ONE / (Dd::ONE + Dd::from(damping));
        let scatter = self.scatter(state, damping)?;
        let mut columns = self.design(state, &scatter);
        for (column, length) in columns.iter().zip(&mut *lengths) {
            *length = length.max(dot(column, column).sqrt().to_f64());
        }
        let lifted = self.observed.iter().zip(&state.places).map(|(o, place)| {
            let displaced = product(&self.factor.rows[o.standard], &state.z);
            o.mean - place.value - place.slope * displaced * shrink
        });
        let w = scatter.forward(&lifted.collect::<Vec<_>>());
        let mut right = w.clone();
        let design = columns.clone();
        if damping > 0.0 {
            let root = Dd::from(damping).sqrt();
            for (j, column) in columns.iter_mut().enumerate() {
                let unit = |i: usize| if i == j { root * lengths[j] } else { Dd::ZERO };
                column.extend((0..lengths.len()).map(unit));
            }
            right.resize(right.len() + lengths.len(), Dd::ZERO);
        }
        let delta = Orthogonal::new(columns)?.solve(right);
        let left: Vec<Dd> =
            w.iter().enumerate().map(|(i, w)| *w - (0..delta.len()).map(|j| design[j][i] * delta[j]).sum()).collect();
        let pushed = self.to_standards(state, &scatter.backward(left));
        let kept = Dd::from(damping);
        let z: Vec<Dd> = pushed.iter().zip(&state.z).map(|(s, z)| (*z * kept - *s) * shrink).collect();
        let cost = self.promised(state, &delta, &z);
        (cost.is_finite() && delta.iter().all(|d| d.is_finite())).then_some(Step { delta, z, cost })
    }

    /// The sum after a step if everything were linear.
    fn promised(&self, state: &State, delta: &[Dd], z: &[Dd]) -> Dd {
        let moved: Vec<Dd> = z.iter().zip(&state.z).map(|(new, old)| *new - *old).collect();
        let mut cost = product(z, z);
        for (o, place) in self.observed.iter().zip(&state.places) {
            let shift = product(&self.factor.rows[o.standard], &moved);
            let rest = o.mean - place.value - dot(&place.gradient, delta) + place.slope * shift;
            cost += rest.square() / o.variance;
        }
        cost
    }

    /// How the estimate hangs together with the data at `state`; `None` when the coefficients cannot be
    /// told apart there.
    pub(super) fn linearised(&self, state: &State) -> Option<Linearised> {
        let scatter = self.scatter(state, 0.0)?;
        let basis = Orthogonal::new(self.design(state, &scatter))?;
        let readings: Vec<Vec<Dd>> = basis.q.into_iter().map(|q| scatter.backward(q)).collect();
        let standards = readings.iter().map(|column| self.to_standards(state, column)).collect();
        let slopes = state.places.iter().map(|p| p.slope).collect();
        Some(Linearised { r: basis.r, readings, standards, slopes })
    }
}
