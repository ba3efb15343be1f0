//! Where a signature stands in its file, and what it covers.

use super::{pdf, problem::Problem};
use der::{Decode, Encode, Header, SliceReader};
use lopdf::{Dictionary, Document, Object};
use std::ops::Range;

/// The bytes that one signature covers: everything from the first byte to `covered_to` but the gap.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct SignedRange {
    /// Where the signature itself stands, its angle brackets included.
    pub(super) gap: Range<usize>,
    /// The first byte that is not covered any more.
    pub(super) covered_to: usize,
}

/// Reads `ByteRange`: from the first byte, with one gap in it.
pub(super) fn signed_range(pdf: &[u8], document: &Document, signature: &Dictionary) -> Result<SignedRange, Problem> {
    let numbers: Vec<usize> = pdf::array(document, signature, b"ByteRange")
        .iter()
        .map(|n| n.as_i64().ok().and_then(|n| usize::try_from(n).ok()))
        .collect::<Option<_>>()
        .ok_or(Problem::Range)?;
    let [0, gap_start, gap_end, rest] = numbers[..] else {
        return Err(Problem::Range);
    };
    let covered_to = gap_end.checked_add(rest).ok_or(Problem::Range)?;
    if gap_start >= gap_end || covered_to > pdf.len() {
        return Err(Problem::Range);
    }
    Ok(SignedRange { gap: gap_start..gap_end, covered_to })
}

/// The container in the gap: one string of lower-case hexadecimal digits, DER and then zeros only, and the very string
/// that the signature dictionary holds.
pub(super) fn container(pdf: &[u8], range: &SignedRange, signature: &Dictionary) -> Result<Vec<u8>, Problem> {
    let digits =
        pdf[range.gap.clone()].strip_prefix(b"<").and_then(|rest| rest.strip_suffix(b">")).ok_or(Problem::Gap)?;
    let bytes = decode(digits).ok_or(Problem::Gap)?;
    let stated = signature.get(b"Contents").and_then(Object::as_str);
    if stated.ok() != Some(bytes.as_slice()) {
        return Err(Problem::Gap);
    }
    let length = der_length(&bytes).ok_or(Problem::Gap)?;
    if bytes[length..].iter().any(|b| *b != 0) {
        return Err(Problem::Gap);
    }
    Ok(bytes[..length].to_vec())
}

/// Length in bytes of the DER value that `bytes` begin with.
fn der_length(bytes: &[u8]) -> Option<usize> {
    let header = Header::decode(&mut SliceReader::new(bytes).ok()?).ok()?;
    let total = (header.encoded_len().ok()? + header.length()).ok()?;
    let total = usize::try_from(total).ok()?;
    (total <= bytes.len()).then_some(total)
}

fn decode(digits: &[u8]) -> Option<Vec<u8>> {
    let nibble = |digit: u8| match digit {
        b'0'..=b'9' => Some(digit - b'0'),
        b'a'..=b'f' => Some(digit - b'a' + 10),
        _ => None,
    };
    let pairs = digits.chunks_exact(2);
    if !pairs.remainder().is_empty() {
        return None;
    }
    pairs.map(|pair| Some(nibble(pair[0])? << 4 | nibble(pair[1])?)).collect()
}
