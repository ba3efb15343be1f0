//! A signer's secret key together with the certificate that names the signer.

use super::{
    certificate::{Certificate, CertificateError},
    fingerprint::Fingerprint,
};
use jiff::Timestamp;
use p256::ecdsa::{Signature, VerifyingKey, signature::Signer};
use std::fmt;

/// Why a key cannot be made, stored or opened.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum KeyError {
    /// The random bytes are no valid secret (zero, or not below the order of the curve); draw new ones.
    #[error("the random bytes do not make a key; draw new ones")]
    UnusableRandom,
    /// The certificate cannot be made or read.
    #[error(transparent)]
    Certificate(#[from] CertificateError),
    /// A key is stored under a passphrase only.
    #[error("a key file needs a passphrase")]
    EmptyPassphrase,
    /// The passphrase holds a character that the file format cannot take, such as a pictogram.
    #[error("the passphrase holds a character that a key file cannot take: {character:?}")]
    PassphraseCharacter {
        /// The first such character.
        character: char,
    },
    /// The bytes are no PKCS#12 file, or a damaged one.
    #[error("this is not a key file (PKCS#12): {reason}")]
    NotAKeyFile {
        /// What the reader met.
        reason: String,
    },
    /// The file's seal does not fit the passphrase; a damaged file looks the same.
    #[error("the passphrase does not open this key file")]
    WrongPassphrase,
    /// The file is protected by a method that is not read here, such as the 40-bit and triple-DES ones of old.
    #[error("this key file is protected in a way that is not supported; export it again with AES")]
    UnsupportedProtection,
    /// The file opens, but holds no P-256 key.
    #[error("this key file holds no P-256 key")]
    NoUsableKey,
    /// The file holds a P-256 key but no certificate that goes with it.
    #[error("this key file holds a key but no certificate for it")]
    NoCertificate,
    /// The file cannot be written.
    #[error("the key file cannot be written: {reason}")]
    NotWritten {
        /// What the writer met.
        reason: String,
    },
}

/// A P-256 secret key and its certificate. The secret is wiped from memory when the value is dropped.
#[derive(Clone)]
pub struct SigningKey {
    secret: p256::ecdsa::SigningKey,
    certificate: Certificate,
}

impl SigningKey {
    /// Makes a key with a self-signed certificate that names its holder and is valid for ten years.
    ///
    /// The same values give the same key, so `random` must come from the operating system and be used once.
    ///
    /// # Shapes and units
    /// `name`: 1 to 64 characters. `random`: 32 bytes for the secret, then 16 for the serial number.
    ///
    /// # Errors
    /// [`KeyError::UnusableRandom`] (about once in 2³² draws), [`KeyError::Certificate`] for the name, the serial
    /// number or the time.
    ///
    /// # Source
    /// X.509 profile of RFC 5280, 4.1 and 4.2.1; curve P-256 of NIST SP 800-186.
    pub fn create(name: &str, not_before: Timestamp, random: &[u8; 48]) -> Result<Self, KeyError> {
        let (scalar, rest) = random.split_at(32);
        let secret = p256::ecdsa::SigningKey::from_slice(scalar).map_err(|_| KeyError::UnusableRandom)?;
        let mut serial = [0; 16];
        serial.copy_from_slice(rest);
        let certificate = Certificate::self_signed(name, &secret, not_before, &serial)?;
        Ok(Self { secret, certificate })
    }

    /// Puts a secret and its certificate together; `None` if they do not belong to each other.
    pub(super) fn from_parts(secret: p256::ecdsa::SigningKey, certificate: Certificate) -> Option<Self> {
        let belongs = certificate.verifying_key() == Some(*secret.verifying_key());
        belongs.then_some(Self { secret, certificate })
    }

    /// The holder's name as the certificate states it.
    #[must_use]
    pub fn name(&self) -> String {
        self.certificate.name()
    }

    /// The certificate's bytes (X.509, DER).
    #[must_use]
    pub fn certificate_der(&self) -> &[u8] {
        self.certificate.der()
    }

    /// SHA-256 of the certificate: what two people compare, and what a report prints.
    #[must_use]
    pub fn fingerprint(&self) -> Fingerprint {
        self.certificate.fingerprint()
    }

    /// The certificate.
    pub(super) fn certificate(&self) -> &Certificate {
        &self.certificate
    }

    /// The secret.
    pub(super) fn secret(&self) -> &p256::ecdsa::SigningKey {
        &self.secret
    }

    /// ECDSA over SHA-256 of `message`, in DER, the nonce drawn from key and message (RFC 6979).
    ///
    /// Of the two signatures (r, s) and (r, n − s), which hold alike, the one with the lower s is given, so that a
    /// third party cannot turn a valid file into another valid file.
    pub(super) fn sign(&self, message: &[u8]) -> Vec<u8> {
        let signature: Signature = self.secret.sign(message);
        signature.normalize_s().to_der().as_bytes().to_vec()
    }
}

impl fmt::Debug for SigningKey {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_struct("SigningKey")
            .field("name", &self.name())
            .field("fingerprint", &self.fingerprint().to_string())
            .finish_non_exhaustive()
    }
}

/// Whether `signature` (DER) is the lower-s signature of `message` under `key`.
pub(super) fn holds(key: &VerifyingKey, message: &[u8], signature: &[u8]) -> bool {
    use p256::ecdsa::signature::Verifier;
    let Ok(signature) = Signature::from_der(signature) else {
        return false;
    };
    signature.normalize_s() == signature && key.verify(message, &signature).is_ok()
}
