//! The list of commands: which of them a typed text means.

use super::{Entry, TABLE};

/// Commands whose name or hint holds every typed word, those whose name begins with the text first.
#[must_use]
pub fn matching(typed: &str) -> Vec<&'static Entry> {
    let typed = typed.trim().to_lowercase();
    let holds = |entry: &&Entry| {
        let text = format!("{} {}", entry.name, entry.hint).to_lowercase();
        typed.split_whitespace().all(|word| text.contains(word))
    };
    let mut found: Vec<&'static Entry> = TABLE.iter().filter(holds).collect();
    found.sort_by_key(|entry| {
        let name = entry.name.to_lowercase();
        (!name.starts_with(&typed), !name.contains(&typed))
    });
    found
}
