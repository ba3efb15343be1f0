//! Counts, and the figures that belong to no column.

use super::{near_zero::ZeroFacts, observe::Observation, types::DataSummary};
use crate::{
    project::{Project, figures::Figure},
    quantity::format::significant,
    readings::{Reading, Stage},
};

pub(super) fn summary(project: &Project, stage: Stage, observations: &[Observation]) -> DataSummary {
    let of_stage = || project.readings.iter().filter(move |r| r.stage == stage);
    let counted = |zero: bool| of_stage().filter(|r| r.counts() && r.is_zero() == zero).count();
    let zeros = observations.iter().filter(|o| o.is_zero()).count();
    let mut standards: Vec<f64> = observations.iter().filter(|o| !o.is_zero()).map(|o| o.x).collect();
    standards.sort_by(f64::total_cmp);
    standards.dedup();
    DataSummary {
        stage,
        readings: counted(false),
        applications: observations.len() - zeros,
        distinct_standards: standards.len(),
        zero_readings: counted(true),
        zeros,
        set_aside: of_stage().filter(|r| r.set_aside.is_some()).count(),
        corrected: of_stage().filter(|r: &&Reading| !r.corrections.is_empty()).count(),
    }
}

pub(super) fn figures(project: &Project, data: &DataSummary, zeros: &ZeroFacts) -> Vec<Figure> {
    let count = |key: &str, label: &str, n: usize| Figure::new(key, label, Some(n as f64), n.to_string(), "");
    let mut all = vec![
        count("applications", "applications of standards", data.applications),
        count("distinct_standards", "different standards", data.distinct_standards),
        count("zeros", "zero applications", data.zeros),
        count("set_aside", "readings set aside", data.set_aside),
    ];
    let unit = project.plan.output.unit.as_str();
    if let Some(band) = &zeros.band {
        let (low, high) = (band.next_reading.low, band.next_reading.high);
        let place = crate::quantity::format::place_of(band.sd.max(f64::MIN_POSITIVE));
        let at = |v: f64| crate::quantity::format::to_place(v, place);
        all.push(Figure::new("zero.mean", "zero mean", Some(band.mean), at(band.mean), unit));
        all.push(Figure::new("zero.sd", "SD of the zeros", Some(band.sd), significant(band.sd, 2), unit));
        let text = format!("{} … {}", at(low), at(high));
        all.push(Figure::new("zero.next_reading", "zero band, next single reading", None, text, unit));
    }
    all
}
