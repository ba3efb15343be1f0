//! No special path for the data that the program is measured by.

use super::{none, short, sources};

/// Names of published sets, as they would stand in code that knows one of them.
const SETS: [&str; 24] = [
    "Norris", "Pontius", "NoInt", "Filip", "Longley", "Wampler", "Misra", "Chwirut", "Lanczos", "DanWood", "Kirby",
    "Hahn1", "Nelson", "MGH", "Roszman", "ENSO", "Thurber", "BoxBOD", "Rat42", "Rat43", "Eckerle", "Bennett5",
    "NumAcc", "SmLs",
];

#[test]
fn the_core_knows_no_published_set() {
    let mut offences = Vec::new();
    for (path, text) in sources("core/src") {
        let name = short(&path);
        // What is built for tests only: files of their own, and whatever follows the mark inside a file.
        if name.contains("/tests") || name.ends_with("tests.rs") || for_tests(&text) {
            continue;
        }
        let code = text.split("#[cfg(test)]\nmod tests {").next().unwrap_or_default();
        let known = SETS.iter().filter(|set| code.contains(**set) || code.contains(&set.to_uppercase()));
        offences.extend(known.map(|set| format!("{name} names {set}")));
    }
    none(&offences, "a set that the program is measured by has no path of its own");
}

/// Files that their parents take in for tests only.
fn for_tests(text: &str) -> bool {
    ["//! Published data and small helpers shared by the tests", "//! Worked examples"]
        .iter()
        .any(|head| text.starts_with(head))
}
