//! The two tables of the bench as the grid widget wants them.

use super::model::{Row, told};
use crate::{
    theme::MarkShape,
    widgets::grid::{CellStyle, CellView, Column, EntryRow, GridSource},
};
use assize_core::{project::Project, readings::Direction, trail::sentences::words};

/// Column of the standard.
pub const STANDARD: usize = 0;
/// Column of the reading, in the table of standards.
pub const READING: usize = 1;
/// Column of the reading, in the table of zeros.
pub const ZERO: usize = 0;

/// Readings of standards.
pub struct Standards<'a> {
    rows: &'a [Row],
    project: &'a Project,
    columns: Vec<Column>,
}

impl<'a> Standards<'a> {
    /// The table over these rows.
    #[must_use]
    pub fn new(rows: &'a [Row], project: &'a Project) -> Self {
        let plan = &project.plan;
        let columns = vec![
            Column::number("Standard", plan.input.unit.as_str(), 92.0),
            Column::number("Reading", plan.output.unit.as_str(), 112.0),
            Column::words("Direction", 86.0).read_only(),
            Column::number("Application", "", 84.0).read_only(),
            Column::words("Stage", 78.0).read_only(),
            Column::number("Was", "", 60.0).read_only(),
            Column::words("State", 64.0).read_only().growing(),
        ];
        Self { rows, project, columns }
    }

    /// The row in which new readings are typed.
    #[must_use]
    pub fn entry() -> EntryRow {
        EntryRow {
            last_column: Some(READING),
            repeats: vec![STANDARD],
            hint: "standard, Tab, reading, Enter".to_owned(),
        }
    }
}

impl GridSource for Standards<'_> {
    fn rows(&self) -> usize {
        self.rows.len()
    }

    fn number(&self, row: usize) -> usize {
        number(self.rows, row)
    }

    fn columns(&self) -> &[Column] {
        &self.columns
    }

    fn cell(&self, row: usize, col: usize) -> CellView {
        let Some(row) = self.rows.get(row) else { return CellView::default() };
        let hover = || told(row, self.project);
        match col {
            STANDARD => CellView::plain(&row.standard),
            READING => reading(row, hover()),
            2 => CellView { mark: mark(row.direction), ..CellView::plain(words::direction(row.direction)) },
            3 => soft(&row.application),
            4 => soft(words::stage(row.stage)),
            5 => was(row),
            _ => CellView { hover: hover(), ..soft(&row.note) },
        }
    }

    fn raw(&self, row: usize, col: usize) -> String {
        self.cell(row, col).text
    }
}

/// Zero readings.
pub struct Zeros<'a> {
    rows: &'a [Row],
    project: &'a Project,
    columns: Vec<Column>,
}

impl<'a> Zeros<'a> {
    /// The table over these rows.
    #[must_use]
    pub fn new(rows: &'a [Row], project: &'a Project) -> Self {
        let columns = vec![
            Column::number("Zero", project.plan.output.unit.as_str(), 112.0),
            Column::number("Was", "", 58.0).read_only(),
            Column::words("State", 70.0).read_only().growing(),
        ];
        Self { rows, project, columns }
    }

    /// The row in which new zero readings are typed.
    #[must_use]
    pub fn entry() -> EntryRow {
        EntryRow { last_column: Some(ZERO), repeats: Vec::new(), hint: "reading, Enter".to_owned() }
    }
}

impl GridSource for Zeros<'_> {
    fn rows(&self) -> usize {
        self.rows.len()
    }

    fn number(&self, row: usize) -> usize {
        number(self.rows, row)
    }

    fn columns(&self) -> &[Column] {
        &self.columns
    }

    fn cell(&self, row: usize, col: usize) -> CellView {
        let Some(row) = self.rows.get(row) else { return CellView::default() };
        match col {
            ZERO => reading(row, told(row, self.project)),
            1 => was(row),
            _ => {
                let after = if row.standard.is_empty() { String::new() } else { format!("after {}", row.standard) };
                let parts: Vec<&str> =
                    [row.note.as_str(), after.as_str()].into_iter().filter(|part| !part.is_empty()).collect();
                soft(&parts.join("; "))
            }
        }
    }

    fn raw(&self, row: usize, col: usize) -> String {
        self.cell(row, col).text
    }
}

/// Readings keep their number, by which the trail and the findings speak of them.
fn number(rows: &[Row], row: usize) -> usize {
    rows.get(row).map_or(row + 1, |r| r.id.0 as usize)
}

fn reading(row: &Row, hover: String) -> CellView {
    let style = match (row.aside, row.questioned) {
        (true, _) => CellStyle::Struck,
        (false, true) => CellStyle::Questioned,
        (false, false) => CellStyle::Normal,
    };
    CellView { text: row.reading.clone(), style, mark: row.aside.then_some(MarkShape::SetAside), hover }
}

fn was(row: &Row) -> CellView {
    CellView { style: CellStyle::Struck, ..CellView::plain(&row.was) }
}

fn soft(text: &str) -> CellView {
    CellView { style: CellStyle::Soft, ..CellView::plain(text) }
}

fn mark(direction: Direction) -> Option<MarkShape> {
    match direction {
        Direction::Rising => Some(MarkShape::Rising),
        Direction::Falling => Some(MarkShape::Falling),
        Direction::TurningPoint | Direction::None => None,
    }
}
