//! Which decimal mark the numbers have, once their delimiter is known.
//!
//! A mark with other than three figures behind it, or with a leading zero before it, can only be a decimal mark.
//! Where every comma could also group thousands (`1,234`), a semicolon between the cells settles it, because it is
//! there to leave the comma to the numbers; otherwise both readings are shown and nothing is chosen. Points are
//! decimal marks unless commas prove to be. Numbers with both marks are refused when the cells are read; where there
//! are no others, the last mark of the first of them is the one in force.

use super::{
    draft::{Draft, NumberCell},
    error::TableError,
    layout::number_like,
    options::{Delimiter, TableOptions},
};
use crate::quantity::number::{DecimalMark, shorten};

/// The mark chosen, and a sentence where it could have been another.
#[derive(Debug, PartialEq, Eq)]
pub(super) struct Chosen {
    /// The mark.
    pub(super) mark: DecimalMark,
    /// What had to be assumed.
    pub(super) note: Option<String>,
}

/// The cells with one kind of mark.
#[derive(Debug, Default)]
struct Tally<'a> {
    count: usize,
    /// How many can only be decimal marks.
    proofs: usize,
    first: Option<NumberCell<'a>>,
}

impl<'a> Tally<'a> {
    fn add(&mut self, cell: NumberCell<'a>, mark: char) {
        let Some((whole, fraction)) = cell.text.split_once(mark) else {
            return;
        };
        self.count += 1;
        self.proofs += usize::from(!grouped(whole, fraction));
        self.first = self.first.or(Some(cell));
    }
}

/// Whether the figures before and behind a mark could be groups of thousands.
pub(super) fn grouped(whole: &str, fraction: &str) -> bool {
    let whole = whole.strip_prefix(['+', '-', '\u{2212}']).unwrap_or(whole);
    let figures = |text: &str| text.bytes().all(|b| b.is_ascii_digit());
    let group = |text: &str| text.len() == 3 && figures(text);
    (1..=3).contains(&whole.len()) && figures(whole) && !whole.starts_with('0') && group(fraction)
}

/// The decimal mark of a table.
pub(super) fn recognise(
    table: &Draft,
    options: &TableOptions,
    delimiter: Option<Delimiter>,
) -> Result<Chosen, TableError> {
    if let Some(mark) = options.decimal {
        return Ok(Chosen { mark, note: None });
    }
    let (mut points, mut commas) = (Tally::default(), Tally::default());
    let mut last_of_both = None;
    for cell in table.numbers() {
        if !number_like(cell.text) {
            continue;
        }
        match cell.text.matches(['.', ',']).count() {
            1 if cell.text.contains(',') => commas.add(cell, ','),
            1 => points.add(cell, '.'),
            0 => {}
            _ => last_of_both = last_of_both.or_else(|| last_mark(cell.text)),
        }
    }
    match last_of_both.filter(|_| points.count + commas.count == 0) {
        Some(mark) if delimiter != Some(Delimiter::Comma) => Ok(Chosen { mark, note: None }),
        _ => choose(&points, &commas, delimiter),
    }
}

fn last_mark(text: &str) -> Option<DecimalMark> {
    let at = text.rfind(['.', ','])?;
    let both = text.contains('.') && text.contains(',');
    both.then(|| if text[at..].starts_with(',') { DecimalMark::Comma } else { DecimalMark::Point })
}

fn choose(points: &Tally<'_>, commas: &Tally<'_>, delimiter: Option<Delimiter>) -> Result<Chosen, TableError> {
    let plain = |mark| Ok(Chosen { mark, note: None });
    let between = delimiter == Some(Delimiter::Comma);
    let Some(comma) = commas.first else {
        let open = points.proofs == 0 && delimiter == Some(Delimiter::Semicolon);
        let note = points.first.filter(|_| open).map(|cell| noted(cell, DecimalMark::Point));
        return Ok(Chosen { mark: DecimalMark::Point, note });
    };
    if between && points.count == 0 && commas.proofs > 0 {
        return Err(TableError::CommaForBoth { line: comma.line, column: comma.at + 1, text: shorten(comma.text) });
    }
    if between && points.count > 0 {
        return plain(DecimalMark::Point);
    }
    match (points.proofs, commas.proofs) {
        (0, 0) if points.count == 0 && delimiter == Some(Delimiter::Semicolon) => {
            Ok(Chosen { mark: DecimalMark::Comma, note: Some(noted(comma, DecimalMark::Comma)) })
        }
        (0, 0) => Err(ambiguous(comma)),
        (_, 0) => plain(DecimalMark::Point),
        (0, _) => plain(DecimalMark::Comma),
        _ if commas.count > points.count => plain(DecimalMark::Comma),
        _ => plain(DecimalMark::Point),
    }
}

fn noted(cell: NumberCell<'_>, mark: DecimalMark) -> String {
    format!(
        "Every number with a mark has three figures behind it, as {:?} in line {}: read with a {mark}, since \
         thousands marks are not accepted.",
        shorten(cell.text),
        cell.line
    )
}

fn ambiguous(cell: NumberCell<'_>) -> TableError {
    TableError::Ambiguous {
        line: cell.line,
        column: cell.at + 1,
        text: shorten(cell.text),
        readings: [
            format!("{} (decimal comma)", cell.text.replace(',', ".")),
            format!("{} (thousands mark, not accepted)", cell.text.replace(',', "")),
        ],
        hint: "for the first say --decimal , with semicolons or tabs between cells; for the second write the \
               figures without marks"
            .to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use Delimiter::{Comma, Semicolon, Tab};

    fn choice(texts: &[&str], delimiter: Option<Delimiter>) -> Result<DecimalMark, TableError> {
        let (mut points, mut commas) = (Tally::default(), Tally::default());
        for text in texts {
            let cell = NumberCell { line: 2, at: 0, text };
            points.add(cell, '.');
            commas.add(cell, ',');
        }
        choose(&points, &commas, delimiter).map(|chosen| chosen.mark)
    }

    #[test]
    fn one_number_that_can_only_be_decimal_settles_it() {
        for (texts, delimiter, mark) in [
            (&["1", "2"][..], None, DecimalMark::Point),
            (&["1.234", "2.345"], Some(Comma), DecimalMark::Point),
            (&["1.234", "2.345"], Some(Tab), DecimalMark::Point),
            (&["1,234", "0,345"], Some(Tab), DecimalMark::Comma),
            (&["1,234", "2,5"], None, DecimalMark::Comma),
            (&["1,234", "2,345"], Some(Semicolon), DecimalMark::Comma),
            (&["1,000", "2.5"], Some(Tab), DecimalMark::Point),
            (&["1.000", "2,5"], Some(Tab), DecimalMark::Comma),
            (&["1.5", "2,5", "3,5"], Some(Tab), DecimalMark::Comma),
            (&["1.5", "1,000"], Some(Comma), DecimalMark::Point),
        ] {
            assert_eq!(choice(texts, delimiter), Ok(mark), "{texts:?} {delimiter:?}");
        }
    }

    #[test]
    fn where_every_comma_could_group_thousands_nothing_is_chosen() {
        for (texts, delimiter) in [
            (&["1,234", "-12,000"][..], Some(Tab)),
            (&["1,234"], None),
            (&["1,234"], Some(Comma)),
            (&["1,234", "5.678"], Some(Tab)),
        ] {
            let Err(TableError::Ambiguous { readings, .. }) = choice(texts, delimiter) else {
                panic!("{texts:?} has two readings");
            };
            assert!(readings[0].starts_with("1.234 ") && readings[1].starts_with("1234 "), "{readings:?}");
        }
    }

    #[test]
    fn the_last_of_two_marks_is_the_decimal_mark() {
        assert_eq!(last_mark("1.000,92"), Some(DecimalMark::Comma));
        assert_eq!(last_mark("1,000.92"), Some(DecimalMark::Point));
        assert_eq!(last_mark("1,000,000"), None);
    }

    #[test]
    fn a_quoted_decimal_comma_between_commas_is_an_error() {
        assert!(matches!(choice(&["1,5"], Some(Comma)), Err(TableError::CommaForBoth { line: 2, .. })));
    }
}
