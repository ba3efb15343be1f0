//! One family of tests judged together, so that many looks do not raise many false alarms.

/// The level at which the family of warnings is judged.
pub const FAMILY_LEVEL: f64 = 0.10;

/// What the family makes of one test.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Judged {
    /// The p handed in.
    pub p: f64,
    /// Holm's adjusted p, at least `p`, at most 1.
    pub adjusted: f64,
    /// Adjusted p ≤ the family's level: worth a warning.
    pub rejected: bool,
    /// p ≤ 0.05 by itself although the family does not reject it: worth a note at most.
    pub alone: bool,
}

/// Judges the tests that apply as one family.
///
/// # Formula
/// With p₍₁₎ ≤ … ≤ p₍ₙ₎: adjusted p₍ⱼ₎ = min(1, max_{i≤j} (n − i + 1)·p₍ᵢ₎); rejected when ≤ `level`.
/// The chance of any false rejection among n tests is at most `level`, whatever their dependence.
///
/// # Shapes and units
/// One entry a test; `None` (does not apply, or cannot be computed) stays `None` and is not counted.
///
/// # Source
/// S. Holm (1979), Scand. J. Statist. 6, 65–70; from memory.
#[must_use]
pub fn holm(p: &[Option<f64>], level: f64) -> Vec<Option<Judged>> {
    let mut order: Vec<(usize, f64)> =
        p.iter().enumerate().filter_map(|(i, p)| p.filter(|p| !p.is_nan()).map(|p| (i, p))).collect();
    order.sort_by(|a, b| a.1.total_cmp(&b.1));
    let n = order.len();
    let mut judged = vec![None; p.len()];
    let mut highest = 0.0_f64;
    for (rank, (index, p)) in order.into_iter().enumerate() {
        highest = highest.max((n - rank) as f64 * p);
        let adjusted = highest.min(1.0);
        let rejected = adjusted <= level;
        judged[index] = Some(Judged { p, adjusted, rejected, alone: !rejected && p <= 0.05 });
    }
    judged
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn steps_down_and_stays_monotone() {
        let judged = holm(&[Some(0.04), None, Some(0.01), Some(0.03)], 0.10);
        let adjusted = |i: usize| judged[i].unwrap().adjusted;
        assert!((adjusted(2) - 0.03).abs() < 1e-15);
        assert!((adjusted(3) - 0.06).abs() < 1e-15);
        assert!((adjusted(0) - 0.06).abs() < 1e-15);
        assert!(judged[1].is_none());
        assert!(judged.iter().flatten().all(|j| j.rejected));
    }

    #[test]
    fn one_alone_is_a_note() {
        let judged = holm(&[Some(0.04), Some(0.6), Some(0.7)], 0.10);
        let first = judged[0].unwrap();
        assert!(!first.rejected && first.alone);
    }
}
