//! How the plan is laid out: two calm columns, one when the window is narrow.

use super::{State, choices, fields::Form, model::Field};
use crate::{
    rooms::{View, Wish},
    shell::Extent,
    theme::Theme,
    widgets::segmented,
};
use assize_core::project::{
    Project, cautions,
    command::{Command, PlanField},
    plan::Limits,
};
use eframe::egui::{Align, Frame, Label, Layout, Margin, RichText, ScrollArea, TextStyle, Ui, vec2};

/// The whole room.
pub fn room(ui: &mut Ui, view: &View<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let small = Extent::of(ui) == Extent::Small;
    let margin = if small { Margin::symmetric(12, 8) } else { Margin::symmetric(24, 16) };
    ScrollArea::vertical().auto_shrink([false, false]).show(ui, |ui| {
        Frame::new().inner_margin(margin).show(ui, |ui| {
            ui.spacing_mut().item_spacing.y = 8.0;
            standing(ui, view.project);
            let mut form = Form { view, state, wishes };
            if ui.available_width() < 700.0 {
                left(ui, &mut form);
                right(ui, &mut form);
                return;
            }
            let between = std::mem::replace(&mut ui.spacing_mut().item_spacing.x, 40.0);
            ui.columns(2, |columns| {
                if let [first, second] = columns {
                    column(first, between, |ui| left(ui, &mut form));
                    column(second, between, |ui| right(ui, &mut form));
                }
            });
        });
    });
}

/// Columns are justified by nature; running text is not.
fn column(ui: &mut Ui, between: f32, contents: impl FnOnce(&mut Ui)) {
    ui.with_layout(Layout::top_down(Align::Min), |ui| {
        ui.spacing_mut().item_spacing.x = between;
        contents(ui);
    });
}

/// Since when the plan is fixed, and what that means.
fn standing(ui: &mut Ui, project: &Project) {
    let text = match project.plan.fixed {
        Some(since) => format!(
            "Fixed since {}, with the first reading. A later change asks for a reason and is printed.",
            since.readable()
        ),
        None => "Free until the first reading; then it is fixed, and a later change needs a reason. \
                 Nothing here has to be filled in before a first fit."
            .to_owned(),
    };
    soft(ui, &text);
}

fn left(ui: &mut Ui, form: &mut Form<'_, '_>) {
    section(ui, "Instrument");
    form.row(ui, &[(Field::Description, 2.0), (Field::Identity, 1.0)]);
    form.row(ui, &[(Field::Maker, 1.0), (Field::Model, 1.0)]);
    form.row(ui, &[(Field::Serial, 1.0), (Field::Channel, 1.0)]);
    form.row(ui, &[(Field::Condition, 2.0), (Field::Received, 1.0)]);
    section(ui, "Work");
    form.row(ui, &[(Field::Number, 1.0), (Field::Customer, 1.0)]);
    form.one(ui, Field::Laboratory);
    form.row(ui, &[(Field::Place, 1.0), (Field::Method, 1.0)]);
    section(ui, "Conditions");
    form.one(ui, Field::AtStart);
    form.one(ui, Field::AtEnd);
    section(ui, "What the work can do to people");
    hazards(ui, form);
}

fn right(ui: &mut Ui, form: &mut Form<'_, '_>) {
    section(ui, "What is measured");
    form.row(ui, &[(Field::InputName, 2.0), (Field::InputUnit, 1.0)]);
    form.row(ui, &[(Field::OutputName, 2.0), (Field::OutputUnit, 1.0), (Field::FullScale, 1.0)]);
    form.row(ui, &[(Field::Interval, 1.0), (Field::Levels, 1.0)]);
    form.row(ui, &[(Field::Order, 2.0), (Field::Repeats, 1.0)]);
    section(ui, "Nothing applied");
    zero(ui, form);
    section(ui, "Functions this instrument can take");
    families(ui, form);
    section(ui, "How small is more than nothing");
    detection(ui, form);
    section(ui, "Bands and verdict");
    verdict(ui, form);
}

fn zero(ui: &mut Ui, form: &mut Form<'_, '_>) {
    let plan = &form.view.project.plan;
    let mut state = plan.zero_state;
    if segmented(ui, "Nothing applied …", &mut state, &choices::ZERO_STATES).changed() {
        enter(form, PlanField::ZeroState(state));
    }
    soft(ui, choices::explained(plan.zero_state));
    let mut part = plan.zeros_part;
    if segmented(ui, "Zero readings are …", &mut part, &choices::ZEROS_PARTS).changed() {
        enter(form, PlanField::ZerosPart(part));
    }
}

fn families(ui: &mut Ui, form: &mut Form<'_, '_>) {
    let project = form.view.project;
    ui.horizontal_wrapped(|ui| {
        for family in &choices::families() {
            let mut on = project.plan.allows(family);
            if ui.checkbox(&mut on, family.plain_name()).changed() {
                enter(form, PlanField::Families(choices::switched(family, project)));
            }
        }
    });
    soft(ui, "Only these are advised and can be chosen; others can still be looked at.");
    form.row(ui, &[(Field::Declared, 2.0), (Field::DeclaredFrom, 1.0)]);
}

fn detection(ui: &mut Ui, form: &mut Form<'_, '_>) {
    form.row(ui, &[(Field::Alpha, 1.0), (Field::Beta, 1.0), (Field::Together, 1.0), (Field::Target, 1.0)]);
    let mut question = form.view.project.plan.detection;
    if segmented(ui, "The limit rests on …", &mut question.basis, &choices::BASES).changed() {
        enter(form, PlanField::Detection(question));
    }
}

fn verdict(ui: &mut Ui, form: &mut Form<'_, '_>) {
    form.row(ui, &[(Field::Level, 1.0), (Field::DecisionRule, 2.0)]);
    let limits = form.view.project.plan.limits.as_ref();
    let mut kind = choices::limit_kind(limits);
    if segmented(ui, "Limits of the error", &mut kind, &choices::LIMIT_KINDS).changed() {
        enter(form, PlanField::Limits(choices::with_kind(kind, limits)));
    }
    if !matches!(limits, None | Some(Limits::NoVerdictWanted)) {
        form.row(ui, &[(Field::LimitSize, 1.0)]);
    }
}

/// The unit beside the size of a limit.
pub fn limit_unit(project: &Project) -> &str {
    match project.plan.limits {
        Some(Limits::PercentOfReading(_) | Limits::PercentOfSpan(_)) => "%",
        _ => project.plan.input.unit.as_str(),
    }
}

/// Hazards, each with its caution as it will be printed.
fn hazards(ui: &mut Ui, form: &mut Form<'_, '_>) {
    let project = form.view.project;
    ui.horizontal_wrapped(|ui| {
        for hazard in cautions::ALL {
            let mut on = project.plan.hazards.contains(&hazard);
            if ui.checkbox(&mut on, cautions::caution(hazard).heading).changed() {
                enter(form, PlanField::Hazards(choices::with_hazard(hazard, project)));
            }
        }
    });
    let theme = Theme::of(ui);
    Frame::from(theme).show(ui, |ui| {
        ui.set_width(ui.available_width());
        ui.spacing_mut().item_spacing = vec2(8.0, 4.0);
        soft(ui, "As it will be printed");
        for caution in cautions::cautions(&project.plan.hazards) {
            let head = RichText::new(caution.heading).font(theme.semibold(theme.sizes.body));
            ui.label(head);
            ui.add(Label::new(caution.text).wrap());
        }
        ui.add(Label::new(cautions::GENERAL).wrap());
    });
}

fn enter(form: &mut Form<'_, '_>, field: PlanField) {
    let command: Command = choices::set(field);
    form.wishes.push(Wish::Enter { command, because: None });
}

fn section(ui: &mut Ui, title: &str) {
    ui.add_space(8.0);
    ui.label(RichText::new(title).text_style(TextStyle::Heading));
}

fn soft(ui: &mut Ui, text: &str) {
    let theme = Theme::of(ui);
    ui.add(Label::new(RichText::new(text).font(theme.small()).color(theme.soft_ink)).wrap());
}
