//! The sheets for a table: which file, and how it is understood.

use super::{
    state::State,
    table::{DECIMALS, DELIMITERS, Import},
};
use crate::{
    platform::{Ask, FileKind},
    rooms::{Room, View, Wish},
    shell::sheet,
    theme::Theme,
    widgets::{Severity, caption, segmented},
};
use assize_core::exchange::table::{Purpose, Role};
use eframe::egui::{Button, ComboBox, Context, Grid, Label, RichText, Ui};

/// Shows the sheet that is open, if one is.
pub fn sheets(ctx: &Context, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    if state.import.is_some() {
        understood(ctx, view, state, wishes);
    } else if state.path.is_some() {
        path(ctx, state, wishes);
    }
}

fn path(ctx: &Context, state: &mut State, wishes: &mut Vec<Wish>) {
    let Some(field) = &mut state.path else { return };
    let kinds = vec![FileKind::new("Tables", &["csv", "tsv", "txt"]), FileKind::new("All files", &["*"])];
    let shown = sheet(ctx, "Import a table", 560.0, |ui| {
        let theme = Theme::of(ui);
        let why = "Delimited text. You see how it is understood before anything is taken.";
        ui.label(RichText::new(why).color(theme.soft_ink));
        let mut settled = field.show(ui, "File", &Ask::Open(kinds));
        let typed = field.path();
        if ui.add_enabled(typed.is_some(), Button::new("Read it")).clicked() {
            settled = typed;
        }
        settled
    });
    if let Some(path) = shown.inner {
        state.path = None;
        wishes.push(Wish::Import { path, zeros: false });
    } else if shown.closed {
        state.path = None;
    }
}

fn understood(ctx: &Context, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let Some(import) = &mut state.import else { return };
    let title = format!("{}: as it was understood", import.name);
    let shown = sheet(ctx, &title, 640.0, |ui| {
        choices(ui, import);
        columns(ui, import);
        match &import.understood {
            Err(why) => {
                caption(ui, Some(Severity::Stop), why);
            }
            Ok((table, _)) => {
                preview(ui, import);
                let theme = Theme::of(ui);
                for note in &table.notes {
                    ui.add(Label::new(RichText::new(note).color(theme.soft_ink)).wrap());
                }
            }
        }
        buttons(ui, import)
    });
    match shown.inner {
        Some(true) => {
            let first = view.project.readings.is_empty() && !import.zeros();
            let commands = import.commands(view.project);
            wishes.extend(commands.into_iter().map(|command| Wish::Enter { command, because: None }));
            if first {
                wishes.push(Wish::Go(Room::Compare, None));
            }
            state.import = None;
        }
        Some(false) => state.import = None,
        None if shown.closed => state.import = None,
        None => {}
    }
}

fn choices(ui: &mut Ui, import: &mut Import) {
    let mut purpose = import.options.purpose;
    let purposes = [(Purpose::Standards, "standards and readings"), (Purpose::Zeros, "zero readings")];
    if segmented(ui, "What the rows are", &mut purpose, &purposes).changed() {
        import.again(|o| o.purpose = purpose);
    }
    ui.horizontal_wrapped(|ui| {
        ui.spacing_mut().item_spacing.x = 16.0;
        let mut delimiter = import.options.delimiter;
        ui.vertical(|ui| {
            if segmented(ui, "Between cells", &mut delimiter, &DELIMITERS).changed() {
                import.again(|o| o.delimiter = delimiter);
            }
        });
        let mut decimal = import.options.decimal;
        ui.vertical(|ui| {
            if segmented(ui, "Decimal mark", &mut decimal, &DECIMALS).changed() {
                import.again(|o| o.decimal = decimal);
            }
        });
    });
    ui.add_space(6.0);
}

/// Which column holds the standards, and which the readings.
fn columns(ui: &mut Ui, import: &mut Import) {
    if import.heads.len() < 2 {
        return;
    }
    let wanted: &[(Role, &str)] = if import.zeros() {
        &[(Role::Reading, "Readings are in")]
    } else {
        &[(Role::Standard, "Standards are in"), (Role::Reading, "Readings are in")]
    };
    ui.horizontal_wrapped(|ui| {
        ui.spacing_mut().item_spacing.x = 16.0;
        for (role, name) in wanted {
            ui.vertical(|ui| column(ui, import, *role, name));
        }
    });
    ui.add_space(6.0);
}

fn column(ui: &mut Ui, import: &mut Import, role: Role, name: &str) {
    let theme = Theme::of(ui);
    let label = ui.label(RichText::new(name).font(theme.small()).color(theme.soft_ink));
    let now = import.column(role);
    let shown = now.and_then(|at| import.heads.get(at)).map_or("choose a column", String::as_str);
    let list = ComboBox::from_id_salt(name).selected_text(shown).width(260.0);
    let mut taken = now;
    let response = list.show_ui(ui, |ui| {
        for (at, head) in import.heads.iter().enumerate() {
            ui.selectable_value(&mut taken, Some(at), head);
        }
    });
    response.response.labelled_by(label.id);
    if let Some(at) = taken.filter(|_| taken != now) {
        import.choose(role, at);
    }
}

fn preview(ui: &mut Ui, import: &Import) {
    let theme = Theme::of(ui);
    let soft = |text: &str| RichText::new(text).color(theme.soft_ink);
    Grid::new("recognised").num_columns(2).spacing([16.0, 3.0]).show(ui, |ui| {
        for (what, how) in import.recognised() {
            ui.label(soft(what));
            ui.add(Label::new(how).wrap());
            ui.end_row();
        }
    });
    ui.add_space(6.0);
    Grid::new("first rows").num_columns(2).spacing([32.0, 2.0]).striped(true).show(ui, |ui| {
        ui.label(soft("standard"));
        ui.label(soft("reading"));
        ui.end_row();
        for [standard, reading] in import.first_rows() {
            ui.label(standard);
            ui.label(reading);
            ui.end_row();
        }
    });
    ui.label(soft("the first rows, as numbers"));
}

/// Whether the table is taken (`true`) or left (`false`).
fn buttons(ui: &mut Ui, import: &Import) -> Option<bool> {
    let mut answer = None;
    ui.add_space(8.0);
    ui.horizontal(|ui| {
        let words = match &import.understood {
            Ok((_, records)) => format!("Take these {} readings", records.len()),
            Err(_) => "Take the readings".to_owned(),
        };
        let take = ui.add_enabled(import.understood.is_ok(), Button::new(words));
        if take.clicked() {
            answer = Some(true);
        }
        if ui.button("Leave it").clicked() {
            answer = Some(false);
        }
        if import.understood.is_ok() && ui.memory(|m| m.focused().is_none()) {
            take.request_focus();
        }
    });
    answer
}
