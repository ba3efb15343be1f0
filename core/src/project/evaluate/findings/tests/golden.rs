//! Real and classroom data with known verdicts.

use super::bench::{Bench, LINE, QUADRATIC};
use crate::{
    convert::reference::pontius,
    model::Family,
    project::evaluate::{Finding, Severity},
};

/// NIST/ITL StRD, Pontius.
fn load_cell(family: Family) -> Vec<Finding> {
    let mut bench = Bench::new();
    for p in pontius() {
        bench.apply(p.x, &[p.y]);
    }
    bench.family(family).evaluate().findings
}

fn codes(findings: &[Finding], at_least: Severity) -> Vec<&str> {
    findings.iter().filter(|f| f.severity <= at_least).map(|f| f.code).collect()
}

/// NIST/SEMATECH e-Handbook 4.6.1: the line is refused although R² = 0.99999, the quadratic stands.
#[test]
fn the_published_load_cell() {
    let line = load_cell(LINE);
    assert_eq!(codes(&line, Severity::Look), ["shape"], "{line:?}");
    let shape = line.iter().find(|f| f.code == "shape").unwrap();
    assert!(shape.message.contains("bows") && shape.message.contains("R² = 0.999989"), "{shape:?}");
    let quadratic = load_cell(QUADRATIC);
    assert!(codes(&quadratic, Severity::Look).is_empty(), "{quadratic:?}");
    let forced = load_cell(Family::LineThroughZero);
    assert!(codes(&forced, Severity::Look).contains(&"forced-zero"), "{forced:?}");
    for f in line.iter().chain(&quadratic).chain(&forced) {
        println!("{} {}: {}", f.severity, f.code, f.message);
    }
}

/// A scale's factor worked out at 1, 2 and 3 kg: 48 400, 50 500 and 51 500.
#[test]
fn the_factor_that_was_not_one() {
    let factors = [48_400.0, 50_500.0, 51_500.0];
    let mut bench = Bench::new();
    for (x, factor) in [1.0, 2.0, 3.0].into_iter().zip(factors) {
        bench.apply(x, &[factor * x]);
    }
    let one = bench.family(Family::OnePoint).evaluate().findings;
    for f in &one {
        println!("{} {}: {}", f.severity, f.code, f.message);
    }
    assert_eq!(codes(&one, Severity::Look), ["one-point", "forced-zero"], "{one:?}");
    let message = &one.iter().find(|f| f.code == "one-point").unwrap().message;
    assert!(message.contains("51500 at 3 kN; the others give 48400 at 1 kN, 50500 at 2 kN"), "{message}");
}
