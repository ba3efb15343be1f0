//! Making, storing and opening keys.

use super::{key, noon};
use crate::record::{CertificateError, KeyError, SigningKey};
use der::Decode;
use jiff::Timestamp;
use proptest::prelude::*;
use x509_cert::{
    Certificate,
    ext::pkix::{BasicConstraints, KeyUsage, SubjectKeyIdentifier},
};

const PASSPHRASE: &str = "tide table";
const BY_OPENSSL: &[u8] = include_bytes!("assets/openssl.p12");

#[test]
fn the_same_values_make_the_same_key() {
    let (one, two) = (key("Ines Halloran", 1), key("Ines Halloran", 1));
    assert_eq!(one.certificate_der(), two.certificate_der());
    assert_ne!(one.fingerprint(), key("Ines Halloran", 2).fingerprint());
    assert_ne!(one.fingerprint(), key("Ines Hallorax", 1).fingerprint());
}

#[test]
fn the_certificate_says_what_it_is_for() {
    let key = key("Ines Halloran", 1);
    let certificate = Certificate::from_der(key.certificate_der()).expect("a certificate");
    let tbs = certificate.tbs_certificate();
    assert_eq!(key.name(), "Ines Halloran");
    assert_eq!(tbs.subject(), tbs.issuer());
    let (critical, usage) = tbs.get_extension::<KeyUsage>().expect("readable").expect("present");
    assert!(critical && usage.digital_signature() && usage.non_repudiation());
    assert!(!usage.key_cert_sign() && !usage.key_agreement() && !usage.crl_sign());
    let (critical, constraints) = tbs.get_extension::<BasicConstraints>().expect("readable").expect("present");
    assert!(critical && !constraints.ca);
    assert!(tbs.get_extension::<SubjectKeyIdentifier>().expect("readable").is_some());
    assert_eq!(tbs.serial_number().as_bytes().len(), 16);
    assert_eq!(tbs.validity().not_before.to_string(), "2026-12-01T12:45:00Z");
    assert_eq!(tbs.validity().not_after.to_string(), "2036-12-01T12:45:00Z");
}

#[test]
fn a_fingerprint_has_sixteen_groups_of_four() {
    let fingerprint = key("Ines Halloran", 1).fingerprint();
    let shown = fingerprint.to_string();
    let groups: Vec<_> = shown.split(' ').collect();
    assert_eq!(groups.len(), 16);
    assert!(groups.iter().all(|g| g.len() == 4 && *g == g.to_uppercase()));
    assert_eq!(groups.concat().to_lowercase(), fingerprint.hex());
}

#[test]
fn what_makes_no_key_is_refused() {
    let refused =
        |name: &str, at: Timestamp, random: [u8; 48]| SigningKey::create(name, at, &random).expect_err("refused");
    let good: [u8; 48] = std::array::from_fn(|i| i as u8 + 1);
    let (mut zero, mut large, mut no_serial) = (good, good, good);
    zero[..32].fill(0);
    large[..32].fill(0xFF);
    no_serial[32..].fill(0);
    assert_eq!(refused("Ines", noon(), zero), KeyError::UnusableRandom);
    assert_eq!(refused("Ines", noon(), large), KeyError::UnusableRandom);
    assert_eq!(refused("Ines", noon(), no_serial), CertificateError::Serial.into());
    for (name, length) in [("", 0), ("  ", 0), ("a\nb", 3), (&"x".repeat(65), 65)] {
        assert_eq!(refused(name, noon(), good), CertificateError::Name { length }.into());
    }
    for at in ["1969-12-31T23:59:59Z", "9995-01-01T00:00:00Z"] {
        let at = at.parse().expect("a time");
        assert_eq!(refused("Ines", at, good), CertificateError::Time { at }.into());
    }
}

#[test]
fn the_largest_serial_number_and_a_foreign_name_are_kept() {
    let random = std::array::from_fn(|i| if i < 32 { 9 } else { 0xFF });
    let key = SigningKey::create("  Søren 張, =Ø+\"#;\\  ", noon(), &random).expect("a key");
    assert_eq!(key.name(), "Søren 張, =Ø+\"#;\\");
}

#[test]
fn a_stored_key_comes_back_with_its_passphrase_only() {
    let key = key("Søren 😀 Holm", 3);
    let passphrase = "grün & 7";
    let file = key.to_pkcs12(passphrase).expect("a file");
    let back = SigningKey::from_pkcs12(&file, passphrase).expect("the key");
    assert_eq!(back.certificate_der(), key.certificate_der());
    assert_eq!(back.sign(b"message"), key.sign(b"message"));
    let wrong = SigningKey::from_pkcs12(&file, "grün & 8").expect_err("wrong");
    assert_eq!(wrong, KeyError::WrongPassphrase);
    // No part of the secret stands in the file in the clear.
    let secret = key.secret().to_bytes();
    assert!(!file.windows(8).any(|w| w == &secret[..8]));
}

#[test]
fn a_passphrase_must_be_one() {
    let key = key("Ines", 1);
    assert_eq!(key.to_pkcs12(""), Err(KeyError::EmptyPassphrase));
    let character = '😀';
    assert_eq!(key.to_pkcs12("a😀"), Err(KeyError::PassphraseCharacter { character }));
}

#[test]
fn a_key_file_of_openssl_opens() {
    let key = SigningKey::from_pkcs12(BY_OPENSSL, PASSPHRASE).expect("a key");
    assert_eq!(key.name(), "Ines Halloran");
    // Printed by `openssl x509 -fingerprint -sha256` of OpenSSL 3.0.22.
    let by_openssl = "86A9 FB0D FE8A 710C A14D 627B F4D2 6698 3E25 291D ED91 BD09 5D7D 1BAB 494A FD1E";
    assert_eq!(key.fingerprint().to_string(), by_openssl);
}

#[test]
fn each_unusable_file_has_its_own_error() {
    let error = |bytes: &[u8], passphrase: &str| SigningKey::from_pkcs12(bytes, passphrase).expect_err("refused");
    assert_eq!(error(BY_OPENSSL, "tide tables"), KeyError::WrongPassphrase);
    assert_eq!(error(BY_OPENSSL, ""), KeyError::WrongPassphrase);
    let no_seal = include_bytes!("assets/no-seal.p12");
    assert!(SigningKey::from_pkcs12(no_seal, PASSPHRASE).is_ok());
    assert_eq!(error(no_seal, "tide tables"), KeyError::WrongPassphrase);
    let old = include_bytes!("assets/old-protection.p12");
    assert_eq!(error(old, PASSPHRASE), KeyError::UnsupportedProtection);
    assert_eq!(error(include_bytes!("assets/other-key.p12"), PASSPHRASE), KeyError::NoUsableKey);
    assert_eq!(error(include_bytes!("assets/no-certificate.p12"), PASSPHRASE), KeyError::NoCertificate);
    for other in [&b""[..], b"level/m,reading/mA\n0.0,4.01\n", b"\x30\x03\x02\x01\x03", &BY_OPENSSL[..900]] {
        assert!(matches!(error(other, PASSPHRASE), KeyError::NotAKeyFile { .. }), "{other:?}");
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    #[test]
    fn a_damaged_key_file_is_refused_or_opens_to_the_same_key(at in 0..BY_OPENSSL.len(), change in 1..=255u8) {
        let mut bytes = BY_OPENSSL.to_vec();
        bytes[at] ^= change;
        if let Ok(key) = SigningKey::from_pkcs12(&bytes, PASSPHRASE) {
            let whole = SigningKey::from_pkcs12(BY_OPENSSL, PASSPHRASE).expect("a key");
            prop_assert_eq!(key.fingerprint(), whole.fingerprint());
        }
    }
}
