//! From a specification to a project with its trail, its raw tables and its story.

use assize_core::{
    project::{
        about::{Condition, Import, Kind},
        columns::{ColumnSpec, Declared},
        command::{
            AboutCommand, Act, ColumnsCommand, Command, ItemField, NewReading, PlanCommand, PlanField, ReadingsCommand,
            StandardsCommand, What,
        },
    },
    quantity::{Moment, Text},
    readings::{Direction, Source},
    standards::StandardPapers,
    trail::{Digest, Document},
};
use base64ct::{Base64, Encoding};
use std::{fmt::Write as _, sync::Arc};

/// One application as it stands in the raw table.
#[derive(Debug, Clone)]
pub struct Row {
    /// Standard as typed.
    pub standard: String,
    /// Reading as typed.
    pub reading: String,
    /// Direction.
    pub direction: Direction,
}

/// What a demo is made of.
#[derive(Debug, Clone, Default)]
pub struct Spec {
    /// File name without ending.
    pub file: &'static str,
    /// Number of the report.
    pub number: &'static str,
    /// Fields of the item.
    pub item: Vec<(ItemField, &'static str)>,
    /// Fields of the plan.
    pub plan: Vec<PlanField>,
    /// Papers of the standards.
    pub papers: StandardPapers,
    /// Conditions at start and end.
    pub conditions: [Vec<Condition>; 2],
    /// Columns, when other than the first three.
    pub columns: Vec<ColumnSpec>,
    /// Declared function.
    pub declared: Option<Declared>,
    /// Rows in run order.
    pub rows: Vec<Row>,
    /// Zero readings as typed, in run order.
    pub zeros: Vec<String>,
    /// Heads of the raw table: standard and reading, with units.
    pub heads: (&'static str, &'static str),
    /// The story, about ten lines.
    pub story: &'static str,
    /// Where the data come from.
    pub origin: &'static str,
}

/// A finished demo.
#[derive(Debug, Clone)]
pub struct Demo {
    /// What it was made of.
    pub spec: Spec,
    /// The project with its trail.
    pub document: Document,
    /// Raw table of the standards.
    pub csv: String,
    /// Raw table of the zeros, if any.
    pub zeros_csv: Option<String>,
}

const BENCH: &str = "M. Orrin";

/// `2026-11-03T09:12:00+00:00` and so many seconds.
fn moment(seconds: usize) -> Moment {
    let (h, m, s) = (9 + (720 + seconds) / 3600, (720 + seconds) / 60 % 60, seconds % 60);
    format!("2026-11-03T{h:02}:{m:02}:{s:02}.000+00:00").parse().expect("a time of day before midnight")
}

impl Spec {
    /// Builds the project: plan first, then the imported tables.
    ///
    /// # Panics
    /// When the specification itself is refused.
    #[must_use]
    pub fn build(self) -> Demo {
        let (csv, zeros_csv) = (self.csv(), self.zeros_csv());
        let mut document = Document::default();
        let mut clock = 0;
        for command in self.before().into_iter().chain(self.tables(&csv, zeros_csv.as_deref())) {
            let act = Act { by: Text::from(BENCH), at: moment(clock), because: None, command };
            document.enter(act).unwrap_or_else(|e| panic!("{}: {e}", self.file));
            clock += 5;
        }
        Demo { spec: self, document, csv, zeros_csv }
    }

    /// Published data do not say in which order they were read.
    fn order_known(&self) -> bool {
        self.origin == super::data::INVENTED
    }

    fn csv(&self) -> String {
        if !self.order_known() {
            let lines: Vec<String> = self.rows.iter().map(|r| format!("{},{}\n", r.standard, r.reading)).collect();
            return format!("{},{}\n{}", self.heads.0, self.heads.1, lines.concat());
        }
        let mut out = format!("order,{},{},direction\n", self.heads.0, self.heads.1);
        for (n, row) in (1..).zip(&self.rows) {
            let direction = match row.direction {
                Direction::Rising => "rising",
                Direction::Falling => "falling",
                Direction::TurningPoint => "turning point",
                Direction::None => "",
            };
            writeln!(out, "{n},{},{},{direction}", row.standard, row.reading).expect("writing to a string");
        }
        out
    }

    fn zeros_csv(&self) -> Option<String> {
        (!self.zeros.is_empty()).then(|| format!("{}\n{}\n", self.heads.1, self.zeros.join("\n")))
    }

    fn before(&self) -> Vec<Command> {
        let mut all = vec![
            Command::About(AboutCommand::Kind(Kind::Practice)),
            Command::About(AboutCommand::AtBench { name: Text::from(BENCH), role: Some(Text::from("performed")) }),
            Command::About(AboutCommand::Number(Text::from(self.number))),
            Command::About(AboutCommand::Story(Text::from(format!("{}\n{}", self.origin, self.story)))),
        ];
        let item = |(field, text): &(ItemField, &str)| Command::About(AboutCommand::Item(*field, Text::from(*text)));
        all.extend(self.item.iter().map(item));
        all.extend(self.plan.iter().cloned().map(|field| Command::Plan(PlanCommand::Set(field))));
        all.push(Command::About(AboutCommand::ConditionsAtStart(self.conditions[0].clone())));
        all.extend(self.declared.clone().map(|d| Command::Columns(ColumnsCommand::Declare(d))));
        if !self.columns.is_empty() {
            all.push(Command::Columns(ColumnsCommand::Show(self.columns.clone())));
        }
        all
    }

    fn tables(&self, csv: &str, zeros_csv: Option<&str>) -> Vec<Command> {
        let mut all = Vec::new();
        if let Some(zeros) = zeros_csv {
            let import = import(&format!("{}-zeros.csv", self.file), zeros, "reading = column 1");
            let rows = (2..).zip(&self.zeros).map(|(line, raw)| NewReading {
                source: Source::File { digest: import.digest.clone(), line },
                ..NewReading::new(What::Nothing(None), raw, number(raw))
            });
            all.push(Command::Readings(ReadingsCommand::Import(Arc::clone(&import), rows.collect())));
        }
        let import = import(&format!("{}.csv", self.file), csv, "order, standard, reading, direction by their heads");
        let rows = (1..).zip(&self.rows).map(|(order, row)| NewReading {
            order: self.order_known().then_some(order),
            direction: row.direction,
            source: Source::File { digest: import.digest.clone(), line: order + 1 },
            ..NewReading::new(
                What::Standard(Text::from(row.standard.as_str()), number(&row.standard)),
                &row.reading,
                number(&row.reading),
            )
        });
        all.push(Command::Readings(ReadingsCommand::Import(Arc::clone(&import), rows.collect())));
        all.push(Command::Standards(StandardsCommand::PapersForAll(self.papers.clone())));
        all.push(Command::About(AboutCommand::ConditionsAtEnd(self.conditions[1].clone())));
        all
    }
}

fn import(name: &str, text: &str, mapping: &str) -> Arc<Import> {
    Arc::new(Import {
        name: Text::from(name),
        digest: Text::from(Digest::of(text.as_bytes()).hex()),
        base64: Arc::from(Base64::encode_string(text.as_bytes())),
        mapping: vec![Text::from("UTF-8, comma, decimal point, one header row"), Text::from(mapping)],
    })
}

fn number(text: &str) -> f64 {
    text.parse().unwrap_or_else(|_| panic!("{text} is a number"))
}
