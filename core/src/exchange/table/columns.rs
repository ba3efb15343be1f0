//! Which column is what: by the mapping asked for, by name, or by place.
//!
//! Edge cases: two columns under one name; one column asked to be two things; a head asked for that is not there;
//! two columns without known names (the first is the standard, the second the reading, and a note says so); one
//! column (readings, where no standard is needed).

use super::{
    Row,
    error::{TableError, column_text},
    options::{Purpose, TableOptions},
    role::Role,
    units::{heading, is_blank_unit, is_units_row, unit_cell},
};
use std::collections::BTreeMap;

/// The head of one column.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Column {
    /// The text in the file, of all its name rows.
    raw: String,
    /// The text without its unit, or `column 3` where there is none.
    pub(super) name: String,
    /// The unit, if the head or a row of units gives one.
    pub(super) unit: Option<String>,
    /// What its name says it is.
    role: Option<Role>,
}

/// Which column has which role, and what had to be assumed.
#[derive(Debug, Default, PartialEq, Eq)]
pub(super) struct Assigned {
    /// Position of each role.
    pub(super) roles: BTreeMap<Role, usize>,
    /// Sentences on what was assumed.
    pub(super) notes: Vec<String>,
}

/// Reads the rows of heads.
pub(super) fn columns(heads: &[Row], width: usize) -> Vec<Column> {
    let (names, units) = match heads.split_last() {
        Some((last, names)) if !names.is_empty() && is_units_row(&last.cells) => (names, Some(last)),
        _ => (heads, None),
    };
    (0..width).map(|i| column(names, units, i)).collect()
}

fn column(names: &[Row], units: Option<&Row>, i: usize) -> Column {
    let mut parts: Vec<&str> =
        names.iter().filter_map(|row| row.cells.get(i)).map(|c| c.trim()).filter(|c| !c.is_empty()).collect();
    parts.dedup();
    let raw = parts.join(" ");
    let head = heading(&raw);
    let below = units.and_then(|row| row.cells.get(i)).map(|cell| unit_cell(cell));
    let below = below.filter(|unit| !is_blank_unit(unit)).map(str::to_owned);
    let of_part = || parts.iter().rev().find_map(|part| Role::from_name(&heading(part).name));
    let role = Role::from_name(&head.name).or_else(of_part);
    let name = if head.name.is_empty() { format!("column {}", i + 1) } else { head.name };
    Column { raw, name, unit: below.or(head.unit), role }
}

/// Gives the roles out.
pub(super) fn assign(columns: &[Column], options: &TableOptions) -> Result<Assigned, TableError> {
    let mut assigned = Assigned::default();
    as_asked(columns, options, &mut assigned.roles)?;
    by_name(columns, &mut assigned.roles)?;
    by_place(columns, options.purpose, &mut assigned);
    let needed = match options.purpose {
        Purpose::Standards => [Role::Standard, Role::Reading].as_slice(),
        Purpose::Zeros | Purpose::Readings => [Role::Reading].as_slice(),
    };
    match needed.iter().find(|role| !assigned.roles.contains_key(role)) {
        Some(&role) => Err(TableError::MissingColumn { role, headers: raw_heads(columns) }),
        None => Ok(assigned),
    }
}

fn as_asked(columns: &[Column], options: &TableOptions, roles: &mut BTreeMap<Role, usize>) -> Result<(), TableError> {
    for (&role, asked) in &options.columns {
        let at = find(columns, role, asked)?;
        if let Some((&other, _)) = roles.iter().find(|(_, taken)| **taken == at) {
            let header = columns[at].name.clone();
            return Err(TableError::ColumnTwice { column: at + 1, header, roles: [other, role] });
        }
        roles.insert(role, at);
    }
    Ok(())
}

/// The column with that head; else with that head but for capitals; else with that number.
fn find(columns: &[Column], role: Role, asked: &str) -> Result<usize, TableError> {
    let asked = asked.trim();
    let lower = asked.to_lowercase();
    let by = |same: &dyn Fn(&str) -> bool| -> Vec<usize> {
        let heads = columns.iter().enumerate();
        heads.filter(|(_, c)| same(&c.raw) || same(&c.name)).map(|(i, _)| i).collect()
    };
    let mut found = by(&|head| head == asked);
    if found.is_empty() {
        found = by(&|head| head.to_lowercase() == lower);
    }
    match found[..] {
        [at] => Ok(at),
        [first, second, ..] => Err(TableError::RepeatedColumn { role, columns: [first + 1, second + 1] }),
        [] => asked
            .parse::<usize>()
            .ok()
            .and_then(|number| number.checked_sub(1))
            .filter(|at| *at < columns.len())
            .ok_or_else(|| TableError::NoSuchHeader { role, name: asked.to_owned(), headers: raw_heads(columns) }),
    }
}

fn by_name(columns: &[Column], roles: &mut BTreeMap<Role, usize>) -> Result<(), TableError> {
    let asked = roles.clone();
    for (at, column) in columns.iter().enumerate() {
        let Some(role) = column.role else { continue };
        if asked.contains_key(&role) || asked.values().any(|taken| *taken == at) {
            continue;
        }
        if let Some(first) = roles.insert(role, at) {
            return Err(TableError::RepeatedColumn { role, columns: [first + 1, at + 1] });
        }
    }
    Ok(())
}

/// What remains: a lone free column, or two columns of which no name is known.
fn by_place(columns: &[Column], purpose: Purpose, assigned: &mut Assigned) {
    let roles = &mut assigned.roles;
    let free: Vec<usize> = (0..columns.len()).filter(|at| !roles.values().any(|t| t == at)).collect();
    let missing = |role: Role| !roles.contains_key(&role);
    let place = match (free[..].as_ref(), missing(Role::Standard), missing(Role::Reading)) {
        ([x, y], true, true) if columns.len() == 2 => {
            vec![(Role::Standard, *x), (Role::Reading, *y)]
        }
        ([y], false, true) if columns.len() == 2 => vec![(Role::Reading, *y)],
        ([y], _, true) if purpose != Purpose::Standards => vec![(Role::Reading, *y)],
        ([x], true, false) if columns.len() == 2 && purpose == Purpose::Standards => {
            vec![(Role::Standard, *x)]
        }
        _ => return,
    };
    let taken = place.iter().map(|(role, at)| format!("{} as {role}", column_text(at + 1, &columns[*at].name)));
    let taken: Vec<String> = taken.collect();
    assigned.notes.push(format!("Taken by place, not by name: {}; --columns says otherwise.", taken.join(", ")));
    assigned.roles.extend(place);
}

fn raw_heads(columns: &[Column]) -> Vec<String> {
    columns.iter().map(|c| if c.raw.is_empty() { c.name.clone() } else { c.raw.clone() }).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn heads(rows: &[&str]) -> Vec<Column> {
        let cells = |text: &str| text.split('|').map(str::to_owned).collect::<Vec<_>>();
        let width = rows.first().map_or(2, |row| cells(row).len());
        let rows: Vec<Row> = rows.iter().map(|row| Row { line: 1, cells: cells(row) }).collect();
        columns(&rows, width)
    }

    fn assigned(rows: &[&str], purpose: Purpose, asked: &[(Role, &str)]) -> Result<Assigned, TableError> {
        let columns = asked.iter().map(|(role, head)| (*role, (*head).to_owned())).collect();
        assign(&heads(rows), &TableOptions { purpose, columns, ..TableOptions::default() })
    }

    fn roles(rows: &[&str], purpose: Purpose, asked: &[(Role, &str)]) -> Vec<(Role, usize)> {
        assigned(rows, purpose, asked).unwrap().roles.into_iter().collect()
    }

    use Purpose::{Standards, Zeros};
    use Role::{Reading, Standard, Time, UStandard};

    #[test]
    fn names_and_units_come_from_one_or_more_rows() {
        let found = heads(&["Applied|Read|", "load, kN|signal|note"]);
        let names: Vec<&str> = found.iter().map(|c| c.name.as_str()).collect();
        assert_eq!(names, ["Applied load", "Read signal", "note"]);
        assert_eq!(found[0].unit.as_deref(), Some("kN"));
        let found = heads(&["standard|reading", "[kN]|-"]);
        assert_eq!((found[0].unit.as_deref(), found[1].unit.as_deref()), (Some("kN"), None));
    }

    #[test]
    fn roles_come_from_names_in_any_row() {
        assert_eq!(roles(&["Reading|Standard [kN]"], Standards, &[]), [(Standard, 1), (Reading, 0)]);
        assert_eq!(roles(&["applied|read", "standard|reading"], Standards, &[]), [(Standard, 0), (Reading, 1)]);
    }

    #[test]
    fn two_columns_without_known_names_go_by_place_and_are_noted() {
        let found = assigned(&["load|signal"], Standards, &[]).unwrap();
        assert_eq!(found.roles, [(Standard, 0), (Reading, 1)].into());
        assert!(found.notes[0].contains("column 1 (load) as standard"), "{:?}", found.notes);
        assert_eq!(roles(&["signal|standard"], Standards, &[]), [(Standard, 1), (Reading, 0)]);
        assert_eq!(roles(&["V"], Zeros, &[]), [(Reading, 0)]);
        assert_eq!(roles(&["time|V"], Zeros, &[]), [(Reading, 1), (Time, 0)]);
    }

    #[test]
    fn the_mapping_asked_for_comes_first() {
        let asked = [(Standard, "last"), (Reading, "3"), (UStandard, "u, kN")];
        let wanted = [(Standard, 1), (Reading, 2), (UStandard, 3)];
        assert_eq!(roles(&["reading|Last|x|u, kN"], Standards, &asked), wanted);
    }

    #[test]
    fn what_cannot_be_given_out_is_an_error() {
        let missing = assigned(&["reading|a|b"], Standards, &[]).unwrap_err();
        assert!(matches!(&missing, TableError::MissingColumn { role: Standard, headers } if headers.len() == 3));
        let twice = assigned(&["reading|Reading|standard"], Standards, &[]).unwrap_err();
        assert_eq!(twice, TableError::RepeatedColumn { role: Reading, columns: [1, 2] });
        let absent = assigned(&["a|b"], Standards, &[(Reading, "Signal")]).unwrap_err();
        assert!(matches!(absent, TableError::NoSuchHeader { role: Reading, .. }));
        let both = assigned(&["a|b"], Standards, &[(Reading, "a"), (Standard, "a")]).unwrap_err();
        assert!(matches!(both, TableError::ColumnTwice { column: 1, .. }));
        assert!(assigned(&["V"], Standards, &[]).is_err());
    }
}
