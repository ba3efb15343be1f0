//! Helpers that the specifications share.

use super::build::Row;
use assize_core::{
    numerics::streams::Stream,
    project::about::Condition,
    quantity::Text,
    readings::Direction,
    standards::{StandardPapers, StatedUncertainty},
};

/// What is invented, in the words of every invented demo.
pub(super) const INVENTED: &str = "Invented demonstration data of an invented workshop, Skerrow Tideworks.";

pub(super) fn temperature(value: &str) -> Vec<Condition> {
    vec![Condition { name: Text::from("temperature"), value: Text::from(value) }]
}

pub(super) fn papers(identity: &str, certificate: &str, due: &str, uncertainty: StatedUncertainty) -> StandardPapers {
    StandardPapers {
        identity: Some(Text::from(identity)),
        certificate: Some(Text::from(certificate)),
        due: Some(Text::from(due)),
        uncertainty: Some(uncertainty),
        ..StandardPapers::default()
    }
}

/// A row with the reading rounded to the display.
pub(super) fn row(x: &str, y: f64, decimals: usize, direction: Direction) -> Row {
    Row { standard: x.to_owned(), reading: format!("{y:.decimals$}"), direction }
}

/// Applications in a seeded random order.
pub(super) fn shuffled<T>(mut items: Vec<T>, stream: &mut Stream) -> Vec<T> {
    for i in (1..items.len()).rev() {
        let j = stream.below(i as u64 + 1) as usize;
        items.swap(i, j);
    }
    items
}

pub(super) fn number(text: &str) -> f64 {
    text.parse().unwrap_or(f64::NAN)
}
