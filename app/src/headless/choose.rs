//! `assize choose`: records the choice with its reason.

use super::{Failed, fit::column, load, print};
use crate::platform::AppendFile;
use assize_core::project::{
    command::{ColumnsCommand, Command},
    evaluate::evaluate,
};
use clap::Args;
use std::path::PathBuf;

/// Options of `choose`.
#[derive(Debug, Args)]
pub struct Options {
    /// The project.
    project: PathBuf,
    /// The function, with its weights after @ if not equal.
    #[arg(long)]
    fit: String,
    /// Why.
    #[arg(long)]
    because: String,
    /// Printed name of the person who chooses.
    #[arg(long)]
    by: String,
}

/// Carries it out.
pub fn run(options: &Options) -> Result<(), Failed> {
    let mut document = load::project(&options.project)?;
    let spec = column(&options.fit)?;
    let command = Command::Columns(ColumnsCommand::Choose(spec.clone()));
    let line = load::enter(&mut document, command, &options.by, Some(&options.because))?;
    let evaluation = evaluate(document.project());
    if evaluation.chosen.is_none() {
        let reason = evaluation.columns.iter().find(|c| c.spec == spec).and_then(|c| c.outcome.as_ref().err());
        let reason = reason.cloned().unwrap_or_default();
        return Err(Failed::Wrong(format!("{} cannot be fitted to these readings: {reason}", spec.head())));
    }
    AppendFile::open(&options.project)?.append(line.as_bytes())?;
    print(&format!("{}: {} chosen", options.project.display(), spec.head()));
    Ok(())
}
