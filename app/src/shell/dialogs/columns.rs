//! Which functions stand side by side: family, weights and axes of up to six columns.

use super::Outcome;
use crate::{rooms::Wish, shell::sheet, theme::Theme, widgets::Field};
use assize_core::{
    fit::{Weights, weights},
    model::{Family, TypedFormula},
    project::{
        Project,
        columns::{Axes, ColumnSpec},
        command::{ColumnsCommand, Command},
    },
};
use eframe::egui::{Button, ComboBox, Context, Grid, RichText, Role, Ui, WidgetInfo};

/// Most columns that stand side by side.
const MOST: usize = 6;

/// The columns as they would be shown.
#[derive(Debug)]
pub struct Columns {
    rows: Vec<Row>,
    /// Whose reading guide is shown.
    at: usize,
    allowed: Vec<Family>,
}

/// One column in the making.
#[derive(Debug, Clone)]
struct Row {
    family: Kind,
    weights: Weights,
    both: bool,
    zeros: Option<assize_core::project::plan::ZerosPart>,
    expression: String,
    start: String,
}

/// A family, or a formula that is still being typed.
#[derive(Debug, Clone, PartialEq)]
enum Kind {
    Named(Family),
    Typed,
}

impl Kind {
    fn name(&self) -> String {
        match self {
            Self::Named(family) => family.plain_name(),
            Self::Typed => "Formula of your own".to_owned(),
        }
    }
}

impl Row {
    fn of(spec: &ColumnSpec) -> Self {
        let (family, expression, start) = match &spec.family {
            Family::Formula(typed) => {
                let text = typed.to_string();
                let start = text.split_once('|').map(|(_, start)| start.to_owned()).unwrap_or_default();
                (Kind::Typed, typed.expression().to_owned(), start)
            }
            named => (Kind::Named(named.clone()), String::new(), String::new()),
        };
        Self { family, weights: spec.weights, both: spec.axes == Axes::Both, zeros: spec.zeros, expression, start }
    }

    /// The column, or what is wrong with its formula.
    fn spec(&self) -> Result<ColumnSpec, String> {
        let family = match &self.family {
            Kind::Named(family) => family.clone(),
            Kind::Typed => {
                Family::Formula(TypedFormula::new(&self.expression, &self.start).map_err(|e| e.to_string())?)
            }
        };
        let axes = if self.both { Axes::Both } else { Axes::ReadingsOnly };
        Ok(ColumnSpec { family, weights: self.weights, axes, zeros: self.zeros })
    }
}

impl Columns {
    /// The columns that stand now.
    #[must_use]
    pub fn new(project: &Project) -> Self {
        let rows = project.shown_columns().iter().map(Row::of).collect();
        let declared = project.declared.is_some();
        let offered = |family: &Family| *family != Family::Declared || declared;
        let allowed = Family::all().into_iter().filter(offered).collect();
        Self { rows, at: 0, allowed }
    }

    pub(super) fn show(&mut self, ctx: &Context) -> Option<Outcome> {
        let shown = sheet(ctx, "Columns to compare", 760.0, |ui| self.contents(ui));
        shown.inner.or_else(|| shown.closed.then_some(Outcome::Closed))
    }

    fn contents(&mut self, ui: &mut Ui) -> Option<Outcome> {
        let removed = self.grid(ui);
        if let Some(index) = removed {
            self.rows.remove(index);
            self.at = self.at.min(self.rows.len().saturating_sub(1));
        }
        self.formula(ui);
        self.guide(ui);
        let specs: Result<Vec<ColumnSpec>, String> = self.rows.iter().map(Row::spec).collect();
        let problem = specs.as_ref().err().cloned().or_else(|| twice(specs.as_deref().ok()?));
        if let Some(problem) = &problem {
            ui.label(problem);
        }
        let mut outcome = None;
        ui.horizontal(|ui| {
            if ui.add_enabled(self.rows.len() < MOST, Button::new("Add a column")).clicked() {
                self.add();
            }
            if ui.add_enabled(problem.is_none(), Button::new("Show these")).clicked() {
                outcome = specs.ok().map(|specs| Outcome::Wished(show(specs)));
            }
        });
        outcome
    }

    /// The first family that does not stand yet.
    fn add(&mut self) {
        let stands = |family: &Family| self.rows.iter().any(|r| r.family == Kind::Named(family.clone()));
        let free = self.allowed.iter().find(|family| !stands(family)).cloned();
        let family = free.map_or(Kind::Typed, Kind::Named);
        let (expression, start) = (String::new(), String::new());
        self.rows.push(Row { family, weights: Weights::Equal, both: false, zeros: None, expression, start });
        self.at = self.rows.len() - 1;
    }

    /// One line a column; which one is to go, if any.
    fn grid(&mut self, ui: &mut Ui) -> Option<usize> {
        let theme = Theme::of(ui);
        let mut removed = None;
        Grid::new("columns").num_columns(5).spacing([16.0, 6.0]).show(ui, |ui| {
            for head in ["", "Function", "Weights", "Errors", ""] {
                ui.label(RichText::new(head).font(theme.small()).color(theme.soft_ink));
            }
            ui.end_row();
            let several = self.rows.len() > 1;
            for index in 0..self.rows.len() {
                ui.label((index + 1).to_string());
                if self.family(ui, index) {
                    self.at = index;
                }
                let row = &mut self.rows[index];
                pick_weights(ui, index, &mut row.weights);
                let both = ui.checkbox(&mut row.both, "standards too");
                both.on_hover_text("Takes the stated uncertainties of the standards into the fit.");
                let remove = ui.add_enabled(several, Button::new("Remove"));
                let spoken = format!("Remove column {}", index + 1);
                remove.widget_info(|| WidgetInfo::labeled(Role::Button, several, &spoken));
                if remove.clicked() {
                    removed = Some(index);
                }
                ui.end_row();
            }
        });
        removed
    }

    /// The family of one column; whether the person turned to it.
    fn family(&mut self, ui: &mut Ui, index: usize) -> bool {
        let mut turned = false;
        let current = self.rows[index].family.name();
        let mut offered: Vec<Kind> = self.allowed.iter().cloned().map(Kind::Named).collect();
        offered.push(Kind::Typed);
        // A polynomial beyond the list keeps its place in it.
        if !offered.contains(&self.rows[index].family) {
            offered.insert(5, self.rows[index].family.clone());
        }
        let combo = ComboBox::from_id_salt(("family", index)).selected_text(current).width(230.0).height(420.0);
        let shown = combo.show_ui(ui, |ui| {
            for kind in offered {
                let name = kind.name();
                turned |= ui.selectable_value(&mut self.rows[index].family, kind, name).clicked();
            }
        });
        let spoken = format!("Function of column {}: {}", index + 1, self.rows[index].family.name());
        shown.response.widget_info(|| WidgetInfo::labeled(Role::ComboBox, true, &spoken));
        turned || shown.response.clicked()
    }

    /// Expression and start values of the column turned to, when it is a formula.
    fn formula(&mut self, ui: &mut Ui) {
        let Some(row) = self.rows.get_mut(self.at).filter(|r| r.family == Kind::Typed) else {
            return;
        };
        Field::text("Formula in x, other names are fitted")
            .hint("b1*(1-exp(-b2*x))")
            .width(440.0)
            .show(ui, &mut row.expression);
        Field::text("Where the search starts").hint("b1=500, b2=1e-4").width(440.0).show(ui, &mut row.start);
    }

    /// When to use the function turned to, and what goes wrong.
    fn guide(&self, ui: &mut Ui) {
        let Some(row) = self.rows.get(self.at) else { return };
        let theme = Theme::of(ui);
        let (formula, guide) = match &row.family {
            Kind::Named(family) => (family.printed_formula(), family.guide()),
            Kind::Typed => (String::from("y = …"), assize_core::model::guide::FORMULA),
        };
        ui.add_space(theme.spacing.item);
        ui.label(RichText::new(format!("{}   {formula}", row.family.name())).font(theme.semibold(theme.sizes.body)));
        ui.label(guide.when);
        ui.label(RichText::new(guide.wrong).color(theme.soft_ink));
        ui.add_space(theme.spacing.item);
    }
}

fn pick_weights(ui: &mut Ui, index: usize, value: &mut Weights) {
    let shown =
        ComboBox::from_id_salt(("weights", index)).selected_text(value.plain_name()).width(190.0).show_ui(ui, |ui| {
            for (weights, _, name) in weights::NAMES {
                ui.selectable_value(value, weights, name);
            }
        });
    let spoken = format!("Weights of column {}: {}", index + 1, value.plain_name());
    shown.response.widget_info(|| WidgetInfo::labeled(Role::ComboBox, true, &spoken));
}

/// Two columns that are one and the same.
fn twice(specs: &[ColumnSpec]) -> Option<String> {
    let repeated = specs.iter().enumerate().find(|(i, spec)| specs[..*i].contains(spec))?;
    Some(format!("{} stands twice; two different columns can be compared.", repeated.1.head()))
}

fn show(specs: Vec<ColumnSpec>) -> Wish {
    Wish::Enter { command: Command::Columns(ColumnsCommand::Show(specs)), because: None }
}
