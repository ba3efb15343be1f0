//! Keys, signatures, verification.
//!
//! A [`SigningKey`] signs a finished report file with [`sign_pdf`]; [`inspect_pdf`] says of any bytes what is
//! signed, by whom, whether it is as it was when it was signed, and hands out what the file carries.
//! The figures inside are somebody else's business: this layer knows bytes, names and times only.
//!
//! Clause numbers of ISO and ETSI texts in this folder are given from memory; those of RFCs can be looked up.

mod append;
mod attachments;
mod attributes;
mod certificate;
mod cms;
mod field;
mod fingerprint;
mod found;
mod gap;
mod inspection;
mod key;
mod key_file;
mod pdf;
mod problem;
mod revision;
mod sign;
mod structure;
mod text;
mod update;
mod verify;

#[cfg(test)]
mod tests;

pub use certificate::CertificateError;
pub use fingerprint::Fingerprint;
pub use inspection::{Attachment, Inspection, Relationship, SignatureFinding};
pub use key::{KeyError, SigningKey};
pub use pdf::ReadError;
pub use problem::Problem;
pub use sign::{SignError, SignatureField, SignatureRequest, add_signature_fields, sign_pdf};
pub use verify::{inspect_pdf, only_signatures_follow};
