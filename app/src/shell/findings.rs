//! The strip at the bottom: messages and findings, at most three lines until it is opened.

use super::{
    Asked, Extent,
    glyph::{self, Glyph},
    shape_of,
    strip::{LINES, Line, rest},
};
use crate::{rooms::Wish, theme::Theme, widgets::finding_line};
use assize_core::project::command::{Command, RecordCommand};
use eframe::egui::{Align, Button, Frame, Layout, Margin, Panel, RichText, ScrollArea, Stroke, Ui};

/// Whether the strip shows all its lines.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct StripState {
    open: bool,
    /// Height of the strip in the frame before, points.
    height: f32,
}

/// Shows the strip; nothing at all when there is nothing to say.
pub fn findings(ui: &mut Ui, state: &mut StripState, lines: &[Line], asked: &mut Asked) {
    if lines.is_empty() {
        return;
    }
    let theme = Theme::of(ui);
    let extent = Extent::of(ui);
    let shown = if extent == Extent::Full { LINES } else { 1 };
    let frame = Frame::new().fill(theme.panel).inner_margin(Margin::symmetric(16, 5));
    let panel = Panel::bottom("findings").frame(frame).show_separator_line(false).resizable(false);
    let response = panel.show(ui, |ui| {
        ui.spacing_mut().item_spacing.y = 1.0;
        if state.open {
            let height = ui.ctx().content_rect().height() * 0.4;
            ScrollArea::vertical().max_height(height).auto_shrink([false, true]).show(ui, |ui| {
                lines.iter().for_each(|l| whole(ui, l, asked));
            });
            more(ui, state, "fewer");
            return;
        }
        let (head, tail) = lines.split_at(lines.len().min(shown));
        let rest = rest(tail);
        for (n, l) in head.iter().enumerate() {
            let last = n + 1 == head.len() && !rest.is_empty();
            with_rest(ui, state, l, if last { &rest } else { "" }, asked);
        }
    });
    let rect = response.response.rect;
    if rect.height() != std::mem::replace(&mut state.height, rect.height()) {
        // A panel takes its place by its height in the frame before.
        ui.ctx().request_repaint();
    }
    let rule = Stroke::new(theme.spacing.hair, theme.rule);
    ui.painter().hline(rect.x_range(), rect.top(), rule);
}

/// A line, and at its right what stands behind the last one.
fn with_rest(ui: &mut Ui, state: &mut StripState, l: &Line, rest: &str, asked: &mut Asked) {
    if rest.is_empty() {
        line(ui, l, asked);
        return;
    }
    ui.with_layout(Layout::right_to_left(Align::Min), |ui| {
        more(ui, state, rest);
        ui.with_layout(Layout::left_to_right(Align::Min), |ui| line(ui, l, asked));
    });
}

fn more(ui: &mut Ui, state: &mut StripState, words: &str) {
    let theme = Theme::of(ui);
    let button = Button::new(RichText::new(words).color(theme.soft_ink)).frame_when_inactive(false);
    if ui.add(button).clicked() {
        state.open = !state.open;
    }
}

/// A line with its hint and the way to mark it as read.
fn whole(ui: &mut Ui, l: &Line, asked: &mut Asked) {
    let theme = Theme::of(ui);
    line(ui, l, asked);
    ui.horizontal_wrapped(|ui| {
        ui.add_space(theme.spacing.mark + theme.spacing.item);
        if !l.hint.is_empty() {
            ui.label(RichText::new(&l.hint).font(theme.small()).color(theme.soft_ink));
        }
        match l.code {
            Some(_) if l.read => {
                ui.label(RichText::new("marked as read").font(theme.small()).color(theme.soft_ink));
            }
            Some(code) => {
                let words = RichText::new("Mark as read").font(theme.small());
                if ui.add(Button::new(words).frame_when_inactive(false)).clicked() {
                    let command = Command::Record(RecordCommand::MarkRead(code.into()));
                    asked.wishes.push(Wish::Enter { command, because: None });
                }
            }
            None => {}
        }
    });
    ui.add_space(theme.spacing.tight);
}

fn line(ui: &mut Ui, l: &Line, asked: &mut Asked) {
    let shape = shape_of(l.severity);
    if l.goes.is_some() {
        let response = finding_line(ui, shape, &l.text);
        let response = if l.hint.is_empty() { response } else { response.on_hover_text(&l.hint) };
        if response.clicked() {
            asked.wishes.extend(l.goes.clone().map(|(room, place)| Wish::Go(room, Some(place))));
        }
        return;
    }
    // A message of the program: it can be closed.
    ui.with_layout(Layout::right_to_left(Align::Min), |ui| {
        if glyph::button(ui, Glyph::Cross, "Close this message", true).clicked() {
            asked.closed.push(l.text.clone());
        }
        ui.with_layout(Layout::left_to_right(Align::Min), |ui| {
            let text = if l.hint.is_empty() { l.text.clone() } else { format!("{} {}", l.text, l.hint) };
            if finding_line(ui, shape, &text).clicked() {
                asked.closed.push(l.text.clone());
            }
        });
    });
}
