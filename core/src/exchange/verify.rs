//! Checks a report: signatures, trail, and every printed figure computed afresh from the record inside.

use super::report::{
    self,
    issue::{Issue, RENDERER},
};
use crate::{
    project::evaluate::evaluate,
    record::{Inspection, Problem, inspect_pdf, only_signatures_follow},
    trail::Document,
};

/// The answer, in one of four.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Answer {
    /// As it was signed, by a known key.
    UnalteredKnown,
    /// As it was signed; whose key it is must be learnt elsewhere.
    UnalteredUnknown,
    /// Not as it was signed.
    Altered,
    /// Signed as it is, but a printed figure does not follow from the record inside.
    DoesNotRecompute,
}

impl Answer {
    /// The words of the answer.
    #[must_use]
    pub fn words(self) -> &'static str {
        match self {
            Self::UnalteredKnown => "unaltered, signer known",
            Self::UnalteredUnknown => "unaltered, signer unknown",
            Self::Altered => "altered",
            Self::DoesNotRecompute => "does not recompute",
        }
    }
}

/// A signature as found.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Signature {
    /// Name in the certificate.
    pub name: String,
    /// Meaning.
    pub meaning: String,
    /// Fingerprint, hexadecimal; blank when it cannot be read.
    pub fingerprint: String,
    /// Time as stated.
    pub time: String,
    /// What was signed is unchanged.
    pub intact: bool,
    /// Nothing was added behind it but further signatures.
    pub covers_whole_file: bool,
    /// Its fingerprint is among the known ones.
    pub known: bool,
}

/// A printed text that does not follow from the record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Difference {
    /// Page, from 1.
    pub page: usize,
    /// As printed.
    pub printed: String,
    /// As computed from the record.
    pub computed: String,
}

/// What a check found.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Verification {
    /// The answer.
    pub answer: Answer,
    /// Signatures in order.
    pub signatures: Vec<Signature>,
    /// The chain of the trail holds.
    pub trail_intact: bool,
    /// Printed figures that were compared.
    pub figures_checked: usize,
    /// Those that differ.
    pub figures_differing: Vec<Difference>,
    /// Everything that was found wrong, one sentence each.
    pub problems: Vec<String>,
}

/// Why a file cannot be checked at all.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum NotChecked {
    /// No PDF, or not one of ours.
    #[error("this is not a report that can be checked: {reason}")]
    NotAReport {
        /// Why.
        reason: String,
    },
    /// A draft.
    #[error("this report carries no signature: a draft cannot be checked")]
    Unsigned,
}

/// Checks a report on any machine.
///
/// `known`: fingerprints (64 hexadecimal digits) of keys whose owner is known.
///
/// # Errors
/// [`NotChecked`] for files that are no signed report; a damaged one is answered, not refused.
pub fn verify(pdf: &[u8], known: &[String]) -> Result<Verification, NotChecked> {
    if !pdf.starts_with(b"%PDF-") {
        return Err(NotChecked::NotAReport { reason: "it does not begin like a PDF file".to_owned() });
    }
    let inspection = inspect_pdf(pdf);
    if inspection.problems == [Problem::NotSigned] && issue_of(&inspection).is_none_or(|issue| issue.signer.is_none()) {
        return Err(NotChecked::Unsigned);
    }
    let signatures = signatures(&inspection, known);
    let mut problems: Vec<String> = inspection.problems.iter().map(ToString::to_string).collect();
    for s in &inspection.signatures {
        problems.extend(s.problems.iter().map(|p| format!("signature of {}: {p}", s.name)));
    }
    let again = recompute(pdf, &inspection);
    problems.extend(again.problem.clone());
    let answer = if !inspection.is_sound() || !again.trail_intact {
        Answer::Altered
    } else if again.problem.is_some() || !again.differing.is_empty() {
        Answer::DoesNotRecompute
    } else if signatures.iter().all(|s| s.known) {
        Answer::UnalteredKnown
    } else {
        Answer::UnalteredUnknown
    };
    Ok(Verification {
        answer,
        signatures,
        trail_intact: again.trail_intact,
        figures_checked: again.checked,
        figures_differing: again.differing,
        problems,
    })
}

fn signatures(inspection: &Inspection, known: &[String]) -> Vec<Signature> {
    let plain = |text: &str| text.chars().filter(char::is_ascii_hexdigit).collect::<String>().to_lowercase();
    let known: Vec<String> = known.iter().map(|k| plain(k)).collect();
    inspection
        .signatures
        .iter()
        .map(|s| {
            let fingerprint = s.fingerprint.as_ref().map(crate::record::Fingerprint::hex).unwrap_or_default();
            Signature {
                name: s.name.clone(),
                meaning: s.meaning.clone(),
                known: !fingerprint.is_empty() && known.contains(&fingerprint.to_lowercase()),
                fingerprint,
                time: s.time_text.clone(),
                intact: s.intact,
                covers_whole_file: s.covers_whole_file,
            }
        })
        .collect()
}

struct Again {
    trail_intact: bool,
    checked: usize,
    differing: Vec<Difference>,
    problem: Option<String>,
}

impl Again {
    fn stopped(trail_intact: bool, problem: String) -> Self {
        Self { trail_intact, checked: 0, differing: Vec::new(), problem: Some(problem) }
    }
}

fn attached<'a>(inspection: &'a Inspection, name: &str) -> Option<&'a [u8]> {
    inspection.attachments.iter().find(|a| a.name == name).map(|a| &a.bytes[..])
}

fn issue_of(inspection: &Inspection) -> Option<Issue> {
    attached(inspection, report::ISSUE).and_then(|bytes| serde_json::from_slice(bytes).ok())
}

/// Evaluates the attached project afresh, composes the pages again and compares.
fn recompute(pdf: &[u8], inspection: &Inspection) -> Again {
    let Some(bytes) = attached(inspection, report::PROJECT) else {
        return Again::stopped(false, format!("the attachment {} is missing", report::PROJECT));
    };
    let document = match Document::from_bytes(bytes) {
        Ok((document, None)) => document,
        Ok((_, Some(_))) => {
            return Again::stopped(false, "the attached project ends in the middle of an entry".to_owned());
        }
        Err(e) => return Again::stopped(false, format!("the attached project: {e}")),
    };
    let Some(issue) = issue_of(inspection) else {
        return Again::stopped(true, format!("the attachment {} is missing or cannot be read", report::ISSUE));
    };
    let evaluation = evaluate(document.project());
    let fresh = match report::pages(&document, &evaluation, &issue) {
        Ok(rendered) => rendered.pdf,
        Err(e) => return Again::stopped(true, e.to_string()),
    };
    let fresh_pages = inspect_pdf(&fresh).pages_text;
    let checked = fresh_pages.iter().map(|p| figures(p).count()).sum();
    if only_signatures_follow(&fresh, pdf) {
        return Again { trail_intact: true, checked, differing: Vec::new(), problem: None };
    }
    let differing = compare(&inspection.pages_text, &fresh_pages);
    let newer = issue.renderer != RENDERER;
    let same_words = differing.is_empty();
    let problem = match (same_words, newer) {
        (true, true) | (false, _) => None,
        (true, false) => Some("the pages carry the same words but are not those that the record gives".to_owned()),
    };
    Again { trail_intact: true, checked, differing, problem }
}

/// Words of a page that hold a figure.
fn figures(page: &str) -> impl Iterator<Item = &str> {
    page.split_whitespace().filter(|w| w.bytes().any(|b| b.is_ascii_digit()))
}

/// Word by word; a page with more or fewer words is one difference.
fn compare(printed: &[String], computed: &[String]) -> Vec<Difference> {
    let mut found = Vec::new();
    if printed.len() != computed.len() {
        let pages = |n: usize| format!("{n} pages");
        found.push(Difference { page: 0, printed: pages(printed.len()), computed: pages(computed.len()) });
    }
    for (page, (p, c)) in (1..).zip(printed.iter().zip(computed)) {
        let (p, c): (Vec<&str>, Vec<&str>) = (p.split_whitespace().collect(), c.split_whitespace().collect());
        let mut pairs = p.iter().zip(&c).filter(|(a, b)| a != b);
        found.extend(pairs.by_ref().take(20).map(|(a, b)| Difference {
            page,
            printed: (*a).to_owned(),
            computed: (*b).to_owned(),
        }));
        if p.len() != c.len() {
            let words = |n: usize| format!("{n} words");
            found.push(Difference { page, printed: words(p.len()), computed: words(c.len()) });
        }
    }
    found
}
