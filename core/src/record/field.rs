//! The form field of a signature: making one, finding it again, filling it.

use super::{
    pdf,
    sign::{SignError, SignatureRequest},
    structure,
    text::{is_plain, pdf_date, text_object},
    update::Revision,
};
use lopdf::{Dictionary, Object, ObjectId, Stream, Writer, dictionary};

/// Largest coordinate of a page in points (ISO 32000-1:2008, annex C.2).
const LARGEST: f32 = 14_400.0;

/// Annotation flags Print and Locked (ISO 32000-1:2008, table 165); PDF/A asks for Print (ISO 19005-3, 6.3.2).
const PRINT_AND_LOCKED: i64 = 4 | 128;

/// Where a signature stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Place<'a> {
    /// Name of the form field.
    pub(super) field_name: &'a str,
    /// The page, counted from 0.
    pub(super) page_index: usize,
    /// Left, bottom, right, top in points.
    pub(super) rect: [f32; 4],
}

impl<'a> Place<'a> {
    /// The place that a request asks for.
    pub(super) fn of(request: &'a SignatureRequest) -> Self {
        Self { field_name: &request.field_name, page_index: request.page_index, rect: request.rect }
    }

    fn check(&self) -> Result<(), SignError> {
        let name = self.field_name;
        if !is_plain(name) || name.contains('.') {
            return Err(SignError::FieldName { name: name.to_owned() });
        }
        let [left, bottom, right, top] = self.rect;
        let on_page = self.rect.iter().all(|x| x.abs() <= LARGEST);
        if !(on_page && left < right && bottom < top) {
            return Err(SignError::Rect { rect: self.rect });
        }
        Ok(())
    }

    fn page(&self, revision: &Revision<'_>) -> Result<ObjectId, SignError> {
        let pages = pdf::pages(revision.document());
        pages.get(self.page_index).copied().ok_or(SignError::NoSuchPage { index: self.page_index, count: pages.len() })
    }

    fn sides(&self) -> Vec<Object> {
        self.rect.iter().map(|x| Object::Real(*x)).collect()
    }
}

/// The field of that name, if the form has one. A field without a number of its own cannot be filled: taken.
pub(super) fn with_name(revision: &Revision<'_>, name: &str) -> Result<Option<ObjectId>, SignError> {
    let document = revision.document();
    let Some(form) = pdf::dictionary(document, revision.catalog()?.1, b"AcroForm") else {
        return Ok(None);
    };
    let has_name = |field: &Dictionary| pdf::text(document, field, b"T").as_deref() == Some(name);
    let found = pdf::array(document, form, b"Fields")
        .iter()
        .find(|field| pdf::as_dictionary(document, field).is_some_and(has_name));
    let taken = |_| SignError::FieldNameTaken { name: name.to_owned() };
    found.map(|field| field.as_reference().map_err(taken)).transpose()
}

/// Adds an empty signature field: the field, its appearance, its page, the form, and its tag in a tagged file.
pub(super) fn create(revision: &mut Revision<'_>, place: &Place<'_>) -> Result<ObjectId, SignError> {
    place.check()?;
    let page = place.page(revision)?;
    let id = revision.new_id();
    let appearance = revision.new_id();
    let title = text_object(&format!("Signature: {}", place.field_name));
    let mut widget = dictionary! {
        "Type" => "Annot",
        "Subtype" => "Widget",
        "FT" => "Sig",
        "T" => text_object(place.field_name),
        "TU" => title.clone(),
        "Contents" => title.clone(),
        "F" => PRINT_AND_LOCKED,
        "Rect" => place.sides(),
        "P" => page,
        "AP" => dictionary! { "N" => appearance },
    };
    let key = structure::add_form_element(revision, page, id, &title)?;
    if let Some(key) = key {
        widget.set("StructParent", key);
    }
    revision.put(id, widget);
    revision.put(appearance, empty_appearance(place.rect));
    add_to_page(revision, page, id, key.is_some())?;
    add_to_form(revision, id)?;
    Ok(id)
}

/// The field `id` with `signature` as its value; refused if it is taken or stands elsewhere.
pub(super) fn filled(
    revision: &Revision<'_>,
    id: ObjectId,
    place: &Place<'_>,
    signature: ObjectId,
) -> Result<Dictionary, SignError> {
    let name = || place.field_name.to_owned();
    let document = revision.document();
    let field = document.get_dictionary(id).map_err(|_| SignError::Structure { part: "form" })?;
    if field.has(b"V") || pdf::name(document, field, b"FT") != Some(b"Sig") {
        return Err(SignError::FieldNameTaken { name: name() });
    }
    let page = place.page(revision)?;
    let sides = pdf::numbers(document, field, b"Rect");
    let there = field.get(b"P").and_then(Object::as_reference).is_ok_and(|p| p == page);
    if !there || sides != Some(place.rect) {
        return Err(SignError::FieldElsewhere { name: name() });
    }
    let mut field = field.clone();
    field.set("V", signature);
    Ok(field)
}

/// A form that paints nothing: the box and its text are part of the page, and PDF/A asks every field of some size
/// for an appearance (ISO 19005-3, 6.3.3).
fn empty_appearance(rect: [f32; 4]) -> Stream {
    let [left, bottom, right, top] = rect;
    let sides = [0.0, 0.0, right - left, top - bottom];
    let entries = dictionary! {
        "Type" => "XObject",
        "Subtype" => "Form",
        "BBox" => sides.iter().map(|x| Object::Real(*x)).collect::<Vec<_>>(),
        "Resources" => Dictionary::new(),
    };
    Stream::new(entries, Vec::new())
}

/// One more annotation on the page; in a tagged file the reading order becomes that of the tags.
fn add_to_page(revision: &mut Revision<'_>, page: ObjectId, field: ObjectId, tagged: bool) -> Result<(), SignError> {
    let document = revision.document();
    let before = document.get_dictionary(page).map_err(|_| SignError::Structure { part: "page" })?;
    let mut annotations = pdf::array(document, before, b"Annots").to_vec();
    annotations.push(field.into());
    let mut changed = before.clone();
    changed.set("Annots", annotations);
    if tagged {
        changed.set("Tabs", "S");
    }
    revision.put(page, changed);
    Ok(())
}

/// One more field in the form; whatever else the form held stays.
fn add_to_form(revision: &mut Revision<'_>, field: ObjectId) -> Result<(), SignError> {
    let (id, catalog) = revision.catalog()?;
    let document = revision.document();
    let mut form = pdf::dictionary(document, catalog, b"AcroForm").cloned().unwrap_or_default();
    let mut fields = pdf::array(document, &form, b"Fields").to_vec();
    fields.push(field.into());
    form.set("Fields", fields);
    // There are signature fields, and the file may only be appended to (ISO 32000-1:2008, table 219).
    form.set("SigFlags", 3);
    let mut catalog = catalog.clone();
    catalog.set("AcroForm", form);
    revision.put(id, catalog);
    Ok(())
}

/// The entries of the signature dictionary but `ByteRange` and `Contents`, as they stand in the file.
pub(super) fn signature_entries(request: &SignatureRequest) -> Result<Vec<u8>, SignError> {
    for (entry, text) in [("Name", &request.name), ("Reason", &request.meaning)] {
        if !is_plain(text) {
            return Err(SignError::Text { entry });
        }
    }
    let at = request.signed_at;
    let time = pdf_date(at).ok_or(SignError::Time { at })?;
    let entries = dictionary! {
        "Type" => "Sig",
        "Filter" => "Adobe.PPKLite",
        "SubFilter" => "ETSI.CAdES.detached",
        "M" => Object::string_literal(time),
        "Name" => text_object(&request.name),
        "Reason" => text_object(&request.meaning),
    };
    let mut written = Vec::new();
    for (key, value) in &entries {
        Writer::write_object(&mut written, &Object::Name(key.clone())).expect("writing to memory does not fail");
        Writer::write_object(&mut written, value).expect("writing to memory does not fail");
    }
    Ok(written)
}
