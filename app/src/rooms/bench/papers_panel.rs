//! The panel with the papers of the standards.

use super::{
    papers::{self, PaperField, Whose},
    state::State,
};
use crate::{
    rooms::{View, Wish},
    theme::Theme,
    widgets::Field,
};
use assize_core::{
    project::{
        Project,
        command::{Command, StandardsCommand},
    },
    quantity::{format::with_unit, number::parse_number},
    standards::{Standard, StandardId},
};
use eframe::egui::{ComboBox, Label, RichText, ScrollArea, TextStyle, Ui};

/// Shows the panel.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let theme = Theme::of(ui);
    ui.label(RichText::new("Papers of the standards").text_style(TextStyle::Heading));
    if view.project.standards.is_empty() {
        let text = "Standards appear here with their first reading. What stands on their certificates is \
                    noted once for all of them, or for each.";
        ui.add(Label::new(RichText::new(text).color(theme.soft_ink)).wrap());
        return;
    }
    ScrollArea::vertical().auto_shrink([false, false]).show(ui, |ui| {
        whose(ui, view.project, state);
        if let Whose::One(id) = state.whose {
            value(ui, id, view.project, state, wishes);
        }
        for field in PaperField::ALL {
            one(ui, field, view.project, state, wishes);
        }
    });
}

fn whose(ui: &mut Ui, project: &Project, state: &mut State) {
    let before = state.whose;
    let shown = match state.whose {
        Whose::All => format!("all {} standards", project.standards.len()),
        Whose::One(id) => project.standard(id).map_or(String::new(), |s| name(s, project)),
    };
    let label = ui.label(RichText::new("Of").font(Theme::of(ui).small()).color(Theme::of(ui).soft_ink));
    let list = ComboBox::from_id_salt("whose papers").selected_text(shown).width(ui.available_width());
    let response = list.show_ui(ui, |ui| {
        ui.selectable_value(&mut state.whose, Whose::All, format!("all {} standards", project.standards.len()));
        for standard in project.standards.iter() {
            ui.selectable_value(&mut state.whose, Whose::One(standard.id), name(standard, project));
        }
    });
    response.response.labelled_by(label.id);
    if before != state.whose {
        state.drafts.clear();
        state.value_draft = None;
        state.paper_problem = None;
    }
}

fn name(standard: &Standard, project: &Project) -> String {
    let value = with_unit(&standard.raw, project.plan.input.unit.as_str());
    match &standard.papers.identity {
        Some(identity) => format!("{value}, {identity}"),
        None => value,
    }
}

/// The certified value itself; a change of it is asked for its reason once there are readings.
fn value(ui: &mut Ui, id: StandardId, project: &Project, state: &mut State, wishes: &mut Vec<Wish>) {
    let Some(standard) = project.standard(id) else { return };
    let mut text = state.value_draft.clone().unwrap_or_else(|| standard.raw.to_string());
    let unit = project.plan.input.unit.as_str();
    let response = Field::number("Certified value", unit).width(ui.available_width()).show(ui, &mut text);
    if response.changed() {
        state.value_draft = Some(text.clone());
    }
    if !response.lost_focus() || state.value_draft.take().is_none() || text.trim() == &*standard.raw {
        return;
    }
    match parse_number(&text, None) {
        Ok(value) => {
            let raw = text.trim().into();
            let command = Command::Standards(StandardsCommand::Value { id, raw, value });
            wishes.push(Wish::Enter { command, because: None });
        }
        Err(why) => state.problem = Some((false, format!("The standard was not changed: {why}."))),
    }
}

fn one(ui: &mut Ui, field: PaperField, project: &Project, state: &mut State, wishes: &mut Vec<Wish>) {
    let now = papers::text(field, state.whose, project);
    let mut text = state.drafts.get(&field).cloned().unwrap_or_else(|| now.clone());
    let hint = if papers::differ(field, state.whose, project) { "differ: choose one standard" } else { field.hint() };
    let problem = state.paper_problem.as_ref().filter(|(f, _)| *f == field).map(|(_, why)| why.clone());
    let label = match field {
        PaperField::Uncertainty => format!("Uncertainty, {}", project.plan.input.unit),
        _ => field.label().to_owned(),
    };
    let response = Field::text(label.trim_end_matches([',', ' ']))
        .hint(hint)
        .problem(problem.as_deref())
        .width(ui.available_width())
        .show(ui, &mut text);
    if response.changed() {
        state.drafts.insert(field, text.clone());
    }
    if !response.lost_focus() || !state.drafts.contains_key(&field) {
        return;
    }
    match papers::commands(field, &text, state.whose, project) {
        Ok(commands) => {
            state.drafts.remove(&field);
            state.paper_problem = None;
            wishes.extend(commands.into_iter().map(|command| Wish::Enter { command, because: None }));
        }
        Err(why) => state.paper_problem = Some((field, why)),
    }
}
