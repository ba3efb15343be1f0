//! Checking a PDF of unknown origin: its signatures, and what it carries.

use super::{
    attachments::attachments,
    cms::Container,
    found::{Found, signatures},
    gap::{SignedRange, container, signed_range},
    inspection::{Inspection, SignatureFinding},
    pdf::{self, ReadError},
    problem::Problem,
    revision::is_only_a_signature,
    sign::digest_without,
};
use lopdf::Document;

/// The only kind of signature that is read.
const KIND: &[u8] = b"ETSI.CAdES.detached";
/// Most bytes of page description that are unpacked for one page.
const PAGE_SIZE_LIMIT: usize = 64 << 20;

/// Says of any bytes what is signed in them, by whom, whether it is unchanged, and what the file carries.
///
/// Never fails and never panics: what cannot be read is a problem in the answer.
///
/// # Formula
/// A signature is intact if SHA-256 of the covered bytes is the one in its container, the container's attributes are
/// signed by the key of its certificate, and the container has exactly the form that follows from these.
///
/// # Shapes and units
/// `pdf`: any bytes.
///
/// # Source
/// ISO 32000-1:2008, 12.8.1; RFC 5652, 5.6; RFC 5035, 3 (signing certificate). The order of checks answers the attacks
/// on signed PDFs described by Mladenov et al., "1 Trillion Dollar Refund: How To Spoof PDF Signatures", CCS 2019.
#[must_use]
pub fn inspect_pdf(pdf: &[u8]) -> Inspection {
    let stopped = || {
        let reason = "the reader stopped".to_owned();
        unreadable(ReadError::Damaged { reason })
    };
    pdf::fenced(|| inspect(pdf)).unwrap_or_else(stopped)
}

/// Whether `pdf` is `base` with one or more signatures appended and nothing else. It does not say whether they hold:
/// ask [`inspect_pdf`].
///
/// With a report made again from its data as `base`, this compares every page of the signed file at once.
#[must_use]
pub fn only_signatures_follow(base: &[u8], pdf: &[u8]) -> bool {
    let follow = || {
        let document = pdf::read(pdf).ok()?;
        let mut problems = Vec::new();
        let placed = in_order(pdf, &document, signatures(&document, &mut problems));
        let beyond = |(_, range): &Placed<'_>| range.as_ref().map_or(true, |r| r.covered_to > base.len());
        let first = placed.iter().position(beyond)?;
        let (found, range) = &placed[first];
        let range = range.as_ref().ok()?;
        let begins = pdf.starts_with(base) && is_only_a_signature(base, pdf, range, found.request().as_ref());
        let goes_on = links(pdf, &placed)[first..].iter().all(|link| *link);
        Some(begins && goes_on && problems.is_empty())
    };
    pdf::fenced(follow).flatten().unwrap_or(false)
}

fn unreadable(error: ReadError) -> Inspection {
    Inspection { problems: vec![Problem::Unreadable(error)], ..Inspection::default() }
}

fn inspect(pdf: &[u8]) -> Inspection {
    let document = match pdf::read(pdf) {
        Ok(document) => document,
        Err(error) => return unreadable(error),
    };
    let mut problems = Vec::new();
    let found = signatures(&document, &mut problems);
    let placed = in_order(pdf, &document, found);
    match placed.last() {
        None => problems.push(Problem::NotSigned),
        Some((_, Ok(last))) if last.covered_to < pdf.len() => {
            let count = pdf.len() - last.covered_to;
            problems.push(Problem::Appended { count });
        }
        Some(_) => {}
    }
    Inspection {
        signatures: findings(pdf, &placed),
        attachments: attachments(&document, &mut problems),
        pages_text: pages_text(&document, &mut problems),
        problems,
    }
}

/// A signature and the bytes it covers.
type Placed<'a> = (Found<'a>, Result<SignedRange, Problem>);

/// The signatures in order of what they cover; those without a proper range last.
fn in_order<'a>(pdf: &[u8], document: &'a Document, found: Vec<Found<'a>>) -> Vec<Placed<'a>> {
    let mut placed: Vec<Placed<'_>> = found
        .into_iter()
        .map(|found| {
            let range = signed_range(pdf, document, found.signature);
            (found, range)
        })
        .collect();
    placed.sort_by_key(|(_, range)| range.as_ref().map_or(usize::MAX, |r| r.covered_to));
    placed
}

/// For each signature, whether what follows up to the next one's end is that next signature alone; for the last,
/// whether nothing follows.
fn links(pdf: &[u8], placed: &[Placed<'_>]) -> Vec<bool> {
    let link = |i: usize| match (&placed[i].1, placed.get(i + 1)) {
        (Ok(range), None) => range.covered_to == pdf.len(),
        (Ok(range), Some((next, Ok(next_range)))) => {
            is_only_a_signature(&pdf[..range.covered_to], pdf, next_range, next.request().as_ref())
        }
        _ => false,
    };
    (0..placed.len()).map(link).collect()
}

fn findings(pdf: &[u8], placed: &[Placed<'_>]) -> Vec<SignatureFinding> {
    let mut findings: Vec<_> = placed.iter().map(|one| finding(pdf, one)).collect();
    // From the last to the first: a signature covers the file if it is followed by intact ones that do.
    let mut rest_is_sound = true;
    for (i, follows) in links(pdf, placed).into_iter().enumerate().rev() {
        let covers = follows && rest_is_sound;
        findings[i].covers_whole_file = covers;
        // Where the range itself cannot be read, that is the problem already.
        if !covers && placed[i].1.is_ok() {
            findings[i].problems.push(Problem::Continued);
        }
        rest_is_sound = covers && findings[i].intact;
    }
    findings
}

fn finding(pdf: &[u8], (found, range): &Placed<'_>) -> SignatureFinding {
    let signed_at = found.signed_at();
    let time_text = signed_at.map_or_else(|| found.stated(b"M"), |at| at.strftime("%Y-%m-%d %H:%M:%S UTC").to_string());
    let mut finding = SignatureFinding {
        field_name: found.field_name(),
        name: String::new(),
        stated_name: found.stated(b"Name"),
        meaning: found.stated(b"Reason"),
        fingerprint: None,
        time_text,
        signed_at,
        intact: false,
        covers_whole_file: false,
        has_unchecked_timestamp: false,
        problems: Vec::new(),
    };
    match read_container(pdf, found, range) {
        Ok((range, container)) => judge(pdf, range, &container, &mut finding),
        Err(problem) => finding.problems.push(problem),
    }
    finding
}

fn read_container<'a>(
    pdf: &[u8],
    found: &Found<'_>,
    range: &'a Result<SignedRange, Problem>,
) -> Result<(&'a SignedRange, Container), Problem> {
    let range = range.as_ref().map_err(Clone::clone)?;
    match found.signature.get(b"SubFilter").and_then(lopdf::Object::as_name) {
        Ok(KIND) => {}
        other => {
            let kind = String::from_utf8_lossy(other.unwrap_or_default()).into_owned();
            return Err(Problem::Kind { kind });
        }
    }
    let container = container(pdf, range, found.signature)?;
    Ok((range, Container::read(&container)?))
}

/// Compares what the container states with the file and with its certificate.
fn judge(pdf: &[u8], range: &SignedRange, container: &Container, finding: &mut SignatureFinding) {
    let certificate = &container.certificate;
    finding.name = certificate.name();
    finding.fingerprint = Some(certificate.fingerprint());
    finding.has_unchecked_timestamp = container.timestamp.is_some();
    if digest_without(&pdf[..range.covered_to], range.gap.start, range.gap.end) != container.digest {
        finding.problems.push(Problem::Changed);
    }
    if !container.signature_holds() {
        finding.problems.push(Problem::WrongSignature);
    }
    finding.intact = finding.problems.is_empty();
    let stated = finding.signed_at;
    if !stated.is_some_and(|at| certificate.is_valid_at(at)) {
        finding.problems.push(Problem::NotValidThen { stated });
    }
}

fn pages_text(document: &Document, problems: &mut Vec<Problem>) -> Vec<String> {
    let page_text = |page: usize| {
        let number = u32::try_from(page).ok()?;
        let text = pdf::fenced(|| document.extract_text_with_limit(&[number], PAGE_SIZE_LIMIT));
        text?.ok()
    };
    let pages = 1..=pdf::pages(document).len();
    pages
        .map(|page| {
            page_text(page).unwrap_or_else(|| {
                problems.push(Problem::PageText { page });
                String::new()
            })
        })
        .collect()
}
