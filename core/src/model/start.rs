//! Start values for fits that are not linear: a few columns solved exactly, the rest searched.
//!
//! Every such family is linear in some coefficients once the others (a rate, a pole, a steepness) are
//! given. So only those others are searched, on a grid wide enough for any sensible data and then by ever
//! smaller steps; the linear ones follow by least squares. Data alone decide: no guess can mislead.

/// One searched coefficient: from `lo` to `hi` in `count` steps of equal size.
#[derive(Debug, Clone, Copy)]
pub(super) struct Axis {
    /// Lower end.
    pub(super) lo: f64,
    /// Upper end.
    pub(super) hi: f64,
    /// Number of places, at least 2.
    pub(super) count: u32,
}

impl Axis {
    fn step(self) -> f64 {
        (self.hi - self.lo) / f64::from(self.count - 1)
    }

    fn place(self, k: u32) -> f64 {
        self.lo + f64::from(k) * self.step()
    }
}

/// Half width of [`signed_axis`].
pub(super) const SPREAD: f64 = 7.0;

/// For a coefficient of either sign over many sizes: the coefficient is proportional to sinh of the place.
/// The count is even, so that no place is exactly zero.
pub(super) fn signed_axis() -> Axis {
    Axis { lo: -SPREAD, hi: SPREAD, count: 140 }
}

/// Halvings of the search steps after the grid.
const HALVINGS: u32 = 14;

/// The readings of each distinct level brought together: a long series costs no more than its levels, and the order
/// of the readings does not matter to the last bit.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Levels {
    /// Distinct levels, ascending.
    pub(super) x: Vec<f64>,
    /// Mean reading of each.
    pub(super) y: Vec<f64>,
    /// Square root of the number of readings of each.
    pub(super) root: Vec<f64>,
}

impl Levels {
    /// `None` with fewer levels than asked for, or when a point is not finite or outside the domain.
    pub(super) fn of(points: &[(f64, f64)], domain: impl Fn(f64) -> bool, at_least: usize) -> Option<Self> {
        if points.iter().any(|(x, y)| !domain(*x) || !x.is_finite() || !y.is_finite()) {
            return None;
        }
        let mut sorted = points.to_vec();
        sorted.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1)));
        let mut levels = Self { x: Vec::new(), y: Vec::new(), root: Vec::new() };
        // Plain comparison, so that −0 and 0 are one level.
        for same in sorted.chunk_by(|a, b| a.0 == b.0) {
            let count = same.len() as f64;
            levels.x.push(same[0].0);
            levels.y.push(same.iter().map(|(_, y)| y / count).sum());
            levels.root.push(libm::sqrt(count));
        }
        (levels.x.len() >= at_least.max(1)).then_some(levels)
    }

    /// Smallest and largest level.
    pub(super) fn ends(&self) -> (f64, f64) {
        (self.x[0], self.x[self.x.len() - 1])
    }

    /// Middle and half width of the levels; the half width is positive for two levels or more.
    pub(super) fn middle(&self) -> (f64, f64) {
        let (lo, hi) = self.ends();
        (0.5 * lo + 0.5 * hi, 0.5 * hi - 0.5 * lo)
    }

    /// The same levels at other places, g(x) rising with x.
    pub(super) fn moved(&self, g: impl Fn(f64) -> f64) -> Self {
        Self { x: self.x.iter().map(|x| g(*x)).collect(), ..self.clone() }
    }

    /// 1/y in place of y, with weights y⁴ so that errors count as errors of y; `None` unless every y > 0.
    pub(super) fn inverted(&self) -> Option<Self> {
        let root = self.root.iter().zip(&self.y).map(|(root, y)| root * (y * y)).collect();
        let y = self.y.iter().map(|y| 1.0 / y).collect();
        self.y.iter().all(|y| *y > 0.0).then(|| Self { x: self.x.clone(), y, root })
    }

    /// Coefficients of the columns g(x), and the length of the weighted residuals of the means.
    pub(super) fn fit(&self, columns: &[&dyn Fn(f64) -> f64]) -> Option<(Vec<f64>, f64)> {
        let weighted = |g: &&dyn Fn(f64) -> f64| self.x.iter().zip(&self.root).map(|(x, root)| root * g(*x)).collect();
        let columns: Vec<Vec<f64>> = columns.iter().map(weighted).collect();
        let y: Vec<f64> = self.y.iter().zip(&self.root).map(|(y, root)| root * y).collect();
        least_squares(&columns, &y)
    }
}

/// Coefficients of the columns and the length of the residuals; `None` when the columns depend on each other (to
/// 10⁻¹³) or a number is not finite. The length, √SS, stays within doubles where SS would not.
///
/// Gram–Schmidt, each column twice, with the data as last column: never the normal equations.
pub(super) fn least_squares(columns: &[Vec<f64>], y: &[f64]) -> Option<(Vec<f64>, f64)> {
    let mut basis: Vec<Vec<f64>> = Vec::with_capacity(columns.len());
    let mut triangle: Vec<Vec<f64>> = Vec::with_capacity(columns.len());
    for column in columns {
        let length = norm(column);
        let (shares, mut rest) = remove(&basis, column);
        let left = norm(&rest);
        // Not finite, zero, or nearly a mixture of the columns before.
        if !(length.is_finite() && left > 1e-13 * length) {
            return None;
        }
        rest.iter_mut().for_each(|v| *v /= left);
        basis.push(rest);
        triangle.push(shares.into_iter().chain([left]).collect());
    }
    let (mut found, rest) = remove(&basis, y);
    for k in (0..found.len()).rev() {
        found[k] /= triangle[k][k];
        for i in 0..k {
            found[i] -= triangle[k][i] * found[k];
        }
    }
    let left = norm(&rest);
    (left.is_finite() && found.iter().all(|b| b.is_finite())).then_some((found, left))
}

/// Shares of the orthonormal columns in a vector, and what is left of it.
fn remove(basis: &[Vec<f64>], column: &[f64]) -> (Vec<f64>, Vec<f64>) {
    let mut shares = vec![0.0; basis.len()];
    let mut rest = column.to_vec();
    for _ in 0..2 {
        for (share, q) in shares.iter_mut().zip(basis) {
            let part = dot(q, &rest);
            *share += part;
            rest.iter_mut().zip(q).for_each(|(r, q)| *r -= part * q);
        }
    }
    (shares, rest)
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

/// Length without overflow or underflow in the squares.
fn norm(a: &[f64]) -> f64 {
    let largest = a.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
    if largest == 0.0 || !largest.is_finite() {
        return largest;
    }
    largest * libm::sqrt(a.iter().map(|v| (v / largest) * (v / largest)).sum())
}

/// The place of the smallest cost on a grid, improved by steps along each axis that are halved when none
/// helps; never outside the axes. `None` when no place of the grid has a cost.
pub(super) fn search(axes: &[Axis], cost: impl Fn(&[f64]) -> Option<f64>) -> Option<Vec<f64>> {
    let mut at: Vec<u32> = vec![0; axes.len()];
    let mut best: Option<(Vec<f64>, f64)> = None;
    loop {
        let place: Vec<f64> = axes.iter().zip(&at).map(|(axis, k)| axis.place(*k)).collect();
        if let Some(found) = cost(&place).filter(|c| best.as_ref().is_none_or(|(_, least)| c < least)) {
            best = Some((place, found));
        }
        // Count up, the first axis fastest.
        let Some(next) = (0..axes.len()).find(|i| at[*i] + 1 < axes[*i].count) else { break };
        at[next] += 1;
        at[..next].fill(0);
    }
    best.map(|(place, least)| improve(axes, cost, place, least))
}

fn improve(axes: &[Axis], cost: impl Fn(&[f64]) -> Option<f64>, mut place: Vec<f64>, mut least: f64) -> Vec<f64> {
    let mut share = 0.5;
    for _ in 0..HALVINGS {
        // A valley may be long; forty rounds of one size are enough for a start.
        for _ in 0..40 {
            let before = least;
            for (i, step) in (0..axes.len()).flat_map(|i| [(i, share), (i, -share)]) {
                let mut next = place.clone();
                next[i] = (place[i] + step * axes[i].step()).clamp(axes[i].lo, axes[i].hi);
                if let Some(found) = cost(&next).filter(|c| *c < least) {
                    (place, least) = (next, found);
                }
            }
            if least == before {
                break;
            }
        }
        share *= 0.5;
    }
    place
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_are_solved_at_any_scale() {
        for scale in [1e-150, 1e-12, 1.0, 1e12, 1e150] {
            let x: Vec<f64> = (0..6).map(|i| scale * f64::from(i)).collect();
            let square: Vec<f64> = x.iter().map(|x| x * (x / scale)).collect();
            let y: Vec<f64> = x.iter().zip(&square).map(|(x, s)| 3.0 - 2.0 * x + 5.0 * s).collect();
            let (b, _) = least_squares(&[vec![1.0; 6], x, square], &y).unwrap();
            let size = scale.max(1.0);
            assert!((b[0] - 3.0).abs() < 1e-11 * size && (b[1] + 2.0).abs() < 1e-11 * size.max(1.0 / scale), "{b:?}");
        }
    }

    #[test]
    fn what_is_left_over() {
        // 1, 2, 4 about their mean 7/3: (16 + 1 + 25)/9.
        let (b, left) = least_squares(&[vec![1.0; 3]], &[1.0, 2.0, 4.0]).unwrap();
        assert!((b[0] - 7.0 / 3.0).abs() < 1e-15 && (left * left - 42.0 / 9.0).abs() < 1e-14);
        assert!(least_squares(&[vec![1.0; 3], vec![2.0; 3]], &[1.0, 2.0, 4.0]).is_none());
        assert!(least_squares(&[vec![0.0; 3]], &[1.0, 2.0, 4.0]).is_none());
        assert!(least_squares(&[vec![1.0, f64::NAN, 1.0]], &[1.0, 2.0, 4.0]).is_none());
    }

    #[test]
    fn the_search_finds_a_valley_and_stays_inside() {
        let axes = [Axis { lo: -4.0, hi: 4.0, count: 9 }, Axis { lo: 0.0, hi: 1.0, count: 5 }];
        let place = search(&axes, |p| Some((p[0] - 1.3).powi(2) + (p[1] - 7.0).powi(2))).unwrap();
        assert!((place[0] - 1.3).abs() < 1e-3 && place[1] == 1.0, "{place:?}");
        assert!(search(&axes, |_| None).is_none());
    }

    #[test]
    fn levels_are_brought_together_in_any_order() {
        let any = |_| true;
        let points = [(2.0, 1.0), (1.0, 1.0), (2.0, 3.0), (-6.0, 0.0)];
        let levels = Levels::of(&points, any, 3).unwrap();
        assert_eq!((&levels.x[..], &levels.y[..]), (&[-6.0, 1.0, 2.0][..], &[0.0, 1.0, 2.0][..]));
        assert_eq!((levels.root[2], levels.middle()), (libm::sqrt(2.0), (-2.0, 4.0)));
        assert_eq!(Levels::of(&[points[2], points[3], points[0], points[1]], any, 3), Some(levels));
        assert_eq!(Levels::of(&points, any, 4), None);
        assert_eq!(Levels::of(&points, |x| x > 0.0, 1), None);
        assert_eq!(Levels::of(&[(1.0, f64::NAN)], any, 1), None);
        assert_eq!(Levels::of(&[], any, 0), None);
        assert_eq!(Levels::of(&[(0.0, 1.0), (-0.0, 1.0)], any, 2), None);
    }

    #[test]
    fn repeats_weigh_as_often_as_they_are() {
        let points = [(0.0, 1.0), (0.0, 3.0), (1.0, 8.0)];
        let (b, left) = Levels::of(&points, |_| true, 1).unwrap().fit(&[&|_| 1.0]).unwrap();
        // Mean of all three is 4; about the means 2 and 8 of the levels: 2·4 + 16.
        assert!((b[0] - 4.0).abs() < 1e-15 && (left * left - 24.0).abs() < 1e-13, "{b:?} {left}");
    }
}
