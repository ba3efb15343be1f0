//! How often the advice names the function that the data were made with.

use crate::coverage::{Design, SEED, Scatter, Scenario, Truth, hash, line, logarithm, quadratic};
use assize_core::{
    fit::Weights,
    inference::advice::{Outcome, Rules, advise},
    model::Family,
    numerics::streams::Stream,
};
use std::fmt::Write as _;

/// Data sets a row.
pub const RUNS: usize = 1_000;

/// What the plan allows in all of these.
#[must_use]
pub fn allowed() -> Vec<Family> {
    vec![Family::Polynomial(1), Family::Polynomial(2), Family::Log, Family::Logistic4]
}

/// One kind of data with what was advised for it.
#[derive(Debug, Clone)]
pub struct Scored {
    /// The data.
    pub scenario: Scenario,
    /// Whether the truth is among the functions allowed.
    pub inside: bool,
    /// How often each allowed function was advised, in the order of [`allowed`].
    pub advised: Vec<usize>,
    /// How often none was good enough.
    pub none: usize,
    /// How often there were too few points to tell.
    pub too_few: usize,
}

impl Scored {
    /// Share of the data sets for which the truth was advised, or "none" where it is not allowed.
    #[must_use]
    pub fn right(&self) -> f64 {
        let all: usize = self.advised.iter().sum::<usize>() + self.none + self.too_few;
        let place = allowed().iter().position(|family| *family == self.scenario.truth.family);
        let right = if self.inside { place.map_or(0, |i| self.advised[i]) } else { self.none };
        right as f64 / all as f64
    }
}

/// A line that jumps by 1.5 at 6, as after a change of range: no allowed function.
fn jump() -> Truth {
    let f = |x: f64| 1.0 + 2.0 * x + if x < 6.0 { 0.0 } else { 1.5 };
    Truth { family: Family::Declared, f, coefficients: Vec::new() }
}

/// A logistic from 1 to 21 with its middle at 4.
fn logistic() -> Truth {
    let f = |x: f64| 21.0 - 20.0 / (1.0 + (x / 4.0).powi(3));
    Truth { family: Family::Logistic4, f, coefficients: vec![1.0, 3.0, 4.0, 21.0] }
}

/// A line with a wave of 1 on it: no allowed function.
fn wave() -> Truth {
    let f = |x: f64| 1.0 + 2.0 * x + (1.5 * x).sin();
    Truth { family: Family::Declared, f, coefficients: Vec::new() }
}

/// The kinds of data: one entry each, with whether the truth is allowed.
fn kinds() -> Vec<(Scenario, bool)> {
    const GROWING: Scatter = Scatter::OfSignal(0.02);
    let of = |name, truth: Truth, (levels, repeats)| {
        Scenario::new(name, truth, Design::new(levels, repeats), [2.0, 5.5, 9.5]).asking(&[])
    };
    let weighted = |name, truth, design| of(name, truth, design).scatter(GROWING).weights(Weights::InverseY2);
    vec![
        (of("line, 5×3", line(), (5, 3)), true),
        (of("line, 6×1", line(), (6, 1)), true),
        (of("line, 11×1", line(), (11, 1)), true),
        (of("line, 11×3", line(), (11, 3)), true),
        (of("quadratic, 6×1", quadratic(), (6, 1)), true),
        (of("quadratic, 11×3", quadratic(), (11, 3)), true),
        (of("logarithm, 11×3", logarithm(), (11, 3)), true),
        (of("jump, 11×1", jump(), (11, 1)), false),
        (of("jump, 11×3", jump(), (11, 3)), false),
        (of("logistic, 11×3", logistic(), (11, 3)), true),
        (of("wave, 11×1", wave(), (11, 1)), false),
        (of("wave, 11×3", wave(), (11, 3)), false),
        (of("line, spread grows, equal weights, 11×3", line(), (11, 3)).scatter(GROWING), true),
        (weighted("line, spread grows, weights 1/y², 11×3", line(), (11, 3)), true),
        (weighted("quadratic, spread grows, weights 1/y², 11×3", quadratic(), (11, 3)), true),
        (weighted("logarithm, spread grows, weights 1/y², 11×3", logarithm(), (11, 3)), true),
        (weighted("jump, spread grows, weights 1/y², 11×3", jump(), (11, 3)), false),
        (weighted("logistic, spread grows, weights 1/y², 11×3", logistic(), (11, 3)), true),
        (weighted("wave, spread grows, weights 1/y², 11×3", wave(), (11, 3)), false),
    ]
}

/// Advises for `runs` data sets of every kind.
#[must_use]
pub fn score(runs: usize) -> Vec<Scored> {
    let rules = Rules { allowed: allowed(), ..Rules::default() };
    let one = |(scenario, inside): (Scenario, bool)| {
        let mut stream = Stream::new(SEED ^ hash(scenario.name), 0);
        let mut scored = Scored { inside, advised: vec![0; rules.allowed.len()], none: 0, too_few: 0, scenario };
        for _ in 0..runs {
            let (points, _) = scored.scenario.observe(&mut stream);
            match advise(&points, scored.scenario.weights, &rules).outcome {
                Outcome::Advised(family) => {
                    for (count, allowed) in scored.advised.iter_mut().zip(&rules.allowed) {
                        *count += usize::from(*allowed == family);
                    }
                }
                Outcome::NoneGoodEnough => scored.none += 1,
                Outcome::TooFewToTell(..) | Outcome::NothingToJudge => scored.too_few += 1,
            }
        }
        scored
    };
    kinds().into_iter().map(one).collect()
}

/// Chosen against true, in Markdown.
#[must_use]
pub fn table(scored: &[Scored]) -> String {
    let mut text = "Data sets by what was advised; in bold what is right.\n\n\
         | truth | line | quadratic | logarithm | logistic | none good enough | too few to tell | right |\n\
         |---|---|---|---|---|---|---|---|\n"
        .to_owned();
    let cell = |count: usize, right: bool| if right { format!("**{count}**") } else { count.to_string() };
    for row in scored {
        let _ = write!(text, "| {} |", row.scenario.name);
        for (count, family) in row.advised.iter().zip(allowed()) {
            let _ = write!(text, " {} |", cell(*count, family == row.scenario.truth.family));
        }
        let none = cell(row.none, !row.inside);
        let _ = writeln!(text, " {none} | {} | {:.1} % |", row.too_few, 100.0 * row.right());
    }
    text
}
