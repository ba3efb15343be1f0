//! Signature fields made before anybody signs.

use super::{
    key,
    report::{Standard, report},
    request, second_request,
};
use crate::record::{
    Problem, SignError, SignatureField, SignatureRequest, add_signature_fields, inspect_pdf, only_signatures_follow,
    sign_pdf,
};

fn place(request: SignatureRequest) -> SignatureField {
    SignatureField { field_name: request.field_name, page_index: request.page_index, rect: request.rect }
}

fn with_fields(standard: Standard) -> Vec<u8> {
    add_signature_fields(&report(standard), &[place(request()), place(second_request())]).expect("fields")
}

#[test]
fn fields_made_beforehand_are_filled_in_any_order() {
    let (ines, adam) = (key("Ines Halloran", 1), key("Adam O'Brien", 2));
    for standard in [Standard::A3b, Standard::A3bUntagged, Standard::A3aAndUa1] {
        let base = with_fields(standard);
        assert!(base.starts_with(&report(standard)));
        assert_eq!(inspect_pdf(&base).problems, [Problem::NotSigned]);
        for [first, second] in
            [[(&ines, request()), (&adam, second_request())], [(&adam, second_request()), (&ines, request())]]
        {
            let once = sign_pdf(&base, first.0, &first.1).expect("signed");
            assert!(inspect_pdf(&once).is_sound());
            let twice = sign_pdf(&once, second.0, &second.1).expect("signed");
            let found = inspect_pdf(&twice);
            assert!(found.is_sound(), "{standard:?}: {found:?}");
            let names: Vec<_> = found.signatures.iter().map(|s| &s.field_name).collect();
            assert_eq!(names, [&first.1.field_name, &second.1.field_name]);
            assert!(only_signatures_follow(&base, &twice));
        }
    }
}

#[test]
fn filling_a_field_leaves_catalog_and_pages_alone() {
    let base = with_fields(Standard::A3b);
    let signed = sign_pdf(&base, &key("Ines", 1), &request()).expect("signed");
    let update = String::from_utf8_lossy(&signed[base.len()..]).into_owned();
    assert_eq!(update.matches(" obj\n").count(), 2, "field and signature");
    assert!(!update.contains("/Catalog") && !update.contains("/MediaBox"));
}

#[test]
fn a_field_is_filled_where_it_stands_only() {
    let base = with_fields(Standard::A3b);
    let key = key("Ines", 1);
    let name = request().field_name;
    let moved = SignatureRequest { rect: [40.0, 60.5, 240.0, 111.0], ..request() };
    let turned = SignatureRequest { page_index: 1, ..request() };
    for other in [moved, turned] {
        let error = sign_pdf(&base, &key, &other).expect_err("refused");
        assert_eq!(error, SignError::FieldElsewhere { name: name.clone() });
    }
    let again = add_signature_fields(&base, &[place(request())]);
    assert_eq!(again, Err(SignError::FieldNameTaken { name }));
}

#[test]
fn no_fields_change_nothing() {
    let base = report(Standard::A3b);
    assert_eq!(add_signature_fields(&base, &[]), Ok(base));
}

#[test]
fn a_field_added_after_signing_is_a_change() {
    let signed = sign_pdf(&report(Standard::A3b), &key("Ines", 1), &request()).expect("signed");
    let more = add_signature_fields(&signed, &[place(second_request())]).expect("fields");
    let found = inspect_pdf(&more);
    let count = more.len() - signed.len();
    assert_eq!(found.problems, [Problem::Appended { count }]);
    // Nor does filling it make it right: the first signer saw no such field.
    let twice = sign_pdf(&more, &key("Adam O'Brien", 2), &second_request()).expect("signed");
    assert_eq!(inspect_pdf(&twice).signatures[0].problems, [Problem::Continued]);
}
