//! Simulates how often intervals hold the truth and advice names it, and writes both tables into
//! `tests/README.md`: `cargo rates`. With a number as argument: so many runs instead of 20 000.

use assize_tests::{
    advice,
    coverage::{replaced, scenarios, simulate, table},
};
use std::{env, error::Error, fs, num::NonZero, path::Path, thread};

/// Data sets a row of the coverage table.
const RUNS: usize = 20_000;

fn main() -> Result<(), Box<dyn Error>> {
    let runs = env::args().nth(1).map_or(Ok(RUNS), |text| text.parse())?;
    let threads = thread::available_parallelism().map_or(1, NonZero::get);
    let scenarios = scenarios();
    let intervals = table(&scenarios, &simulate(&scenarios, runs, threads));
    let advised = advice::table(&advice::score(advice::RUNS));
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("README.md");
    let document = fs::read_to_string(&path)?;
    let written = replaced(&document, "coverage", &intervals).and_then(|text| replaced(&text, "advice", &advised));
    fs::write(&path, written.ok_or("tests/README.md has lost a pair of markers")?)?;
    Ok(())
}
