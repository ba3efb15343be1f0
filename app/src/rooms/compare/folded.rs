//! Rows folded to their captions, and columns folded to a line at the right.

use super::{
    keys,
    layout::Layout,
    near_facts::NearRow,
    rows::{Row, RowPlace},
    state::State,
    words::{self, Scene},
};
use crate::theme::paint_mark;
use assize_core::project::evaluate::{Caption, ColumnEvaluation};
use eframe::egui::{Align2, CursorIcon, Rect, Role, Sense, Shape, Stroke, Ui, WidgetInfo, pos2, vec2};

/// A folded row: its name and key at the left, its captions under their columns; a click opens it.
pub(super) fn row(ui: &mut Ui, scene: Scene<'_>, state: &mut State, place: RowPlace) {
    let right = scene.layout.columns.last().map_or(scene.layout.room.right(), |c| c.x.max);
    let rect = Rect::from_x_y_ranges(scene.layout.room.left()..=right, place.caption);
    let response = ui.interact(rect, ui.scope_id().with(("folded", place.row)), Sense::click());
    response.widget_info(|| WidgetInfo::labeled(Role::Button, true, format!("Open {}", place.row.name())));
    let theme = scene.theme;
    if response.hovered() || response.has_focus() {
        ui.painter().rect_filled(rect.shrink2(vec2(0.0, 2.0)), theme.spacing.corner, theme.hover);
    }
    name(ui, scene, state, place);
    if let (Row::NearZero, NearRow::Line(line)) = (place.row, &state.cache.near) {
        let left = scene.layout.columns.first().map_or(rect.left(), |c| c.x.min);
        let cell = rect.with_min_x(left);
        words::caption(ui, ui.scope_id().with("near zero line"), cell, &Caption::plain(line.clone()), theme);
    } else {
        for column in &scene.layout.columns {
            let cell = Layout::cell(*column, place.caption);
            let caption = short(&scene.view.evaluation.columns[column.index], column.index, place.row, state);
            words::caption(ui, ui.scope_id().with(("folded words", place.row, column.index)), cell, &caption, theme);
        }
    }
    if response.on_hover_cursor(CursorIcon::PointingHand).clicked() {
        keys::ask(state, place.row);
    }
}

fn name(ui: &Ui, scene: Scene<'_>, state: &State, place: RowPlace) {
    let theme = scene.theme;
    let text = match (place.row, state.near().and_then(|f| f.around)) {
        (Row::NearZero, Some(_)) => "Change",
        (row, _) => row.name(),
    };
    let galley = ui.painter().layout_no_wrap(text.to_owned(), theme.semibold(theme.sizes.small), theme.soft_ink);
    words::text(ui, pos2(scene.layout.room.left() + 2.0, place.caption.center()), Align2::LEFT_CENTER, galley);
}

/// What a folded row says of a column.
fn short(column: &ColumnEvaluation, index: usize, row: Row, state: &State) -> Caption {
    match (row, &column.outcome) {
        (Row::Curve, Err(reason)) => Caption::plain(format!("not fitted: {reason}")),
        (_, Err(_)) => Caption::default(),
        (Row::Curve, Ok(_)) => column.captions.curve.clone(),
        (Row::Residuals, Ok(_)) => column.captions.residuals.clone(),
        (Row::NearZero, Ok(_)) => {
            state.readouts.get(index).map_or_else(|| column.captions.near_zero.clone(), |r| r.caption.clone())
        }
        (Row::Numbers, Ok(_)) => {
            let find = |key: &str| column.figures.iter().find(|f| f.key == key);
            let all = [find("residual_sd"), find("detection_limit").or_else(|| find("smallest_change"))];
            let words: Vec<String> = all.iter().flatten().map(|f| format!("{} {}", f.label, f.shown())).collect();
            Caption::plain(words.join(", "))
        }
    }
}

/// The row's name along its left edge, upright text turned; a click opens it alone.
pub(super) fn row_name(ui: &mut Ui, scene: Scene<'_>, state: &mut State, place: RowPlace) {
    let theme = scene.theme;
    let text = match (place.row, state.near().and_then(|f| f.around)) {
        (Row::NearZero, Some(at)) => {
            use assize_core::{project::evaluate::words::plain, quantity::format::with_unit};
            format!("Near {}", with_unit(&plain(at), scene.view.project.plan.input.unit.as_str()))
        }
        (row, _) => row.name().to_owned(),
    };
    let galley = ui.painter().layout_no_wrap(text, theme.semibold(theme.sizes.small), theme.soft_ink);
    let size = galley.size();
    let centre = pos2(scene.layout.room.left() + 8.0, place.plot.center());
    let shape =
        eframe::egui::epaint::TextShape::new(centre + vec2(-size.x / 2.0, -size.y / 2.0), galley, theme.soft_ink)
            .with_angle_and_anchor(-std::f32::consts::FRAC_PI_2, Align2::CENTER_CENTER);
    ui.painter().add(Shape::Text(shape));
    let rect = Rect::from_center_size(centre, vec2(18.0, size.x + 10.0));
    let response = ui.interact(rect, ui.scope_id().with(("row name", place.row)), Sense::click());
    let verb = if state.open == Some(place.row) { "Show all rows" } else { "Open" };
    let words =
        if state.open == Some(place.row) { verb.to_owned() } else { format!("{verb} {} alone", place.row.name()) };
    response.widget_info(|| WidgetInfo::labeled(Role::Button, true, &words));
    if response.has_focus() {
        let ring = Stroke::new(theme.spacing.focus, theme.focus);
        ui.painter().rect_stroke(rect, theme.spacing.corner, ring, eframe::egui::StrokeKind::Inside);
    }
    if response.on_hover_cursor(CursorIcon::PointingHand).clicked() {
        keys::ask(state, place.row);
    }
}

/// Columns without room: a line each at the right; a click (or Space) brings one in.
pub(super) fn columns(ui: &mut Ui, scene: Scene<'_>, state: &mut State) {
    let theme = scene.theme;
    let area = scene.layout.aside_rect;
    let mut top = scene.layout.head.max + 2.0;
    for &index in &scene.layout.aside {
        let column = &scene.view.evaluation.columns[index];
        let rect = Rect::from_min_max(pos2(area.left(), top), pos2(area.right(), top + 40.0));
        top += 44.0;
        let response = ui.interact(rect, ui.scope_id().with(("aside", index)), Sense::click());
        let caption = match &column.outcome {
            Ok(_) => column.captions.residuals.clone(),
            Err(reason) => Caption::plain(format!("not fitted: {reason}")),
        };
        let words = format!("Show {}: {}", column.head, words::spoken(&caption));
        response.widget_info(|| WidgetInfo::labeled(Role::Button, true, &words));
        if response.hovered() || response.has_focus() {
            ui.painter().rect_filled(rect.expand2(vec2(4.0, 0.0)), theme.spacing.corner, theme.hover);
        }
        let look = theme.fit(index);
        let name = words::shortened(ui, &column.head, (theme.semibold(theme.sizes.body), look.text), rect.width());
        words::text(ui, rect.left_top() + vec2(0.0, 3.0), Align2::LEFT_TOP, name);
        let mut left = rect.left();
        let line = rect.bottom() - 11.0;
        if let Some(severity) = caption.severity {
            let shape = words::mark_of(severity);
            paint_mark(ui.painter(), shape, pos2(left + 4.0, line), 8.0, theme.mark_colour(shape));
            left += 13.0;
        }
        let verdict = words::shortened(ui, &caption.text, (theme.small(), theme.ink), rect.right() - left);
        words::text(ui, pos2(left, line), Align2::LEFT_CENTER, verdict);
        let response = response.on_hover_text(&caption.text).on_hover_cursor(CursorIcon::PointingHand);
        if response.clicked() {
            state.asked.retain(|spec| *spec != column.spec);
            state.asked.insert(0, column.spec.clone());
        }
    }
}
