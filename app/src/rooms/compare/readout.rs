//! The two read-outs of a threshold on trial, for every column at once. Knows no window.

use super::near_facts::NearFacts;
use assize_core::{
    project::{
        Project,
        evaluate::{
            Caption, ColumnEvaluation, Evaluation, FitEvaluation, NearZeroOutcome,
            near_zero::{absent_words, near, trial_words},
        },
    },
    zero::{detection::Detection, trial::Trial},
};

/// What the cursor means in one column.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Readout {
    /// The value it traces to, input unit; in a smallest-change row the change.
    pub traced: Option<f64>,
    /// The smallest value (or change) missed at most β times with the cursor as threshold.
    pub missed: Option<f64>,
    /// With two directions: the same on the other side, with the threshold mirrored at the zero mean.
    pub missed_other: Option<f64>,
    /// `traced` as shown: `3.3 N`, or why there is none.
    pub traced_text: String,
    /// `missed` as shown.
    pub missed_text: String,
    /// The caption over the plot.
    pub caption: Caption,
}

/// The read-outs of all columns for a signal, in the order of the columns.
///
/// With the cursor on the decision threshold the captions are the evaluation's own.
pub(super) fn readouts(project: &Project, evaluation: &Evaluation, facts: &NearFacts, signal: f64) -> Vec<Readout> {
    let home = facts.on_threshold(signal);
    let each = |column: &ColumnEvaluation| {
        let mut readout = match &column.outcome {
            Ok(e) => of_fit(project, evaluation, e, (facts, signal)),
            Err(_) => absent("not fitted"),
        };
        if home || readout.caption.text.is_empty() {
            readout.caption = column.captions.near_zero.clone();
        }
        readout
    };
    evaluation.columns.iter().map(each).collect()
}

fn absent(why: &str) -> Readout {
    Readout { traced_text: why.to_owned(), missed_text: why.to_owned(), ..Readout::default() }
}

fn of_fit(
    project: &Project,
    evaluation: &Evaluation,
    e: &FitEvaluation,
    (facts, signal): (&NearFacts, f64),
) -> Readout {
    let beta = evaluation.zeros.asked.beta;
    let text = |v: Option<f64>, none: &str| v.map_or_else(|| none.to_owned(), |x| near(project, x, 2));
    match &e.near_zero {
        NearZeroOutcome::Absent(why) => absent(&absent_words(project, *why)),
        NearZeroOutcome::Change(change) => {
            let trial = change.trial(signal);
            let as_trial = Trial {
                distance_sd: trial.distance_sd,
                false_alarm: trial.false_alarm,
                traced: Some(trial.traced),
                missed_at_most: trial.missed_at_most,
            };
            Readout {
                traced: Some(trial.traced),
                missed: trial.missed_at_most,
                missed_other: trial.missed_at_most.map(|x| -x),
                traced_text: text(Some(trial.traced), ""),
                missed_text: text(trial.missed_at_most, "no value here"),
                caption: Caption::plain(format!("a change: {}", trial_words(project, &as_trial, beta, None))),
            }
        }
        NearZeroOutcome::Limits(_) => {
            let Ok(all) = evaluation.zeros.detections(&e.fit) else {
                return absent("no value");
            };
            let (trial, missed_other) = on_trial(&all, facts, signal);
            let Some(trial) = trial else {
                return absent("no value");
            };
            Readout {
                traced: trial.traced,
                missed: trial.missed_at_most,
                missed_other,
                traced_text: text(trial.traced, "no value"),
                missed_text: text(trial.missed_at_most, "no value here"),
                caption: Caption::plain(trial_words(project, &trial, beta, None)),
            }
        }
    }
}

/// The trial on the side to which the cursor points; on the other side the mirrored threshold.
pub(super) fn on_trial(all: &[Detection<'_>], facts: &NearFacts, signal: f64) -> (Option<Trial>, Option<f64>) {
    let trials: Vec<Trial> = all.iter().map(|d| d.trial(signal)).collect();
    let [first, second] = trials.as_slice() else {
        return (trials.first().copied(), None);
    };
    let (mine, other) = if first.distance_sd >= second.distance_sd { (0, 1) } else { (1, 0) };
    let mirrored = 2.0 * facts.band.mean - signal;
    (Some(trials[mine]), all[other].trial(mirrored).missed_at_most)
}
