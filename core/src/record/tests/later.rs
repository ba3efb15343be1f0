//! What may and may not happen to a signed file afterwards.

use super::{
    key,
    report::{Standard, report},
    request, second_request,
};
use crate::record::{Problem, SignError, SignatureRequest, inspect_pdf, only_signatures_follow, sign_pdf};
use lopdf::{Document, IncrementalDocument, Object};
use proptest::prelude::*;

fn signed_once() -> Vec<u8> {
    sign_pdf(&report(Standard::A3b), &key("Ines Halloran", 1), &request()).expect("signed")
}

fn signed_twice() -> Vec<u8> {
    sign_pdf(&signed_once(), &key("Adam O'Brien", 2), &second_request()).expect("signed")
}

#[test]
fn a_second_signature_leaves_the_first_whole() {
    for standard in [Standard::A3b, Standard::A3bUntagged, Standard::A3aAndUa1] {
        let base = report(standard);
        let once = sign_pdf(&base, &key("Ines Halloran", 1), &request()).expect("signed");
        let twice = sign_pdf(&once, &key("Adam O'Brien", 2), &second_request()).expect("signed");
        assert!(twice.starts_with(&once));
        let found = inspect_pdf(&twice);
        assert!(found.is_sound(), "{standard:?}: {found:?}");
        let said: Vec<_> = found.signatures.iter().map(|s| (s.name.as_str(), s.meaning.as_str())).collect();
        assert_eq!(said, [("Ines Halloran", "calibrated by"), ("Adam O'Brien", "approved by")]);
        assert_eq!(found.signatures[1].stated_name, second_request().name);
        assert!(only_signatures_follow(&base, &twice) && only_signatures_follow(&once, &twice));
    }
}

#[test]
fn a_third_signature_on_the_same_page_works_too() {
    let third = SignatureRequest { field_name: "witnessed".to_owned(), ..second_request() };
    let found = inspect_pdf(&sign_pdf(&signed_twice(), &key("Third", 3), &third).expect("signed"));
    assert_eq!(found.signatures.len(), 3);
    assert!(found.is_sound(), "{found:?}");
}

#[test]
fn a_field_has_one_signature() {
    let name = request().field_name;
    let again = sign_pdf(&signed_once(), &key("Ines", 1), &request());
    assert_eq!(again, Err(SignError::FieldNameTaken { name }));
}

#[test]
fn a_single_byte_more_is_seen() {
    for whole in [signed_once(), signed_twice()] {
        for extra in [&b"\n"[..], b" ", b"%", b"\0", b"% a remark\n"] {
            let found = inspect_pdf(&[&whole[..], extra].concat());
            assert_eq!(found.problems, [Problem::Appended { count: extra.len() }]);
            assert!(found.signatures.iter().all(|s| s.intact && !s.covers_whole_file));
            assert!(found.signatures.iter().all(|s| s.problems == [Problem::Continued]));
        }
    }
}

/// Appends an update that changes the first page, as any editor can.
fn edited(pdf: &[u8]) -> Vec<u8> {
    let document = Document::load_mem(pdf).expect("a PDF");
    let page = document.page_iter().next().expect("a page");
    let mut update = IncrementalDocument::create_from(pdf.to_vec(), document);
    update.opt_clone_object_to_new_document(page).expect("a page");
    let page = update.new_document.get_dictionary_mut(page).expect("a page");
    page.set("Rotate", Object::Integer(180));
    let mut out = Vec::new();
    update.save_to(&mut out).expect("written");
    out
}

#[test]
fn an_edited_page_is_seen() {
    for whole in [signed_once(), signed_twice()] {
        let found = inspect_pdf(&edited(&whole));
        assert!(!found.is_sound());
        assert!(matches!(found.problems[..], [Problem::Appended { .. }]), "{found:?}");
        assert!(found.signatures.iter().all(|s| s.intact && !s.covers_whole_file));
    }
}

#[test]
fn an_edit_between_two_signatures_is_seen_though_the_second_covers_it() {
    let edited = edited(&signed_once());
    let twice = sign_pdf(&edited, &key("Adam O'Brien", 2), &second_request()).expect("signed");
    let found = inspect_pdf(&twice);
    assert_eq!(found.problems, []);
    let covers: Vec<_> = found.signatures.iter().map(|s| (s.intact, s.covers_whole_file)).collect();
    assert_eq!(covers, [(true, false), (true, true)]);
    assert_eq!(found.signatures[0].problems, [Problem::Continued]);
    assert!(!only_signatures_follow(&signed_once(), &twice));
}

#[test]
fn a_broken_second_signature_takes_the_first_ones_cover_with_it() {
    let once = signed_once().len();
    let mut twice = signed_twice();
    let digits = twice.windows(10).rposition(|w| w == b"/Contents<").expect("a signature") + 1000;
    assert!(digits > once);
    twice[digits] = if twice[digits] == b'0' { b'1' } else { b'0' };
    let found = inspect_pdf(&twice);
    let said: Vec<_> = found.signatures.iter().map(|s| (s.intact, s.covers_whole_file)).collect();
    assert_eq!(said, [(true, false), (false, true)]);
}

#[test]
fn another_base_is_not_the_base() {
    let other = report(Standard::A3bUntagged);
    assert!(!only_signatures_follow(&other, &signed_once()));
    let base = report(Standard::A3b);
    assert!(!only_signatures_follow(&base[..base.len() - 1], &signed_once()));
    assert!(!only_signatures_follow(&base, &base));
    assert!(!only_signatures_follow(&base, &[&signed_once()[..], b"\n"].concat()));
}

#[test]
fn a_file_cut_short_is_not_sound() {
    let (once, twice) = (signed_once(), signed_twice());
    for cut in (0..once.len()).step_by(997).chain([once.len() - 1]) {
        assert!(!inspect_pdf(&once[..cut]).is_sound(), "cut at {cut}");
    }
    // Cut back to its first signature, a file is what it was before the second: whole, with one signature.
    assert_eq!(twice[..once.len()], once[..]);
    for cut in (once.len() + 1..twice.len()).step_by(997) {
        assert!(!inspect_pdf(&twice[..cut]).is_sound(), "cut at {cut}");
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]

    #[test]
    fn any_text_in_a_later_signature_is_read_back(name in "\\PC{1,20}", meaning in "[ -~]{1,20}[()\\\\é€]{0,4}x",
            left in 0.0f32..400.0, width in 0.001f32..150.0, seconds in 1_800_000_000i64..2_000_000_000) {
        prop_assume!(!name.trim().is_empty());
        let second = SignatureRequest {
            name,
            meaning,
            signed_at: jiff::Timestamp::from_second(seconds).expect("a time"),
            rect: [left, 10.0, left + width, 20.0],
            ..second_request()
        };
        let twice = sign_pdf(&signed_once(), &key("Adam", 2), &second).expect("signed");
        let found = inspect_pdf(&twice);
        prop_assert!(found.is_sound(), "{:?}", found);
        prop_assert_eq!(&found.signatures[1].stated_name, &second.name);
        prop_assert_eq!(&found.signatures[1].meaning, &second.meaning);
        prop_assert_eq!(found.signatures[1].signed_at, Some(second.signed_at));
    }
}
