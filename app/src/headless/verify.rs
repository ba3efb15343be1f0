//! `assize verify`: checks a report.

use super::{Failed, print};
use crate::platform;
use assize_core::exchange::verify::{Answer, Verification, verify};
use clap::Args;
use serde_json::{Value, json};
use std::path::PathBuf;

/// Options of `verify`.
#[derive(Debug, Args)]
pub struct Options {
    /// The report.
    file: PathBuf,
    /// Prints one JSON document.
    #[arg(long)]
    json: bool,
    /// Answers "no" when the signer is not known.
    #[arg(long)]
    require_known: bool,
    /// Fingerprint of a key whose owner is known. May be repeated.
    #[arg(long)]
    fingerprint: Vec<String>,
}

/// Carries it out.
pub fn run(options: &Options) -> Result<(), Failed> {
    for given in &options.fingerprint {
        let digits = given.chars().filter(char::is_ascii_hexdigit).count();
        let others = given.chars().any(|c| !c.is_ascii_hexdigit() && !c.is_whitespace() && c != ':');
        if digits != 64 || others {
            return Err(Failed::Wrong(format!(
                "--fingerprint {given:?} is not a fingerprint: 64 hexadecimal digits are accepted"
            )));
        }
    }
    let pdf = platform::read(&options.file)?;
    let found =
        verify(&pdf, &options.fingerprint).map_err(|e| Failed::Wrong(format!("{}: {e}", options.file.display())))?;
    print(&if options.json { format!("{:#}", document(&found)) } else { sentence(&found) });
    match found.answer {
        Answer::UnalteredKnown => Ok(()),
        Answer::UnalteredUnknown if !options.require_known => Ok(()),
        _ => Err(Failed::No),
    }
}

/// The answer in one sentence, details below.
fn sentence(found: &Verification) -> String {
    let mut lines = vec![match found.answer {
        Answer::UnalteredKnown => "Unaltered, signed with a known key.".to_owned(),
        Answer::UnalteredUnknown => {
            "Unaltered since it was signed; whose key it is, only a fingerprint from the signer can tell.".to_owned()
        }
        Answer::Altered => "ALTERED: this file is not as it was signed.".to_owned(),
        Answer::DoesNotRecompute => {
            "DOES NOT RECOMPUTE: a printed figure does not follow from the record inside.".to_owned()
        }
    }];
    for s in &found.signatures {
        lines.push(format!("  {} ({}), {}, key {}", s.name, s.meaning, s.time, s.fingerprint));
    }
    lines.push(format!("  trail intact: {}", if found.trail_intact { "yes" } else { "no" }));
    lines.push(format!("  figures compared: {}, differing: {}", found.figures_checked, found.figures_differing.len()));
    lines.extend(
        found
            .figures_differing
            .iter()
            .map(|d| format!("  page {}: printed {}, computed {}", d.page, d.printed, d.computed)),
    );
    lines.extend(found.problems.iter().map(|p| format!("  {p}")));
    lines.join("\n")
}

fn document(found: &Verification) -> Value {
    let signatures: Vec<Value> = found
        .signatures
        .iter()
        .map(|s| {
            json!({
                "name": s.name, "meaning": s.meaning, "fingerprint": s.fingerprint, "time": s.time, "intact": s.intact,
                "covers_whole_file": s.covers_whole_file, "trust": if s.known { "known key" } else { "unknown key" },
            })
        })
        .collect();
    let differing: Vec<Value> = found
        .figures_differing
        .iter()
        .map(|d| json!({"page": d.page, "printed": d.printed, "computed": d.computed}))
        .collect();
    json!({
        "schema": "assize.verify/1",
        "answer": found.answer.words(),
        "signatures": signatures,
        "trail_intact": found.trail_intact,
        "figures_checked": found.figures_checked,
        "figures_differing": differing,
        "problems": found.problems,
        "ok": match found.answer {
            Answer::UnalteredKnown => json!(true),
            Answer::UnalteredUnknown => Value::Null,
            Answer::Altered | Answer::DoesNotRecompute => json!(false),
        },
    })
}
