//! Files and functions stay short enough to be read in one go.

use super::{none, short, sources};

const FILE: usize = 400;
const FUNCTION: usize = 60;

#[test]
fn files_stay_below_400_lines() {
    let mut offences = Vec::new();
    for folder in ["core/src", "app/src", "tests"] {
        for (path, text) in sources(folder) {
            let lines = text.lines().count();
            if lines > FILE {
                offences.push(format!("{}: {lines} lines", short(&path)));
            }
        }
    }
    none(&offences, "a file of more than 400 lines holds more than one idea");
}

#[test]
fn functions_stay_below_60_lines() {
    let mut offences = Vec::new();
    for folder in ["core/src", "app/src", "tests"] {
        for (path, text) in sources(folder) {
            offences.extend(
                long_functions(&text).into_iter().map(|(line, n)| format!("{}:{line}: {n} lines", short(&path))),
            );
        }
    }
    none(&offences, "a function of more than 60 lines does more than one thing");
}

/// Line number and length of each function that is too long; its end is the brace at its own indent.
fn long_functions(text: &str) -> Vec<(usize, usize)> {
    let lines: Vec<&str> = text.lines().collect();
    let mut found = Vec::new();
    for (start, line) in lines.iter().enumerate() {
        let indent = line.len() - line.trim_start().len();
        let head = line.trim_start();
        let is_fn = head.starts_with("fn ") || (head.starts_with("pub") && head.contains(" fn "));
        // A method that a trait only asks for ends before any brace opens.
        let first_sign = lines[start..].iter().find(|l| l.ends_with('{') || l.ends_with(';') || l.ends_with('}'));
        if !is_fn || first_sign.is_some_and(|l| l.ends_with(';')) {
            continue;
        }
        let close = format!("{}}}", " ".repeat(indent));
        let end = lines[start..].iter().position(|l| **l == close).unwrap_or(0);
        if end >= FUNCTION {
            found.push((start + 1, end + 1));
        }
    }
    found
}

#[test]
fn a_long_function_is_noticed() {
    let text = format!("fn short() {{\n}}\nfn long() {{\n{}}}\n", "    x();\n".repeat(70));
    assert_eq!(long_functions(&text), [(3, 72)]);
    let asked = format!(
        "trait T {{\n    fn asked(\n        &self,\n    ) -> u8;\n{}    fn given() {{\n    }}\n}}\n",
        "    // x\n".repeat(70)
    );
    assert_eq!(long_functions(&asked), []);
}
