//! From cells to typed records; every cell that cannot be taken is listed.
//!
//! Edge cases: an empty `standard` is an error in a row of kind standard and nothing in the others; empty cells of
//! columns that are not needed mean "not said"; a whole number may be written `1.0`.

use super::{
    Row, Table,
    error::{CellError, Place, accepted_number},
    options::Purpose,
    role::Role,
    words::{Direction, Kind, Stage, Word},
};
use crate::quantity::number::{parse_number, shorten};

/// How many bad cells are listed one by one.
const LISTED: usize = 20;

/// A number and the text it was read from.
#[derive(Debug, Clone, PartialEq)]
pub struct Number {
    /// The text as typed, without surrounding space.
    pub raw: String,
    /// Its value, finite.
    pub value: f64,
}

/// One row of a table, typed.
#[derive(Debug, Clone, PartialEq)]
pub struct Record {
    /// Line in the file, from 1.
    pub line: usize,
    /// Value of the standard, in input units; always there in a row of kind standard when standards are read.
    pub standard: Option<Number>,
    /// Reading, in output units.
    pub reading: Number,
    /// Standard uncertainty of the standard, in input units, 0 or more.
    pub u_standard: Option<f64>,
    /// Standard uncertainty of the reading, in output units, 0 or more.
    pub u_reading: Option<f64>,
    /// What the row is for.
    pub kind: Kind,
    /// At which point of the work it was taken.
    pub stage: Option<Stage>,
    /// Number of the run.
    pub run: Option<u32>,
    /// Number of the cycle within the run.
    pub cycle: Option<u32>,
    /// How the standard was approached.
    pub direction: Option<Direction>,
    /// Number of the application of the standard.
    pub application: Option<u32>,
    /// Number of the look within the application.
    pub look: Option<u32>,
    /// Place in the order of measurement.
    pub order: Option<u32>,
    /// Time as written.
    pub time: Option<String>,
}

impl Table {
    /// Reads every row.
    ///
    /// # Shapes and units
    /// One record a row, in the order of the file; values in the units of their columns.
    ///
    /// # Errors
    /// All cells that cannot be taken, top to bottom: the first 20 one by one, then [`CellError::Further`].
    pub fn records(&self) -> Result<Vec<Record>, Vec<CellError>> {
        let mut records = Vec::with_capacity(self.rows.len());
        let mut errors = Errors::default();
        for row in &self.rows {
            let mut cells = Cells { table: self, row, errors: &mut errors };
            records.extend(cells.record());
        }
        errors.into_list().map_or(Ok(records), Err)
    }
}

#[derive(Debug, Default)]
struct Errors {
    listed: Vec<CellError>,
    further: usize,
}

impl Errors {
    /// Takes an error whose text is only made when it is listed.
    fn push(&mut self, error: impl FnOnce() -> CellError) {
        if self.listed.len() < LISTED {
            self.listed.push(error());
        } else {
            self.further += 1;
        }
    }

    fn into_list(mut self) -> Option<Vec<CellError>> {
        if self.further > 0 {
            self.listed.push(CellError::Further { count: self.further });
        }
        (!self.listed.is_empty()).then_some(self.listed)
    }
}

/// The cells of one row.
struct Cells<'a> {
    table: &'a Table,
    row: &'a Row,
    errors: &'a mut Errors,
}

impl<'a> Cells<'a> {
    /// The record, unless a needed cell cannot be taken; errors are noted.
    fn record(&mut self) -> Option<Record> {
        let unsaid = match self.table.purpose {
            Purpose::Zeros => Kind::Zero,
            Purpose::Standards | Purpose::Readings => Kind::Standard,
        };
        let kind = self.word(Role::Kind).unwrap_or(unsaid);
        let needed = kind == Kind::Standard && self.table.purpose == Purpose::Standards;
        let standard = self.number(Role::Standard, needed);
        let reading = self.number(Role::Reading, true);
        let record = Record {
            line: self.row.line,
            standard,
            u_standard: self.uncertainty(Role::UStandard),
            u_reading: self.uncertainty(Role::UReading),
            kind,
            stage: self.word(Role::Stage),
            run: self.whole(Role::Run),
            cycle: self.whole(Role::Cycle),
            direction: self.word(Role::Direction),
            application: self.whole(Role::Application),
            look: self.whole(Role::Look),
            order: self.whole(Role::Order),
            time: self.text(Role::Time).map(|(_, text)| text.to_owned()),
            reading: reading?,
        };
        Some(record)
    }

    /// Position and text of a cell that holds anything.
    fn text(&self, role: Role) -> Option<(usize, &'a str)> {
        let at = *self.table.roles.get(&role)?;
        let text = self.row.cells.get(at)?.trim();
        (!text.is_empty()).then_some((at, text))
    }

    fn place(&self, at: usize) -> Place {
        let header = self.table.headers.get(at).cloned().unwrap_or_default();
        Place { line: self.row.line, column: at + 1, header }
    }

    fn number(&mut self, role: Role, needed: bool) -> Option<Number> {
        let decimal = self.table.decimal;
        let Some((at, text)) = self.text(role) else {
            let at = self.table.roles.get(&role).copied().filter(|_| needed)?;
            let place = self.place(at);
            self.errors.push(|| CellError::Missing { place, accepted: accepted_number(decimal) });
            return None;
        };
        match parse_number(text, Some(decimal)) {
            Ok(value) => Some(Number { raw: text.to_owned(), value }),
            Err(why) => {
                let place = self.place(at);
                self.errors.push(|| CellError::NotANumber {
                    place,
                    text: shorten(text),
                    why,
                    accepted: accepted_number(decimal),
                });
                None
            }
        }
    }

    fn uncertainty(&mut self, role: Role) -> Option<f64> {
        let number = self.number(role, false)?;
        if number.value < 0.0 {
            let place = self.place(*self.table.roles.get(&role)?);
            self.errors.push(|| CellError::Negative { place, text: shorten(&number.raw) });
            return None;
        }
        Some(number.value)
    }

    fn whole(&mut self, role: Role) -> Option<u32> {
        let (at, text) = self.text(role)?;
        // A whole double prints without a mark, so `2,0` becomes "2" and `2,5` stays no count.
        let whole = text.parse().ok().or_else(|| {
            let value = parse_number(text, Some(self.table.decimal)).ok()?;
            value.to_string().parse().ok()
        });
        if whole.is_none() {
            let place = self.place(at);
            self.errors.push(|| CellError::NotWhole { place, text: shorten(text) });
        }
        whole
    }

    fn word<W: Word>(&mut self, role: Role) -> Option<W> {
        let (at, text) = self.text(role)?;
        let word = W::from_cell(text);
        if word.is_none() {
            let place = self.place(at);
            let text = shorten(text);
            self.errors.push(|| CellError::UnknownWord { place, text, accepted: W::ACCEPTED });
        }
        word
    }
}
