//! `assize report`: writes the report, a draft or signed.

use super::{Failed, key::passphrase, load, print};
use crate::platform::{self, AppendFile};
use assize_core::{
    exchange::report::{
        self,
        issue::{Issue, RENDERER},
    },
    project::{
        about::Signed,
        command::{Command, RecordCommand},
        evaluate::evaluate,
    },
    quantity::Text,
    record::SigningKey,
};
use clap::Args;
use std::path::PathBuf;

/// Options of `report`.
#[derive(Debug, Args)]
pub struct Options {
    /// The project.
    project: PathBuf,
    /// The PDF file to write.
    #[arg(long)]
    out: PathBuf,
    /// A key file (PKCS#12) to sign with.
    #[arg(long, requires = "passphrase_file")]
    sign: Option<PathBuf>,
    /// A file whose first line is the passphrase of the key.
    #[arg(long)]
    passphrase_file: Option<PathBuf>,
    /// What the signature means.
    #[arg(long, default_value = "performed")]
    meaning: String,
}

/// Carries it out. Signing a record that is not ready is the answer "no".
pub fn run(options: &Options) -> Result<(), Failed> {
    let mut document = load::project(&options.project)?;
    let evaluation = evaluate(document.project());
    let issue =
        Issue { renderer: RENDERER, program: env!("CARGO_PKG_VERSION").to_owned(), at: load::now(), signer: None };
    let Some(key_path) = &options.sign else {
        let rendered = report::pages(&document, &evaluation, &issue)?;
        platform::write_whole(&options.out, &rendered.pdf)?;
        print(&format!("{}: draft, {} pages", options.out.display(), rendered.pages));
        return Ok(());
    };
    let passphrase = passphrase(options.passphrase_file.as_deref().unwrap_or(key_path))?;
    let key = SigningKey::from_pkcs12(&platform::read(key_path)?, &passphrase)
        .map_err(|e| Failed::Wrong(format!("{}: {e}", key_path.display())))?;
    let missing = report::not_ready(document.project(), &evaluation);
    if !missing.is_empty() {
        eprintln!("assize: {}: not ready to be signed: {}", options.project.display(), missing.join("; "));
        return Err(Failed::No);
    }
    let pdf = report::signed(&document, &evaluation, &issue, &key, &options.meaning)?;
    let signed = Signed {
        name: Text::from(key.name()),
        meaning: Text::from(options.meaning.as_str()),
        at: issue.at,
        fingerprint: Text::from(key.fingerprint().to_string()),
        trail: Text::from(document.digest().hex()),
    };
    let line = load::enter(&mut document, Command::Record(RecordCommand::Signed(signed)), &key.name(), None)?;
    platform::write_whole(&options.out, &pdf)?;
    AppendFile::open(&options.project)?.append(line.as_bytes())?;
    print(&format!("{}: signed by {}, fingerprint {}", options.out.display(), key.name(), key.fingerprint()));
    Ok(())
}
