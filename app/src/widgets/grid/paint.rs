//! How the table looks, and where its parts lie.

use eframe::egui::{
    Align2, CornerRadius, Pos2, Rect, Role, ScrollArea, Sense, Stroke, StrokeKind, Ui, UiBuilder, Vec2, WidgetInfo,
    scroll_area::{DragScroll, ScrollSource},
    vec2,
};

use super::cells::{self, Spot};
use super::sheet::{ENTRY, Place, Sheet};
use super::{CellView, Turn, editor, pointer};
use crate::theme::Theme;

/// Height of the row of heads, points.
pub(super) fn header_height(theme: &Theme) -> f32 {
    theme.spacing.row + theme.spacing.tight
}

/// Height of `rows` rows, points.
pub(super) fn rows_height(theme: &Theme, rows: usize) -> f32 {
    rows as f32 * theme.spacing.row
}

/// Where the parts of the table lie, in screen points.
pub(super) struct Layout {
    pub(super) theme: &'static Theme,
    /// The whole table.
    rect: Rect,
    /// Row numbers, left of the cells.
    gutter: Rect,
    /// The heads, above the cells.
    header: Rect,
    /// The cells; scrolls.
    pub(super) body: Rect,
    /// Left edges of the columns and the right edge of the last, from the first edge.
    edges: Vec<f32>,
}

impl Layout {
    pub(super) fn new(ui: &Ui, theme: &'static Theme, rect: Rect, sheet: &Sheet) -> Self {
        let inner = rect.shrink(theme.spacing.hair);
        let last = sheet.rows().checked_sub(1).map_or(1, |row| sheet.source.number(row));
        let digits = last.max(1).ilog10() + 1;
        let gutter_width = 18.0 + theme.sizes.small * 0.66 * digits.max(2) as f32;
        let corner = inner.min + vec2(gutter_width, header_height(theme));
        let body = Rect::from_min_max(corner, inner.max.max(corner));
        let bar = ui.spacing().scroll.allocated_width();
        Self {
            theme,
            rect,
            gutter: Rect::from_min_max(Pos2::new(inner.left(), corner.y), Pos2::new(corner.x, body.bottom())),
            header: Rect::from_min_max(Pos2::new(corner.x, inner.top()), Pos2::new(body.right(), corner.y)),
            body,
            edges: edges(sheet, body.width() - bar),
        }
    }

    /// Size of all cells together.
    fn content(&self, sheet: &Sheet) -> Vec2 {
        let width = self.edges.last().copied().unwrap_or(0.0);
        vec2(width, rows_height(self.theme, sheet.total_rows()))
    }

    /// Rectangle of the cell at row `index`, with the first cell's corner at `origin`.
    fn cell(&self, index: usize, col: usize, origin: Pos2) -> Rect {
        let top = rows_height(self.theme, index);
        Rect::from_min_max(
            origin + vec2(self.edges[col], top),
            origin + vec2(self.edges[col + 1], top + self.theme.spacing.row),
        )
    }

    /// The cell under `pointer`, or the nearest.
    pub(super) fn place_at(&self, pointer: Pos2, origin: Pos2, sheet: &Sheet) -> Place {
        let from = pointer - origin;
        let index = row_of(from.y, self.theme).min(sheet.total_rows().saturating_sub(1));
        let past = self.edges[1..].iter().take_while(|edge| **edge <= from.x);
        Place { row: sheet.row_at(index), col: past.count().min(sheet.last_col()) }
    }
}

/// Row (from 0) at `y` points below the first row's top.
fn row_of(y: f32, theme: &Theme) -> usize {
    (y / theme.spacing.row).floor().max(0.0) as usize
}

/// Edges of the columns, what is left of `width` shared among those that grow.
fn edges(sheet: &Sheet, width: f32) -> Vec<f32> {
    let columns = sheet.columns();
    let used: f32 = columns.iter().map(|column| column.width).sum();
    let growing = columns.iter().filter(|column| column.grows).count() as f32;
    let share = if growing > 0.0 { (width - used).max(0.0) / growing } else { 0.0 };
    let mut edges = vec![0.0];
    let mut edge = 0.0;
    for column in columns {
        edge += column.width + if column.grows { share } else { 0.0 };
        edges.push(edge);
    }
    edges
}

/// Paints the table and lets the pointer work on it.
pub(super) fn table(ui: &mut Ui, layout: &Layout, turn: &mut Turn) {
    let theme = layout.theme;
    let corner = CornerRadius::same(theme.spacing.corner);
    ui.painter().rect_filled(layout.rect, corner, theme.panel);
    // Scrolling puts other cells where these were.
    ui.allow_widget_id_changes_in(layout.rect);

    let mut inner = ui.new_child(UiBuilder::new().max_rect(layout.body));
    inner.set_clip_rect(layout.body.intersect(ui.clip_rect()));
    let offset = ScrollArea::both()
        .id_salt(turn.ids.grid.with("cells"))
        .auto_shrink(false)
        .scroll_source(ScrollSource { scroll_bar: true, drag: DragScroll::Never, mouse_wheel: true })
        .show_viewport(&mut inner, |ui, viewport| {
            body(ui, viewport, layout, turn);
            viewport.min
        })
        .inner;

    cells::header(ui, layout.header, offset.x, theme, &layout.edges, turn.sheet);
    numbers(ui, layout, offset.y, turn);
    let keyboard = ui.memory(|m| m.has_focus(turn.ids.grid) || m.has_focus(turn.ids.editor));
    let frame = if keyboard { theme.brass } else { theme.rule };
    let hairline = |colour| Stroke::new(theme.spacing.hair, colour);
    ui.painter().hline(layout.rect.x_range(), layout.header.bottom(), hairline(theme.rule));
    ui.painter().rect_stroke(layout.rect, corner, hairline(frame), StrokeKind::Inside);
}

fn body(ui: &mut Ui, viewport: Rect, layout: &Layout, turn: &mut Turn) {
    let theme = layout.theme;
    let origin = ui.max_rect().min;
    ui.set_min_size(layout.content(turn.sheet));
    if turn.sheet.is_empty() {
        return;
    }
    turn.state.seen(viewport.height(), theme.spacing.row);
    let first = row_of(viewport.top(), theme);
    let last = (row_of(viewport.bottom(), theme) + 1).min(turn.sheet.total_rows());
    let seen = |col: &usize| layout.edges[col + 1] > viewport.left() && layout.edges[*col] < viewport.right();
    let cols: Vec<usize> = (0..turn.sheet.columns().len()).filter(seen).collect();
    for index in first..last {
        let row = turn.sheet.row_at(index);
        for &col in &cols {
            let spot = Spot { place: Place { row, col }, rect: layout.cell(index, col, origin) };
            one_cell(ui, &spot, layout, origin, turn);
        }
        cells::below_row(ui, layout.cell(index, 0, origin), viewport.width(), row == ENTRY);
    }
    if turn.sheet.entry.is_some() && last == turn.sheet.total_rows() {
        let start = turn.sheet.entry_start(&turn.state.entry);
        cells::hint(ui, layout.cell(turn.sheet.rows(), start, origin), turn.state, turn.sheet);
    }
    let cursor = turn.state.cursor;
    let at_cursor = layout.cell(turn.sheet.index(cursor.row), cursor.col, origin);
    cells::cursor(ui, at_cursor, ui.memory(|m| m.has_focus(turn.ids.grid)));
    if std::mem::take(&mut turn.state.reveal) {
        ui.scroll_to_rect(at_cursor, None);
    }
    if let Some(edit) = &turn.state.edit {
        let place = edit.place;
        let rect = layout.cell(turn.sheet.index(place.row), place.col, origin);
        editor::show(ui, rect, turn);
        cells::cursor(ui, rect, true);
    }
}

fn one_cell(ui: &Ui, spot: &Spot, layout: &Layout, origin: Pos2, turn: &mut Turn) {
    let Place { row, col } = spot.place;
    let index = turn.sheet.index(row);
    let response = ui.interact(spot.rect, turn.ids.grid.with((index, col)), Sense::CLICK | Sense::DRAG);
    pointer::cell(ui, &response, spot.place, turn);
    pointer::drag(&response, layout, origin, turn);
    let view = match row {
        ENTRY => CellView::plain(turn.state.entry_text(col)),
        row => turn.sheet.source.cell(row, col),
    };
    let selected = turn.state.selected(spot.place, turn.sheet);
    let elided = cells::paint(ui, spot, &view, selected, turn.sheet);
    response.widget_info(|| WidgetInfo {
        current_text_value: Some(view.text.clone()),
        selected: Some(selected),
        ..WidgetInfo::labeled(Role::Cell, true, turn.sheet.name(spot.place))
    });
    let description = cells::description(&view);
    if !description.is_empty() {
        ui.accesskit_node_builder(response.id, |node| node.set_description(description));
    }
    if !view.hover.is_empty() {
        response.on_hover_text(view.hover);
    } else if elided {
        response.on_hover_text(view.text);
    }
}

/// The row numbers, which stay in place when the cells scroll sideways.
fn numbers(ui: &Ui, layout: &Layout, offset: f32, turn: &mut Turn) {
    let theme = layout.theme;
    let gutter = layout.gutter;
    let top = gutter.top() - offset;
    pointer::row_numbers(ui, gutter, top, layout, turn);
    let painter = ui.painter_at(gutter);
    let first = row_of(offset, theme);
    let last = (row_of(offset + gutter.height(), theme) + 1).min(turn.sheet.total_rows());
    let selected = turn.state.selected_indices(turn.sheet);
    for index in first..last {
        let y = top + rows_height(theme, index) + theme.spacing.row / 2.0;
        let entry = turn.sheet.row_at(index) == ENTRY;
        let text = if entry { "+".to_owned() } else { turn.sheet.source.number(index).to_string() };
        let (font, colour) = if selected.contains(&index) {
            (theme.semibold(theme.sizes.small), theme.ink)
        } else {
            (theme.small(), theme.soft_ink)
        };
        let at = Pos2::new(gutter.right() - theme.spacing.item, y);
        painter.text(at, Align2::RIGHT_CENTER, text, font, colour);
    }
    let edge = Stroke::new(theme.spacing.hair, theme.rule);
    ui.painter().vline(gutter.right(), layout.rect.y_range(), edge);
}
