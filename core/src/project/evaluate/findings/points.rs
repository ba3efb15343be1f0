//! Single observations that stand out.

use super::{context::Context, finding};
use crate::{
    inference::{grubbs::grubbs_within_levels, outlier::outlier},
    project::evaluate::finding::{Finding, Place, Severity},
    quantity::format::significant,
};

/// One observation unlike its neighbours: against the curve, else among the repeats of its standard.
fn unlike(c: &Context<'_>) -> Option<(u32, String)> {
    let id = |index: usize| c.seen.get(index)?.readings.first().map(|r| r.0);
    if let Some(far) = outlier(c.fit()).filter(|o| o.beyond) {
        let sds = significant(far.studentised.abs(), 2);
        let x = c.fit().points[far.index].x;
        let size = c.size(far.residual / c.fit().curve.derivative(x));
        return id(far.index).map(|n| (n, format!("reading {n} lies {sds} residual SDs from the curve ({size})")));
    }
    let levels = grubbs_within_levels(&c.fit().points);
    let count = levels.len() as f64;
    let far = levels.into_iter().min_by(|a, b| a.grubbs.p.total_cmp(&b.grubbs.p))?;
    if far.grubbs.p * count > 0.05 {
        return None;
    }
    let sds = significant(far.grubbs.g, 2);
    id(far.grubbs.index).map(|n| (n, format!("reading {n} lies {sds} SDs from the other repeats at {}", c.at(far.x))))
}

pub(super) fn findings(c: &Context<'_>) -> Option<Finding> {
    let (n, what) = unlike(c)?;
    let message = format!("{what}: unlike its neighbours");
    Some(finding("outlier", Severity::Note, Place::Reading(n), message, "find out why before anything else"))
}
