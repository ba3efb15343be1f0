//! Many runs over all cores, with the same counts for any number of threads.

use super::{SEED, scenario::Scenario};
use assize_core::numerics::streams::Stream;
use std::{
    sync::{
        Mutex,
        atomic::{AtomicUsize, Ordering},
    },
    thread,
};

/// Runs that share one stream of random numbers.
const BLOCK: usize = 250;

/// How often each answer of a scenario held.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Outcome {
    /// Number of runs.
    pub runs: usize,
    /// Answers that held, row by row and place by place.
    pub held: Vec<Vec<usize>>,
}

impl Outcome {
    fn empty(scenario: &Scenario) -> Self {
        Self { runs: 0, held: scenario.rows.iter().map(|row| vec![0; row.expected.len()]).collect() }
    }

    /// Rate at which the answer of a row at a place held.
    #[must_use]
    pub fn rate(&self, row: usize, place: usize) -> f64 {
        self.held[row][place] as f64 / self.runs as f64
    }

    /// One Monte-Carlo SD of a rate whose true value is `rate`.
    #[must_use]
    pub fn monte_carlo_sd(&self, rate: f64) -> f64 {
        (rate * (1.0 - rate) / self.runs as f64).sqrt()
    }

    fn add(&mut self, other: &Self) {
        self.runs += other.runs;
        for (mine, theirs) in self.held.iter_mut().flatten().zip(other.held.iter().flatten()) {
            *mine += theirs;
        }
    }
}

/// Simulates every scenario `runs` times on `threads` threads; outcomes in the order of the scenarios.
///
/// Every block of runs has a stream of its own, chosen by the scenario's name and the block's number, so
/// neither the threads nor the other scenarios change a count.
#[must_use]
pub fn simulate(scenarios: &[Scenario], runs: usize, threads: usize) -> Vec<Outcome> {
    let blocks = runs.div_ceil(BLOCK).max(1);
    let next = AtomicUsize::new(0);
    let total = Mutex::new(scenarios.iter().map(Outcome::empty).collect::<Vec<_>>());
    let work = || loop {
        let job = next.fetch_add(1, Ordering::Relaxed);
        let Some(scenario) = scenarios.get(job / blocks) else { break };
        let block = job % blocks;
        let size = BLOCK.min(runs.saturating_sub(block * BLOCK));
        let part = one_block(scenario, block as u64, size);
        if let Ok(mut total) = total.lock() {
            total[job / blocks].add(&part);
        }
    };
    thread::scope(|scope| {
        for _ in 0..threads.max(1) {
            scope.spawn(work);
        }
    });
    total.into_inner().unwrap_or_default()
}

fn one_block(scenario: &Scenario, block: u64, size: usize) -> Outcome {
    let mut stream = Stream::new(SEED ^ hash(scenario.name), block);
    let mut outcome = Outcome::empty(scenario);
    for _ in 0..size {
        outcome.runs += 1;
        // Data that cannot be fitted give no interval, and no interval does not hold.
        let Ok(fit) = scenario.draw(&mut stream) else { continue };
        for (row, held) in scenario.rows.iter().zip(&mut outcome.held) {
            let answers = row.question.holds(&fit, scenario, &mut stream);
            for (count, held) in held.iter_mut().zip(answers) {
                *count += usize::from(held);
            }
        }
    }
    outcome
}

/// FNV-1a of a name.
pub(crate) fn hash(name: &str) -> u64 {
    let mix = |h: u64, byte: u8| (h ^ u64::from(byte)).wrapping_mul(0x0000_0100_0000_01b3);
    name.bytes().fold(0xcbf2_9ce4_8422_2325, mix)
}
