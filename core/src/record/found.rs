//! Finding the signatures of a file and reading what they state.

use super::{pdf, problem::Problem, sign::SignatureRequest, text::read_pdf_date};
use jiff::Timestamp;
use lopdf::{Dictionary, Document, Object, ObjectId};

/// A signature field with its signature dictionary.
pub(super) struct Found<'a> {
    document: &'a Document,
    field: &'a Dictionary,
    /// The signature dictionary.
    pub(super) signature: &'a Dictionary,
}

impl Found<'_> {
    /// A text of the signature dictionary; blank where it is missing.
    pub(super) fn stated(&self, key: &[u8]) -> String {
        pdf::text(self.document, self.signature, key).unwrap_or_default()
    }

    /// The stated time of signing.
    pub(super) fn signed_at(&self) -> Option<Timestamp> {
        read_pdf_date(&self.stated(b"M"))
    }

    /// The field's name.
    pub(super) fn field_name(&self) -> String {
        pdf::text(self.document, self.field, b"T").unwrap_or_default()
    }

    /// The request that would lead to this signature; `None` where a part of it is missing.
    pub(super) fn request(&self) -> Option<SignatureRequest> {
        let page: ObjectId = self.field.get(b"P").and_then(Object::as_reference).ok()?;
        Some(SignatureRequest {
            name: self.stated(b"Name"),
            meaning: self.stated(b"Reason"),
            signed_at: self.signed_at()?,
            page_index: pdf::pages(self.document).iter().position(|id| *id == page)?,
            rect: pdf::numbers(self.document, self.field, b"Rect")?,
            field_name: self.field_name(),
        })
    }
}

/// The signatures that the file's form leads to, in the order of the form.
pub(super) fn signatures<'a>(document: &'a Document, problems: &mut Vec<Problem>) -> Vec<Found<'a>> {
    let found = fields(document)
        .into_iter()
        .filter(|field| pdf::name(document, field, b"FT") == Some(b"Sig"))
        .filter_map(|field| {
            let signature = pdf::dictionary(document, field, b"V")?;
            Some(Found { document, field, signature })
        })
        .collect::<Vec<_>>();
    let outside = |signature: &&Dictionary| !found.iter().any(|f| std::ptr::eq(f.signature, *signature));
    let count = document.objects.values().filter_map(as_signature).filter(outside).count();
    if count > 0 {
        problems.push(Problem::OutsideForm { count });
    }
    found
}

/// Every field of the form, parents before children.
fn fields(document: &Document) -> Vec<&Dictionary> {
    let form = document.catalog().ok().and_then(|catalog| pdf::dictionary(document, catalog, b"AcroForm"));
    form.map_or_else(Vec::new, |form| pdf::walk(document, pdf::array(document, form, b"Fields").iter()))
}

fn as_signature(object: &Object) -> Option<&Dictionary> {
    object.as_dict().ok().filter(|d| d.has(b"ByteRange") && d.has(b"Contents"))
}
