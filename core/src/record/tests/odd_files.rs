//! Files that are read but are not as they should be.

use super::{
    key,
    report::{Standard, report},
    request,
};
use crate::record::{Problem, ReadError, SignError, inspect_pdf, sign_pdf};
use lopdf::{Dictionary, Document, EncryptionState, EncryptionVersion, Object, Permissions, Stream, dictionary};

/// The report after `change`, written anew.
fn rewritten(change: impl FnOnce(&mut Document)) -> Vec<u8> {
    let mut document = Document::load_mem(&report(Standard::A3b)).expect("a PDF");
    change(&mut document);
    let mut out = Vec::new();
    document.save_to(&mut out).expect("written");
    out
}

/// The dictionaries (of streams too) that have `key`.
fn with_key<'a>(document: &'a mut Document, key: &'static [u8]) -> impl Iterator<Item = &'a mut Dictionary> {
    document.objects.values_mut().filter_map(move |object| {
        let dictionary = match object {
            Object::Dictionary(dictionary) => dictionary,
            Object::Stream(stream) => &mut stream.dict,
            _ => return None,
        };
        dictionary.has(key).then_some(dictionary)
    })
}

fn refusal(pdf: &[u8]) -> SignError {
    sign_pdf(pdf, &key("Ines", 1), &request()).expect_err("refused")
}

#[test]
fn a_rewritten_report_can_be_signed() {
    // So that the refusals below are due to the change and not to the rewriting.
    let signed = sign_pdf(&rewritten(|_| {}), &key("Ines", 1), &request()).expect("signed");
    assert!(inspect_pdf(&signed).is_sound());
}

#[test]
fn a_compressed_table_is_not_continued() {
    let mut out = Vec::new();
    let mut document = Document::load_mem(&report(Standard::A3b)).expect("a PDF");
    document.save_modern(&mut out).expect("written");
    assert_eq!(refusal(&out), SignError::CompressedTable);
    assert_eq!(inspect_pdf(&out).attachments.len(), 2);
}

#[test]
fn a_certified_file_is_not_signed_again() {
    let pdf = rewritten(|document| {
        let permissions = dictionary! { "DocMDP" => dictionary! { "Type" => "Sig" } };
        document.catalog_mut().expect("a catalog").set("Perms", permissions);
    });
    assert_eq!(refusal(&pdf), SignError::Locked);
}

#[test]
fn an_encrypted_file_is_neither_read_nor_signed() {
    let pdf = rewritten(|document| {
        let version = EncryptionVersion::V2 {
            document,
            owner_password: "owner",
            user_password: "",
            key_length: 128,
            permissions: Permissions::all(),
        };
        let state = EncryptionState::try_from(version).expect("a state");
        document.encrypt(&state).expect("encrypted");
    });
    assert_eq!(refusal(&pdf), ReadError::Encrypted.into());
    assert_eq!(inspect_pdf(&pdf).problems, [Problem::Unreadable(ReadError::Encrypted)]);
}

#[test]
fn a_tag_tree_in_parts_is_not_continued() {
    let pdf = rewritten(|document| {
        for root in with_key(document, b"ParentTree") {
            root.set("ParentTree", dictionary! { "Kids" => Object::Array(Vec::new()) });
        }
    });
    assert_eq!(refusal(&pdf), SignError::Structure { part: "tag tree" });
}

#[test]
fn a_signature_outside_the_form_is_seen() {
    let pdf = rewritten(|document| {
        let stray = dictionary! { "ByteRange" => vec![0.into()], "Contents" => Object::string_literal("") };
        document.add_object(stray);
    });
    assert_eq!(inspect_pdf(&pdf).problems, [Problem::OutsideForm { count: 1 }, Problem::NotSigned]);
}

#[test]
fn two_attachments_of_one_name_are_seen() {
    let pdf = rewritten(|document| {
        for specification in with_key(document, b"AFRelationship") {
            specification.set("UF", Object::string_literal("record.json"));
        }
    });
    let found = inspect_pdf(&pdf);
    let name = "record.json".to_owned();
    assert_eq!(found.problems, [Problem::NotSigned, Problem::SameName { name }]);
    assert_eq!(found.attachments.len(), 1);
}

#[test]
fn an_attachment_that_does_not_unpack_is_seen() {
    let pdf = rewritten(|document| {
        for specification in with_key(document, b"AFRelationship") {
            specification.remove(b"EF");
        }
    });
    let missing = |name: &str| Problem::Attachment { name: name.to_owned() };
    let expected = [Problem::NotSigned, missing("readings.csv"), missing("record.json")];
    assert_eq!(inspect_pdf(&pdf).problems, expected);
}

#[test]
fn a_page_whose_text_cannot_be_read_is_seen() {
    let pdf = rewritten(|document| {
        let page = document.page_iter().nth(1).expect("a page");
        let contents = document.add_object(Stream::new(Dictionary::new(), b"BT Tf (x) Tj ET".to_vec()));
        document.get_dictionary_mut(page).expect("a page").set("Contents", contents);
    });
    let found = inspect_pdf(&pdf);
    assert_eq!(found.problems, [Problem::NotSigned, Problem::PageText { page: 2 }]);
    assert_eq!(found.pages_text[1], "");
}

#[test]
fn another_kind_of_signature_is_named() {
    let mut pdf = sign_pdf(&report(Standard::A3b), &key("Ines", 1), &request()).expect("signed");
    let at = pdf.windows(5).rposition(|w| w == b"CAdES").expect("a kind");
    pdf[at..at + 5].copy_from_slice(b"OTHER");
    let kind = "ETSI.OTHER.detached".to_owned();
    assert_eq!(inspect_pdf(&pdf).signatures[0].problems, [Problem::Kind { kind }]);
}

#[test]
fn loops_end() {
    let pdf = rewritten(|document| {
        let field = document.new_object_id();
        let kids = vec![Object::Reference(field); 500];
        document.objects.insert(field, dictionary! { "FT" => "Sig", "Kids" => kids }.into());
        let tree = document.new_object_id();
        let names = vec![Object::Reference(tree); 500];
        let node = dictionary! { "Kids" => vec![Object::Reference(tree); 500], "Names" => names };
        document.objects.insert(tree, node.into());
        let catalog = document.catalog_mut().expect("a catalog");
        catalog.set("AcroForm", dictionary! { "Fields" => vec![field.into()] });
        catalog.set("Names", dictionary! { "EmbeddedFiles" => tree });
        let pages = catalog.get(b"Pages").and_then(Object::as_reference).expect("pages");
        let root = document.get_dictionary_mut(pages).expect("pages");
        root.set("Kids", vec![Object::Reference(pages); 500]);
    });
    let found = inspect_pdf(&pdf);
    assert!(!found.is_sound());
    assert_eq!(found.pages_text, [""; 0]);
}

#[test]
fn deep_nesting_ends() {
    for (open, close) in [("[", "]"), ("<<", ">>"), ("<</A", ">>"), ("(", ")")] {
        let depth = 100_000;
        let deep = [&open.repeat(depth)[..], &close.repeat(depth)].concat();
        let mut pdf = format!("%PDF-1.7\n1 0 obj\n{deep}\nendobj\n");
        let table = pdf.len();
        pdf += "xref\n0 2\n0000000000 65535 f \n0000000009 00000 n \n";
        pdf += &format!("trailer\n<</Size 2/Root 1 0 R>>\nstartxref\n{table}\n%%EOF\n");
        assert!(!inspect_pdf(pdf.as_bytes()).is_sound());
    }
}
