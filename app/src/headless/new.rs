//! `assize new`: a project from tables.

use super::{Failed, load, print};
use crate::platform;
use assize_core::{
    exchange::intake,
    project::{
        about::Kind,
        command::{AboutCommand, Command},
    },
    quantity::Text,
    trail::Document,
};
use clap::Args;
use std::path::PathBuf;

/// Options of `new`.
#[derive(Debug, Args)]
pub struct Options {
    /// A table of standards and readings.
    data: PathBuf,
    /// A table of zero readings.
    #[arg(long)]
    zeros: Option<PathBuf>,
    /// A project whose plan, item, laboratory and declared function are taken over.
    #[arg(long)]
    plan: Option<PathBuf>,
    /// Printed name of the person whose entry this is.
    #[arg(long)]
    by: String,
    /// Number of the report.
    #[arg(long)]
    number: Option<String>,
    /// Identity mark of the item.
    #[arg(long)]
    item: Option<String>,
    /// The project file to write; it must not exist yet.
    #[arg(long)]
    out: PathBuf,
    #[command(flatten)]
    table: load::TableArgs,
}

/// Carries it out.
pub fn run(options: &Options) -> Result<(), Failed> {
    if options.out.exists() {
        let shown = options.out.display();
        return Err(Failed::Wrong(format!("{shown} exists already; name a file that does not exist")));
    }
    let standards = load::table(&options.data, &options.table, false)?;
    let zeros = options.zeros.as_ref().map(|path| load::table(path, &options.table, true)).transpose()?;
    let mut document = Document::default();
    let mut commands = vec![
        Command::About(AboutCommand::Kind(Kind::Record)),
        Command::About(AboutCommand::AtBench {
            name: Text::from(options.by.as_str()),
            role: Some(Text::from("performed")),
        }),
    ];
    commands.extend(intake::quantities(&standards.table));
    commands.extend(taken_over(options)?);
    let text = |t: &String| Text::from(t.as_str());
    commands.extend(options.number.as_ref().map(|n| Command::About(AboutCommand::Number(text(n)))));
    let identity = assize_core::project::command::ItemField::Identity;
    commands.extend(options.item.as_ref().map(|i| Command::About(AboutCommand::Item(identity, text(i)))));
    commands.extend(zeros.as_ref().map(|z| z.commands(true)).unwrap_or_default());
    commands.extend(standards.commands(false));
    for command in commands {
        load::enter(&mut document, command, &options.by, None)?;
    }
    platform::write_whole(&options.out, &document.to_bytes()?)?;
    print(&format!("{}: {} entries", options.out.display(), document.acts().len()));
    Ok(())
}

/// Plan, item and declared function of another project: its own entries of these kinds, entered again.
fn taken_over(options: &Options) -> Result<Vec<Command>, Failed> {
    use assize_core::project::command::ColumnsCommand;
    let Some(path) = &options.plan else { return Ok(Vec::new()) };
    let other = load::project(path)?;
    let wanted = |c: &Command| {
        matches!(
            c,
            Command::Plan(_)
                | Command::About(AboutCommand::Item(..))
                | Command::Columns(ColumnsCommand::Declare(_) | ColumnsCommand::Show(_))
        )
    };
    Ok(other.acts().iter().map(|a| a.command.clone()).filter(wanted).collect())
}
