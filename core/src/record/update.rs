//! What a signature changes in a file: the field's value and, where the field is new, catalog, page and structure.
//!
//! The update follows from the file before it and the request alone, so that a reader can build it again and compare.
//! A later layout therefore needs a builder of its own beside this one, or older files lose their second signatures.

use super::{
    append::{Appender, Draft},
    field::{self, Place},
    pdf,
    sign::{SignError, SignatureRequest},
};
use lopdf::{Dictionary, Document, Object, ObjectId, StringFormat};
use sha2::{Digest, Sha256};
use std::collections::BTreeSet;

/// A file that is being continued: its objects as they will be, and which of them are new or changed.
pub(super) struct Revision<'a> {
    pdf: &'a [u8],
    document: Document,
    changed: BTreeSet<ObjectId>,
}

impl<'a> Revision<'a> {
    /// Reads `pdf` and refuses what cannot be continued.
    pub(super) fn of(pdf: &'a [u8]) -> Result<Self, SignError> {
        let document = pdf::read(pdf)?;
        if !pdf::has_classic_table(pdf, &document) {
            return Err(SignError::CompressedTable);
        }
        let revision = Self { pdf, document, changed: BTreeSet::new() };
        let permissions = pdf::dictionary(&revision.document, revision.catalog()?.1, b"Perms");
        if permissions.is_some_and(|p| p.has(b"DocMDP")) {
            return Err(SignError::Locked);
        }
        Ok(revision)
    }

    /// The file with all changes so far.
    pub(super) fn document(&self) -> &Document {
        &self.document
    }

    /// The catalog and its number.
    pub(super) fn catalog(&self) -> Result<(ObjectId, &Dictionary), SignError> {
        let missing = |_| SignError::Structure { part: "catalog" };
        let id = self.document.trailer.get(b"Root").and_then(Object::as_reference).map_err(missing)?;
        Ok((id, self.document.get_dictionary(id).map_err(missing)?))
    }

    /// A number that no object of the file has.
    pub(super) fn new_id(&mut self) -> ObjectId {
        self.document.max_id = self.document.max_id.saturating_add(1);
        (self.document.max_id, 0)
    }

    /// Adds or replaces an object.
    pub(super) fn put(&mut self, id: ObjectId, object: impl Into<Object>) {
        self.document.objects.insert(id, object.into());
        self.changed.insert(id);
    }

    /// The file so far with the changes behind it.
    pub(super) fn write(&self) -> Vec<u8> {
        self.appender().finish(&self.trailer())
    }

    /// The same with a signature dictionary whose digits are still zeros.
    fn write_unsigned(&self, signature: ObjectId, entries: &[u8]) -> Draft {
        self.appender().finish_unsigned(signature, entries, &self.trailer())
    }

    fn appender(&self) -> Appender {
        let mut appender = Appender::after(self.pdf);
        for id in &self.changed {
            if let Some(object) = self.document.objects.get(id) {
                appender.object(*id, object);
            }
        }
        appender
    }

    /// The trailer: first half of the identifier kept, second half new, drawn from the bytes before.
    fn trailer(&self) -> Dictionary {
        let before = &self.document.trailer;
        let fresh = Object::String(Sha256::digest(self.pdf)[..16].to_vec(), StringFormat::Hexadecimal);
        let first = pdf::array(&self.document, before, b"ID").first().cloned().unwrap_or_else(|| fresh.clone());
        let mut trailer = Dictionary::new();
        trailer.set("Size", i64::from(self.document.max_id).saturating_add(1));
        for key in ["Root", "Info"] {
            if let Ok(value) = before.get(key.as_bytes()) {
                trailer.set(key, value.clone());
            }
        }
        trailer.set("Prev", i64::try_from(self.document.xref_start).unwrap_or(i64::MAX));
        trailer.set("ID", vec![first, fresh]);
        trailer
    }
}

/// Appends an unfilled signature to `pdf`.
pub(super) fn append_signature(pdf: &[u8], request: &SignatureRequest) -> Result<Draft, SignError> {
    let entries = field::signature_entries(request)?;
    let mut revision = Revision::of(pdf)?;
    let place = Place::of(request);
    let existing = field::with_name(&revision, place.field_name)?;
    let id = match existing {
        Some(id) => id,
        None => field::create(&mut revision, &place)?,
    };
    let signature = revision.new_id();
    let widget = field::filled(&revision, id, &place, signature)?;
    revision.put(id, widget);
    Ok(revision.write_unsigned(signature, &entries))
}
