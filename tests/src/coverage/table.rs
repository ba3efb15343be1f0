//! The outcomes as a table in Markdown.

use super::{LEVEL, Outcome, scenario::Scenario};
use std::fmt::Write as _;

/// One row for each question of each scenario, one column for each place.
#[must_use]
pub fn table(scenarios: &[Scenario], outcomes: &[Outcome]) -> String {
    let runs = outcomes.first().map_or(0, |o| o.runs);
    let error = outcomes.first().map_or(0.0, |o| o.monte_carlo_sd(LEVEL));
    let mut text = format!(
        "{runs} simulated data sets a row, nominal {LEVEL}; one Monte-Carlo SD is {error:.4}. In brackets: the rate \
         to be expected where it is another one.\n\n| data | interval | low | middle | high |\n|---|---|---|---|---|\n"
    );
    for (scenario, outcome) in scenarios.iter().zip(outcomes) {
        for (index, row) in scenario.rows.iter().enumerate() {
            let name = if index == 0 { heading(scenario) } else { String::new() };
            let _ = write!(text, "| {name} | {} |", row.question.words());
            for place in 0..3 {
                let cell = row.expected.get(place).map_or(String::new(), |e| rate(outcome.rate(index, place), *e));
                let _ = write!(text, " {cell} |");
            }
            text.push('\n');
        }
    }
    text
}

/// Name and places.
fn heading(scenario: &Scenario) -> String {
    let places: Vec<String> = scenario.places.iter().map(f64::to_string).collect();
    format!("{}; at {}", scenario.name, places.join(", "))
}

fn rate(found: f64, expected: f64) -> String {
    if (expected - LEVEL).abs() < 1e-12 { format!("{found:.4}") } else { format!("{found:.4} ({expected:.3})") }
}
