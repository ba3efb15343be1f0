//! From looks to observations: the mean of the looks of one application is one observation.

use crate::{
    fit::Point,
    project::{Project, plan::ZerosPart},
    readings::{Applied, Direction, Reading, ReadingId, Stage},
    standards::StandardId,
};
use std::collections::BTreeMap;

/// One application of a standard, or of nothing.
#[derive(Debug, Clone, PartialEq)]
pub struct Observation {
    /// The standard; `None` for a zero.
    pub standard: Option<StandardId>,
    /// Certified value, input unit; 0 for a zero.
    pub x: f64,
    /// Mean of the looks that count, output unit.
    pub y: f64,
    /// The readings behind it, those set aside not among them.
    pub readings: Vec<ReadingId>,
    /// Standard uncertainty of the observation as entered with its readings, output unit: the root mean square
    /// over the looks, since what they share does not average out; `None` unless every look has one.
    pub uncertainty: Option<f64>,
    /// Spread of the looks, output unit; `None` with one look.
    pub looks_sd: Option<f64>,
    /// Direction of approach.
    pub direction: Direction,
    /// Place in run order: as recorded, else `None`.
    pub order: Option<f64>,
    /// Cycle.
    pub cycle: u32,
}

impl Observation {
    /// Whether nothing was applied.
    #[must_use]
    pub fn is_zero(&self) -> bool {
        self.standard.is_none()
    }

    /// The point a fit sees.
    #[must_use]
    pub fn point(&self) -> Point {
        Point { x: self.x, y: self.y }
    }
}

/// The stage that is fitted: the one looked at; by default as left once there is such a reading, else as found.
#[must_use]
pub fn fitted_stage(project: &Project) -> Stage {
    if let Some(stage) = project.stage {
        return stage;
    }
    let any_left = project.readings.iter().any(|r| r.stage == Stage::AsLeft);
    if any_left { Stage::AsLeft } else { Stage::AsFound }
}

/// Observations of one stage in order of their first look; readings set aside do not count.
#[must_use]
pub fn observations(project: &Project, stage: Stage) -> Vec<Observation> {
    let mut groups: BTreeMap<(u32, Option<StandardId>), Vec<&Reading>> = BTreeMap::new();
    for r in project.readings.iter().filter(|r| r.stage == stage && r.counts()) {
        let standard = match r.applied {
            Applied::Standard(id) => Some(id),
            Applied::Nothing { .. } => None,
        };
        groups.entry((r.application, standard)).or_default().push(r);
    }
    let mut all: Vec<Observation> =
        groups.into_iter().filter_map(|((_, standard), looks)| observe(project, standard, &looks)).collect();
    all.sort_by_key(|o| o.readings.first().copied());
    all
}

fn observe(project: &Project, standard: Option<StandardId>, looks: &[&Reading]) -> Option<Observation> {
    let first = looks.first()?;
    let x = match standard {
        Some(id) => project.standard(id)?.value,
        None => 0.0,
    };
    let n = looks.len() as f64;
    let y = looks.iter().map(|r| r.value).sum::<f64>() / n;
    let spread = looks.iter().map(|r| (r.value - y) * (r.value - y)).sum::<f64>();
    Some(Observation {
        standard,
        x,
        y,
        readings: looks.iter().map(|r| r.id).collect(),
        uncertainty: stated(looks),
        looks_sd: (looks.len() > 1).then(|| libm::sqrt(spread / (n - 1.0))),
        direction: first.direction,
        order: first.order.map(f64::from),
        cycle: first.cycle,
    })
}

/// The uncertainty stated for the looks of one application.
fn stated(looks: &[&Reading]) -> Option<f64> {
    let squares: Option<Vec<f64>> = looks.iter().map(|r| r.uncertainty.map(|u| u * u)).collect();
    squares.map(|all| libm::sqrt(all.iter().sum::<f64>() / all.len() as f64))
}

/// Positions of the observations that a column fits.
///
/// Zeros take part as applications at 0 when the plan lets them, nothing applied *is* the value 0 and the
/// family has a value there.
#[must_use]
pub fn fitted(observations: &[Observation], zeros: ZerosPart, zero_is_a_value: bool) -> Vec<usize> {
    let take = zeros == ZerosPart::Fitted && zero_is_a_value;
    (0..observations.len()).filter(|&i| take || !observations[i].is_zero()).collect()
}
