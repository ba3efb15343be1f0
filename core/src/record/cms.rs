//! The signature container (CMS `SignedData`, RFC 5652), written and read in one form only.
//!
//! The container lies outside the bytes it signs, so much of it could be changed without breaking the digest.
//! Therefore it is read by taking out the four parts that carry meaning, building it again from them, and
//! insisting on the same bytes.

use super::{
    attributes::{
        DATA, MESSAGE_DIGEST, SIGNING_CERTIFICATE, digest_algorithm, signature_algorithm, signed_attributes,
        signing_certificate_der, single_value,
    },
    certificate::Certificate,
    key::{SigningKey, holds},
    problem::Problem,
};
use cms::{
    cert::{CertificateChoices, IssuerAndSerialNumber},
    content_info::{CmsVersion, ContentInfo},
    signed_data::{CertificateSet, EncapsulatedContentInfo, SignedData, SignerIdentifier, SignerInfo, SignerInfos},
};
use der::{
    Any, Decode, Encode,
    asn1::{ObjectIdentifier, OctetString, SetOfVec},
};
use x509_cert::attr::{Attribute, Attributes};

/// `signedData` (RFC 5652, 5.1).
const SIGNED_DATA: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.7.2");
/// Attribute `signatureTimeStampToken`, the only unsigned one let through (RFC 3161, appendix A).
const TIMESTAMP_TOKEN: ObjectIdentifier = ObjectIdentifier::new_unwrap("1.2.840.113549.1.9.16.2.14");

/// What a container says; everything else in it follows from these.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Container {
    /// The signer's certificate.
    pub(super) certificate: Certificate,
    /// SHA-256 of the signed bytes as the container states it.
    pub(super) digest: [u8; 32],
    /// The ECDSA signature of the signed attributes, DER.
    pub(super) signature: Vec<u8>,
    /// A timestamp token put in after signing; carried along, not checked.
    pub(super) timestamp: Option<Any>,
}

impl Container {
    /// Signs `digest`, the SHA-256 of the bytes to be signed.
    pub(super) fn sign(key: &SigningKey, digest: [u8; 32]) -> der::Result<Self> {
        let certificate = key.certificate().clone();
        // What is signed is the set itself (tag 0x31), not the tagged field it stands in (RFC 5652, 5.4).
        let message = signed_attributes(&certificate, &digest)?.to_der()?;
        Ok(Self { signature: key.sign(&message), certificate, digest, timestamp: None })
    }

    /// The one encoding of these parts.
    pub(super) fn to_der(&self) -> der::Result<Vec<u8>> {
        let certificate = self.certificate.parsed();
        let tbs = certificate.tbs_certificate();
        let signer = SignerInfo {
            version: CmsVersion::V1,
            sid: SignerIdentifier::IssuerAndSerialNumber(IssuerAndSerialNumber {
                issuer: tbs.issuer().clone(),
                serial_number: tbs.serial_number().clone(),
            }),
            digest_alg: digest_algorithm(),
            signed_attrs: Some(signed_attributes(&self.certificate, &self.digest)?),
            signature_algorithm: signature_algorithm(),
            signature: OctetString::new(self.signature.as_slice())?,
            unsigned_attrs: self.timestamp.as_ref().map(timestamp_attributes).transpose()?,
        };
        let certificates = vec![CertificateChoices::Certificate(certificate.clone())];
        let signed = SignedData {
            version: CmsVersion::V1,
            digest_algorithms: SetOfVec::try_from(vec![digest_algorithm()])?,
            encap_content_info: EncapsulatedContentInfo { econtent_type: DATA, econtent: None },
            certificates: Some(CertificateSet::try_from(certificates)?),
            crls: None,
            signer_infos: SignerInfos::try_from(vec![signer])?,
        };
        ContentInfo { content_type: SIGNED_DATA, content: Any::encode_from(&signed)? }.to_der()
    }

    /// Reads a container and accepts it only if it is exactly what [`Self::to_der`] writes for its parts.
    pub(super) fn read(der: &[u8]) -> Result<Self, Problem> {
        let signed = ContentInfo::from_der(der)
            .ok()
            .filter(|info| info.content_type == SIGNED_DATA)
            .and_then(|info| info.content.decode_as::<SignedData>().ok())
            .ok_or(Problem::NotAContainer)?;
        let signers = signed.signer_infos.0.as_slice();
        let [signer] = signers else {
            return Err(Problem::SignerCount { count: signers.len() });
        };
        let certificates = signed.certificates.as_ref().map_or(&[][..], |set| set.0.as_slice());
        let [CertificateChoices::Certificate(certificate)] = certificates else {
            let count = certificates.len();
            return Err(Problem::CertificateCount { count });
        };
        let certificate = certificate.to_der().ok().and_then(|der| Certificate::from_der(&der).ok());
        let certificate = certificate.ok_or(Problem::NotAContainer)?;
        let attributes = signer.signed_attrs.as_ref().ok_or(Problem::NotAContainer)?;
        let named = single_value(attributes, SIGNING_CERTIFICATE).and_then(|value| value.to_der().ok());
        if named != signing_certificate_der(&certificate).ok() {
            return Err(Problem::OtherCertificate);
        }
        let digest = single_value(attributes, MESSAGE_DIGEST)
            .and_then(|value| <[u8; 32]>::try_from(value.value()).ok())
            .ok_or(Problem::NotAContainer)?;
        let container = Self {
            certificate,
            digest,
            signature: signer.signature.as_bytes().to_vec(),
            timestamp: timestamp_token(signer.unsigned_attrs.as_ref())?,
        };
        match container.to_der() {
            Ok(again) if again == der => Ok(container),
            _ => Err(Problem::NotCanonical),
        }
    }

    /// Whether the signature is the certificate holder's.
    pub(super) fn signature_holds(&self) -> bool {
        let message = signed_attributes(&self.certificate, &self.digest).and_then(|a| a.to_der());
        match (self.certificate.verifying_key(), message) {
            (Some(key), Ok(message)) => holds(&key, &message, &self.signature),
            _ => false,
        }
    }
}

fn timestamp_attributes(token: &Any) -> der::Result<Attributes> {
    SetOfVec::try_from(vec![Attribute { oid: TIMESTAMP_TOKEN, values: SetOfVec::try_from(vec![token.clone()])? }])
}

/// The timestamp token among the unsigned attributes; anything else beside it is refused.
fn timestamp_token(unsigned: Option<&Attributes>) -> Result<Option<Any>, Problem> {
    let Some(unsigned) = unsigned else {
        return Ok(None);
    };
    let token = single_value(unsigned, TIMESTAMP_TOKEN).filter(|_| unsigned.len() == 1);
    let is_signed_data = |token: &&Any| {
        let info = token.decode_as::<ContentInfo>();
        info.is_ok_and(|info| info.content_type == SIGNED_DATA)
    };
    let token = token.filter(is_signed_data).ok_or(Problem::UnsignedAttributes)?;
    Ok(Some(token.clone()))
}
