//! Intervals hold the truth as often as they say, and advice names it: the tables of `tests/README.md` again
//! with fewer runs.

use assize_tests::{
    advice,
    coverage::{Design, Outcome, Scenario, line, replaced, scenarios, simulate, table},
};
use std::{fs, path::Path, thread};

/// Data sets a row.
const RUNS: usize = 2_000;

/// How many Monte-Carlo SDs a rate may lie from the one expected.
const SDS: f64 = 4.0;

/// Four Monte-Carlo SDs; next to 0 and 1, where they vanish, those of 0.95.
fn tolerance(outcome: &Outcome, expected: f64) -> f64 {
    SDS * outcome.monte_carlo_sd(expected.clamp(0.05, 0.95))
}

#[test]
fn intervals_hold_as_often_as_they_say() {
    let scenarios = scenarios();
    let threads = thread::available_parallelism().map_or(1, std::num::NonZero::get);
    let outcomes = simulate(&scenarios, RUNS, threads);
    let mut offences = Vec::new();
    for (scenario, outcome) in scenarios.iter().zip(&outcomes) {
        assert_eq!(outcome.runs, RUNS);
        for (index, row) in scenario.rows.iter().enumerate() {
            for (place, expected) in row.expected.iter().enumerate() {
                let rate = outcome.rate(index, place);
                if (rate - expected).abs() > tolerance(outcome, *expected) {
                    let what = row.question.words();
                    offences.push(format!("{}: {what}, place {place}: {rate} for {expected}", scenario.name));
                }
            }
        }
    }
    assert!(offences.is_empty(), "{}", offences.join("\n"));
}

/// A rate that is wrong by five hundredths is noticed.
#[test]
fn a_wrong_rate_would_be_noticed() {
    let outcome = Outcome { runs: RUNS, held: vec![vec![RUNS * 9 / 10]] };
    assert!((outcome.rate(0, 0) - 0.95).abs() > tolerance(&outcome, 0.95));
}

#[test]
fn counts_do_not_depend_on_the_threads() {
    let few = || vec![Scenario::new("any", line(), Design::new(6, 1), [2.0, 5.0, 9.0])];
    let one = simulate(&few(), 600, 1);
    assert_eq!(one, simulate(&few(), 600, 3));
    assert_ne!(one[0].held, simulate(&few(), 601, 2)[0].held);
}

/// The rows of the document are those of the list: whoever adds a scenario runs `cargo rates`.
#[test]
fn the_document_has_a_row_for_every_question() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("README.md");
    let document = fs::read_to_string(path).expect("tests/README.md");
    assert!(replaced(&document, "coverage", "").is_some() && replaced(&document, "advice", "").is_some());
    let scenarios = scenarios();
    let blank: Vec<Outcome> = simulate(&scenarios, 0, 1);
    let heads = |text: &str| -> Vec<String> {
        let rows = text.lines().filter(|line| line.starts_with("| "));
        rows.map(|line| line.split('|').take(3).collect::<Vec<_>>().join("|")).collect()
    };
    let written = heads(&document);
    let missing: Vec<String> =
        heads(&table(&scenarios, &blank)).into_iter().filter(|head| !written.contains(head)).collect();
    assert!(missing.is_empty(), "run `cargo rates`: {missing:?}");
}

#[test]
fn advice_names_a_clean_line_and_admits_none() {
    for row in advice::score(advice::RUNS) {
        let (name, right) = (row.scenario.name, row.right());
        let clean_line = name.starts_with("line, ") && !name.contains("grows");
        let least = if clean_line { 0.94 } else { 0.0 };
        assert!(right >= least, "{name}: {right}");
        if !row.inside && row.scenario.design.repeats > 1 {
            assert!(row.none > 0 && right > 0.9, "{name}: {right}");
        }
    }
}
