//! How the record room is laid out.

use super::{
    sign,
    state::{Part, State},
    trail,
};
use crate::{
    app::draft,
    rooms::{View, Wish},
    shell::Extent,
    theme::Theme,
    widgets::segmented,
};
use eframe::egui::{Frame, Margin, Panel, RichText, TextStyle, Ui};

/// The whole room.
pub fn room(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    if Extent::of(ui) == Extent::Full && ui.available_width() > 1080.0 {
        wide(ui, view, state, wishes);
    } else {
        narrow(ui, view, state, wishes);
    }
}

fn wide(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let frame = Frame::new().inner_margin(Margin::symmetric(16, 14));
    Panel::left("trail").frame(frame).resizable(false).exact_size(340.0).show(ui, |ui| {
        trail::show(ui, view, state);
    });
    Panel::right("sign").frame(frame).resizable(false).exact_size(340.0).show(ui, |ui| {
        sign::show(ui, view, state, wishes);
    });
    frame.show(ui, |ui| pages(ui, view, state));
}

fn narrow(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    Frame::new().inner_margin(Margin::symmetric(12, 8)).show(ui, |ui| {
        let parts = [(Part::Trail, "Trail"), (Part::Report, "Report"), (Part::Sign, "Sign and check")];
        segmented(ui, "", &mut state.part, &parts);
        ui.add_space(4.0);
        match state.part {
            Part::Trail => trail::show(ui, view, state),
            Part::Report => pages(ui, view, state),
            Part::Sign => sign::show(ui, view, state, wishes),
        }
    });
}

fn pages(ui: &mut Ui, view: &View<'_>, state: &mut State) {
    let theme = Theme::of(ui);
    ui.horizontal(|ui| {
        ui.label(RichText::new("Report as it will print").text_style(TextStyle::Heading));
        if view.evaluation.provisional {
            let words = "as advised, not yet chosen";
            ui.label(RichText::new(words).font(theme.small()).color(theme.soft_ink));
        }
    });
    state.preview.show(ui, view.document, view.revision, draft);
}
