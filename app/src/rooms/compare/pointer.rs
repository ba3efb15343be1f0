//! The pointer in the near-zero row: it takes the cursor, or the ■ of a fit.
//!
//! Read before anything is drawn, from where the plots lay in the last frame, so that one movement
//! reaches all columns in the same frame.

use super::state::{Drag, NearPlot, Probe, State};
use eframe::egui::{CursorIcon, Pos2, Rect, Ui, pos2};
use egui_plot::PlotTransform;

/// How near the pointer must come to the cursor's line, points.
const NEAR: f32 = 6.0;
/// How near to a ■.
const SQUARE: f32 = 9.0;
/// The handle and the zero readings left of the first plot can be pressed anywhere, points.
const HANDLE: f32 = 48.0;

/// What the pointer is over.
enum Over {
    Square(usize),
    Line(usize),
    Handle(usize),
}

/// Takes, moves and lets go.
pub(super) fn handle(ui: &Ui, state: &mut State) {
    if state.near().is_none() || state.near_plots.is_empty() {
        state.drag = None;
        return;
    }
    let (pressed, down, position) =
        ui.input(|i| (i.pointer.primary_pressed(), i.pointer.primary_down(), i.pointer.latest_pos()));
    let Some(position) = position else {
        state.drag = None;
        return;
    };
    let ours = ui.ctx().layer_id_at(position).is_none_or(|layer| layer == ui.layer_id());
    let over = if ours { over(state, position) } else { None };
    if pressed {
        state.drag = over.as_ref().and_then(|over| take(state, over, position));
    }
    if state.drag.is_some() && !down {
        state.drag = None;
    }
    if let Some(drag) = state.drag {
        follow(state, drag, position);
    }
    let icon = match (state.drag, over) {
        (Some(Drag::Cursor { .. }), _) | (None, Some(Over::Line(_) | Over::Handle(_))) => CursorIcon::ResizeVertical,
        (Some(Drag::Square { .. }), _) | (None, Some(Over::Square(_))) => CursorIcon::ResizeHorizontal,
        (None, None) => return,
    };
    ui.ctx().set_cursor_icon(icon);
}

fn over(state: &State, position: Pos2) -> Option<Over> {
    let near_square = |p: &&NearPlot| p.square.is_some_and(|s| s.distance(position) <= SQUARE);
    if let Some(plot) = state.near_plots.iter().find(near_square) {
        return Some(Over::Square(plot.column));
    }
    for (i, plot) in state.near_plots.iter().enumerate() {
        let frame = *plot.transform.frame();
        let line = plot.transform.position_from_point_y(state.cursor);
        if frame.contains(position) && (position.y - line).abs() <= NEAR {
            return Some(Over::Line(plot.column));
        }
        let handle = Rect::from_min_max(pos2(frame.left() - HANDLE, frame.top()), pos2(frame.left(), frame.bottom()));
        if i == 0 && handle.contains(position) {
            return Some(Over::Handle(plot.column));
        }
    }
    None
}

fn plot(state: &State, column: usize) -> Option<&NearPlot> {
    state.near_plots.iter().find(|p| p.column == column)
}

fn take(state: &State, over: &Over, position: Pos2) -> Option<Drag> {
    match *over {
        Over::Square(column) => Some(Drag::Square { column }),
        // On the band beside the axis the cursor jumps to the pointer.
        Over::Handle(column) => Some(Drag::Cursor { grip: 0.0, column }),
        Over::Line(column) => {
            let line = plot(state, column)?.transform.position_from_point_y(state.cursor);
            Some(Drag::Cursor { grip: position.y - line, column })
        }
    }
}

fn follow(state: &mut State, drag: Drag, position: Pos2) {
    let column = match drag {
        Drag::Cursor { column, .. } | Drag::Square { column } => column,
    };
    let Some(transform) = plot(state, column).map(|p| p.transform) else {
        state.drag = None;
        return;
    };
    match drag {
        Drag::Cursor { grip, .. } => {
            let line = transform.position_from_point_y(state.cursor);
            let wanted = position.y - grip;
            // A press alone moves nothing: the line is where the pointer took it.
            if (wanted - line).abs() > 1e-3 {
                state.move_cursor(signal_at(&transform, wanted));
            }
        }
        Drag::Square { column } => {
            let bounds = transform.bounds();
            let x = transform.value_from_position(position).x;
            let around = state.near().and_then(|f| f.around).unwrap_or(0.0);
            let x = x.clamp(bounds.min()[0], bounds.max()[0]) - around;
            state.probe = Some(Probe { column, x });
        }
    }
}

/// The signal at a height of the screen, kept inside the plot.
fn signal_at(transform: &PlotTransform, y: f32) -> f64 {
    let frame = transform.frame();
    let y = y.clamp(frame.top(), frame.bottom());
    transform.value_from_position(pos2(frame.left(), y)).y
}
