//! Storing a signing key in a PKCS#12 file under a passphrase, and opening such files.
//!
//! The library that knows the format keeps a copy of the secret in memory of its own while it works, and does not
//! wipe it when it is done; everything else here does.

use super::{
    certificate::Certificate,
    key::{KeyError, SigningKey},
};
use p12_keystore::{
    Certificate as StoredCertificate, EncryptionAlgorithm, KeyStore, KeyStoreEntry, MacAlgorithm, Pkcs12Archive,
    PrivateKey, PrivateKeyChain, error::Error as StoreError,
};
use p256::{
    SecretKey,
    pkcs8::{DecodePrivateKey, EncodePrivateKey},
};

/// Rounds of the passphrase's key derivation, for the seal and for the encryption alike: a guess costs the same on
/// either way. The figure is common advice for PBKDF2 with SHA-256 (OWASP password storage cheat sheet, from memory).
const ROUNDS: u32 = 600_000;

/// Largest character of the passphrase encoding (BMPString, RFC 7292, B.1).
const LAST_BMP: char = '\u{FFFF}';

impl SigningKey {
    /// Writes the key as a PKCS#12 file: AES-256 with PBKDF2, sealed with HMAC-SHA-256.
    ///
    /// The salts are drawn from the operating system inside the writer, so two files of one key differ.
    ///
    /// # Errors
    /// [`KeyError::EmptyPassphrase`], [`KeyError::PassphraseCharacter`], [`KeyError::NotWritten`].
    ///
    /// # Source
    /// PKCS#12 v1.1, RFC 7292; PBES2, RFC 8018, 6.2.
    pub fn to_pkcs12(&self, passphrase: &str) -> Result<Vec<u8>, KeyError> {
        if passphrase.is_empty() {
            return Err(KeyError::EmptyPassphrase);
        }
        check_characters(passphrase)?;
        let written = |reason: String| KeyError::NotWritten { reason };
        let secret =
            SecretKey::from(self.secret().as_nonzero_scalar()).to_pkcs8_der().map_err(|e| written(e.to_string()))?;
        let key = PrivateKey::from_der(secret.as_bytes()).map_err(|e| written(e.to_string()))?;
        let certificate = StoredCertificate::from_der(self.certificate_der()).map_err(|e| written(e.to_string()))?;
        let id = self.fingerprint().bytes().to_vec();
        let chain = PrivateKeyChain::new(id, key, [certificate]);

        let mut store = KeyStore::new();
        // The label takes the characters of the passphrase encoding only.
        let label: String = self.name().chars().filter(|c| *c <= LAST_BMP).collect();
        store.add_entry(&label, KeyStoreEntry::PrivateKeyChain(chain));
        store
            .writer(passphrase)
            .encryption_algorithm(EncryptionAlgorithm::PbeWithHmacSha256AndAes256)
            .encryption_iterations(ROUNDS)
            .mac_algorithm(MacAlgorithm::HmacSha256)
            .mac_iterations(ROUNDS)
            .write()
            .map_err(|e| written(e.to_string()))
    }

    /// Opens a PKCS#12 file and takes its first P-256 key with the certificate that goes with it.
    ///
    /// Certificates and keys are matched by the public key, not by the labels in the file.
    ///
    /// # Errors
    /// [`KeyError::NotAKeyFile`], [`KeyError::WrongPassphrase`], [`KeyError::UnsupportedProtection`],
    /// [`KeyError::NoUsableKey`], [`KeyError::NoCertificate`], [`KeyError::Certificate`].
    pub fn from_pkcs12(bytes: &[u8], passphrase: &str) -> Result<Self, KeyError> {
        check_characters(passphrase)?;
        let archive = Pkcs12Archive::from_pkcs12(bytes, passphrase).map_err(why_not_opened)?;
        let secrets: Vec<_> = archive
            .keys
            .iter()
            .filter_map(|bag| SecretKey::from_pkcs8_der(bag.key.as_der()).ok())
            .map(|secret| p256::ecdsa::SigningKey::from(&secret))
            .collect();
        if secrets.is_empty() {
            return Err(KeyError::NoUsableKey);
        }
        let mut refused = KeyError::NoCertificate;
        for bag in &archive.certs {
            // A certificate that cannot be used matters only if no other one fits.
            match Certificate::from_der(bag.cert.as_der()) {
                Ok(certificate) => {
                    let fits = |secret| Self::from_parts(secret, certificate.clone());
                    if let Some(key) = secrets.iter().cloned().find_map(fits) {
                        return Ok(key);
                    }
                }
                Err(error) => refused = error.into(),
            }
        }
        Err(refused)
    }
}

fn check_characters(passphrase: &str) -> Result<(), KeyError> {
    match passphrase.chars().find(|c| *c > LAST_BMP) {
        Some(character) => Err(KeyError::PassphraseCharacter { character }),
        None => Ok(()),
    }
}

/// Tells the three cases apart: another kind of file, another passphrase, another kind of protection.
fn why_not_opened(error: StoreError) -> KeyError {
    match error {
        // A file without a seal shows a wrong passphrase only when its contents do not decrypt.
        StoreError::MacError(_) | StoreError::Pkcs5Error(_) => KeyError::WrongPassphrase,
        StoreError::UnsupportedEncryptionScheme
        | StoreError::UnsupportedMacAlgorithm
        | StoreError::InvalidParameters => KeyError::UnsupportedProtection,
        other => KeyError::NotAKeyFile { reason: other.to_string() },
    }
}
