//! A clean straight instrument is left in peace: no Look or Stop in at least 90 of 100 runs.

use super::bench::{Bench, LINE};
use crate::{
    numerics::streams::Stream,
    project::evaluate::{Evaluation, Place, Severity},
};

const RUNS: u64 = 2000;

fn bench(design: (u32, u32), ordered: bool, seed: u64) -> Bench {
    let mut stream = Stream::new(seed, 41);
    Bench::new().cycles(design, ordered, |x, _| 0.3 + 2.0 * x + 0.02 * stream.normal())
}

/// Findings louder than a note, those on the paper work of the record left out.
fn loud(e: &Evaluation) -> Vec<&str> {
    let paper = |f: &crate::project::evaluate::Finding| f.place == Place::Record && f.code != "none-good-enough";
    e.findings.iter().filter(|f| f.severity < Severity::Note && !paper(f)).map(|f| f.code).collect()
}

/// Rates over the runs: any warning with the advised column speaking, with the line chosen, line advised.
fn rates(design: (u32, u32), ordered: bool) -> [usize; 3] {
    let mut counts = [0; 3];
    let mut codes = std::collections::BTreeMap::new();
    for seed in 0..RUNS {
        let bench = bench(design, ordered, seed);
        let free = bench.evaluate();
        counts[0] += usize::from(!loud(&free).is_empty());
        let advised = free.advice.column.as_ref().is_some_and(|c| c.family == LINE);
        counts[2] += usize::from(advised);
        let chosen = bench.family(LINE).evaluate();
        let found = loud(&chosen);
        counts[1] += usize::from(!found.is_empty());
        for code in found {
            *codes.entry(code.to_owned()).or_insert(0) += 1;
        }
    }
    println!(
        "{design:?} ordered {ordered}: advised speaks {}, line chosen {}, line advised {} of {RUNS}; {codes:?}",
        counts[0], counts[1], counts[2]
    );
    counts
}

#[track_caller]
fn peaceful(design: (u32, u32), ordered: bool) {
    let [speaking, chosen, advised] = rates(design, ordered);
    let runs = RUNS as usize;
    assert!(speaking * 10 <= runs && chosen * 10 <= runs, "{speaking} and {chosen} of {runs} warned");
    assert!(advised * 100 >= runs * 94, "line advised in {advised} of {runs}");
}

#[test]
fn five_levels_three_times() {
    peaceful((5, 3), false);
}

#[test]
fn five_levels_three_times_in_known_order() {
    peaceful((5, 3), true);
}

#[test]
fn six_levels_once() {
    peaceful((6, 1), false);
}

#[test]
fn eleven_levels_once() {
    peaceful((11, 1), false);
}

#[test]
fn eleven_levels_three_times() {
    peaceful((11, 3), false);
}
