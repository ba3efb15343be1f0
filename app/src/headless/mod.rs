//! The command line: the whole main job without a window, one file a verb.
//!
//! Results go to stdout, messages to stderr. Exit status 0: done; 1: the answer is "no"; 2: the input or
//! the call is wrong.

mod choose;
mod convert;
mod fit;
mod key;
mod load;
mod new;
mod report;
mod verify;

use clap::{Parser, Subcommand};
use std::{path::PathBuf, process::ExitCode};

/// Calibration studio: from standards and readings to a signed report.
#[derive(Debug, Parser)]
#[command(name = "assize", version, about, disable_help_subcommand = true)]
pub struct Cli {
    #[command(subcommand)]
    verb: Option<Verb>,
}

#[derive(Debug, Subcommand)]
enum Verb {
    /// Opens a project, a table, or a PDF to check, in the window.
    Open {
        /// The file.
        file: PathBuf,
    },
    /// Fits and compares functions; DATA is a table or a project.
    Fit(fit::Options),
    /// Makes a project from a table.
    New(new::Options),
    /// Records the choice of a function, with its reason.
    Choose(choose::Options),
    /// Readings to values with uncertainty.
    Convert(convert::Options),
    /// Writes the report, signed when a key is given.
    Report(report::Options),
    /// Checks a report: signature, trail, and every printed figure computed afresh.
    Verify(verify::Options),
    /// Makes a signing key, protected by a passphrase.
    Key(key::Options),
}

/// What the window is asked to show first.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Start {
    /// The last project; the demo at the very first start.
    Last,
    /// A file.
    File(PathBuf),
}

/// Why a verb did not end with status 0.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Failed {
    /// The answer is "no"; what there is to say was printed.
    No,
    /// The input or the call is wrong.
    Wrong(String),
}

impl<E: std::error::Error> From<E> for Failed {
    fn from(e: E) -> Self {
        Self::Wrong(e.to_string())
    }
}

/// Reads the command line: either a start of the window, or a verb that has been carried out.
///
/// # Errors
/// The exit status when no window is to be shown.
pub fn run() -> Result<Start, ExitCode> {
    let done = match Cli::parse().verb {
        None => return Ok(Start::Last),
        Some(Verb::Open { file }) => return Ok(Start::File(file)),
        Some(Verb::Fit(o)) => fit::run(&o),
        Some(Verb::New(o)) => new::run(&o),
        Some(Verb::Choose(o)) => choose::run(&o),
        Some(Verb::Convert(o)) => convert::run(&o),
        Some(Verb::Report(o)) => report::run(&o),
        Some(Verb::Verify(o)) => verify::run(&o),
        Some(Verb::Key(o)) => key::run(&o),
    };
    Err(match done {
        Ok(()) => ExitCode::SUCCESS,
        Err(Failed::No) => ExitCode::from(1),
        Err(Failed::Wrong(message)) => {
            eprintln!("assize: {message}");
            ExitCode::from(2)
        }
    })
}

/// Prints to stdout; a closed pipe is not an error of ours.
fn print(text: &str) {
    use std::io::Write;
    let _ = writeln!(std::io::stdout().lock(), "{text}");
}
