//! Signing a finished PDF: an appended update that leaves every byte before it as it was.

use super::{
    append::Draft,
    cms::Container,
    field::{self, Place},
    fingerprint::hex,
    key::SigningKey,
    pdf::ReadError,
    update::{Revision, append_signature},
};
use jiff::Timestamp;
use sha2::{Digest, Sha256};

/// Bytes kept free for the signature container; about 1 kB is used, the rest leaves room for a timestamp token.
pub(super) const RESERVED: usize = 12_288;

/// A place for a signature.
#[derive(Debug, Clone, PartialEq)]
pub struct SignatureField {
    /// Name of the form field. No full stop in it.
    pub field_name: String,
    /// The page, counted from 0.
    pub page_index: usize,
    /// The box: left, bottom, right, top in points from the page's lower left corner.
    pub rect: [f32; 4],
}

/// What a signature says beside who made it.
#[derive(Debug, Clone, PartialEq)]
pub struct SignatureRequest {
    /// The signer's name as the file states it (entry `Name`).
    pub name: String,
    /// What the signature means, such as "calibrated by" (entry `Reason`).
    pub meaning: String,
    /// When it was made by the signer's clock; kept to the second (entry `M`).
    pub signed_at: Timestamp,
    /// Page that carries the signature's box, counted from 0.
    pub page_index: usize,
    /// The box: left, bottom, right, top in points from the page's lower left corner.
    pub rect: [f32; 4],
    /// Name of the form field; each signature of a file has its own. No full stop in it. A field made beforehand with
    /// [`add_signature_fields`] is filled, and must have the same page and box; otherwise the field is made.
    pub field_name: String,
}

/// Why a file cannot be signed.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum SignError {
    /// The file cannot be read.
    #[error(transparent)]
    Unreadable(#[from] ReadError),
    /// The file keeps its table of objects in a compressed stream, which is not written here.
    #[error("the file's table of objects is compressed; only plain tables can be continued")]
    CompressedTable,
    /// An earlier signature forbids changes, further signatures among them.
    #[error("an earlier signature in this file forbids further ones")]
    Locked,
    /// There is no such page.
    #[error("page {index} (counted from 0) does not exist; the file has {count}")]
    NoSuchPage {
        /// The page asked for, counted from 0.
        index: usize,
        /// Pages in the file.
        count: usize,
    },
    /// The box is empty, not finite or larger than a page can be.
    #[error("{rect:?} is not a box on a page")]
    Rect {
        /// Left, bottom, right, top in points.
        rect: [f32; 4],
    },
    /// A text is blank or holds control characters.
    #[error("the entry {entry} needs printable text")]
    Text {
        /// Name of the entry in the signature dictionary.
        entry: &'static str,
    },
    /// The field's name is blank, holds a full stop or control characters.
    #[error("{name:?} cannot be the name of a field")]
    FieldName {
        /// The name asked for.
        name: String,
    },
    /// The field of that name is signed already, or is no field for a signature.
    #[error("the field {name:?} is taken")]
    FieldNameTaken {
        /// The name asked for.
        name: String,
    },
    /// The field of that name stands on another page or in another box than asked for.
    #[error("the field {name:?} stands elsewhere in this file")]
    FieldElsewhere {
        /// The name asked for.
        name: String,
    },
    /// The time lies before the year 0.
    #[error("{at} cannot be written as a time of signing")]
    Time {
        /// The time asked for.
        at: Timestamp,
    },
    /// An object that the update must continue is not what it should be.
    #[error("the file's {part} is not as expected")]
    Structure {
        /// Which part of the file.
        part: &'static str,
    },
    /// The container does not fit the room kept for it: a very long certificate.
    #[error("the signature takes {needed} bytes, {RESERVED} are kept free")]
    TooLarge {
        /// Length of the container in bytes.
        needed: usize,
    },
    /// The container cannot be encoded.
    #[error("the signature cannot be encoded: {reason}")]
    Encoding {
        /// What the encoder met.
        reason: String,
    },
}

/// Adds empty signature fields to an unsigned report.
///
/// Not needed for one signature. With several, a reader that judges what changed after the first one has an easier
/// task if the later ones only fill fields that were there when it was made; some refuse new fields in tagged files.
///
/// # Shapes and units
/// `pdf`: a whole file with a classic table of objects. Boxes in points.
///
/// # Errors
/// [`SignError`]; a name that exists already is [`SignError::FieldNameTaken`].
///
/// # Source
/// ISO 32000-1:2008, 12.7.4.5 (signature fields).
pub fn add_signature_fields(pdf: &[u8], fields: &[SignatureField]) -> Result<Vec<u8>, SignError> {
    let mut revision = Revision::of(pdf)?;
    if fields.is_empty() {
        return Ok(pdf.to_vec());
    }
    for SignatureField { field_name, page_index, rect } in fields {
        if field::with_name(&revision, field_name)?.is_some() {
            let name = field_name.clone();
            return Err(SignError::FieldNameTaken { name });
        }
        let place = Place { field_name, page_index: *page_index, rect: *rect };
        field::create(&mut revision, &place)?;
    }
    Ok(revision.write())
}

/// Signs `pdf` and returns the file with the signature appended; the bytes of `pdf` are its beginning.
///
/// A file signed before can be signed again: the second signature covers the first. The same file, key and request
/// give the same bytes.
///
/// # Formula
/// ECDSA (P-256, SHA-256) of the signed attributes, among them SHA-256 of all bytes of the file but the digits of the
/// signature itself.
///
/// # Shapes and units
/// `pdf`: a whole file with a classic table of objects. `request.rect`: points.
///
/// # Errors
/// [`SignError`]; nothing is written then.
///
/// # Source
/// ISO 32000-1:2008, 12.8 (digital signatures) and 7.5.6 (incremental updates); ETSI EN 319 142-1, baseline level B-B;
/// RFC 5652 (CMS).
pub fn sign_pdf(pdf: &[u8], key: &SigningKey, request: &SignatureRequest) -> Result<Vec<u8>, SignError> {
    let Draft { mut bytes, gap } = append_signature(pdf, request)?;
    let digest = digest_without(&bytes, gap.start, gap.end);
    let container = Container::sign(key, digest)
        .and_then(|c| c.to_der())
        .map_err(|e| SignError::Encoding { reason: e.to_string() })?;
    if container.len() > RESERVED {
        return Err(SignError::TooLarge { needed: container.len() });
    }
    let digits = hex(&container);
    bytes[gap.start + 1..][..digits.len()].copy_from_slice(digits.as_bytes());
    Ok(bytes)
}

/// SHA-256 of `bytes` without the part from `start` to before `end`.
pub(super) fn digest_without(bytes: &[u8], start: usize, end: usize) -> [u8; 32] {
    let mut hash = Sha256::new();
    hash.update(&bytes[..start]);
    hash.update(&bytes[end..]);
    hash.finalize().into()
}
