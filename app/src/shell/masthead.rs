//! The masthead: what is calibrated, who is at the bench, what is to do, where the entries are.

use super::{
    Asked, Extent,
    glyph::{self, Glyph},
    head::{Disk, Head},
};
use crate::{
    command::{Does, entry},
    rooms::{Room, Wish},
    theme::{MarkShape, TITLE, Theme, paint_mark},
};
use assize_core::project::evaluate::Place;
use eframe::egui::{
    Align, Button, Frame, Label, Layout, Margin, Panel, Response, RichText, Sense, Stroke, TextStyle, Ui, vec2,
};

/// Shows the masthead over the whole width of the window.
pub fn masthead(ui: &mut Ui, head: &Head, asked: &mut Asked) {
    let theme = Theme::of(ui);
    let extent = Extent::of(ui);
    let frame = Frame::new().fill(theme.panel).inner_margin(margin(extent));
    let panel = Panel::top("masthead").frame(frame).show_separator_line(false);
    let shown = panel.show(ui, |ui| {
        ui.horizontal(|ui| {
            if extent == Extent::Full {
                ui.set_min_height(38.0);
            }
            ui.with_layout(Layout::right_to_left(Align::Center), |ui| {
                right(ui, head, extent, asked);
                ui.with_layout(Layout::left_to_right(Align::Center), |ui| {
                    left(ui, head, extent, asked);
                });
            });
        });
    });
    let rect = shown.response.rect;
    let line = Stroke::new(theme.spacing.hair, theme.rule);
    ui.painter().hline(rect.x_range(), rect.bottom(), line);
}

fn margin(extent: Extent) -> Margin {
    let air = extent.air();
    // Both are small whole numbers of points.
    #[expect(clippy::cast_possible_truncation, reason = "20 and 10 at most")]
    let (x, y) = (air.x as i8, air.y as i8);
    Margin::symmetric(x, y.min(7))
}

fn left(ui: &mut Ui, head: &Head, extent: Extent, asked: &mut Asked) {
    let theme = Theme::of(ui);
    let title = RichText::new(&head.title).text_style(TextStyle::Name(TITLE.into()));
    let quantities = RichText::new(&head.quantities).font(theme.small()).color(theme.soft_ink);
    if head.practice {
        ribbon(ui, extent, asked);
    }
    if extent == Extent::Small {
        let whole = format!("{}\n{}", head.title, head.quantities);
        let title = title.font(theme.semibold(theme.sizes.heading));
        ui.add(Label::new(title).truncate().selectable(false)).on_hover_text(&whole);
        return;
    }
    ui.vertical(|ui| {
        ui.spacing_mut().item_spacing.y = 1.0;
        ui.add(Label::new(title).truncate());
        ui.add(Label::new(quantities).truncate());
    });
}

/// A practice project says so, and offers the way out.
fn ribbon(ui: &mut Ui, extent: Extent, asked: &mut Asked) {
    let theme = Theme::of(ui);
    let start = entry(Does::StartOwn);
    let words = format!("{} ({})", start.name, start.shortcut());
    let text = RichText::new(words).color(theme.brass).font(theme.semibold(theme.sizes.body));
    let button = Button::new(text).stroke(Stroke::new(theme.spacing.hair, theme.brass));
    let hint = format!("Practice: what is done here never becomes a record. {}", start.hint);
    if ui.add(button).on_hover_text(hint).clicked() {
        asked.does.push(Does::StartOwn);
    }
    ui.add_space(if extent == Extent::Full { 8.0 } else { 2.0 });
}

fn right(ui: &mut Ui, head: &Head, extent: Extent, asked: &mut Asked) {
    let theme = Theme::of(ui);
    ui.spacing_mut().item_spacing.x = if extent == Extent::Full { 14.0 } else { 6.0 };
    disk(ui, &head.disk, extent);
    let todo = RichText::new(&head.to_do).color(theme.ink);
    if link(ui, todo, "What stands between the project and its signature", true).clicked() {
        asked.wishes.push(Wish::Go(Room::Record, Some(Place::Record)));
    }
    let bench = RichText::new(&head.bench).color(theme.soft_ink);
    if link(ui, bench, entry(Does::AtBench).hint, false).clicked() {
        asked.does.push(Does::AtBench);
    }
    if extent == Extent::Full {
        quiet(ui, Does::CopyTo, asked);
        quiet(ui, Does::Open, asked);
    } else {
        menu(ui, asked);
    }
    ui.spacing_mut().item_spacing.x = 2.0;
    let theme_hint = entry(Does::SwitchTheme);
    if glyph::button(ui, Glyph::HalfDisc, theme_hint.name, true).on_hover_text(theme_hint.tooltip()).clicked() {
        asked.does.push(Does::SwitchTheme);
    }
    step(ui, Glyph::Forth, Does::PutBack, head.put_back.as_deref(), asked);
    step(ui, Glyph::Back, Does::TakeBack, head.take_back.as_deref(), asked);
    ui.add_space(8.0);
}

fn step(ui: &mut Ui, glyph: Glyph, does: Does, what: Option<&str>, asked: &mut Asked) {
    let line = entry(does);
    let response = glyph::button(ui, glyph, line.name, what.is_some());
    let hover = match what {
        Some(what) => format!("{} ({}): {what}", line.name, line.shortcut()),
        None => format!("{} ({}): nothing to do so with", line.name, line.shortcut()),
    };
    if response.on_hover_text(hover).clicked() {
        asked.does.push(does);
    }
}

fn quiet(ui: &mut Ui, does: Does, asked: &mut Asked) {
    let line = entry(does);
    let button = Button::new(line.name).frame_when_inactive(false);
    if ui.add(button).on_hover_text(line.tooltip()).clicked() {
        asked.does.push(does);
    }
}

/// What a small window folds away.
fn menu(ui: &mut Ui, asked: &mut Asked) {
    ui.menu_button("Menu", |ui| {
        for does in [Does::Open, Does::CopyTo, Does::Import, Does::StartOwn, Does::Find] {
            let line = entry(does);
            let button = Button::new(line.name).shortcut_text(line.shortcut());
            if ui.add(button).clicked() {
                asked.does.push(does);
            }
        }
    });
}

fn disk(ui: &mut Ui, disk: &Disk, extent: Extent) {
    let theme = Theme::of(ui);
    let text = RichText::new(disk.shown()).color(theme.soft_ink);
    match disk {
        Disk::Not(why) => {
            let text = RichText::new(disk.shown()).color(theme.alert);
            ui.add(Label::new(text).selectable(false)).on_hover_text(why);
            let (rect, _) = ui.allocate_exact_size(vec2(theme.spacing.mark, 16.0), Sense::hover());
            let colour = theme.mark_colour(MarkShape::Stop);
            paint_mark(ui.painter(), MarkShape::Stop, rect.center(), theme.spacing.mark, colour);
        }
        Disk::All(Some(at)) if extent == Extent::Small => {
            let short = RichText::new(format!("disk {}", at.clock_seconds())).color(theme.soft_ink);
            ui.add(Label::new(short).selectable(false)).on_hover_text(disk.shown());
        }
        _ => {
            ui.add(Label::new(text).selectable(false))
                .on_hover_text("Every entry is written and synced before the next prompt.");
        }
    }
}

/// Words that lead somewhere; underlined when they are a link to a place.
fn link(ui: &mut Ui, text: RichText, hover: &str, underlined: bool) -> Response {
    let theme = Theme::of(ui);
    let button = Button::new(text).frame_when_inactive(false);
    let response = ui.add(button).on_hover_text(hover);
    if underlined {
        let line = Stroke::new(theme.spacing.hair, theme.ink);
        let rect = response.rect.shrink2(vec2(8.0, 3.0));
        ui.painter().hline(rect.x_range(), rect.bottom(), line);
    }
    response
}
