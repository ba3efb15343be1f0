//! Reading what a verb works on: a project, or a table that becomes one in memory.

use super::Failed;
use crate::platform;
use assize_core::{
    exchange::{
        intake::{self, Taken},
        table::{
            CellError, Purpose, Record, Table, TableOptions, parse_columns, parse_decimal, parse_delimiter, read_table,
        },
    },
    project::command::{Act, Command},
    quantity::{Moment, Text},
    trail::{Document, chain},
};
use clap::Args;
use std::path::Path;

/// How tables are read; whatever is left out is recognised.
#[derive(Debug, Clone, Args, Default)]
pub struct TableArgs {
    /// Mark between cells: comma, semicolon or tab.
    #[arg(long)]
    delimiter: Option<String>,
    /// Decimal mark: . or ,
    #[arg(long)]
    decimal: Option<String>,
    /// How many rows are heads.
    #[arg(long)]
    header_rows: Option<usize>,
    /// Which column is what: standard=Last,reading=Signal
    #[arg(long)]
    columns: Option<String>,
}

impl TableArgs {
    fn options(&self, purpose: Purpose) -> Result<TableOptions, Failed> {
        Ok(TableOptions {
            purpose,
            encoding: None,
            delimiter: self.delimiter.as_deref().map(parse_delimiter).transpose()?,
            decimal: self.decimal.as_deref().map(parse_decimal).transpose()?,
            header_rows: self.header_rows,
            columns: self.columns.as_deref().map(parse_columns).transpose()?.unwrap_or_default(),
        })
    }
}

/// The moment by this computer's clock, with its local offset.
pub fn now() -> Moment {
    let now = platform::now();
    Moment::new(now.timestamp, now.offset.seconds())
}

/// A table with its bytes and records.
pub struct Read {
    /// File name without folder.
    pub name: String,
    /// The bytes.
    pub bytes: Vec<u8>,
    /// As understood.
    pub table: Table,
    /// Its records.
    pub records: Vec<Record>,
}

impl Read {
    /// The commands that enter it.
    pub fn commands(&self, zeros: bool) -> Vec<Command> {
        let Self { name, bytes, table, records } = self;
        intake::commands(&Taken { name, bytes, table, records, zeros })
    }
}

/// Reads a table file.
pub fn table(path: &Path, args: &TableArgs, zeros: bool) -> Result<Read, Failed> {
    let bytes = platform::read(path)?;
    let purpose = if zeros { Purpose::Zeros } else { Purpose::Standards };
    let shown = path.display();
    // A table of zeros keeps its own heads: the mapping given is for the table of standards.
    let args = if zeros { TableArgs { columns: None, ..args.clone() } } else { args.clone() };
    let table = read_table(&bytes, &args.options(purpose)?).map_err(|e| Failed::Wrong(format!("{shown}: {e}")))?;
    for note in &table.notes {
        eprintln!("assize: {shown}: {note}");
    }
    let records = table.records().map_err(|all| cells(path, &all))?;
    let name = path.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    Ok(Read { name, bytes, table, records })
}

fn cells(path: &Path, all: &[CellError]) -> Failed {
    let lines: Vec<String> = all.iter().map(|e| format!("{}: {e}", path.display())).collect();
    Failed::Wrong(lines.join("\nassize: "))
}

/// Whether a file is a project, by its first line.
pub fn is_project(bytes: &[u8]) -> bool {
    bytes.starts_with(chain::HEADER.as_bytes())
}

/// Reads a project file; a last line cut short is said on stderr.
pub fn project(path: &Path) -> Result<Document, Failed> {
    let bytes = platform::read(path)?;
    let (document, torn) =
        Document::from_bytes(&bytes).map_err(|e| Failed::Wrong(format!("{}: {e}", path.display())))?;
    if torn.is_some() {
        eprintln!("assize: {}: the last entry was cut short while it was written and is left out", path.display());
    }
    Ok(document)
}

/// A project in memory from tables.
pub fn in_memory(standards: &Read, zeros: Option<&Read>) -> Result<Document, Failed> {
    let mut document = Document::default();
    let zero_commands = zeros.map(|z| z.commands(true)).unwrap_or_default();
    let all = intake::quantities(&standards.table).into_iter().chain(zero_commands).chain(standards.commands(false));
    for command in all {
        enter(&mut document, command, "command line", None)?;
    }
    Ok(document)
}

/// Enters one command and returns its line.
pub fn enter(document: &mut Document, command: Command, by: &str, because: Option<&str>) -> Result<String, Failed> {
    let act = Act { by: Text::from(by), at: now(), because: because.map(Text::from), command };
    Ok(document.enter(act)?.line)
}
