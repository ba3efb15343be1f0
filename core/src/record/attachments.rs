//! The files carried inside a PDF (ISO 32000-1:2008, 7.11.4; associated files of ISO 19005-3, 6.8).

use super::{
    inspection::{Attachment, Relationship},
    pdf,
    problem::Problem,
};
use lopdf::{Document, Object, ObjectId};
use std::collections::BTreeSet;

/// Most bytes that are unpacked for all attachments together.
const SIZE_LIMIT: usize = 256 << 20;
/// Most attachments that are looked at.
const COUNT_LIMIT: usize = 10_000;

/// The attachments in the order of the file's list, then associated files that the list lacks.
pub(super) fn attachments(document: &Document, problems: &mut Vec<Problem>) -> Vec<Attachment> {
    let Ok(catalog) = document.catalog() else {
        return Vec::new();
    };
    let root =
        pdf::dictionary(document, catalog, b"Names").and_then(|names| pdf::entry(document, names, b"EmbeddedFiles"));
    let nodes = pdf::walk(document, root.into_iter());
    // A name tree lists names and values in turn.
    let listed = nodes.into_iter().flat_map(|node| pdf::array(document, node, b"Names").iter().skip(1).step_by(2));
    let associated = pdf::array(document, catalog, b"AF").iter();
    let mut seen = BTreeSet::new();
    let mut found: Vec<Attachment> = Vec::new();
    let mut room = SIZE_LIMIT;
    for specification in listed.chain(associated).take(COUNT_LIMIT) {
        if is_new(specification, &mut seen) {
            match attachment(document, specification, &mut room) {
                Ok(attachment) if found.iter().any(|other| other.name == attachment.name) => {
                    problems.push(Problem::SameName { name: attachment.name });
                }
                Ok(attachment) => found.push(attachment),
                Err(name) => problems.push(Problem::Attachment { name }),
            }
        }
    }
    found
}

/// Objects that stand in two lists are taken once; those without a number cannot be the same.
fn is_new(object: &Object, seen: &mut BTreeSet<ObjectId>) -> bool {
    object.as_reference().map_or(true, |id| seen.insert(id))
}

/// Reads one attachment of at most `room` bytes, which it takes up; on failure its name.
fn attachment(document: &Document, specification: &Object, room: &mut usize) -> Result<Attachment, String> {
    let specification = pdf::as_dictionary(document, specification).ok_or_else(String::new)?;
    let name = pdf::text(document, specification, b"UF")
        .or_else(|| pdf::text(document, specification, b"F"))
        .ok_or_else(String::new)?;
    let bytes = pdf::dictionary(document, specification, b"EF")
        .and_then(|files| pdf::entry(document, files, b"F").or_else(|| pdf::entry(document, files, b"UF")))
        .and_then(|stream| stream.as_stream().ok())
        .and_then(|stream| stream.get_plain_content_with_limit(*room).ok())
        .ok_or_else(|| name.clone())?;
    *room = room.saturating_sub(bytes.len());
    let relationship = match pdf::name(document, specification, b"AFRelationship") {
        Some(b"Source") => Relationship::Source,
        Some(b"Data") => Relationship::Data,
        Some(b"Alternative") => Relationship::Alternative,
        Some(b"Supplement") => Relationship::Supplement,
        Some(b"Unspecified") | None => Relationship::Unspecified,
        Some(other) => Relationship::Other(String::from_utf8_lossy(other).into_owned()),
    };
    Ok(Attachment { name, bytes, relationship })
}
