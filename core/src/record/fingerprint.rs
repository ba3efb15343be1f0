//! The short text by which two people compare a certificate.

use sha2::{Digest, Sha256};
use std::fmt;

/// SHA-256 of a certificate's DER bytes; shown as 16 groups of 4 upper-case hexadecimal digits.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Fingerprint([u8; 32]);

impl Fingerprint {
    /// The fingerprint of `der`, a whole certificate.
    #[must_use]
    pub fn of(der: &[u8]) -> Self {
        Self(Sha256::digest(der).into())
    }

    /// The 32 bytes of the digest.
    #[must_use]
    pub fn bytes(&self) -> &[u8; 32] {
        &self.0
    }

    /// 64 lower-case hexadecimal digits without a gap, as tools print and read them.
    #[must_use]
    pub fn hex(&self) -> String {
        hex(&self.0)
    }
}

impl fmt::Display for Fingerprint {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, pair) in self.0.chunks_exact(2).enumerate() {
            let gap = if i == 0 { "" } else { " " };
            write!(f, "{gap}{:02X}{:02X}", pair[0], pair[1])?;
        }
        Ok(())
    }
}

/// Lower-case hexadecimal digits of `bytes`, two for each byte.
pub(super) fn hex(bytes: &[u8]) -> String {
    const DIGITS: &[u8; 16] = b"0123456789abcdef";
    let digit = |nibble: u8| char::from(DIGITS[usize::from(nibble)]);
    bytes.iter().flat_map(|b| [digit(b >> 4), digit(b & 15)]).collect()
}
