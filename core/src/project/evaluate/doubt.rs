//! The doubt of the standards behind a column: own and shared parts, as the papers give them.

use super::observe::Observation;
use crate::{
    fit::StandardsDoubt,
    project::Project,
    standards::{Standard, StandardId, StatedUncertainty},
};

/// The standards of the observations that a column uses, with the covariance of their values; `None` when no
/// paper states any doubt.
///
/// Standards of one group share a cause of error: the shared part is fully correlated, the rest is each one's
/// own. Without a group everything is each one's own.
#[must_use]
pub fn doubt(project: &Project, observations: &[Observation], used: &[usize]) -> Option<StandardsDoubt> {
    let mut ids: Vec<StandardId> = used.iter().filter_map(|&i| observations[i].standard).collect();
    ids.sort();
    ids.dedup();
    let standards: Vec<&Standard> = ids.iter().filter_map(|id| project.standard(*id)).collect();
    if standards.iter().all(|s| s.papers.uncertainty.is_none()) {
        return None;
    }
    let shares: Vec<(f64, f64)> = standards.iter().map(|s| shares(s)).collect();
    let group = |i: usize| standards[i].papers.group.as_ref().filter(|g| !g.trim().is_empty());
    let together = |i: usize, j: usize| i == j || (group(i).is_some() && group(i) == group(j));
    let common = (0..standards.len())
        .map(|i| {
            let cell = |j: usize| if together(i, j) { shares[i].1 * shares[j].1 } else { 0.0 };
            (0..standards.len()).map(cell).collect()
        })
        .collect();
    let place = |i: &usize| observations[*i].standard.and_then(|id| ids.binary_search(&id).ok());
    Some(StandardsDoubt {
        standard_of: used.iter().map(place).collect(),
        values: standards.iter().map(|s| s.value).collect(),
        independent: shares.iter().map(|(own, _)| own * own).collect(),
        common,
    })
}

/// (own, shared) standard uncertainty of one standard, input unit.
fn shares(standard: &Standard) -> (f64, f64) {
    let of = |stated: Option<StatedUncertainty>| stated.map(StatedUncertainty::standard);
    let whole = of(standard.papers.uncertainty).unwrap_or(0.0);
    let grouped = standard.papers.group.as_ref().is_some_and(|g| !g.trim().is_empty());
    if !grouped {
        return (whole, 0.0);
    }
    let shared = of(standard.papers.shared).unwrap_or(whole).min(whole);
    (libm::sqrt(whole * whole - shared * shared), shared)
}
