//! Second row, the largest: what each fit leaves.

use super::{
    curve,
    dots::{self, Measure, extent},
    layout::Layout,
    residual_column::{ResidualColumn, Shared},
    rows::RowPlace,
    scale::Scales,
    state::{Against, State},
    words::{self, Scene},
};
use assize_core::quantity::Unit;
use eframe::egui::Ui;

/// Height kept free of marks at the top and, for symmetry, at the bottom, points.
const HEADROOM: f32 = 24.0;

/// Draws the row; answers which observation the pointer is on.
pub(super) fn show(ui: &mut Ui, scene: Scene<'_>, state: &mut State, row: RowPlace) -> Option<usize> {
    let shared = shared(scene, state, row.plot.span());
    let mut hover = None;
    for place in &scene.layout.columns {
        let index = place.index;
        let column = &scene.view.evaluation.columns[index];
        if column.outcome.is_err() {
            continue;
        }
        let id = ui.scope_id().with(("residual words", index));
        let cell = Layout::cell(*place, row.caption);
        words::caption(ui, id, cell, &column.captions.residuals, scene.theme);
        let residuals = state.cache.residuals(&scene.view, index, shared.measure);
        let plot = ResidualColumn { shared: &shared, index, residuals: &residuals };
        hover = plot.show(ui, state, Layout::cell(*place, row.plot)).or(hover);
    }
    hover
}

fn shared<'a>(scene: Scene<'a>, state: &mut State, height: f32) -> Shared<'a> {
    let plan = &scene.view.project.plan;
    let (measure, against) = (state.measure, state.against);
    let scales = scales(scene, state);
    let air = f64::from(1.0 - 2.0 * HEADROOM / height.max(4.0 * HEADROOM));
    let half = scales.half / air;
    let dots = state.cache.dots.clone();
    let windows = state.windows;
    let (x, x_unit) = match against {
        Against::Value => (windows.value.unwrap_or_else(|| curve::values(&dots)), plan.input.unit.clone()),
        Against::Order => {
            let range = extent(dots.iter().map(|d| d.order)).unwrap_or((0.0, 1.0));
            (windows.order.unwrap_or_else(|| curve::padded(range, 0.04)), Unit::new(""))
        }
    };
    let unit = match measure {
        Measure::Output => plan.output.unit.clone(),
        Measure::Input => plan.input.unit.clone(),
        Measure::Standardised => Unit::new("SD"),
    };
    let y = windows.residual.unwrap_or((-half, half));
    Shared { scene, dots, measure, against, x, y, scales, unit, x_unit }
}

/// Scales by the columns that are shown; those aside do not stretch them.
fn scales(scene: Scene<'_>, state: &mut State) -> Scales {
    let dots = state.cache.dots.clone();
    let measure = state.measure;
    let columns = &scene.view.evaluation.columns;
    let mut largest = vec![None; columns.len()];
    for place in &scene.layout.columns {
        if columns[place.index].outcome.is_ok() {
            let residuals = state.cache.residuals(&scene.view, place.index, measure);
            largest[place.index] = Some(dots::largest(&dots, &residuals));
        }
    }
    Scales::new(&largest, state.one_scale)
}
