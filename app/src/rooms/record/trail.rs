//! The trail as plain sentences, newest first, with a filter.

use super::state::State;
use crate::{rooms::View, theme::Theme, widgets::Field};
use assize_core::trail::sentences::Told;
use eframe::egui::{
    RichText, Role, ScrollArea, Sense, TextStyle, Ui, WidgetInfo, pos2,
    text::{LayoutJob, TextFormat},
    vec2,
};

/// Shows the trail.
pub fn show(ui: &mut Ui, view: &View<'_>, state: &mut State) {
    let theme = Theme::of(ui);
    state.teller.follow(view.document.acts());
    let told = state.teller.told();
    ui.label(RichText::new("Trail").text_style(TextStyle::Heading));
    Field::text("Only entries that mention").width(ui.available_width()).show(ui, &mut state.filter);
    let filter = state.filter.trim().to_lowercase();
    let shown: Vec<&Told> = told.iter().rev().filter(|t| filter.is_empty() || t.mentions(&filter)).collect();
    let count = if filter.is_empty() {
        format!("{} entries, newest first · digest {}", told.len(), view.document.digest().short())
    } else {
        format!("{} of {} entries", shown.len(), told.len())
    };
    ui.label(RichText::new(count).font(theme.small()).color(theme.soft_ink));
    ScrollArea::vertical().auto_shrink([false, false]).id_salt("trail").show(ui, |ui| {
        if told.is_empty() {
            ui.label("Nothing was entered yet. Every change stands here in a sentence, for good.");
        }
        for entry in shown {
            one(ui, entry);
        }
    });
}

/// One entry: number, who and when in soft ink, what was done in ink.
fn one(ui: &mut Ui, told: &Told) {
    let theme = Theme::of(ui);
    let indent = 34.0;
    let width = ui.available_width() - indent;
    let soft = TextFormat::simple(theme.small(), theme.soft_ink);
    let mut job = LayoutJob::default();
    job.append(&format!("{} {}", told.by, told.did), 0.0, TextFormat::simple(theme.body(), theme.ink));
    if let Some(why) = &told.because {
        job.append(&format!("\nReason: {why}"), 0.0, TextFormat::simple(theme.body(), theme.ink));
    }
    job.append(&format!("\n{}", told.at.readable()), 0.0, soft.clone());
    job.wrap.max_width = width;
    let galley = ui.painter().layout_job(job);
    let size = vec2(ui.available_width(), galley.size().y + 8.0);
    let (rect, response) = ui.allocate_exact_size(size, Sense::hover());
    let sentence = format!("{}: {}", told.number, told.sentence());
    response.widget_info(|| WidgetInfo::labeled(Role::Label, true, &sentence));
    if !ui.is_rect_visible(rect) {
        return;
    }
    let number = LayoutJob::single_section(told.number.to_string(), soft);
    let number = ui.painter().layout_job(number);
    ui.painter().galley(pos2(rect.left() + 26.0 - number.size().x, rect.top() + 4.5), number, theme.soft_ink);
    ui.painter().galley(pos2(rect.left() + indent, rect.top() + 3.0), galley, theme.ink);
    let line = eframe::egui::Stroke::new(theme.spacing.hair, theme.hair);
    ui.painter().hline(rect.x_range(), rect.bottom(), line);
}
