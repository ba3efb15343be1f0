//! Third row: where each curve leaves zero, with the zero readings and the cursor's handle beside it.

use super::{
    keys, labels,
    layout::Layout,
    near_column::{NearColumn, Shared},
    near_facts::NearFacts,
    rows::RowPlace,
    sheet::{self, Sheet},
    state::{NearPlot, State, TraceEnds},
    ticks::{self, Axis, Tick},
    words::{self, Scene},
};
use crate::{rooms::View, theme::Theme};
use eframe::egui::{Rect, Role, Sense, Shape, Stroke, Ui, Vec2b, WidgetInfo, pos2, vec2};
use egui_plot::PlotTransform;
use std::cell::Cell;

/// Least distances of the numbers on the axes, points.
const APART: (f32, f32) = (46.0, 26.0);
/// Numbers on the upright axis keep clear of the cursor's handle, points.
const CLEAR: f32 = 15.0;
/// Widths of the turned name of the row and of the zero readings beside it, points.
const NAME: f32 = 17.0;
const STRIP: f32 = 17.0;

/// Width left of the first column, points: row names, zero readings, and the numbers of the widest axis.
pub(super) fn gutter(ui: &Ui, view: &View<'_>, state: &State, theme: &Theme) -> f32 {
    const LEAST: f32 = 78.0;
    // The row's height is not known yet; the width of its numbers hardly depends on it.
    const HEIGHT: f32 = 130.0;
    let Some(facts) = state.near() else { return LEAST };
    let axis = ticks::axis(&view.project.plan.output.unit, facts.y, (HEIGHT, APART.1), false);
    (NAME + STRIP + widest(ui, &axis, theme) + CLEAR).max(LEAST)
}

/// Width of the widest number of an axis, points.
fn widest(ui: &Ui, axis: &Axis, theme: &Theme) -> f32 {
    let width = |t: &Tick| ui.painter().layout_no_wrap(t.text.clone(), theme.small(), theme.ink).size().x;
    axis.ticks.iter().map(width).fold(0.0, f32::max)
}

/// Draws the row; answers which observation the pointer is on.
pub(super) fn show(ui: &mut Ui, scene: Scene<'_>, state: &mut State, row: RowPlace) -> Option<usize> {
    let facts = state.near().cloned()?;
    let x = state.windows.near_x.unwrap_or(facts.x);
    let y = state.windows.near_y.unwrap_or(facts.y);
    // A cursor typed far out stays in sight.
    let y = (y.0.min(state.cursor), y.1.max(state.cursor));
    let plan = &scene.view.project.plan;
    let width = scene.layout.columns.first().map_or(0.0, |c| c.x.span());
    let x_axis = ticks::axis(&plan.input.unit, x, (width, APART.0), false);
    let y_axis = ticks::axis(&plan.output.unit, y, (row.plot.span(), APART.1), false);
    let held = state.drag.is_some();
    let row_of = Shared { scene, facts: &facts, window: (x, y), y_axis: &y_axis };
    let columns: Vec<NearColumn<'_>> =
        scene.layout.columns.iter().map(|c| NearColumn::new(row_of, state, *c)).collect();
    let names = labels::Label::of_lines(&facts, state.cursor);
    let carrier = labels::carrier(ui, &columns, row.plot, &names, scene.theme);
    state.near_plots.clear();
    state.painted.clear();
    let mut hover = None;
    for (column, place) in columns.iter().zip(&scene.layout.columns) {
        column.caption(ui, Layout::cell(*place, row.caption));
        let ends = Cell::new(TraceEnds::default());
        let sheet = Sheet {
            id: ui.scope_id().with(("near zero", column.index)),
            rect: Layout::cell(*place, row.plot),
            window: (x, y),
            pan: Vec2b::new(!held, !held),
            label: &column.label(),
        };
        let carries = if carrier == Some(column.index) { names.as_slice() } else { &[] };
        let shown = sheet.show(ui, scene.theme, |ui, transform, shapes| {
            ends.set(column.draw(ui, transform, carries, shapes));
        });
        sheet::numbers_below(ui, &shown.transform, (&x_axis, scene.beyond(column.index)), scene.theme);
        column.values(ui, sheet.rect);
        let ends = ends.get();
        state.near_plots.push(NearPlot { column: column.index, transform: shown.transform, square: ends.square });
        state.painted.push(ends);
        if scene.layout.first() == Some(column.index) {
            sheet::numbers_left(ui, &shown.transform, (&y_axis, CLEAR), scene.theme);
            hover = strip(ui, scene, (&facts, state.hover), (&y_axis, &shown.transform));
            handle(ui, scene, state.cursor, &shown.transform);
        }
        let windows = &mut state.windows;
        shown.keep(ui, &mut windows.near_x, &mut windows.near_y, 1.0);
    }
    hover
}

/// The zero readings, beside the axis; answers which observation the pointer is on.
fn strip(
    ui: &Ui,
    scene: Scene<'_>,
    (facts, now): (&NearFacts, Option<usize>),
    (axis, transform): (&Axis, &PlotTransform),
) -> Option<usize> {
    let frame = *transform.frame();
    let theme = scene.theme;
    // Between the row's name and the numbers of the axis, however wide these are.
    let numbers = frame.left() - CLEAR - widest(ui, axis, theme);
    let middle = (numbers - STRIP / 2.0).max(scene.layout.room.left() + NAME + STRIP / 2.0 - 4.0);
    let n = facts.means.len();
    let pointer = ui.input(|i| i.pointer.hover_pos());
    let mut under = None;
    for (i, mean) in facts.means.iter().enumerate().take(super::dots::MOST) {
        // Side by side in a fixed pattern, so that equal readings stay countable.
        let at = pos2(middle + 3.5 * [-1.0, 1.0, 0.0][i % 3], transform.position_from_point_y(*mean));
        if !frame.y_range().contains(at.y) {
            continue;
        }
        ui.painter().circle_filled(at, if n > 60 { 1.5 } else { 2.4 }, theme.brass);
        let seat = facts.seats.get(i).copied();
        if seat.is_some() && seat == now {
            ui.painter().circle_stroke(at, 5.0, Stroke::new(1.5, theme.focus));
        }
        if pointer.is_some_and(|p| p.distance(at) < 4.0) {
            under = seat;
        }
    }
    let rect = Rect::from_min_max(pos2(middle - 7.0, frame.top()), pos2(middle + 7.0, frame.bottom()));
    let what = if facts.around.is_some() { "readings at the lowest standard" } else { "zero readings" };
    let words = format!("{n} {what}");
    words::label(ui, ui.scope_id().with("zero strip"), rect, &words).on_hover_text(&words);
    under
}

/// The triangle at the end of the cursor; it can have the keyboard.
fn handle(ui: &Ui, scene: Scene<'_>, cursor: f64, transform: &PlotTransform) {
    let frame = *transform.frame();
    let y = transform.position_from_point_y(cursor);
    if !frame.y_range().contains(y) {
        return;
    }
    let (tip, theme) = (pos2(frame.left() - 1.0, y), scene.theme);
    let corners = vec![tip, tip + vec2(-11.0, -6.5), tip + vec2(-11.0, 6.5)];
    ui.painter().add(Shape::convex_polygon(corners, theme.brass, Stroke::NONE));
    let rect = Rect::from_center_size(tip - vec2(6.0, 0.0), vec2(16.0, 18.0));
    let response = ui.interact(rect, keys::handle_id(ui), Sense::focusable_noninteractive());
    response.widget_info(|| WidgetInfo::labeled(Role::Slider, true, "threshold on trial: arrow keys move it"));
    if response.has_focus() {
        let ring = Stroke::new(theme.spacing.focus, theme.focus);
        ui.painter().circle_stroke(tip - vec2(6.5, 0.0), 11.0, ring);
    }
}
