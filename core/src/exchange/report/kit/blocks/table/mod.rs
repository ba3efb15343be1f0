//! Tables: caption, head, rows, note.

mod cells;
mod widths;

use std::rc::Rc;

use super::super::document::{Cell, Row, Table};
use super::super::draw::{Draw, Owner, Placed};
use super::super::error::{ReportError, TableProblem};
use super::super::flow::{Galley, Keep, Repeat, Slice};
use super::super::style::{CAPTION, HAIRLINE, Ink, LEFT, MEASURE, NOTE, RIGHT, RULE};
use super::super::tags::{NodeId, Role, Tags};
use super::super::text::Typesetter;
use super::prose::stack;
use super::strips;
use cells::Grid;

/// Between the last line of the head and its rule.
const HEAD_BELOW: f32 = 3.0;
/// Between the rule of the head and the first row.
const HEAD_AFTER: f32 = 2.4;

/// A table. Its head is repeated on every page; a page never holds the head alone, nor the first
/// or the last row alone.
pub(super) fn table(setter: &Typesetter, table: &Table, galley: &mut Galley) -> Result<(), ReportError> {
    check(table)?;
    let grid = Grid::new(setter, table)?;
    let place = galley.tags.add(None, Role::Table);
    let first = galley.len();
    galley.space(9.0);
    if let Some(text) = &table.caption {
        let owner = Owner::Content(galley.tags.add(Some(place), Role::Caption));
        let (height, drawings) = caption(setter, text, owner)?;
        galley.push(Slice { height, drawings, ..Slice::default() });
    }
    let (height, drawings) = head(setter, &grid, Some((place, &mut galley.tags)))?;
    galley.push(Slice { height, drawings, ..Slice::default() });
    galley.hold(first, Keep::Bound);
    galley.bind_last();
    let repeat = Rc::new(repeated(setter, table, &grid)?);
    let body = galley.tags.add(Some(place), Role::TableBody);
    rows(setter, table, &grid, body, &repeat, galley)?;
    note(setter, table, galley)
}

fn check(table: &Table) -> Result<(), ReportError> {
    let columns = table.columns.len();
    let problem = if columns == 0 {
        Some(TableProblem::NoColumns)
    } else {
        let ragged = |row: &Row| row.cells.len() != columns;
        table.rows.iter().position(ragged).map(|row| TableProblem::RaggedRow {
            row,
            cells: table.rows[row].cells.len(),
            columns,
        })
    };
    match problem {
        None => Ok(()),
        Some(problem) => Err(ReportError::Table { caption: table.caption.clone().unwrap_or_default(), problem }),
    }
}

fn caption(setter: &Typesetter, text: &str, owner: Owner) -> Result<(f32, Vec<Placed>), ReportError> {
    let lines = setter.lines(text, CAPTION, MEASURE)?;
    let mut drawings = Vec::new();
    stack(&mut drawings, owner, &lines, CAPTION, (LEFT, 0.0));
    Ok((lines.len() as f32 * CAPTION.leading + 2.0, drawings))
}

/// The head with its rule: content at a place in the structure, or a repetition.
fn head(
    setter: &Typesetter,
    grid: &Grid<'_>,
    place: Option<(NodeId, &mut Tags)>,
) -> Result<(f32, Vec<Placed>), ReportError> {
    let owners = match place {
        None => vec![Owner::Repeated; grid.columns()],
        Some((table, tags)) => {
            let head = tags.add(Some(table), Role::TableHead);
            let row = tags.add(Some(head), Role::TableRow);
            (0..grid.columns()).map(|_| Owner::Content(tags.add(Some(row), Role::HeadCell))).collect()
        }
    };
    let cells = grid.head(setter, &owners)?;
    let rows = cells.iter().map(|cell| cell.lines.len()).max().unwrap_or(1);
    let style = grid.head_style();
    let bottom = rows as f32 * style.leading;
    let mut drawings = Vec::new();
    for cell in cells {
        let top = bottom - cell.lines.len() as f32 * style.leading;
        for (i, (left, line)) in cell.lines.into_iter().enumerate() {
            let top = top + i as f32 * style.leading;
            let draw = Draw::text(left, top, line, style);
            drawings.push(Placed::new(cell.owner, draw));
        }
    }
    let rule = Draw::rule(LEFT, RIGHT, bottom + HEAD_BELOW, Ink::Black, RULE);
    drawings.push(Placed::new(Owner::Ornament, rule));
    Ok((bottom + HEAD_BELOW + HEAD_AFTER, drawings))
}

/// Caption and head as they stand at the top of further pages.
fn repeated(setter: &Typesetter, table: &Table, grid: &Grid<'_>) -> Result<Repeat, ReportError> {
    let (mut height, mut drawings) = (0.0, Vec::new());
    if let Some(text) = &table.caption {
        let text = format!("{text} (continued)");
        (height, drawings) = caption(setter, &text, Owner::Repeated)?;
    }
    let (below, head) = head(setter, grid, None)?;
    let down = |p: Placed| Placed::new(p.owner, p.draw.moved_down(height));
    drawings.extend(head.into_iter().map(down));
    Ok(Repeat { height: height + below, drawings })
}

fn rows(
    setter: &Typesetter,
    table: &Table,
    grid: &Grid<'_>,
    body: NodeId,
    repeat: &Rc<Repeat>,
    galley: &mut Galley,
) -> Result<(), ReportError> {
    let last = table.rows.len().saturating_sub(1);
    if table.rows.is_empty() {
        let row = galley.tags.add(Some(body), Role::TableRow);
        let span = grid.columns();
        let cell = galley.tags.add(Some(row), Role::WideCell { span });
        let cells = [grid.nothing(setter, Owner::Content(cell))?];
        for slice in strips::slices(&cells, grid.spacing()) {
            galley.push(slice);
        }
    }
    for (i, row) in table.rows.iter().enumerate() {
        let place = galley.tags.add(Some(body), Role::TableRow);
        let owners: Vec<Owner> = row.cells.iter().map(|cell| cell_owner(cell, place, &mut galley.tags)).collect();
        let cells = grid.row(setter, row, &owners)?;
        let count = galley.len();
        for mut slice in strips::slices(&cells, grid.spacing()) {
            if row.shade {
                shade(&mut slice);
            }
            slice.repeat = Some(Rc::clone(repeat));
            slice.tail = vec![hairline()];
            galley.push(slice);
        }
        let one_slice = galley.len() == count + 1;
        if one_slice && i < last && (i == 0 || i + 1 == last) {
            galley.bind_last();
        }
    }
    galley.amend_last(close);
    Ok(())
}

/// The place of a cell; a struck one has its text in a place that says so.
fn cell_owner(cell: &Cell, row: NodeId, tags: &mut Tags) -> Owner {
    let place = tags.add(Some(row), Role::Cell);
    if cell.strike {
        return Owner::Content(tags.add(Some(place), Role::Struck));
    }
    Owner::Content(place)
}

fn shade(slice: &mut Slice) {
    let ground = Draw::filled([LEFT, 0.0, RIGHT, slice.height], Ink::Shade);
    slice.drawings.insert(0, Placed::new(Owner::Ground, ground));
}

fn hairline() -> Placed {
    let draw = Draw::rule(LEFT, RIGHT, 0.6, Ink::Hair, HAIRLINE);
    Placed::new(Owner::Ornament, draw)
}

/// Draws the rule that ends the table.
fn close(slice: &mut Slice) {
    slice.height += 2.0;
    slice.tail.clear();
    let rule = Draw::rule(LEFT, RIGHT, slice.height, Ink::Black, RULE);
    slice.drawings.push(Placed::new(Owner::Ornament, rule));
}

fn note(setter: &Typesetter, table: &Table, galley: &mut Galley) -> Result<(), ReportError> {
    let Some(text) = &table.note else {
        galley.space(3.0);
        return Ok(());
    };
    galley.bind_last();
    let owner = Owner::Content(galley.tags.add(None, Role::Text));
    let lines = setter.lines(text, NOTE, MEASURE)?;
    let first = galley.len();
    galley.space(3.5);
    for line in lines {
        let draw = Draw::text(LEFT, 0.0, line, NOTE);
        galley.push(Slice { height: NOTE.leading, drawings: vec![Placed::new(owner, draw)], ..Slice::default() });
    }
    galley.hold(first, Keep::Together);
    Ok(())
}
