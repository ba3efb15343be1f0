//! The line under the grid: how residuals are shown, and the cursor as a number.

use super::{
    distance,
    near_facts::NearFacts,
    state::{Against, State},
    words::Scene,
};
use crate::{
    command::{Does, entry},
    rooms::Wish,
};
use eframe::egui::{Align, Button, Key, Layout as Flow, RichText, TextEdit, Ui, UiBuilder};

/// Draws the line.
pub(super) fn show(ui: &mut Ui, scene: Scene<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let left = scene.layout.columns.first().map_or(scene.layout.status.left(), |c| c.x.min);
    let rect = scene.layout.status.with_min_x(left).with_min_y(scene.layout.status.top() + 3.0);
    let mut line = ui.new_child(UiBuilder::new().max_rect(rect).layout(Flow::left_to_right(Align::Center)));
    line.spacing_mut().item_spacing.x = 5.0;
    switches(&mut line, scene, state);
    let columns = entry(Does::Columns);
    let text = format!("columns ({})", columns.shortcut());
    let pick = quiet(scene, text);
    if line.add(pick).on_hover_text(columns.hint).clicked() {
        wishes.push(Wish::PickColumns);
    }
    if let Some(facts) = state.near().cloned() {
        line.with_layout(Flow::right_to_left(Align::Center), |ui| cursor(ui, scene, state, &facts));
    }
}

/// A word that does something, no louder than the words around it.
fn quiet(scene: Scene<'_>, text: String) -> Button<'static> {
    Button::new(RichText::new(text).font(scene.theme.small()).color(scene.theme.soft_ink)).frame(false)
}

fn switches(ui: &mut Ui, scene: Scene<'_>, state: &mut State) {
    let quiet = |text: String| quiet(scene, text);
    let against = match state.against {
        Against::Value => "against value",
        Against::Order => "against run order",
    };
    let scale = if state.one_scale { "one scale" } else { "scale by fit" };
    if ui
        .add(quiet(format!("residuals in {} (u)", state.measure.words())))
        .on_hover_text("Residuals in output units, input units, or standardised")
        .clicked()
    {
        state.measure = state.measure.next();
        state.windows.residual = None;
    }
    if ui.add(quiet(format!("{against} (o)"))).on_hover_text("Residuals against value or run order").clicked() {
        state.against = if state.against == Against::Value { Against::Order } else { Against::Value };
    }
    if ui
        .add(quiet(format!("{scale} (s)")))
        .on_hover_text("One scale for all residual plots, or its own for a fit five times worse")
        .clicked()
    {
        state.one_scale = !state.one_scale;
        state.windows.residual = None;
    }
}

/// `cursor [3.9] µV/V, 1.9 SD over the zero mean: 1 zero in 20 reads higher`, from right to left.
fn cursor(ui: &mut Ui, scene: Scene<'_>, state: &mut State, facts: &NearFacts) {
    let theme = scene.theme;
    let project = scene.view.project;
    let far = distance::of(scene.view.evaluation, facts, state.cursor);
    let words = distance::words(facts, far);
    let (number, unit) = distance::number(project, facts, state.cursor);
    let brass = |text: String| RichText::new(text).font(theme.small()).color(theme.brass);
    // Narrow windows keep the number and leave the rest to the tooltip.
    let room = ui.available_width();
    if room > 520.0 {
        ui.label(brass(words.clone()));
    }
    ui.label(brass(if room > 520.0 { format!("{unit},") } else { unit }));
    let mut text = state.typed.clone().unwrap_or_else(|| number.clone());
    let width = ui.painter().layout_no_wrap(text.clone(), theme.small(), theme.ink).size().x + 12.0;
    let field = TextEdit::singleline(&mut text)
        .desired_width(width.max(52.0))
        .font(theme.small())
        .align(eframe::egui::Align2::RIGHT_CENTER)
        .id(ui.scope_id().with("cursor field"));
    let response = ui.add(field).on_hover_text(words);
    let label = ui.label(brass("cursor".to_owned()));
    let response = response.labelled_by(label.id);
    if response.changed() {
        state.typed = Some(text.clone());
    }
    if response.lost_focus() {
        let kept = ui.input(|i| i.key_pressed(Key::Escape));
        if let Some(signal) = distance::typed(project, facts, &text).filter(|_| !kept && state.typed.is_some()) {
            state.move_cursor(signal);
            ui.ctx().request_repaint();
        }
        state.typed = None;
    }
}
