//! Reading a PDF of unknown origin: a fence around the reader, and short ways to its dictionaries.

use lopdf::{Dictionary, Document, Object, ObjectId, xref::XrefType};
use std::panic::{AssertUnwindSafe, catch_unwind};

/// Most pages that are looked at.
const PAGE_LIMIT: usize = 10_000;
/// Most nodes of a tree that are looked at.
const NODE_LIMIT: usize = 10_000;

/// Why a file cannot be read as a PDF that starts at its first byte.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum ReadError {
    /// The file does not begin with `%PDF-`.
    #[error("the file does not begin like a PDF")]
    NoHeader,
    /// The file needs a password.
    #[error("the file is encrypted")]
    Encrypted,
    /// The reader gave up, or had to guess where the objects are.
    #[error("the file's structure is damaged: {reason}")]
    Damaged {
        /// What the reader met.
        reason: String,
    },
}

/// Runs `work` on bytes of unknown origin; a panic inside a library becomes `None`.
///
/// The reader is not ours, and whoever checks a file must get an answer for any bytes.
pub(super) fn fenced<T>(work: impl FnOnce() -> T) -> Option<T> {
    catch_unwind(AssertUnwindSafe(work)).ok()
}

/// Reads `bytes`, without repairs: a table of objects that had to be guessed counts as damage.
pub(super) fn read(bytes: &[u8]) -> Result<Document, ReadError> {
    if !bytes.starts_with(b"%PDF-") {
        return Err(ReadError::NoHeader);
    }
    let damaged = |reason: &str| ReadError::Damaged { reason: reason.to_owned() };
    let document = fenced(|| Document::load_mem(bytes))
        .ok_or_else(|| damaged("the reader stopped"))?
        .map_err(|e| damaged(&e.to_string()))?;
    if document.is_encrypted() || document.was_encrypted() {
        return Err(ReadError::Encrypted);
    }
    if document.xref_recovery.is_some() {
        return Err(damaged("the table of objects is not where the file says"));
    }
    Ok(document)
}

/// Whether the last table of objects is a classic one (`xref`), not a compressed stream.
pub(super) fn has_classic_table(bytes: &[u8], document: &Document) -> bool {
    let classic = matches!(document.reference_table.cross_reference_type, XrefType::CrossReferenceTable);
    classic && bytes.get(document.xref_start..).is_some_and(|rest| rest.starts_with(b"xref"))
}

/// The entry `key` of `dictionary`, followed to the object it refers to.
pub(super) fn entry<'a>(document: &'a Document, dictionary: &'a Dictionary, key: &[u8]) -> Option<&'a Object> {
    dictionary.get_deref(key, document).ok()
}

/// The entry `key` as a dictionary.
pub(super) fn dictionary<'a>(document: &'a Document, of: &'a Dictionary, key: &[u8]) -> Option<&'a Dictionary> {
    entry(document, of, key)?.as_dict().ok()
}

/// The entry `key` as an array; empty where it is missing or something else.
pub(super) fn array<'a>(document: &'a Document, of: &'a Dictionary, key: &[u8]) -> &'a [Object] {
    entry(document, of, key).and_then(|o| o.as_array().ok()).map_or(&[], Vec::as_slice)
}

/// The entry `key` as text; `None` where it is missing or not text.
pub(super) fn text(document: &Document, of: &Dictionary, key: &[u8]) -> Option<String> {
    lopdf::decode_text_string(entry(document, of, key)?).ok()
}

/// The entry `key` as exactly `N` numbers.
pub(super) fn numbers<const N: usize>(document: &Document, of: &Dictionary, key: &[u8]) -> Option<[f32; N]> {
    let numbers: Vec<f32> = array(document, of, key).iter().map(|n| n.as_float().ok()).collect::<Option<_>>()?;
    numbers.try_into().ok()
}

/// The entry `key` as a name.
pub(super) fn name<'a>(document: &'a Document, of: &'a Dictionary, key: &[u8]) -> Option<&'a [u8]> {
    entry(document, of, key)?.as_name().ok()
}

/// The dictionary behind `object`, whether it stands there itself or is referred to.
pub(super) fn as_dictionary<'a>(document: &'a Document, object: &'a Object) -> Option<&'a Dictionary> {
    document.dereference(object).ok()?.1.as_dict().ok()
}

/// The dictionaries of a tree in order, parents before children; children stand in `Kids`.
///
/// Nodes are taken from a stack and counted, so neither depth nor loops nor sheer number can exhaust anything.
pub(super) fn walk<'a>(
    document: &'a Document,
    roots: impl DoubleEndedIterator<Item = &'a Object>,
) -> Vec<&'a Dictionary> {
    let mut stack: Vec<&Object> = roots.rev().collect();
    let mut nodes = Vec::new();
    while let Some(object) = stack.pop()
        && nodes.len() < NODE_LIMIT
    {
        if let Some(node) = as_dictionary(document, object) {
            nodes.push(node);
            let room = NODE_LIMIT.saturating_sub(stack.len());
            let kids = array(document, node, b"Kids");
            stack.extend(kids.iter().take(room).rev());
        }
    }
    nodes
}

/// The pages in order. A tree that leads to the same page over and over is cut off.
pub(super) fn pages(document: &Document) -> Vec<ObjectId> {
    document.page_iter().take(PAGE_LIMIT).collect()
}
