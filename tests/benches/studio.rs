//! Benchmarks: `cargo bench -p assize-tests`. Nothing in a test depends on them.
//!
//! Medians on 2 shared cores (x86-64, no GPU), 2026-12-01: tension link 2.4 ms, photometer 4.7 ms, load cell 1.4 ms.
//! Before the digits to hand on, the quantification limit and the sized mistakes: 1.52 ms,
//! 3.75 ms, 0.95 ms.

use assize_core::project::evaluate::evaluate;
use assize_tests::demos::{SHIPPED_SEED, named};

fn main() {
    divan::main();
}

/// Everything that is computed from a demo: target below 2 ms for the tension link.
#[divan::bench(args = ["tension-link", "nitrate-photometer", "load-cell-nist"])]
fn evaluate_demo(bencher: divan::Bencher<'_, '_>, name: &str) {
    let demo = named(name, SHIPPED_SEED).expect("a demo of that name");
    bencher.bench(|| evaluate(demo.document.project()));
}
