//! Signing a report and finding everything in it again.

use super::{
    key, noon,
    report::{READINGS, RECORD, Standard, report},
    request,
};
use crate::record::{
    Problem, ReadError, Relationship, SignError, SignatureRequest, inspect_pdf, only_signatures_follow, sign_pdf,
};

#[test]
fn a_signed_report_says_who_signed_what_and_when() {
    let base = report(Standard::A3b);
    let key = key("Ines Halloran", 1);
    let signed = sign_pdf(&base, &key, &request()).expect("signed");
    assert!(signed.starts_with(&base));
    let found = inspect_pdf(&signed);
    assert_eq!(found.problems, []);
    let [signature] = &found.signatures[..] else {
        panic!("{found:?}");
    };
    assert_eq!(signature.problems, []);
    assert!(signature.intact && signature.covers_whole_file && !signature.has_unchecked_timestamp);
    assert_eq!(signature.name, "Ines Halloran");
    assert_eq!(signature.stated_name, "Ines Halloran");
    assert_eq!(signature.meaning, "calibrated by");
    assert_eq!(signature.field_name, "calibrated");
    assert_eq!(signature.fingerprint, Some(key.fingerprint()));
    assert_eq!(signature.time_text, "2026-12-01 12:45:00 UTC");
    assert_eq!(signature.signed_at.map(|t| t.as_second()), Some(noon().as_second()));
    assert!(found.is_sound());
    assert!(only_signatures_follow(&base, &signed));
}

#[test]
fn the_report_itself_comes_back() {
    for standard in [Standard::A3b, Standard::A3bUntagged, Standard::A3aAndUa1] {
        let signed = sign_pdf(&report(standard), &key("Ines", 1), &request()).expect("signed");
        let found = inspect_pdf(&signed);
        assert!(found.is_sound(), "{standard:?}: {found:?}");
        let files: Vec<_> =
            found.attachments.iter().map(|a| (a.name.as_str(), &a.bytes[..], &a.relationship)).collect();
        let expected =
            [("readings.csv", READINGS, &Relationship::Data), ("record.json", RECORD, &Relationship::Source)];
        assert_eq!(files, expected);
        assert_eq!(found.pages_text.len(), 2);
        assert!(found.pages_text[0].contains("zero at \u{2212}0.012 m"), "{:?}", found.pages_text);
        assert!(found.pages_text[1].contains("calibrated by / approved by"));
    }
}

#[test]
fn the_same_request_gives_the_same_file() {
    let base = report(Standard::A3b);
    let sign = || sign_pdf(&base, &key("Ines", 1), &request()).expect("signed");
    assert_eq!(sign(), sign());
}

#[test]
fn an_unsigned_report_is_read_and_said_to_be_unsigned() {
    let found = inspect_pdf(&report(Standard::A3b));
    assert_eq!(found.problems, [Problem::NotSigned]);
    assert_eq!(found.attachments.len(), 2);
    assert!(!found.is_sound());
}

#[test]
fn a_time_outside_the_certificate_is_a_problem_but_no_change() {
    let late = SignatureRequest { signed_at: "2036-12-01T12:45:01Z".parse().expect("a time"), ..request() };
    let signed = sign_pdf(&report(Standard::A3b), &key("Ines", 1), &late).expect("signed");
    let found = inspect_pdf(&signed);
    let stated = Some(late.signed_at);
    assert_eq!(found.signatures[0].problems, [Problem::NotValidThen { stated }]);
    assert!(found.signatures[0].intact && !found.is_sound());
}

#[test]
fn what_cannot_be_signed_is_refused() {
    let base = report(Standard::A3b);
    let key = key("Ines", 1);
    let refused = |change: &dyn Fn(&mut SignatureRequest)| {
        let mut request = request();
        change(&mut request);
        sign_pdf(&base, &key, &request).expect_err("refused")
    };
    assert_eq!(refused(&|r| r.page_index = 2), SignError::NoSuchPage { index: 2, count: 2 });
    assert_eq!(refused(&|r| r.name = " ".into()), SignError::Text { entry: "Name" });
    assert_eq!(refused(&|r| r.meaning = "a\u{7}".into()), SignError::Text { entry: "Reason" });
    for name in ["", "a.b", "a\tb"] {
        let error = refused(&|r| r.field_name = name.into());
        assert_eq!(error, SignError::FieldName { name: name.into() });
    }
    for rect in [[10.0, 10.0, 10.0, 20.0], [10.0, 30.0, 20.0, 20.0], [0.0, 0.0, 20_000.0, 10.0]] {
        assert_eq!(refused(&|r| r.rect = rect), SignError::Rect { rect });
    }
    assert!(matches!(refused(&|r| r.rect[2] = f32::NAN), SignError::Rect { .. }));
    assert!(matches!(refused(&|r| r.rect[2] = f32::INFINITY), SignError::Rect { .. }));
    let at = "-000001-01-01T00:00:00Z".parse().expect("a time");
    assert_eq!(refused(&|r| r.signed_at = at), SignError::Time { at });
    let error = |pdf: &[u8]| sign_pdf(pdf, &key, &request()).expect_err("refused");
    assert_eq!(error(b""), ReadError::NoHeader.into());
    assert_eq!(error(&[b"\n", &base[..]].concat()), ReadError::NoHeader.into());
    assert!(matches!(error(&base[..base.len() / 2]), SignError::Unreadable(ReadError::Damaged { .. })));
}
