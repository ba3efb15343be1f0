//! The self-signed certificate that carries a signer's name, and reading the certificates of others.

use super::fingerprint::Fingerprint;
use der::{
    Any, DateTime, Decode, Encode, Tag,
    asn1::{ObjectIdentifier, SetOfVec},
};
use jiff::{Timestamp, ToSpan, tz::Offset};
use p256::{
    ecdsa::{DerSignature, SigningKey, VerifyingKey},
    pkcs8::DecodePublicKey,
};
use spki::{SubjectPublicKeyInfoOwned, SubjectPublicKeyInfoRef};
use std::time::Duration;
use x509_cert::{
    Certificate as X509, TbsCertificate,
    attr::AttributeTypeAndValue,
    builder::{Builder, CertificateBuilder, profile::BuilderProfile},
    ext::{
        Extension, ToExtension,
        pkix::{BasicConstraints, KeyUsage, KeyUsages, SubjectKeyIdentifier},
    },
    name::{Name, RdnSequence},
    serial_number::SerialNumber,
    time::{Time, Validity},
};

/// Object identifier of the common name in a distinguished name (RFC 4519, 2.3).
const COMMON_NAME: ObjectIdentifier = ObjectIdentifier::new_unwrap("2.5.4.3");

/// Longest common name in characters (RFC 5280, appendix A.1, `ub-common-name`).
const NAME_LIMIT: usize = 64;

/// How long a certificate made here is valid, in years.
const VALID_YEARS: i64 = 10;

/// Why a certificate cannot be made or read.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum CertificateError {
    /// The signer's name is blank, too long or holds control characters.
    #[error("a signer's name needs 1 to 64 printable characters; this one has {length}")]
    Name {
        /// Length of the name in characters, without the blanks around it.
        length: usize,
    },
    /// The serial number is zero.
    #[error("the random bytes for the serial number are all zero")]
    Serial,
    /// The time lies outside 1970 to 9989, so the ten years of validity cannot be written down.
    #[error("{at} cannot be the start of a certificate's ten years")]
    Time {
        /// The start that was asked for.
        at: Timestamp,
    },
    /// The bytes are not an X.509 certificate in DER, or one that does not write back to the same bytes.
    #[error("not a certificate: {reason}")]
    NotACertificate {
        /// What the decoder or encoder met.
        reason: String,
    },
}

impl CertificateError {
    fn encoding(error: impl std::fmt::Display) -> Self {
        Self::NotACertificate { reason: error.to_string() }
    }
}

/// A certificate with its exact bytes.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Certificate {
    der: Vec<u8>,
    parsed: X509,
}

impl Certificate {
    /// Makes a self-signed certificate: digital signature and non-repudiation only, no authority, ten years.
    pub(super) fn self_signed(
        name: &str,
        secret: &SigningKey,
        not_before: Timestamp,
        serial: &[u8; 16],
    ) -> Result<Self, CertificateError> {
        let subject = distinguished_name(name)?;
        if serial.iter().all(|b| *b == 0) {
            return Err(CertificateError::Serial);
        }
        let key = SubjectPublicKeyInfoOwned::from_key(secret.verifying_key()).map_err(CertificateError::encoding)?;
        let serial = SerialNumber::new(serial).map_err(CertificateError::encoding)?;
        let builder = CertificateBuilder::new(SignerProfile { subject }, serial, validity(not_before)?, key);
        let parsed = builder.and_then(|b| b.build::<_, DerSignature>(secret)).map_err(CertificateError::encoding)?;
        let der = parsed.to_der().map_err(CertificateError::encoding)?;
        Ok(Self { der, parsed })
    }

    /// Reads a certificate and insists that it writes back to the same bytes, so that it has one form only.
    pub(super) fn from_der(der: &[u8]) -> Result<Self, CertificateError> {
        let parsed = X509::from_der(der).map_err(CertificateError::encoding)?;
        if parsed.to_der().map_err(CertificateError::encoding)? != der {
            return Err(CertificateError::encoding("it is not in its one canonical form"));
        }
        Ok(Self { der: der.to_vec(), parsed })
    }

    /// The exact bytes.
    pub(super) fn der(&self) -> &[u8] {
        &self.der
    }

    /// The decoded form.
    pub(super) fn parsed(&self) -> &X509 {
        &self.parsed
    }

    /// The holder's common name, or the whole distinguished name where there is none.
    pub(super) fn name(&self) -> String {
        let subject = self.parsed.tbs_certificate().subject();
        match subject.common_name() {
            Ok(Some(name)) => name.value().to_string(),
            _ => subject.to_string(),
        }
    }

    /// SHA-256 of the certificate.
    pub(super) fn fingerprint(&self) -> Fingerprint {
        Fingerprint::of(&self.der)
    }

    /// The P-256 key that the certificate is for, if it is for one.
    pub(super) fn verifying_key(&self) -> Option<VerifyingKey> {
        let info = self.parsed.tbs_certificate().subject_public_key_info();
        VerifyingKey::from_public_key_der(&info.to_der().ok()?).ok()
    }

    /// Whether `at` lies within the certificate's validity, both ends included.
    pub(super) fn is_valid_at(&self, at: Timestamp) -> bool {
        let validity = self.parsed.tbs_certificate().validity();
        let seconds = |t: &Time| i64::try_from(t.to_unix_duration().as_secs()).unwrap_or(i64::MAX);
        (seconds(&validity.not_before)..=seconds(&validity.not_after)).contains(&at.as_second())
    }
}

/// Which extensions the certificate of a signer carries.
struct SignerProfile {
    subject: Name,
}

impl BuilderProfile for SignerProfile {
    fn get_issuer(&self, subject: &Name) -> Name {
        subject.clone()
    }

    fn get_subject(&self) -> Name {
        self.subject.clone()
    }

    fn build_extensions(
        &self,
        spk: SubjectPublicKeyInfoRef<'_>,
        _issuer_spk: SubjectPublicKeyInfoRef<'_>,
        tbs: &TbsCertificate,
    ) -> x509_cert::builder::Result<Vec<Extension>> {
        let subject = tbs.subject();
        let end_entity = BasicConstraints { ca: false, path_len_constraint: None };
        let usage = KeyUsage(KeyUsages::DigitalSignature | KeyUsages::NonRepudiation);
        Ok(vec![
            (true, &end_entity).to_extension(subject, &[])?,
            (true, &usage).to_extension(subject, &[])?,
            SubjectKeyIdentifier::try_from(spk)?.to_extension(subject, &[])?,
        ])
    }
}

/// A distinguished name of one part, the common name, in UTF-8.
fn distinguished_name(name: &str) -> Result<Name, CertificateError> {
    let name = name.trim();
    let length = name.chars().count();
    if length == 0 || length > NAME_LIMIT || name.chars().any(char::is_control) {
        return Err(CertificateError::Name { length });
    }
    let written = || -> der::Result<Name> {
        let part = AttributeTypeAndValue { oid: COMMON_NAME, value: Any::new(Tag::Utf8String, name.as_bytes())? };
        let mut parts = RdnSequence::default();
        parts.push(SetOfVec::try_from(vec![part])?.into());
        // The name type has no public constructor from parts, so it is read back from its bytes.
        Name::from_der(&parts.to_der()?)
    };
    written().map_err(CertificateError::encoding)
}

/// From `start` to the same moment ten calendar years later, in whole seconds.
fn validity(start: Timestamp) -> Result<Validity, CertificateError> {
    let refused = || CertificateError::Time { at: start };
    let end = Offset::UTC
        .to_datetime(start)
        .checked_add(VALID_YEARS.years())
        .and_then(|end| Offset::UTC.to_timestamp(end))
        .map_err(|_| refused())?;
    let time = |at: Timestamp| {
        let seconds = u64::try_from(at.as_second()).ok()?;
        DateTime::from_unix_duration(Duration::from_secs(seconds)).ok()
    };
    match (time(start), time(end)) {
        (Some(start), Some(end)) => Ok(Validity::new(Time::from(start), Time::from(end))),
        _ => Err(refused()),
    }
}
