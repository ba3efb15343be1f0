//! Reports, keys and checks as plain functions over files; they know no window.

use crate::{
    platform,
    rooms::{
        SignWith,
        record::{Checked, Good},
    },
    session::KnownKey,
};
use assize_core::{
    exchange::{
        report::{
            self,
            issue::{Issue, RENDERER},
        },
        verify::{Answer, Verification, verify},
    },
    project::{about::Signed, evaluate::evaluate},
    quantity::{Moment, Text},
    record::SigningKey,
    trail::Document,
};
use std::path::Path;

/// The pages of a draft and their number.
///
/// # Errors
/// Why there are none.
pub fn draft(document: &Document, at: Moment) -> Result<(Vec<u8>, usize), String> {
    let evaluation = evaluate(document.project());
    let rendered = report::pages(document, &evaluation, &issue(at)).map_err(|e| e.to_string())?;
    Ok((rendered.pdf, rendered.pages))
}

fn issue(at: Moment) -> Issue {
    Issue { renderer: RENDERER, program: env!("CARGO_PKG_VERSION").to_owned(), at, signer: None }
}

/// Writes a draft and says how many pages it has.
///
/// # Errors
/// Why not; a signed file is never written over.
pub fn write_draft(document: &Document, at: Moment, path: &Path) -> Result<usize, String> {
    let (pdf, pages) = draft(document, at)?;
    let there = platform::exists(path).then(|| platform::read(path)).transpose();
    let signed = |bytes: &Vec<u8>| bytes.windows(10).any(|w| w == b"/ByteRange");
    if there.map_err(|e| e.to_string())?.as_ref().is_some_and(signed) {
        return Err(format!("a signed file is never written over: {}", path.display()));
    }
    platform::write_whole(path, &pdf).map_err(|e| e.to_string())?;
    Ok(pages)
}

/// Signs a report and says what is to be entered about it; nothing is written yet.
///
/// # Errors
/// Everything that is missing, a wrong passphrase, a key that cannot be read.
pub fn sign(document: &Document, at: Moment, with: &SignWith) -> Result<(Vec<u8>, Signed), String> {
    let bytes = platform::read(&with.key).map_err(|e| e.to_string())?;
    let key = SigningKey::from_pkcs12(&bytes, &with.passphrase)
        .map_err(|e| format!("{e} (key file {})", with.key.display()))?;
    let evaluation = evaluate(document.project());
    let pdf = report::signed(document, &evaluation, &issue(at), &key, &with.meaning).map_err(|e| e.to_string())?;
    let signed = Signed {
        name: Text::from(key.name()),
        meaning: Text::from(with.meaning.as_str()),
        at,
        fingerprint: Text::from(key.fingerprint().to_string()),
        trail: Text::from(document.digest().hex()),
    };
    Ok((pdf, signed))
}

/// Writes a file that must not exist yet.
///
/// # Errors
/// What is there, or what the system says.
pub fn write_new(path: &Path, bytes: &[u8]) -> Result<(), String> {
    if platform::exists(path) {
        return Err(format!("there is a file already: {}", path.display()));
    }
    platform::write_whole(path, bytes).map_err(|e| e.to_string())
}

/// Makes a key file and returns the fingerprint of the key.
///
/// # Errors
/// What is there, or what went wrong; a key is never written over.
pub fn make_key(name: &str, path: &Path, passphrase: &str, at: Moment) -> Result<String, String> {
    let random = platform::random_bytes().map_err(|e| e.to_string())?;
    let key = SigningKey::create(name, at.timestamp(), &random).map_err(|e| e.to_string())?;
    let bytes = key.to_pkcs12(passphrase).map_err(|e| e.to_string())?;
    write_new(path, &bytes)?;
    Ok(key.fingerprint().to_string())
}

/// Checks a PDF.
///
/// # Errors
/// Why it cannot be checked at all.
pub fn check(path: &Path, known: &[KnownKey]) -> Result<Checked, String> {
    let pdf = platform::read(path).map_err(|e| e.to_string())?;
    let fingerprints: Vec<String> = known.iter().map(|k| k.fingerprint.clone()).collect();
    let found = verify(&pdf, &fingerprints).map_err(|e| e.to_string())?;
    let unknown = found.signatures.iter().find(|s| !s.known && !s.fingerprint.is_empty());
    Ok(Checked {
        path: path.to_owned(),
        answer: sentence(found.answer).to_owned(),
        good: good(found.answer),
        details: details(&found),
        unknown: unknown.map(|s| KnownKey { name: s.name.clone(), fingerprint: s.fingerprint.clone() }),
    })
}

fn good(answer: Answer) -> Good {
    match answer {
        Answer::UnalteredKnown => Good::Yes,
        Answer::UnalteredUnknown => Good::Open,
        Answer::Altered | Answer::DoesNotRecompute => Good::No,
    }
}

fn sentence(answer: Answer) -> &'static str {
    match answer {
        Answer::UnalteredKnown => {
            "Unaltered since it was signed, by a key that is known here; every figure recomputes."
        }
        Answer::UnalteredUnknown => {
            "Unaltered since it was signed, and every figure recomputes; whose key it is, only the signer can tell."
        }
        Answer::Altered => "Altered: this file is not as it was signed.",
        Answer::DoesNotRecompute => "It does not recompute: a printed figure does not follow from the record inside.",
    }
}

fn details(found: &Verification) -> Vec<String> {
    let mut lines: Vec<String> = found
        .signatures
        .iter()
        .map(|s| format!("Signed by {} ({}), {}, key {}", s.name, s.meaning, s.time, s.fingerprint))
        .collect();
    lines.push(format!("Trail intact: {}", if found.trail_intact { "yes" } else { "no" }));
    lines.push(format!("Figures compared: {}, differing: {}", found.figures_checked, found.figures_differing.len()));
    let differing = found.figures_differing.iter();
    lines.extend(differing.map(|d| format!("Page {}: printed {}, computed {}", d.page, d.printed, d.computed)));
    lines.extend(found.problems.iter().cloned());
    lines
}
