//! Which delimiter separates the cells, judged together with the decimal mark.
//!
//! A delimiter is possible when it gives rows of one width, the columns that are needed, and numbers in them under
//! one decimal mark. A head that names the readings settles it. Where two delimiters are possible, as in lines such
//! as `1,5` without heads, both tables are shown and nothing is chosen.

use super::{
    Row,
    decimal::grouped,
    draft::Draft,
    error::{TableError, delimiter_option},
    layout::{filled_width, named_row, number_like, usual_width},
    opening::Opening,
    options::{Delimiter, Purpose, TableOptions},
    split::split,
};
use crate::quantity::number::{DecimalMark, parse_number, shorten};

/// How many lines are looked at.
const SAMPLE_LINES: usize = 400;

/// What one delimiter makes of the first lines.
#[derive(Debug)]
struct Trial {
    delimiter: Option<Delimiter>,
    /// Better is larger: heads that name the readings and have the width of the rows, heads that name them at all,
    /// more than one column, how far the table came, how many numbers it shows.
    rank: (bool, bool, bool, u8, usize),
    /// The table, if it is possible.
    table: Option<Draft>,
}

/// The delimiter, or `None` for one column without any.
pub(super) fn recognise(
    text: &str,
    opening: &Opening,
    options: &TableOptions,
) -> Result<Option<Delimiter>, TableError> {
    if let Some(given) = options.delimiter.or(opening.delimiter) {
        return Ok(Some(given));
    }
    let (sample, whole) = sample(text, opening.start.byte);
    let occurs = |d: &Delimiter| sample[opening.start.byte..].contains(d.as_char());
    let both = |d: &Delimiter| *d == Delimiter::Comma && options.decimal == Some(DecimalMark::Comma);
    let candidates = Delimiter::ALL.into_iter().filter(|d| occurs(d) && !both(d)).map(Some);
    let mut trials: Vec<Trial> =
        candidates.chain([None]).map(|delimiter| trial(sample, whole, opening, delimiter, options)).collect();
    trials.sort_by_key(|trial| std::cmp::Reverse(trial.rank));
    let named = trials.iter().any(|trial| trial.table.as_ref().is_some_and(|table| table.named));
    let possible: Vec<(Option<Delimiter>, &Draft)> = trials
        .iter()
        .filter_map(|trial| Some((trial.delimiter, trial.table.as_ref()?)))
        .filter(|(_, table)| table.named || !named)
        .collect();
    match possible[..] {
        [] => Ok(trials.first().and_then(|best| best.delimiter)),
        [(delimiter, table)] => one_number_each(delimiter, table, options).map_or(Ok(delimiter), Err),
        // A mark that stands in the heads only, as in `"reading, mV"`, makes no difference to the numbers.
        [first, ref others @ ..] if others.iter().all(|(_, table)| table.rows == first.1.rows) => Ok(first.0),
        [first, second, ..] => Err(ambiguous(first, second)),
    }
}

/// The first lines of the text and whether they are all of it.
fn sample(text: &str, from: usize) -> (&str, bool) {
    let ends = text[from..].bytes().enumerate().filter(|(_, b)| matches!(b, b'\n' | b'\r'));
    match ends.map(|(at, _)| from + at + 1).nth(SAMPLE_LINES) {
        Some(end) if end < text.len() => (&text[..end], false),
        _ => (text, true),
    }
}

fn trial(sample: &str, whole: bool, opening: &Opening, delimiter: Option<Delimiter>, options: &TableOptions) -> Trial {
    let start = opening.with_heads(sample, delimiter, options).start;
    let Ok(mut split) = split(sample, start, delimiter) else {
        return Trial { delimiter, rank: Default::default(), table: None };
    };
    if !whole {
        split.rows.pop();
    }
    let rows = split.rows;
    let usual = usual_width(&rows);
    let heads = named_row(&rows, usual, options).map(|at| filled_width(&rows[at]));
    let numbers = rows.iter().flat_map(|row| &row.cells).filter(|cell| number_like(cell)).count();
    let table = Draft::of(rows, options, delimiter);
    let stage = match &table {
        Ok(_) => 2,
        Err(TableError::MissingColumn { .. }) => 1,
        Err(_) => 0,
    };
    let rank = (heads == Some(usual), heads > Some(1), usual > 1, stage, numbers);
    let table = table.ok().filter(|table| is_possible(table, delimiter, options));
    Trial { delimiter, rank, table }
}

/// Whether all numbers of the table are numbers under one decimal mark.
fn is_possible(table: &Draft, delimiter: Option<Delimiter>, options: &TableOptions) -> bool {
    let marks = [DecimalMark::Point, DecimalMark::Comma].into_iter().filter(|mark| {
        options.decimal.is_none_or(|given| given == *mark)
            && !(delimiter == Some(Delimiter::Comma) && *mark == DecimalMark::Comma)
    });
    let all_numbers = |mark| table.numbers().all(|cell| parse_number(cell.text, Some(mark)).is_ok());
    table.numbers().next().is_some() && marks.into_iter().any(all_numbers)
}

fn ambiguous(first: (Option<Delimiter>, &Draft), second: (Option<Delimiter>, &Draft)) -> TableError {
    let mark = first.0.map(|d| d.as_char().to_string()).unwrap_or_default();
    let (line, cells) = example(first.1);
    TableError::Ambiguous {
        line,
        column: 1,
        text: shorten(&cells.join(&mark)),
        readings: [described(cells, first.0), described(example(second.1).1, second.0)],
        hint: format!("say which with {} or {}", delimiter_option(first.0), delimiter_option(second.0)),
    }
}

fn example(table: &Draft) -> (usize, &[String]) {
    table.rows.first().map_or((1, &[]), |row| (row.line, &row.cells))
}

fn described(cells: &[String], delimiter: Option<Delimiter>) -> String {
    let shown = |cell: &String| parse_number(cell, None).map_or_else(|_| cell.clone(), |v| v.to_string());
    let list = shorten(&cells.iter().map(shown).collect::<Vec<_>>().join(" and "));
    match delimiter {
        Some(delimiter) => format!("{list} ({} columns, delimiter {delimiter})", cells.len()),
        None => format!("{list} (one column, decimal comma)"),
    }
}

/// Lines of two whole numbers without heads that may be one number each: those with three decimals (`1,234`), and
/// any below a lone text, which may be the head of one column.
///
/// Others such as `1,5` are taken for two where a standard is needed, since one column cannot hold it.
fn one_number_each(delimiter: Option<Delimiter>, table: &Draft, options: &TableOptions) -> Option<TableError> {
    let open = delimiter == Some(Delimiter::Comma)
        && options.purpose == Purpose::Standards
        && options.decimal.is_none()
        && options.columns.is_empty()
        && table.header_rows == 0;
    let below_text = !table.preamble.is_empty();
    let may_be_one = |row: &Row| match &row.cells[..] {
        [whole, fraction] if below_text => {
            parse_number(&format!("{whole},{fraction}"), Some(DecimalMark::Comma)).is_ok()
        }
        [whole, fraction] => grouped(whole.trim(), fraction.trim()),
        _ => false,
    };
    if !open || !table.rows.iter().all(may_be_one) {
        return None;
    }
    let (line, cells) = example(table);
    let joined = [cells.join(".")];
    Some(TableError::Ambiguous {
        line,
        column: 1,
        text: shorten(&cells.join(",")),
        readings: [described(cells, delimiter), described(&joined, None)],
        hint: format!("say which with {} or {}", delimiter_option(delimiter), delimiter_option(None)),
    })
}
