//! What a person did in the tables, as wishes.

use super::{
    entry,
    grids::{READING, STANDARD, ZERO},
    model::{Row, next_direction, next_stage},
    state::{Correcting, Part, State},
    table::pasted,
};
use crate::{
    rooms::{Room, View, Wish},
    widgets::{Question, QuestionState, ReasonKey, Reply, grid::GridEvent},
};
use assize_core::{
    project::{
        command::{Command, ReadingsCommand, What},
        evaluate::Place,
    },
    quantity::number::parse_number,
    readings::{Reading, Slip},
    trail::sentences::words,
};
use eframe::egui::{Context, Event};

const SLIPS: [(char, Slip); 4] =
    [('1', Slip::TypedWrong), ('2', Slip::ReadWrong), ('3', Slip::WrongRow), ('4', Slip::NotSettled)];

/// The events of one table; `zeros` tells which.
pub struct Happened<'a> {
    /// Whether it is the table of zero readings.
    pub zeros: bool,
    /// Its rows.
    pub rows: &'a [Row],
    /// What was done.
    pub events: Vec<GridEvent>,
}

/// Turns events into wishes.
pub fn handle(happened: Happened<'_>, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let Happened { zeros, rows, events } = happened;
    let reading_column = if zeros { ZERO } else { READING };
    for event in events {
        match event {
            GridEvent::NewRow { cells } => new_row(zeros, cells, view, state, wishes),
            GridEvent::Paste { row, col, cells } => {
                let onto = row < rows.len();
                paste(Block { zeros, col, cells, onto }, view, state, wishes);
            }
            GridEvent::Edit { row, col, text } => {
                let Some(row) = rows.get(row) else { continue };
                if col == reading_column {
                    correct(row, &text, zeros, state);
                } else if !zeros && col == STANDARD {
                    reapply(row, &text, state, wishes);
                }
            }
            GridEvent::Clear { rows: cleared, .. } => {
                let cleared = rows.get(cleared).unwrap_or_default();
                wishes.extend(cleared.iter().filter(|r| !r.aside).map(aside));
            }
            GridEvent::Request { row, key } => request(rows.get(row), key, zeros, row, state, wishes),
            GridEvent::Selected { .. } => {}
        }
    }
}

fn enter(command: Command) -> Wish {
    Wish::Enter { command, because: None }
}

fn aside(row: &Row) -> Wish {
    enter(Command::Readings(ReadingsCommand::SetAside(row.id)))
}

fn new_row(zeros: bool, cells: Vec<(usize, String)>, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let text = |col: usize| cells.iter().find(|(c, _)| *c == col).map(|(_, t)| t.clone()).unwrap_or_default();
    let made = if zeros {
        entry::zero(&text(ZERO), &state.between, state.beside.stage).map_err(|why| (ZERO, why))
    } else {
        entry::reading(&text(STANDARD), &text(READING), state.beside, view.project)
    };
    match made {
        Ok(command) => {
            state.problem = None;
            if !zeros {
                let next = entry::next_standard(&text(STANDARD), view.project);
                state.advance(&text(STANDARD), &next);
            }
            state.handed = Some((zeros, cells));
            wishes.push(enter(command));
        }
        Err((col, why)) => {
            state.problem = Some((zeros, why));
            let grid = if zeros { &mut state.zero_grid } else { &mut state.grid };
            grid.refill_entry(&cells, col);
        }
    }
}

struct Block {
    zeros: bool,
    col: usize,
    cells: Vec<Vec<String>>,
    /// Pasted over rows that exist.
    onto: bool,
}

fn paste(block: Block, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let typed = state.grid.entry_texts().first().cloned().unwrap_or_default();
    let lone = !block.zeros && block.col == READING && block.cells.iter().all(|row| row.len() < 2);
    let lines = block.cells.iter().map(|row| {
        let row = row.join("\t");
        if lone { format!("{typed}\t{row}") } else { row }
    });
    let text = lines.collect::<Vec<_>>().join("\n");
    match pasted(&text, block.zeros, view.project) {
        Ok(commands) => {
            let first = view.project.readings.is_empty();
            let added = "The pasted rows were added at the end; no existing row is ever written over.";
            state.problem = block.onto.then(|| (block.zeros, added.to_owned()));
            wishes.extend(commands.into_iter().map(enter));
            if first && !block.zeros {
                wishes.push(Wish::Go(Room::Compare, None));
            }
        }
        Err(why) => state.problem = Some((block.zeros, format!("Nothing was pasted: {why}."))),
    }
}

fn correct(row: &Row, text: &str, zeros: bool, state: &mut State) {
    match parse_number(text, None) {
        Ok(value) => {
            state.problem = None;
            state.correcting = Some(Correcting {
                id: row.id,
                old: row.reading.clone(),
                raw: text.to_owned(),
                value,
                question: QuestionState::default(),
            });
        }
        Err(why) => state.problem = Some((zeros, format!("Reading {} was not changed: {why}.", row.id.0))),
    }
}

fn reapply(row: &Row, text: &str, state: &mut State, wishes: &mut Vec<Wish>) {
    match parse_number(text, None) {
        Ok(value) => {
            state.problem = None;
            let what = What::Standard(text.into(), value);
            wishes.push(enter(Command::Readings(ReadingsCommand::Reapply { id: row.id, what })));
        }
        Err(why) => {
            let text = format!("The standard of reading {} was not changed: {why}.", row.id.0);
            state.problem = Some((false, text));
        }
    }
}

fn request(row: Option<&Row>, key: char, zeros: bool, index: usize, state: &mut State, wishes: &mut Vec<Wish>) {
    match (key, row) {
        ('x', Some(row)) if row.aside => {
            wishes.push(enter(Command::Readings(ReadingsCommand::CountAgain(row.id))));
        }
        ('x', Some(row)) => wishes.push(aside(row)),
        ('c', Some(_)) if zeros => state.zero_grid.edit_cell(index, ZERO),
        ('c', Some(_)) => state.grid.edit_cell(index, READING),
        ('d', _) => state.beside.direction = next_direction(state.beside.direction),
        ('s', _) => state.beside.stage = next_stage(state.beside.stage),
        ('a', _) => state.beside.again = !state.beside.again,
        _ => {}
    }
}

/// Asks why a reading is corrected; each usual reason is one key, the fifth asks for words.
pub fn correcting(ctx: &Context, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let Some(c) = &mut state.correcting else { return };
    let keys = SLIPS.map(|(key, slip)| ReasonKey { key, text: words::slip(slip) });
    let title = format!("Correct reading {} from {} to {}?", c.id.0, c.old, c.raw);
    let question = Question {
        title: &title,
        body: "The old value stays visible, struck through.",
        reasons: &keys,
        reason_label: Some("5  Another reason"),
        confirm: "Correct",
        cancel: "Leave it",
    };
    let other = !ctx.text_edit_focused() && ctx.input(|i| i.events.contains(&Event::Text("5".into())));
    let reply = question.show(ctx, &mut c.question);
    let reply = if other { Some(Reply::Confirmed { reason: String::new() }) } else { reply };
    let Some(reply) = reply else { return };
    if let Reply::Confirmed { reason } = reply {
        let slip = SLIPS.iter().map(|(_, slip)| *slip).find(|slip| words::slip(*slip) == reason);
        let because = (slip.is_none() && !reason.is_empty()).then(|| reason.as_str().into());
        let (raw, value) = (c.raw.as_str().into(), c.value);
        let slip = slip.unwrap_or(Slip::Other);
        let command = Command::Readings(ReadingsCommand::Correct { id: c.id, raw, value, slip });
        wishes.push(Wish::Enter { command, because });
    }
    let zero = view.project.reading(c.id).is_some_and(Reading::is_zero);
    state.correcting = None;
    if zero { state.zero_grid.focus() } else { state.grid.focus() }
}

/// Brings a finding's place into sight.
pub fn show_wanted(state: &mut State) {
    let Some(place) = state.wanted.take() else { return };
    let (standards, zeros) = state.take_rows();
    match place {
        Place::Reading(number) => {
            let at = |rows: &[Row]| rows.iter().position(|r| r.id.0 == number);
            if let Some(row) = at(&standards) {
                state.part = Part::Readings;
                state.grid.go_to(row, READING);
                state.grid.focus();
            } else if let Some(row) = at(&zeros) {
                state.part = Part::Zeros;
                state.zero_grid.go_to(row, ZERO);
                state.zero_grid.focus();
            }
        }
        Place::Zeros => state.part = Part::Zeros,
        _ => state.part = Part::Readings,
    }
    state.put_rows((standards, zeros));
}
