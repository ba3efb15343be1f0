//! What is found in a PDF: signatures, attachments, page texts, and what is wrong with them.

use super::{fingerprint::Fingerprint, problem::Problem};
use jiff::Timestamp;

/// Everything that [`super::inspect_pdf`] finds in a file.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Inspection {
    /// The signatures in order of signing; those whose place cannot be read stand last.
    pub signatures: Vec<SignatureFinding>,
    /// The files carried inside, in the order of the file's own list.
    pub attachments: Vec<Attachment>,
    /// The text of each page, in order; blank for a page that cannot be read.
    pub pages_text: Vec<String>,
    /// What is wrong with the file as a whole.
    pub problems: Vec<Problem>,
}

impl Inspection {
    /// Whether the file is signed and nothing at all was found wrong with it.
    ///
    /// This says that the file is as the holders of the named keys left it. Who they are, only a comparison of the
    /// fingerprints can tell.
    #[must_use]
    pub fn is_sound(&self) -> bool {
        let sound = |s: &SignatureFinding| s.intact && s.covers_whole_file && s.problems.is_empty();
        self.problems.is_empty() && !self.signatures.is_empty() && self.signatures.iter().all(sound)
    }
}

/// One signature of a file.
#[derive(Debug, Clone, PartialEq)]
pub struct SignatureFinding {
    /// Name of the form field.
    pub field_name: String,
    /// The signer's name from the certificate; blank where that cannot be read.
    pub name: String,
    /// The signer's name as the signature dictionary states it.
    pub stated_name: String,
    /// The stated meaning, such as "calibrated by".
    pub meaning: String,
    /// Fingerprint of the certificate, where it can be read.
    pub fingerprint: Option<Fingerprint>,
    /// The stated time for a person: `2026-12-01 12:45:00 UTC`, or as it stands in the file if that cannot be read.
    pub time_text: String,
    /// The stated time; the signer's clock, not a proof.
    pub signed_at: Option<Timestamp>,
    /// The signed bytes are unchanged and the signature is the certificate holder's.
    pub intact: bool,
    /// The last signature: it covers the file to its last byte. An earlier one: it covers the file as it was then, and
    /// only whole, intact signatures were appended after it.
    pub covers_whole_file: bool,
    /// A timestamp token was put beside the signature. It is not checked here, and may say anything.
    pub has_unchecked_timestamp: bool,
    /// What is wrong with this signature.
    pub problems: Vec<Problem>,
}

/// A file carried inside a PDF.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Attachment {
    /// Its file name.
    pub name: String,
    /// Its bytes.
    pub bytes: Vec<u8>,
    /// What it is to the document.
    pub relationship: Relationship,
}

/// What an attachment is to its document (ISO 19005-3, annex E).
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Relationship {
    /// The document was made from it.
    Source,
    /// The data behind what the document shows.
    Data,
    /// Another form of the document.
    Alternative,
    /// Something in addition.
    Supplement,
    /// Not stated.
    Unspecified,
    /// Stated in a word that is none of these.
    Other(String),
}
