//! The layer table of the core: arrows only downward, no clock, no file, no window.

use super::{none, short, sources};

/// Module and layer. Adding a module or an arrow means changing this table: a visible, discussed change.
const LAYERS: [(&str, u8); 14] = [
    ("numerics", 0),
    ("distributions", 0),
    ("quantity", 1),
    ("standards", 1),
    ("readings", 1),
    ("model", 2),
    ("fit", 2),
    ("inference", 3),
    ("zero", 3),
    ("convert", 3),
    ("project", 6),
    ("trail", 6),
    ("record", 7),
    ("exchange", 8),
];

/// Arrows inside one layer; each pair in one direction only.
const INSIDE: [(&str, &str); 9] = [
    ("distributions", "numerics"),
    ("standards", "quantity"),
    ("readings", "quantity"),
    ("readings", "standards"),
    ("fit", "model"),
    ("zero", "inference"),
    ("zero", "convert"),
    ("inference", "convert"),
    ("trail", "project"),
];

fn layer(module: &str) -> Option<u8> {
    LAYERS.iter().find(|(name, _)| *name == module).map(|(_, layer)| *layer)
}

/// Modules named after `crate::`, also inside braces, in code (not in comments).
fn named(text: &str) -> Vec<(usize, String)> {
    let mut found = Vec::new();
    let code: Vec<String> =
        text.lines().map(|l| if l.trim_start().starts_with("//") { String::new() } else { l.to_owned() }).collect();
    let joined = code.join("\n");
    for (at, _) in joined.match_indices("crate::") {
        let line = joined[..at].matches('\n').count() + 1;
        let rest = &joined[at + "crate::".len()..];
        if let Some(list) = rest.strip_prefix('{') {
            found.extend(top_level(list).into_iter().map(|m| (line, m)));
        } else {
            found.push((line, word(rest)));
        }
    }
    found
}

fn word(text: &str) -> String {
    text.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect()
}

/// First names of a braced list, nested braces skipped.
fn top_level(list: &str) -> Vec<String> {
    let (mut depth, mut start, mut found) = (0, 0, Vec::new());
    for (i, c) in list.char_indices() {
        match c {
            '{' => depth += 1,
            '}' if depth == 0 => {
                found.push(word(list[start..i].trim()));
                break;
            }
            '}' => depth -= 1,
            ',' if depth == 0 => {
                found.push(word(list[start..i].trim()));
                start = i + 1;
            }
            _ => {}
        }
    }
    found.retain(|w| !w.is_empty());
    found
}

#[test]
fn arrows_point_downward() {
    let mut offences = Vec::new();
    for (path, text) in sources("core/src") {
        let below = short(&path).replace("core/src/", "");
        let Some((from, _)) = below.split_once('/') else { continue };
        let Some(here) = layer(from) else {
            offences.push(format!("{}: module {from} is not in the table", short(&path)));
            continue;
        };
        for (line, to) in named(&text) {
            let fine = to == from
                || layer(&to)
                    .is_some_and(|there| there < here || (there == here && INSIDE.contains(&(from, to.as_str()))));
            if !fine {
                offences.push(format!("{}:{line}: {from} → {to}", short(&path)));
            }
        }
    }
    none(&offences, "the core's layers only know layers below them");
}

#[test]
fn the_core_knows_no_clock_file_window_or_chance() {
    const BANNED: [&str; 11] = [
        "SystemTime",
        "Instant::now",
        "Timestamp::now",
        "Zoned::now",
        "std::fs",
        "std::env",
        "std::net",
        "std::process",
        "std::thread",
        "egui",
        "getrandom",
    ];
    let mut offences = Vec::new();
    for (path, text) in sources("core/src") {
        for (n, line) in (1..).zip(text.lines()) {
            let code = line.split("//").next().unwrap_or_default();
            let in_tests = short(&path).contains("tests");
            if let Some(word) = BANNED.iter().find(|b| code.contains(**b)).filter(|_| !in_tests) {
                offences.push(format!("{}:{n}: {word}", short(&path)));
            }
        }
    }
    none(&offences, "bytes, times and random bytes come into the core as values");
}

#[test]
fn the_reader_of_arrows_sees_nested_lists() {
    let text = "use crate::{fit::{self, Fit}, model::Family};\n// crate::window\nlet x = crate::zero::band();";
    let names: Vec<String> = named(text).into_iter().map(|(_, n)| n).collect();
    assert_eq!(names, ["fit", "model", "zero"]);
}
