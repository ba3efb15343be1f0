//! Files and pasted blocks: how a table is understood, before anything is taken from it; knows no window.

use assize_core::{
    exchange::{
        intake::{self, Taken},
        table::{DecimalMark, Delimiter, Purpose, Record, Role, Table, TableError, TableOptions, read_table},
    },
    project::{
        Project,
        command::{Command, NewReading, ReadingsCommand},
    },
    readings::Source,
};

/// How many rows are shown before a table is taken.
const FIRST: usize = 6;

/// A file with the way it is read.
#[derive(Debug, Clone)]
pub struct Import {
    /// File name without its folder.
    pub name: String,
    bytes: Vec<u8>,
    /// What is settled; the rest is recognised.
    pub options: TableOptions,
    /// The table and its records, or why it cannot be read.
    pub understood: Understood,
    /// Heads of the columns, as far as they are known.
    pub heads: Vec<String>,
}

/// A table with its records, or a sentence about what is wrong.
pub type Understood = Result<(Table, Vec<Record>), String>;

impl Import {
    /// Reads a file.
    #[must_use]
    pub fn new(name: String, bytes: Vec<u8>, zeros: bool) -> Self {
        let purpose = if zeros { Purpose::Zeros } else { Purpose::Standards };
        let options = TableOptions { purpose, ..TableOptions::default() };
        let mut import = Self { name, bytes, options, understood: Err(String::new()), heads: Vec::new() };
        import.again(|_| {});
        import
    }

    /// Whether every row is a zero reading.
    #[must_use]
    pub fn zeros(&self) -> bool {
        self.options.purpose == Purpose::Zeros
    }

    /// Reads the file again after an option was changed.
    pub fn again(&mut self, change: impl FnOnce(&mut TableOptions)) {
        change(&mut self.options);
        let read = read_table(&self.bytes, &self.options);
        match &read {
            Ok(table) => self.heads = (0..table.headers.len()).map(|at| head(table, at)).collect(),
            Err(TableError::MissingColumn { headers, .. }) => self.heads.clone_from(headers),
            Err(_) => {}
        }
        self.understood = records_of(read);
    }

    /// Which column has a role, from 0.
    #[must_use]
    pub fn column(&self, role: Role) -> Option<usize> {
        let asked = self.options.columns.get(&role).and_then(|n| n.parse::<usize>().ok());
        let found = || self.understood.as_ref().ok().and_then(|(table, _)| table.roles.get(&role).copied());
        asked.and_then(|n| n.checked_sub(1)).or_else(found)
    }

    /// Says which column has a role; a column has one role only.
    pub fn choose(&mut self, role: Role, column: usize) {
        let number = (column + 1).to_string();
        self.again(|options| {
            options.columns.retain(|_, n| *n != number);
            options.columns.insert(role, number);
        });
    }

    /// What was recognised, in short lines: what, how.
    #[must_use]
    pub fn recognised(&self) -> Vec<(&'static str, String)> {
        let Ok((table, records)) = &self.understood else { return Vec::new() };
        let delimiter = table.delimiter.map_or("one column".to_owned(), |d: Delimiter| d.to_string());
        let columns: Vec<String> =
            table.roles.iter().map(|(role, at)| format!("{role} = {}", head(table, *at))).collect();
        vec![
            ("between cells", delimiter),
            ("decimal mark", table.decimal.to_string()),
            ("columns", columns.join(", ")),
            ("rows", records.len().to_string()),
        ]
    }

    /// The first rows as they were understood: standard, reading, direction, kind.
    #[must_use]
    pub fn first_rows(&self) -> Vec<[String; 2]> {
        let Ok((_, records)) = &self.understood else { return Vec::new() };
        let shown = |r: &Record| {
            let standard = r.standard.as_ref().map_or("zero".to_owned(), |s| s.value.to_string());
            [standard, r.reading.value.to_string()]
        };
        records.iter().take(FIRST).map(shown).collect()
    }

    /// The commands that take the table in; names and units from its heads while the project has none.
    #[must_use]
    pub fn commands(&self, project: &Project) -> Vec<Command> {
        let Ok((table, records)) = &self.understood else { return Vec::new() };
        let taken = Taken { name: &self.name, bytes: &self.bytes, table, records, zeros: self.zeros() };
        let mut all = named(table, project);
        all.extend(intake::commands(&taken));
        all
    }
}

fn head(table: &Table, at: usize) -> String {
    let name = table.headers.get(at).cloned().unwrap_or_default();
    match table.units.get(at).cloned().flatten() {
        Some(unit) => format!("{name}, {unit}"),
        None => name,
    }
}

fn understand(bytes: &[u8], options: &TableOptions) -> Understood {
    records_of(read_table(bytes, options))
}

fn records_of(read: Result<Table, TableError>) -> Understood {
    let table = read.map_err(|error| match error {
        TableError::MissingColumn { role, .. } => {
            format!("no column is named {role}; say which one it is")
        }
        other => other.to_string(),
    })?;
    let records = table.records().map_err(|errors| {
        let lines: Vec<String> = errors.iter().take(3).map(ToString::to_string).collect();
        lines.join("; ")
    })?;
    Ok((table, records))
}

/// Names and units from the heads, as long as nothing was read and nobody named them.
fn named(table: &Table, project: &Project) -> Vec<Command> {
    let unnamed = &*project.plan.input.name == "value" && &*project.plan.output.name == "reading";
    let has_heads = table.header_rows > 0 && table.roles.contains_key(&Role::Standard);
    if project.plan.fixed.is_none() && unnamed && has_heads { intake::quantities(table) } else { Vec::new() }
}

/// The commands for a pasted block: two columns are standard and reading, one column zero readings.
///
/// # Errors
/// Why the block cannot be read; nothing of it is taken then.
pub fn pasted(text: &str, zeros: bool, project: &Project) -> Result<Vec<Command>, String> {
    let purpose = if zeros { Purpose::Zeros } else { Purpose::Standards };
    let options = TableOptions { purpose, ..TableOptions::default() };
    let (table, records) = understand(text.as_bytes(), &options).map_err(|why| as_pasted(&why))?;
    let taken = Taken { name: "pasted", bytes: text.as_bytes(), table: &table, records: &records, zeros };
    let mut all = named(&table, project);
    for command in intake::commands(&taken) {
        match command {
            Command::Readings(ReadingsCommand::Import(_, rows)) => {
                all.push(Command::Readings(ReadingsCommand::Add(rows.into_iter().map(from_paste).collect())));
            }
            other => all.push(other),
        }
    }
    Ok(all)
}

fn from_paste(row: NewReading) -> NewReading {
    NewReading { source: Source::Pasted, ..row }
}

/// Messages about files, said about a pasted block.
fn as_pasted(why: &str) -> String {
    why.replace("the file is empty", "nothing was pasted").replace("the file", "the pasted block")
}

/// Delimiters a person can choose among.
pub const DELIMITERS: [(Option<Delimiter>, &str); 4] = [
    (None, "recognised"),
    (Some(Delimiter::Comma), "comma"),
    (Some(Delimiter::Semicolon), "semicolon"),
    (Some(Delimiter::Tab), "tab"),
];

/// Decimal marks a person can choose among.
pub const DECIMALS: [(Option<DecimalMark>, &str); 3] =
    [(None, "recognised"), (Some(DecimalMark::Point), "point"), (Some(DecimalMark::Comma), "comma")];

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rooms::bench::entry::tests::{act, after};

    fn take(commands: Vec<Command>) -> Project {
        commands.into_iter().fold(Project::default(), |p, c| after(&p, act(c)))
    }

    #[test]
    fn two_pasted_columns_are_standards_and_readings() {
        let project = take(pasted("1\t0,4\n2\t0,8\n3\t1,2\n", false, &Project::default()).unwrap());
        let values: Vec<f64> = project.readings.iter().map(|r| r.value).collect();
        assert_eq!(values, [0.4, 0.8, 1.2]);
        assert_eq!(project.standards.len(), 3);
        assert!(project.readings.iter().all(|r| r.source == Source::Pasted));
        assert_eq!(&*project.readings[0].raw, "0,4");
        assert_eq!(&*project.plan.input.name, "value", "no heads, no names");
    }

    #[test]
    fn heads_name_the_quantities_of_an_empty_project() {
        let text = "tension (kN)\tsignal (mV/V)\n1\t0.4\n2\t0.8\n";
        let project = take(pasted(text, false, &Project::default()).unwrap());
        assert_eq!(project.plan.input.heading(), "tension, kN");
        assert_eq!(project.plan.output.heading(), "signal, mV/V");
        let again = pasted(text, false, &project).unwrap();
        assert_eq!(again.len(), 1, "a project with names keeps them");
    }

    #[test]
    fn one_pasted_column_is_zero_readings() {
        let project = take(pasted("0.001\n0.002\n-0.001\n", true, &Project::default()).unwrap());
        assert!(project.readings.iter().all(assize_core::readings::Reading::is_zero));
        assert_eq!(project.readings.len(), 3);
    }

    #[test]
    fn a_block_that_cannot_be_read_gives_nothing_and_says_where() {
        let why = pasted("1\t0.4\n2\tx\n", false, &Project::default()).unwrap_err();
        assert!(why.contains("line 2"), "{why}");
        assert!(pasted("  \n", false, &Project::default()).is_err());
        assert!(pasted("0.4\n0.8\n", false, &Project::default()).is_err(), "no standards");
    }

    #[test]
    fn a_file_shows_how_it_is_understood_and_can_be_told_otherwise() {
        let bytes = b"load;signal\n1,5;0,4\n2,5;0,8\n".to_vec();
        let mut import = Import::new("run.csv".to_owned(), bytes, false);
        let recognised = import.recognised();
        assert_eq!(recognised[0].1, "semicolon");
        assert_eq!(recognised[1].1, "decimal comma");
        assert_eq!(import.first_rows()[0], ["1.5", "0.4"]);
        assert!(import.commands(&Project::default()).len() >= 2, "names and readings");
        import.again(|o| o.decimal = Some(DecimalMark::Point));
        assert!(import.understood.is_err());
        assert!(import.commands(&Project::default()).is_empty());
    }

    #[test]
    fn columns_without_known_names_are_named_by_a_person() {
        let bytes = b"order,load,signal,temperature\n1,1.5,0.4,20\n2,2.5,0.8,21\n".to_vec();
        let mut import = Import::new("run.csv".to_owned(), bytes, false);
        assert!(import.understood.is_err());
        assert_eq!(import.heads.len(), 4);
        import.choose(Role::Standard, 1);
        import.choose(Role::Reading, 3);
        import.choose(Role::Reading, 2);
        assert_eq!((import.column(Role::Standard), import.column(Role::Reading)), (Some(1), Some(2)));
        assert_eq!(import.first_rows()[1], ["2.5", "0.8"]);
        import.choose(Role::Standard, 2);
        assert_eq!(import.column(Role::Reading), None, "one role for a column");
    }
}
