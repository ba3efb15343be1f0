//! Heads of the columns, the frame of the chosen one, and what stands where nothing could be fitted.

use super::{
    choose,
    layout::Layout,
    rows::Row,
    state::State,
    words::{self, Scene},
};
use eframe::egui::{
    Align, Align2, CursorIcon, Layout as Flow, Rangef, Rect, RichText, Role, Sense, Stroke, StrokeKind, Ui, UiBuilder,
    WidgetInfo, pos2, vec2,
};

/// Draws the heads; a click on one (or Enter) asks whether to choose it.
pub(super) fn show(ui: &mut Ui, scene: Scene<'_>, state: &mut State) {
    let evaluation = scene.view.evaluation;
    for place in &scene.layout.columns {
        let index = place.index;
        let column = &evaluation.columns[index];
        let rect = Layout::cell(*place, scene.layout.head);
        let status = status(scene, index);
        draw(ui, scene, index, rect, status);
        let response = ui.interact(rect, ui.scope_id().with(("head", index)), Sense::click());
        let chosen = evaluation.chosen == Some(index);
        let name = if chosen { format!("{}, chosen", column.head) } else { format!("Choose {}", column.head) };
        response.widget_info(|| WidgetInfo::labeled(Role::Button, true, &name));
        if response.has_focus() {
            let ring = Stroke::new(scene.theme.spacing.focus, scene.theme.focus);
            ui.painter().rect_stroke(rect.shrink(1.0), scene.theme.spacing.corner, ring, StrokeKind::Inside);
        }
        let response = response.on_hover_cursor(CursorIcon::PointingHand);
        if response.clicked() && choose::possible(&scene.view, index) {
            state.choosing = Some(choose::about(&scene.view, &column.spec));
        }
        if chosen {
            let bottom = scene.layout.status.top() - 2.0;
            let frame = Rect::from_x_y_ranges(place.x, Rangef::new(rect.top(), bottom)).expand2(vec2(5.0, 0.0));
            ui.painter().rect_stroke(frame, 4.0, Stroke::new(1.5, scene.theme.ink), StrokeKind::Middle);
        }
    }
}

/// The word beside the formula.
fn status(scene: Scene<'_>, index: usize) -> &'static str {
    let evaluation = scene.view.evaluation;
    let column = &evaluation.columns[index];
    let advised = evaluation.advice.column.as_ref() == Some(&column.spec);
    match evaluation.chosen {
        Some(chosen) if chosen == index => "chosen",
        None if advised => "advised, not yet chosen",
        _ if advised => "advised",
        _ if !column.allowed => "not in the plan",
        _ => "",
    }
}

fn draw(ui: &Ui, scene: Scene<'_>, index: usize, rect: Rect, status: &str) {
    let theme = scene.theme;
    let column = &scene.view.evaluation.columns[index];
    let look = theme.fit(index);
    let y = rect.center().y;
    let mut right = rect.right();
    if !status.is_empty() {
        let word = ui.painter().layout_no_wrap(status.to_owned(), theme.semibold(theme.sizes.small), theme.ink);
        right = words::text(ui, pos2(right, y), Align2::RIGHT_CENTER, word).left() - 10.0;
        let id = ui.scope_id().with(("status", index));
        words::label(ui, id, rect.with_min_x(right), &format!("{} is {status}", column.head));
    }
    let name =
        words::shortened(ui, &column.head, (theme.semibold(theme.sizes.heading), look.text), right - rect.left());
    let after = words::text(ui, pos2(rect.left(), y), Align2::LEFT_CENTER, name).right() + 12.0;
    if right - after > 40.0 {
        let formula = words::shortened(ui, &column.formula, (theme.small(), theme.soft_ink), right - after);
        words::text(ui, pos2(after, y + 1.0), Align2::LEFT_CENTER, formula);
    }
}

/// The reason where plots would be: over the open ones of the first two rows.
pub(super) fn not_fitted(ui: &mut Ui, scene: Scene<'_>) {
    let open = |r: &&super::rows::RowPlace| !r.folded && matches!(r.row, Row::Curve | Row::Residuals);
    let rows: Vec<_> = scene.layout.rows.iter().filter(open).collect();
    let (Some(first), Some(last)) = (rows.first(), rows.last()) else {
        return;
    };
    for place in &scene.layout.columns {
        let column = &scene.view.evaluation.columns[place.index];
        let Err(reason) = &column.outcome else {
            continue;
        };
        let rect = Layout::cell(*place, Rangef::new(first.plot.min, last.plot.max));
        let theme = scene.theme;
        ui.painter().rect_filled(rect, theme.spacing.corner, theme.panel);
        let rule = Stroke::new(theme.spacing.hair, theme.rule);
        ui.painter().rect_stroke(rect, theme.spacing.corner, rule, StrokeKind::Inside);
        let inner = rect.shrink2(vec2(24.0, (rect.height() / 3.0).min(80.0)));
        let builder = UiBuilder::new().max_rect(inner).layout(Flow::top_down(Align::Min));
        let mut inside = ui.new_child(builder);
        inside.label(RichText::new("Not fitted").font(theme.semibold(theme.sizes.caption)).color(theme.ink));
        inside.label(RichText::new(reason).font(theme.body()).color(theme.ink));
    }
}
