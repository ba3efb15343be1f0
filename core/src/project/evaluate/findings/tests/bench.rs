//! A project made of simulated readings, and how often a finding shows.

use crate::{
    fit::Weights,
    model::Family,
    numerics::streams::Stream,
    project::{
        Project,
        about::Kind,
        columns::{Choice, ColumnSpec},
        evaluate::{Evaluation, Finding, Severity, evaluate},
        plan::{Quantity, ZeroState},
    },
    quantity::Text,
    readings::{Applied, Direction, Reading, ReadingId, Source, Stage},
    standards::{Standard, StandardId, StandardPapers, StatedUncertainty},
};
use std::sync::Arc;

pub(super) const LINE: Family = Family::Polynomial(1);
pub(super) const QUADRATIC: Family = Family::Polynomial(2);

/// A project in the making.
#[derive(Clone, Default)]
pub(super) struct Bench {
    pub project: Project,
    applications: u32,
}

impl Bench {
    /// In kN and mV, practice, without zeros.
    pub(super) fn new() -> Self {
        let mut bench = Self::default();
        bench.project.kind = Kind::Practice;
        bench.project.plan.input = Quantity::new("force", "kN");
        bench.project.plan.output = Quantity::new("signal", "mV");
        bench.project.plan.zero_state = ZeroState::NotAsked;
        bench
    }

    fn standard(&mut self, value: f64) -> StandardId {
        let standards = Arc::make_mut(&mut self.project.standards);
        if let Some(known) = standards.iter().find(|s| s.value == value) {
            return known.id;
        }
        let id = StandardId(standards.len() as u32 + 1);
        let raw = Text::from(value.to_string());
        standards.push(Standard { id, raw, value, papers: StandardPapers::default() });
        id
    }

    fn reading(&mut self, applied: Applied, value: f64) -> Reading {
        Reading {
            id: ReadingId(self.project.readings.len() as u32 + 1),
            applied,
            raw: Text::from(value.to_string()),
            value,
            uncertainty: None,
            stage: Stage::AsFound,
            run: 1,
            cycle: 1,
            direction: Direction::None,
            application: self.applications,
            look: 1,
            order: None,
            time: None,
            person: Text::from("A. Person"),
            source: Source::Pasted,
            questioned: false,
            early: false,
            set_aside: None,
            corrections: Vec::new(),
        }
    }

    /// One application of the standard `x` with its looks; the last reading can be changed afterwards.
    pub(super) fn apply(&mut self, x: f64, looks: &[f64]) -> &mut Reading {
        self.applications += 1;
        let id = self.standard(x);
        for y in looks {
            let reading = self.reading(Applied::Standard(id), *y);
            self.project.readings.push(reading);
        }
        self.project.readings.get_mut(self.project.readings.len() - 1).expect("a look")
    }

    /// One application of nothing.
    pub(super) fn zero(&mut self, y: f64) {
        self.applications += 1;
        self.project.plan.zero_state = ZeroState::Zero;
        let reading = self.reading(Applied::Nothing { between: None }, y);
        self.project.readings.push(reading);
    }

    /// Single looks at the standards 1 … `levels`, `repeats` times each, in cycles, y = f(x, place) with the
    /// run order recorded when asked.
    pub(super) fn cycles(
        mut self,
        (levels, repeats): (u32, u32),
        ordered: bool,
        mut f: impl FnMut(f64, f64) -> f64,
    ) -> Self {
        for i in 0..levels * repeats {
            let x = f64::from(i % levels + 1);
            let y = f(x, f64::from(i));
            self.apply(x, &[y]).order = ordered.then_some(i + 1);
        }
        self
    }

    /// Every standard gets this standard uncertainty.
    pub(super) fn papers(mut self, u: f64) -> Self {
        for standard in Arc::make_mut(&mut self.project.standards) {
            standard.papers.uncertainty = Some(StatedUncertainty::Standard(u));
        }
        self
    }

    /// Shows one column only and chooses it.
    pub(super) fn choose(mut self, spec: ColumnSpec) -> Self {
        self.project.columns = vec![spec.clone()];
        self.project.choice = Some(Choice {
            column: spec,
            because: Text::from("test"),
            by: Text::from("A. Person"),
            at: "2026-11-03T09:12:00+00:00".parse().expect("a moment"),
        });
        self
    }

    /// As [`Bench::choose`] with equal weights.
    pub(super) fn family(self, family: Family) -> Self {
        self.choose(ColumnSpec::plain(family))
    }

    /// As [`Bench::choose`] with weights.
    pub(super) fn weighted(self, family: Family, weights: Weights) -> Self {
        self.choose(ColumnSpec { weights, ..ColumnSpec::plain(family) })
    }

    pub(super) fn evaluate(&self) -> Evaluation {
        evaluate(&self.project)
    }

    /// The finding of this code, if there is one; never two.
    pub(super) fn find(&self, code: &str) -> Option<Finding> {
        let all = self.evaluate().findings;
        let mut found: Vec<Finding> = all.into_iter().filter(|f| f.code == code).collect();
        assert!(found.len() <= 1, "one cause, one finding: {found:?}");
        found.pop()
    }
}

/// How a planted fault was met.
#[derive(Debug, Default)]
pub(super) struct Met {
    pub runs: usize,
    pub stop: usize,
    pub look: usize,
    pub note: usize,
    pub messages: Vec<String>,
}

impl Met {
    /// At least Look.
    pub(super) fn loud(&self) -> usize {
        self.stop + self.look
    }

    pub(super) fn any(&self) -> usize {
        self.loud() + self.note
    }
}

/// Runs of every planted fault.
pub(super) const RUNS: usize = 200;

/// Plants a fault [`RUNS`] times and counts the findings of a code by severity.
pub(super) fn plant(code: &str, mut make: impl FnMut(&mut Stream) -> Bench) -> Met {
    let mut met = Met { runs: RUNS, ..Met::default() };
    for seed in 0..RUNS as u64 {
        let found = make(&mut Stream::new(seed, 77)).find(code);
        match found.as_ref().map(|f| f.severity) {
            Some(Severity::Stop) => met.stop += 1,
            Some(Severity::Look) => met.look += 1,
            Some(Severity::Note) => met.note += 1,
            None => {}
        }
        met.messages.extend(found.map(|f| f.message));
    }
    println!("{code}: Stop {} Look {} Note {} of {RUNS}", met.stop, met.look, met.note);
    if let Some(first) = met.messages.first() {
        println!("    {first}");
    }
    met
}

/// A fault of this size is caught, loud, in at least 80 of 100, and the words change with the data.
#[track_caller]
pub(super) fn caught(code: &str, make: impl FnMut(&mut Stream) -> Bench) -> Met {
    let met = plant(code, make);
    assert!(met.loud() * 10 >= met.runs * 8, "{met:?}");
    words_follow(&met);
    met
}

/// The same for what is never more than a note.
#[track_caller]
pub(super) fn noted(code: &str, make: impl FnMut(&mut Stream) -> Bench) -> Met {
    let met = plant(code, make);
    assert!(met.note * 10 >= met.runs * 8 && met.loud() == 0, "{met:?}");
    words_follow(&met);
    met
}

/// Real but tiny: seen in most runs, never loud.
#[track_caller]
pub(super) fn tiny(code: &str, make: impl FnMut(&mut Stream) -> Bench) {
    let met = plant(code, make);
    assert!(met.note * 2 >= met.runs && met.loud() * 50 <= met.runs, "{met:?}");
}

/// Clean data: hardly ever anything louder than a note.
#[track_caller]
pub(super) fn quiet(code: &str, make: impl FnMut(&mut Stream) -> Bench) -> Met {
    let met = plant(code, make);
    assert!(met.loud() * 20 <= met.runs, "{met:?}");
    met
}

/// A message quotes a number, and not always the same one.
#[track_caller]
pub(super) fn words_follow(met: &Met) {
    let mut different = met.messages.clone();
    different.sort();
    different.dedup();
    assert!(different.len() > 1, "{different:?}");
    assert!(different.iter().all(|m| m.chars().any(|c| c.is_ascii_digit())), "{different:?}");
}
