//! A sheet over the window: title, contents, closed by Escape or a click beside it.

use crate::theme::{TITLE, Theme};
use eframe::egui::{Context, Frame, Id, Label, Margin, Modal, RichText, Role, TextStyle, Ui};

/// What came of a sheet in this frame.
pub struct Shown<R> {
    /// What the contents gave back.
    pub inner: R,
    /// Whether it is to be closed.
    pub closed: bool,
}

/// Shows a sheet of at most `width` points.
pub fn sheet<R>(ctx: &Context, title: &str, width: f32, contents: impl FnOnce(&mut Ui) -> R) -> Shown<R> {
    let theme = Theme::of(ctx);
    let frame = Frame::from(theme).inner_margin(Margin::same(20)).shadow(ctx.global_style().visuals.window_shadow);
    let modal = Modal::new(Id::unique(("sheet", title))).backdrop_color(theme.backdrop).frame(frame).show(ctx, |ui| {
        ui.set_width(width.min(ui.ctx().content_rect().width() - 80.0));
        let head = RichText::new(title).text_style(TextStyle::Name(TITLE.into()));
        ui.add(Label::new(head).wrap());
        ui.add_space(theme.spacing.tight);
        contents(ui)
    });
    ctx.accesskit_node_builder(modal.response.id, |node| {
        node.set_role(Role::Dialog);
        node.set_label(title);
    });
    let closed = modal.should_close();
    Shown { inner: modal.inner, closed }
}
