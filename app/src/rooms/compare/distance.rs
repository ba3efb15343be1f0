//! The cursor in words and numbers: how far from the zeros, and how often these reach it. Knows no
//! window.

use super::{near_facts::NearFacts, readout::on_trial};
use assize_core::{
    distributions::t_upper,
    project::{
        Project,
        evaluate::{Evaluation, near_zero::odds},
    },
    quantity::{
        format::{place_of, significant, to_place},
        number::parse_number,
        unit::{Scale, scale_for},
    },
};

/// Distance of the cursor from the zero mean and its false alarms, in numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Distance {
    /// In SDs of one reading, signed by the signal.
    pub(super) sd: f64,
    /// Chance that nothing gives a signal further out.
    pub(super) false_alarm: f64,
}

/// Distance and false alarms of the cursor, the same in all columns while the zeros decide.
pub(super) fn of(evaluation: &Evaluation, facts: &NearFacts, signal: f64) -> Distance {
    let band = &facts.band;
    let offset = signal - band.mean;
    if !NearFacts::rests_on_zeros(&evaluation.zeros) && facts.around.is_none() {
        // The scatter about each curve decides: the speaking column's stands for it.
        let e = evaluation.speaking_column().and_then(|c| c.outcome.as_ref().ok());
        let all = e.and_then(|e| evaluation.zeros.detections(&e.fit).ok());
        if let Some(trial) = all.and_then(|all| on_trial(&all, facts, signal).0) {
            return Distance { sd: trial.distance_sd, false_alarm: trial.false_alarm };
        }
    }
    let share = 1.0 / facts.k.max(1) as f64 + 1.0 / band.n as f64;
    let tau = offset.abs() / (band.sd * share.sqrt());
    let false_alarm = if tau.is_finite() { t_upper(tau, band.degrees_of_freedom) } else { 0.0 };
    Distance { sd: offset / band.sd, false_alarm }
}

/// `1.9 SD over the zero mean: 1 zero in 20 reads higher`.
pub(super) fn words(facts: &NearFacts, distance: Distance) -> String {
    let (what, who) = if facts.around.is_some() { ("the mean", "reading") } else { ("the zero mean", "zero") };
    if !distance.sd.is_finite() {
        return format!("on {what}; identical readings show no scatter");
    }
    let (side, reads) = if distance.sd < 0.0 { ("under", "lower") } else { ("over", "higher") };
    let p = distance.false_alarm;
    let often = if p < 1e-6 {
        format!("practically no {who} reads {reads}")
    } else if (1.0 / p - (1.0 / p).round()).abs() < 1e-6 / p {
        format!("{} reads {reads}", odds(p).replacen("1 in", &format!("1 {who} in"), 1))
    } else {
        let n = significant(1.0 / p, 2);
        format!("1 {who} in {} reads {reads}", n.strip_suffix(".0").unwrap_or(&n))
    };
    format!("{} SD {side} {what}: {often}", significant(distance.sd.abs(), 2))
}

/// The cursor as a number in the unit that reads well near zero, and that unit.
pub(super) fn number(project: &Project, facts: &NearFacts, signal: f64) -> (String, String) {
    let scale = scale(project, facts);
    // Fine enough to show one step with Shift.
    let place = place_of(facts.step() * 0.1 * scale.factor) + 1;
    (to_place(signal * scale.factor, place), scale.unit)
}

/// A typed cursor in the declared output unit; both `.` and `,` are decimal marks.
pub(super) fn typed(project: &Project, facts: &NearFacts, text: &str) -> Option<f64> {
    let signal = parse_number(text, None).ok()? / scale(project, facts).factor;
    signal.is_finite().then_some(signal)
}

/// The scale of the whole row, so that the unit does not jump while the cursor moves.
fn scale(project: &Project, facts: &NearFacts) -> Scale {
    scale_for(&project.plan.output.unit, facts.y.0.abs().max(facts.y.1.abs()))
}
