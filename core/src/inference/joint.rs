//! Several statistics of the same residuals judged by the smallest of their p.

use super::sphere::{Reference, reach};

/// The joint distribution of several statistics, large values speaking against the model.
///
/// Exact whatever their dependence, where Holm's rule gives something away; for the same draws.
#[derive(Debug, Clone, PartialEq)]
pub struct Joint {
    /// Number of statistics.
    count: usize,
    /// `count` values a draw, draw after draw.
    values: Vec<f64>,
    /// How many draws reach each of these values, the draw itself included.
    reached: Vec<usize>,
    /// Each statistic by itself.
    single: Vec<Reference>,
}

/// What a set of statistics comes to.
#[derive(Debug, Clone, PartialEq)]
pub struct JointP {
    /// p of each statistic alone, in their order.
    pub each: Vec<f64>,
    /// p of the smallest of them.
    pub smallest: f64,
}

impl Joint {
    pub(crate) fn new(count: usize, values: Vec<f64>) -> Self {
        let column = |k: usize| values.iter().copied().skip(k).step_by(count).collect();
        let single: Vec<Reference> = (0..count).map(|k| Reference::new(column(k))).collect();
        let reached = values.iter().enumerate().map(|(i, v)| single[i % count].reaching(*v)).collect();
        Self { count, values, reached, single }
    }

    /// The p of each observed statistic and of the smallest p.
    ///
    /// # Formula
    /// pₖ = (1 + #{T*ₖ ≥ Tₖ})/(B + 1). The observed set joins the draws, every member of this set of
    /// B + 1 gets its smallest p within it, and p = #{members whose smallest p ≤ the observed one}/(B + 1).
    ///
    /// # Shapes and units
    /// One value a statistic, in the order of the draws; `None` with another number of values.
    ///
    /// # Source
    /// P. H. Westfall & S. S. Young (1993), Resampling-Based Multiple Testing, 2.3; from memory.
    #[must_use]
    pub fn p(&self, observed: &[f64]) -> Option<JointP> {
        if observed.len() != self.count || self.count == 0 {
            return None;
        }
        let each: Vec<f64> = self.single.iter().zip(observed).map(|(s, t)| s.p(*t)).collect();
        let own = self.single.iter().zip(observed).map(|(s, t)| 1 + s.reaching(*t)).min()?;
        let rows = self.values.chunks_exact(self.count).zip(self.reached.chunks_exact(self.count));
        let as_small = rows
            .filter(|(values, reached)| {
                let with_observed = |k: usize| reached[k] + usize::from(observed[k] >= reach(values[k]));
                (0..self.count).any(|k| with_observed(k) <= own)
            })
            .count();
        let draws = self.values.len() / self.count;
        Some(JointP { each, smallest: (1 + as_small) as f64 / (draws + 1) as f64 })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::inference::added::dot;
    use crate::inference::sphere::{Sphere, whitened};
    use crate::model::Family;
    use crate::numerics::streams::Stream;

    #[test]
    fn one_statistic_is_its_own_smallest() {
        let joint = Joint::new(1, vec![1.0, 2.0, 3.0, 4.0]);
        for t in [0.0, 1.5, 3.0, 9.0] {
            let found = joint.p(&[t]).unwrap();
            assert_eq!(found.each[0], found.smallest);
        }
        assert_eq!(joint.p(&[1.0, 2.0]), None);
    }

    #[test]
    fn a_statistic_twice_counts_once() {
        let joint = Joint::new(2, vec![1.0, 1.0, 2.0, 2.0, 3.0, 3.0]);
        assert_eq!(joint.p(&[3.0, 3.0]).unwrap().smallest, 0.5);
    }

    /// Curvature, the largest residual and a funnel together: 5 in 100 reject a clean line.
    #[test]
    fn the_smallest_p_is_exact() {
        const RUNS: usize = 2000;
        let statistics = |e: &[f64], out: &mut [f64]| {
            let length = dot(e, e).sqrt();
            let centre = |i: usize| i as f64 - 3.0;
            out[0] = e.iter().enumerate().map(|(i, e)| centre(i).powi(2) * e).sum::<f64>().abs() / length;
            out[1] = e.iter().fold(0.0_f64, |m, e| m.max(e.abs())) / length;
            out[2] = e.iter().enumerate().map(|(i, e)| centre(i) * e * e).sum::<f64>().abs() / (length * length);
        };
        let mut stream = Stream::new(51, 0);
        let mut clean = || fitted(Family::Polynomial(1), &simulated(&mut stream, (7, 1), |x| x, |_| 1.0));
        let joint = Sphere::new(&clean(), 1999, 5).unwrap().joint(3, statistics);
        let mut observed = [0.0; 3];
        let hits = (0..RUNS)
            .filter(|_| {
                statistics(&whitened(&clean()).unwrap(), &mut observed);
                joint.p(&observed).unwrap().smallest <= 0.05
            })
            .count();
        assert_rate(hits, RUNS, 0.05);
    }
}
