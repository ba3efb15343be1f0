//! Sentences on what was left out or deserves a look.

use super::{
    Table,
    opening::Opening,
    options::Purpose,
    role::Role,
    split::Split,
    words::{Kind, Word},
};
use crate::quantity::number::parse_number;

/// How many lines or columns a sentence lists.
const LISTED: usize = 5;

/// Adds the notes that need the whole table.
pub(super) fn add(table: &mut Table, opening: &Opening, split: &Split, not_utf8_in_line: Option<usize>) {
    let latin1 = not_utf8_in_line
        .map(|line| format!("Line {line} is not UTF-8: the file was read as Latin-1, which fits any bytes."));
    let in_comment = opening
        .heads_in_comment
        .then(|| format!("The names of the columns come from the comment in line {}.", opening.start.line));
    let comments = lines("left out because they begin with #", &split.comments);
    let hollow = lines("left out because they hold only delimiters", &split.hollow);
    let found = [latin1, in_comment, comments, hollow, unused(table), zero_level(table), not_zero(table)];
    table.notes.extend(found.into_iter().flatten());
}

fn lines(what: &str, lines: &[usize]) -> Option<String> {
    let list = list(lines.iter().map(usize::to_string), lines.len())?;
    Some(format!("Lines {what}: {list}."))
}

fn unused(table: &Table) -> Option<String> {
    let free = (0..table.headers.len()).filter(|at| !table.roles.values().any(|taken| taken == at));
    let names: Vec<&String> = free.map(|at| &table.headers[at]).collect();
    let list = list(names.iter().map(|name| (*name).clone()), names.len())?;
    Some(format!("Columns not used: {list}."))
}

fn list(items: impl Iterator<Item = String>, count: usize) -> Option<String> {
    let mut list: Vec<String> = items.take(LISTED).collect();
    if count > LISTED {
        list.push(format!("and {} more", count - LISTED));
    }
    (!list.is_empty()).then(|| list.join(", "))
}

/// Lines whose standard is a number that fits, rows of other kinds than the given one set aside.
fn standards<'a>(table: &'a Table, kind: Kind, fits: fn(f64) -> bool) -> impl Iterator<Item = usize> + 'a {
    let position = |role| table.roles.get(&role).copied();
    let (standard, kinds) = (position(Role::Standard), position(Role::Kind));
    table.rows.iter().filter_map(move |row| {
        let said = kinds.and_then(|at| Kind::from_cell(row.cells.get(at)?));
        let value = parse_number(row.cells.get(standard?)?, Some(table.decimal)).ok()?;
        (said.unwrap_or(kind) == kind && fits(value)).then_some(row.line)
    })
}

fn zero_level(table: &Table) -> Option<String> {
    if table.purpose != Purpose::Standards {
        return None;
    }
    let mut lines = standards(table, Kind::Standard, |value| value == 0.0);
    let (first, count) = (lines.next()?, 1 + lines.count());
    Some(format!(
        "{count} of {} rows have the standard 0 (the first in line {first}): they are a level of the calibration, \
         not zero readings; zero readings are given with --zeros or as rows of kind zero.",
        table.rows.len()
    ))
}

fn not_zero(table: &Table) -> Option<String> {
    if table.purpose != Purpose::Zeros {
        return None;
    }
    let mut lines = standards(table, Kind::Zero, |value| value != 0.0);
    let (first, count) = (lines.next()?, 1 + lines.count());
    Some(format!(
        "{count} of {} zero readings have a standard other than 0 (the first in line {first}).",
        table.rows.len()
    ))
}
