//! What can be wrong with a file or a signature in it.

use super::pdf::ReadError;
use jiff::Timestamp;

/// One thing that is not as it should be. The text says it in a sentence.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum Problem {
    // About the file.
    /// The file cannot be read.
    #[error(transparent)]
    Unreadable(#[from] ReadError),
    /// The file carries no signature at all.
    #[error("the file is not signed")]
    NotSigned,
    /// Signature dictionaries exist that no form field leads to.
    #[error("{count} signature(s) stand outside the file's form")]
    OutsideForm {
        /// How many.
        count: usize,
    },
    /// Bytes follow the last signature.
    #[error("{count} byte(s) were appended after the last signature")]
    Appended {
        /// How many.
        count: usize,
    },
    /// The text of a page cannot be read.
    #[error("the text of page {page} (counted from 1) cannot be read")]
    PageText {
        /// The page, counted from 1.
        page: usize,
    },
    /// An attachment cannot be read.
    #[error("the attachment {name:?} cannot be read")]
    Attachment {
        /// Its name, blank where even that is missing.
        name: String,
    },
    /// Two attachments have the same name, so it is open which one is meant.
    #[error("there are two attachments named {name:?}")]
    SameName {
        /// The name.
        name: String,
    },

    // About one signature.
    /// The signature is of another kind than `ETSI.CAdES.detached`.
    #[error("this kind of signature is not read here: {kind:?}")]
    Kind {
        /// What the file states.
        kind: String,
    },
    /// `ByteRange` does not take in everything from the first byte but one gap.
    #[error("the signature states no proper range of signed bytes")]
    Range,
    /// The gap is not one string of lower-case digits: a container, then zeros.
    #[error("the place of the signature holds something else beside it")]
    Gap,
    /// The container cannot be decoded.
    #[error("the signature cannot be decoded")]
    NotAContainer,
    /// The container has not exactly one signer.
    #[error("the signature has {count} signers instead of one")]
    SignerCount {
        /// Signers found.
        count: usize,
    },
    /// The container has not exactly one certificate.
    #[error("the signature carries {count} certificates instead of one")]
    CertificateCount {
        /// Certificates found.
        count: usize,
    },
    /// What was signed names another certificate than the one that is there.
    #[error("the certificate is not the one that was signed with")]
    OtherCertificate,
    /// Something was added to the container that nobody signed.
    #[error("unsigned statements were added to the signature")]
    UnsignedAttributes,
    /// The container does not have its one proper form.
    #[error("the signature was altered in a place that it does not protect")]
    NotCanonical,
    /// The bytes of the file are not those that were signed.
    #[error("the file was changed after signing")]
    Changed,
    /// The signature is not the certificate holder's.
    #[error("the signature does not fit the certificate")]
    WrongSignature,
    /// The stated time lies outside the certificate's validity, or cannot be read.
    #[error("the certificate was not valid at the stated time of signing")]
    NotValidThen {
        /// The stated time, if it can be read.
        stated: Option<Timestamp>,
    },
    /// What follows this signature is not just another, intact signature.
    #[error("the file was continued after this signature with something else than a sound signature")]
    Continued,
}
