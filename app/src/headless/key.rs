//! `assize key`: makes a signing key.

use super::{Failed, print};
use crate::platform;
use assize_core::record::SigningKey;
use clap::Args;
use std::path::{Path, PathBuf};

/// Options of `key`.
#[derive(Debug, Args)]
pub struct Options {
    /// Printed name of the person who will sign with it.
    #[arg(long)]
    name: String,
    /// The key file to write (PKCS#12); it must not exist yet.
    #[arg(long)]
    out: PathBuf,
    /// A file whose first line is the passphrase.
    #[arg(long)]
    passphrase_file: PathBuf,
}

/// Carries it out.
pub fn run(options: &Options) -> Result<(), Failed> {
    if options.out.exists() {
        let shown = options.out.display();
        return Err(Failed::Wrong(format!("{shown} exists already; a key is never overwritten")));
    }
    let passphrase = passphrase(&options.passphrase_file)?;
    let key = SigningKey::create(&options.name, platform::now().timestamp, &platform::random_bytes()?)?;
    platform::write_whole(&options.out, &key.to_pkcs12(&passphrase)?)?;
    print(&format!("{}: key of {}, fingerprint {}", options.out.display(), options.name, key.fingerprint()));
    Ok(())
}

/// The first line of a passphrase file.
pub fn passphrase(path: &Path) -> Result<String, Failed> {
    let bytes = platform::read(path)?;
    let text = String::from_utf8(bytes)
        .map_err(|_| Failed::Wrong(format!("{}: a passphrase is one line of UTF-8 text", path.display())))?;
    match text.lines().next() {
        Some(line) if !line.is_empty() => Ok(line.to_owned()),
        _ => Err(Failed::Wrong(format!("{}: the first line is empty; it should be the passphrase", path.display()))),
    }
}
