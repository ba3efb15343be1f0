//! The four signed attributes of a signature: what exactly the secret key signs.

use super::certificate::Certificate;
use der::{
    Any, Encode, EncodeValue, Sequence, Tagged,
    asn1::{ObjectIdentifier, OctetString, SetOfVec},
};
use sha2::{Digest, Sha256};
use spki::AlgorithmIdentifierOwned;
use x509_cert::attr::{Attribute, Attributes};

/// `data`, the content type of a detached signature (RFC 5652, 4).
pub(super) const DATA: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.7.1");
/// Attribute `contentType` (RFC 5652, 11.1).
const CONTENT_TYPE: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.9.3");
/// Attribute `messageDigest` (RFC 5652, 11.2).
pub(super) const MESSAGE_DIGEST: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.9.4");
/// Attribute `signingCertificateV2` (RFC 5035, 3).
pub(super) const SIGNING_CERTIFICATE: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.9.16.2.47");
/// Attribute `cmsAlgorithmProtection` (RFC 6211, 2).
const ALGORITHM_PROTECTION: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.9.52");
/// SHA-256 (RFC 5754, 2.2).
const SHA_256: ObjectIdentifier = ObjectIdentifier::new_unwrap("2.16.840.1.101.3.4.2.1");
/// ECDSA with SHA-256 (RFC 5754, 3.3).
const ECDSA_SHA_256: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.10045.4.3.2");

/// Names one certificate by its digest; SHA-256 is the default algorithm and so is not written (RFC 5035, 4).
#[derive(Sequence)]
struct CertificateById {
    digest: OctetString,
}

/// The value of `signingCertificateV2` with one certificate and no policies.
#[derive(Sequence)]
struct SigningCertificate {
    certificates: Vec<CertificateById>,
}

/// The value of `cmsAlgorithmProtection` for a signature.
#[derive(Sequence)]
struct AlgorithmProtection {
    digest: AlgorithmIdentifierOwned,
    #[asn1(context_specific = "1", tag_mode = "IMPLICIT")]
    signature: AlgorithmIdentifierOwned,
}

/// SHA-256 without parameters, as RFC 5754, 2 asks.
pub(super) fn digest_algorithm() -> AlgorithmIdentifierOwned {
    AlgorithmIdentifierOwned { oid: SHA_256, parameters: None }
}

/// ECDSA with SHA-256, without parameters.
pub(super) fn signature_algorithm() -> AlgorithmIdentifierOwned {
    AlgorithmIdentifierOwned { oid: ECDSA_SHA_256, parameters: None }
}

/// The attributes in DER order. There is no signing time: in a PDF the entry `M` holds it (ETSI EN 319 142-1, 6.3).
pub(super) fn signed_attributes(certificate: &Certificate, digest: &[u8; 32]) -> der::Result<Attributes> {
    let protection = AlgorithmProtection { digest: digest_algorithm(), signature: signature_algorithm() };
    SetOfVec::try_from(vec![
        attribute(CONTENT_TYPE, &DATA)?,
        attribute(MESSAGE_DIGEST, &OctetString::new(&digest[..])?)?,
        attribute(SIGNING_CERTIFICATE, &signing_certificate(certificate)?)?,
        attribute(ALGORITHM_PROTECTION, &protection)?,
    ])
}

/// The only value of the attribute `oid`; `None` if it is missing, there twice or has not exactly one value.
pub(super) fn single_value(attributes: &Attributes, oid: ObjectIdentifier) -> Option<&Any> {
    let mut found = attributes.iter().filter(|a| a.oid == oid);
    let (Some(attribute), None) = (found.next(), found.next()) else {
        return None;
    };
    match attribute.values.as_slice() {
        [value] => Some(value),
        _ => None,
    }
}

/// The bytes that `signingCertificateV2` must have for `certificate`.
pub(super) fn signing_certificate_der(certificate: &Certificate) -> der::Result<Vec<u8>> {
    signing_certificate(certificate)?.to_der()
}

fn signing_certificate(certificate: &Certificate) -> der::Result<SigningCertificate> {
    let digest = OctetString::new(Sha256::digest(certificate.der()).to_vec())?;
    Ok(SigningCertificate { certificates: vec![CertificateById { digest }] })
}

fn attribute(oid: ObjectIdentifier, value: &(impl EncodeValue + Tagged)) -> der::Result<Attribute> {
    Ok(Attribute { oid, values: SetOfVec::try_from(vec![Any::encode_from(value)?])? })
}
