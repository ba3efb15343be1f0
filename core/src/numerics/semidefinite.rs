//! A covariance matrix written as L Lᵀ, also where it is singular.
//!
//! Standards without an uncertainty and standards that share all of it make the covariance singular, so
//! the ordinary Cholesky factor does not exist. A pivoted one does, with as many columns as the rank.

use super::dd::Dd;
use super::scale::as_f64;

/// What rounding of the entries to doubles may leave of a vanishing correlation, per row.
const ROUNDING: f64 = 16.0 * f64::EPSILON;

/// Why a matrix is no covariance matrix. Rows and columns count from 0, in messages from 1.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
pub enum SemidefiniteError {
    /// A row of another length than the number of rows.
    #[error("row {} of the covariance has {found} entries instead of {expected}", .row + 1)]
    NotSquare {
        /// The row.
        row: usize,
        /// Its length.
        found: usize,
        /// Number of rows.
        expected: usize,
    },
    /// An entry that is not a finite number.
    #[error("the covariance of {} and {} is not a finite number", .row + 1, .column + 1)]
    NotFinite {
        /// The row.
        row: usize,
        /// The column.
        column: usize,
    },
    /// Two entries that should be the same.
    #[error("the covariance of {} and {} is given twice and differs", .row + 1, .column + 1)]
    NotSymmetric {
        /// The row.
        row: usize,
        /// The column.
        column: usize,
    },
    /// A correlation beyond ±1, a negative variance (row = column), or entries that contradict each other.
    #[error("no errors can have this covariance of {} and {}", .row + 1, .column + 1)]
    NotSemidefinite {
        /// The row.
        row: usize,
        /// The column.
        column: usize,
    },
}

/// A factor L of a semidefinite matrix U = L Lᵀ.
#[derive(Debug, Clone, PartialEq)]
pub struct SemidefiniteFactor {
    /// m rows with `rank` entries each, in the root of the unit of U.
    pub rows: Vec<Vec<Dd>>,
    /// Number of columns.
    pub rank: usize,
}

/// Factors a symmetric positive semidefinite matrix.
///
/// # Formula
///
/// R = D⁻¹ U D⁻¹ with D = diag √U_ii; the largest remaining diagonal entry of R is the next pivot:
/// ℓ = r_j/√r_jj, R ← R − ℓℓᵀ, until nothing but rounding remains; L = D·(ℓ₁ … ℓ_r). A diagonal matrix
/// gives L = diag √U_ii with its zero columns left out.
///
/// # Shapes and units
///
/// m rows of m entries, m ≥ 0. Entries may span many powers of ten: the correlations decide.
///
/// # Errors
///
/// Every variant of [`SemidefiniteError`], each with the entry at fault. Symmetry and definiteness may be
/// missed by the rounding of the entries to doubles.
///
/// # Source
///
/// Higham, Accuracy and Stability of Numerical Algorithms (2nd edition), 10.3. From memory.
pub fn semidefinite_cholesky(matrix: &[Vec<f64>]) -> Result<SemidefiniteFactor, SemidefiniteError> {
    let m = matrix.len();
    let deviations = check(matrix)?;
    let mut rest = correlations(matrix, &deviations)?;
    let tolerance = ROUNDING * as_f64(m.max(1));
    let mut rows: Vec<Vec<Dd>> = vec![Vec::new(); m];
    let mut done = vec![false; m];
    while let Some(pivot) = largest(&rest, &done).filter(|j| rest[*j][*j].to_f64() > tolerance) {
        done[pivot] = true;
        let root = rest[pivot][pivot].sqrt();
        let column: Vec<Dd> =
            (0..m).map(|i| if done[i] && i != pivot { Dd::ZERO } else { rest[i][pivot] / root }).collect();
        for (i, row) in rest.iter_mut().enumerate().filter(|(i, _)| !done[*i]) {
            if column[i] == Dd::ZERO {
                continue;
            }
            for (j, cell) in row.iter_mut().enumerate().filter(|(j, _)| !done[*j]) {
                *cell -= column[i] * column[j];
            }
        }
        for (i, row) in rows.iter_mut().enumerate() {
            row.push(column[i] * deviations[i]);
        }
    }
    for (row, cells) in rest.iter().enumerate().filter(|(i, _)| !done[*i]) {
        let bad = |j: &usize| !done[*j] && cells[*j].to_f64().abs() > 4.0 * tolerance;
        if let Some(column) = (0..m).find(bad) {
            return Err(SemidefiniteError::NotSemidefinite { row, column });
        }
    }
    let rank = rows.first().map_or(0, Vec::len);
    Ok(SemidefiniteFactor { rows, rank })
}

/// Shape, finiteness and signs; hands back the standard deviations.
fn check(matrix: &[Vec<f64>]) -> Result<Vec<Dd>, SemidefiniteError> {
    let expected = matrix.len();
    let mut deviations = Vec::with_capacity(expected);
    for (row, cells) in matrix.iter().enumerate() {
        if cells.len() != expected {
            return Err(SemidefiniteError::NotSquare { row, found: cells.len(), expected });
        }
        if let Some(column) = cells.iter().position(|v| !v.is_finite()) {
            return Err(SemidefiniteError::NotFinite { row, column });
        }
        if cells[row] < 0.0 {
            return Err(SemidefiniteError::NotSemidefinite { row, column: row });
        }
        deviations.push(Dd::from(cells[row]).sqrt());
    }
    Ok(deviations)
}

/// The correlation matrix, with zeros for what has no uncertainty.
fn correlations(matrix: &[Vec<f64>], deviations: &[Dd]) -> Result<Vec<Vec<Dd>>, SemidefiniteError> {
    let m = matrix.len();
    let mut out = vec![vec![Dd::ZERO; m]; m];
    for row in 0..m {
        for column in 0..=row {
            let (below, above) = (matrix[row][column], matrix[column][row]);
            let unit = deviations[row] * deviations[column];
            if (below - above).abs() > ROUNDING * unit.to_f64() {
                return Err(SemidefiniteError::NotSymmetric { row, column });
            }
            if below == 0.0 && above == 0.0 {
                continue;
            }
            let mean = Dd::from_sum(0.5 * below, 0.5 * above);
            let correlation = mean / unit;
            // Nothing divided by nothing is no number, and so is the correlation of what does not vary.
            let inside = correlation.to_f64().abs() <= 1.0 + ROUNDING;
            if !inside {
                return Err(SemidefiniteError::NotSemidefinite { row, column });
            }
            out[row][column] = correlation;
            out[column][row] = correlation;
        }
    }
    Ok(out)
}

/// The row with the largest remaining diagonal entry, the first of equals.
fn largest(rest: &[Vec<Dd>], done: &[bool]) -> Option<usize> {
    let mut best: Option<usize> = None;
    for i in (0..rest.len()).filter(|i| !done[*i]) {
        if best.is_none_or(|b| rest[i][i] > rest[b][b]) {
            best = Some(i);
        }
    }
    best
}

#[cfg(test)]
mod tests {
    use super::*;

    fn restored(factor: &SemidefiniteFactor, i: usize, j: usize) -> f64 {
        factor.rows[i].iter().zip(&factor.rows[j]).map(|(a, b)| *a * *b).sum::<Dd>().to_f64()
    }

    /// u uᵀ + diag: shared and own parts, one standard exact, sizes from 1e-9 to 1e3.
    #[test]
    fn the_factor_multiplies_back() {
        let shared = [1e-9, 0.0, 2.0, 30.0, 1e3];
        let own = [2e-9, 0.0, 0.0, 1.0, 0.0];
        let entry = |i: usize, j: usize| shared[i] * shared[j] + if i == j { own[i] * own[i] } else { 0.0 };
        let matrix: Vec<Vec<f64>> = (0..5).map(|i| (0..5).map(|j| entry(i, j)).collect()).collect();
        let factor = semidefinite_cholesky(&matrix).unwrap();
        assert_eq!(factor.rank, 3);
        for i in 0..5 {
            for j in 0..5 {
                let unit = libm::sqrt(matrix[i][i] * matrix[j][j]);
                assert!((restored(&factor, i, j) - matrix[i][j]).abs() <= 1e-14 * unit, "{i} {j}");
            }
        }
    }

    #[test]
    fn a_diagonal_gives_its_roots_in_place() {
        let factor = semidefinite_cholesky(&[vec![4.0, 0.0, 0.0], vec![0.0; 3], vec![0.0, 0.0, 9.0]]).unwrap();
        let roots: Vec<Vec<f64>> =
            factor.rows.iter().map(|r| r.iter().map(|v| v.to_f64()).collect::<Vec<f64>>()).collect();
        assert_eq!(roots, [vec![2.0, 0.0], vec![0.0, 0.0], vec![0.0, 3.0]]);
        assert_eq!(semidefinite_cholesky(&[]).unwrap().rank, 0);
        assert_eq!(semidefinite_cholesky(&[vec![0.0]]).unwrap().rank, 0);
    }

    #[test]
    fn what_is_no_covariance_names_its_entry() {
        use SemidefiniteError::{NotFinite, NotSemidefinite, NotSquare, NotSymmetric};
        let of = |rows: &[&[f64]]| {
            let matrix: Vec<Vec<f64>> = rows.iter().map(|r| r.to_vec()).collect();
            semidefinite_cholesky(&matrix).unwrap_err()
        };
        assert_eq!(of(&[&[1.0, 0.0], &[0.0]]), NotSquare { row: 1, found: 1, expected: 2 });
        assert_eq!(of(&[&[1.0, f64::NAN], &[0.0, 1.0]]), NotFinite { row: 0, column: 1 });
        assert_eq!(of(&[&[1.0, 0.1], &[0.2, 1.0]]), NotSymmetric { row: 1, column: 0 });
        assert_eq!(of(&[&[1.0, 0.0], &[0.0, -1.0]]), NotSemidefinite { row: 1, column: 1 });
        assert_eq!(of(&[&[1.0, 1.1], &[1.1, 1.0]]), NotSemidefinite { row: 1, column: 0 });
        assert_eq!(of(&[&[1.0, 0.1], &[0.1, 0.0]]), NotSemidefinite { row: 1, column: 0 });
        // Each pair is possible, all three together are not.
        let three: [&[f64]; 3] = [&[1.0, 0.9, -0.9], &[0.9, 1.0, 0.9], &[-0.9, 0.9, 1.0]];
        assert!(matches!(of(&three), NotSemidefinite { row: 2, .. }), "{:?}", of(&three));
    }
}
