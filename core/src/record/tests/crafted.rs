//! Files that a forger without the key would craft from a signed one: they leave every signed byte as it is, and
//! change what stands in the gap.

use super::{
    key,
    report::{Standard, report},
    request,
};
use crate::record::{Problem, SignatureFinding, cms::Container, inspect_pdf, sign_pdf};
use cms::{
    cert::CertificateChoices,
    content_info::{CmsVersion, ContentInfo},
    revocation::RevocationInfoChoices,
    signed_data::{CertificateSet, SignedData, SignerInfo, SignerInfos},
};
use der::{
    Any, Decode, Encode,
    asn1::{ObjectIdentifier, OctetString, SetOfVec},
};
use p256::ecdsa::Signature;
use std::ops::Range;
use x509_cert::{Certificate, attr::Attribute};

fn signed() -> Vec<u8> {
    sign_pdf(&report(Standard::A3b), &key("Ines Halloran", 1), &request()).expect("signed")
}

/// Where the digits of the signature stand.
fn digits(pdf: &[u8]) -> Range<usize> {
    let start = pdf.windows(10).rposition(|w| w == b"/Contents<").expect("a signature") + 10;
    let length = pdf[start..].iter().position(|b| *b == b'>').expect("an end");
    start..start + length
}

fn container(pdf: &[u8]) -> Vec<u8> {
    let text = std::str::from_utf8(&pdf[digits(pdf)]).expect("digits");
    let bytes: Vec<u8> =
        (0..text.len()).step_by(2).map(|i| u8::from_str_radix(&text[i..i + 2], 16).expect("a digit")).collect();
    let length = 4 + usize::from(u16::from_be_bytes([bytes[2], bytes[3]]));
    bytes[..length].to_vec()
}

/// The signature after its container was replaced.
fn with_container(der: &[u8]) -> SignatureFinding {
    let mut pdf = signed();
    let place = digits(&pdf);
    pdf[place.clone()].fill(b'0');
    let text: String = der.iter().map(|b| format!("{b:02x}")).collect();
    pdf[place.start..place.start + text.len()].copy_from_slice(text.as_bytes());
    inspect_pdf(&pdf).signatures.remove(0)
}

fn altered(change: impl FnOnce(&mut SignedData)) -> SignatureFinding {
    let info = ContentInfo::from_der(&container(&signed())).expect("a container");
    let mut data: SignedData = info.content.decode_as().expect("signed data");
    change(&mut data);
    let content = Any::encode_from(&data).expect("encoded");
    with_container(&ContentInfo { content, ..info }.to_der().expect("encoded"))
}

fn altered_signer(change: impl FnOnce(&mut SignerInfo)) -> SignatureFinding {
    altered(|data| {
        let mut signer = data.signer_infos.0.as_slice()[0].clone();
        change(&mut signer);
        data.signer_infos = SignerInfos::try_from(vec![signer]).expect("a set");
    })
}

fn unsigned(oid: &str, value: Any) -> Attribute {
    Attribute {
        oid: ObjectIdentifier::new(oid).expect("an identifier"),
        values: SetOfVec::try_from(vec![value]).expect("a set"),
    }
}

fn other_certificate() -> CertificateChoices {
    let other = key("Somebody Else", 2);
    CertificateChoices::Certificate(Certificate::from_der(other.certificate_der()).expect("a certificate"))
}

#[test]
fn the_same_container_written_back_is_sound() {
    let finding = altered(|_| {});
    assert!(finding.intact && finding.problems.is_empty(), "{finding:?}");
}

fn assert_refused(finding: &SignatureFinding, problem: &Problem) {
    assert!(!finding.intact);
    assert_eq!(&finding.problems[0], problem);
}

#[test]
fn a_container_has_one_form_only() {
    let findings = [
        altered(|d| d.version = CmsVersion::V3),
        altered(|d| d.crls = Some(RevocationInfoChoices(SetOfVec::new()))),
        altered(|d| d.digest_algorithms = SetOfVec::new()),
        altered(|d| d.encap_content_info.econtent = Some(Any::null())),
        altered_signer(|s| s.version = CmsVersion::V3),
        altered_signer(|s| s.signature_algorithm.parameters = Some(Any::null())),
    ];
    for finding in findings {
        assert_refused(&finding, &Problem::NotCanonical);
    }
    assert_refused(&with_container(b"\x30\x03\x02\x01\x03"), &Problem::NotAContainer);
    assert_refused(&with_container(b"\x31\x80\x00\x00"), &Problem::Gap);
    assert_refused(&altered_signer(|s| s.signed_attrs = None), &Problem::NotAContainer);
}

#[test]
fn a_container_has_one_signer_and_one_certificate() {
    let certificates = |d: &mut SignedData, set: Vec<CertificateChoices>| {
        d.certificates = CertificateSet::try_from(set).ok();
    };
    let own = key("Ines Halloran", 1);
    let own = Certificate::from_der(own.certificate_der()).expect("a certificate");
    let both = vec![CertificateChoices::Certificate(own), other_certificate()];
    let none = altered(|d| d.certificates = None);
    assert_refused(&none, &Problem::CertificateCount { count: 0 });
    let two = altered(|d| certificates(d, both));
    assert_refused(&two, &Problem::CertificateCount { count: 2 });
    let other = altered(|d| certificates(d, vec![other_certificate()]));
    assert_refused(&other, &Problem::OtherCertificate);
    let none = altered(|d| d.signer_infos = SignerInfos(SetOfVec::new()));
    assert_refused(&none, &Problem::SignerCount { count: 0 });
    let two = altered(|d| {
        let mut second = d.signer_infos.0.as_slice()[0].clone();
        second.version = CmsVersion::V3;
        d.signer_infos.0.insert(second).expect("added");
    });
    assert_refused(&two, &Problem::SignerCount { count: 2 });
    let blank = OctetString::new(vec![0; 70]).expect("bytes");
    let blank = altered_signer(|s| s.signature = blank);
    assert_refused(&blank, &Problem::WrongSignature);
}

#[test]
fn nothing_unsigned_may_be_added_but_a_timestamp() {
    let no_token = unsigned("1.2.840.113549.1.9.16.2.14", Any::null());
    let remark = unsigned("1.2.840.113549.1.9.6", Any::null());
    for added in [vec![], vec![no_token], vec![remark]] {
        let finding = altered_signer(|s| s.unsigned_attrs = SetOfVec::try_from(added).ok());
        assert_refused(&finding, &Problem::UnsignedAttributes);
    }
}

#[test]
fn the_twin_of_a_signature_is_refused() {
    // With (r, s) also (r, n − s) holds, which anybody can work out.
    let finding = altered_signer(|signer| {
        let given = Signature::from_der(signer.signature.as_bytes()).expect("a signature");
        let twin = Signature::from_scalars(given.r().to_bytes(), (-*given.s()).to_bytes()).expect("a signature");
        signer.signature = OctetString::new(twin.to_der().as_bytes()).expect("bytes");
    });
    assert_eq!(finding.problems, [Problem::WrongSignature]);
}

#[test]
fn a_container_for_other_bytes_does_not_fit() {
    let other = Container::sign(&key("Ines Halloran", 1), [7; 32]).and_then(|c| c.to_der()).expect("signed");
    assert_eq!(with_container(&other).problems, [Problem::Changed]);
}

#[test]
fn a_timestamp_token_may_be_added_and_is_said_to_be_unchecked() {
    let info = ContentInfo::from_der(&container(&signed())).expect("a container");
    let token = unsigned("1.2.840.113549.1.9.16.2.14", Any::encode_from(&info).expect("encoded"));
    let finding = altered_signer(|s| s.unsigned_attrs = SetOfVec::try_from(vec![token]).ok());
    assert!(finding.intact && finding.has_unchecked_timestamp && finding.problems.is_empty(), "{finding:?}");
}

#[test]
fn the_gap_holds_lower_case_digits_and_zeros_only() {
    let whole = signed();
    let place = digits(&whole);
    let first_letter = whole[place.clone()].iter().position(|b| b.is_ascii_lowercase()).expect("a letter");
    let changes = [
        (place.start + first_letter, whole[place.start + first_letter].to_ascii_uppercase()),
        (place.end - 1, b'1'),
        (place.end - 1, b' '),
        (place.end - 1, b'\n'),
    ];
    for (at, byte) in changes {
        let mut pdf = whole.clone();
        pdf[at] = byte;
        let finding = &inspect_pdf(&pdf).signatures[0];
        assert!(!finding.intact && finding.problems[0] == Problem::Gap, "{at}: {finding:?}");
    }
    // A second end of the string makes the dictionary unreadable altogether.
    let mut pdf = whole;
    pdf[place.end - 2] = b'>';
    assert!(inspect_pdf(&pdf).problems.contains(&Problem::NotSigned));
}

#[test]
fn a_range_that_leaves_more_out_is_refused() {
    // The range is a signed part itself; this shows that its form alone is enough to refuse it.
    let whole = signed();
    let at = whole.windows(12).rposition(|w| w == b"/ByteRange[0").expect("a range");
    for range in ["[1 ", "[0 -", "[9 "] {
        let mut pdf = whole.clone();
        pdf[at + 10..at + 10 + range.len()].copy_from_slice(range.as_bytes());
        let found = inspect_pdf(&pdf);
        assert!(!found.is_sound());
        assert_eq!(found.signatures[0].problems[0], Problem::Range, "{range}");
    }
}
