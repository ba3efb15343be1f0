//! The theme as egui's own style, so that its stock widgets match ours.

use eframe::egui::{
    self, Color32, CornerRadius, FontFamily, FontId, Margin, Shadow, Stroke, Style, TextStyle, Visuals,
    style::ScrollAnimation, style::ScrollStyle, style::Selection, style::WidgetVisuals, style::Widgets, vec2,
};

use super::{SEMIBOLD, Theme};

/// Name of the text style of a plot's verdict: `TextStyle::Name(CAPTION.into())`.
pub const CAPTION: &str = "caption";
/// Name of the text style of the largest head.
pub const TITLE: &str = "title";
/// Name of the text style of figures read at arm's length.
pub const PROMPT: &str = "prompt";

/// The egui style of a theme.
pub(super) fn style(theme: &Theme) -> Style {
    let mut style = Style {
        text_styles: text_styles(theme),
        visuals: visuals(theme),
        // Nothing moves unless it shows where something went; without a GPU every frame is dear.
        animation_time: 0.0,
        scroll_animation: ScrollAnimation::none(),
        explanation_tooltips: false,
        ..Style::default()
    };
    space(&mut style, theme);
    style
}

fn text_styles(theme: &Theme) -> std::collections::BTreeMap<TextStyle, FontId> {
    let sizes = theme.sizes;
    let plain = |size| FontId::new(size, FontFamily::Proportional);
    let bold = |size| FontId::new(size, FontFamily::Name(SEMIBOLD.into()));
    [
        (TextStyle::Small, plain(sizes.small)),
        (TextStyle::Body, plain(sizes.body)),
        (TextStyle::Button, plain(sizes.body)),
        (TextStyle::Monospace, FontId::new(sizes.body, FontFamily::Monospace)),
        (TextStyle::Heading, bold(sizes.heading)),
        (TextStyle::Name(CAPTION.into()), bold(sizes.caption)),
        (TextStyle::Name(TITLE.into()), bold(sizes.title)),
        (TextStyle::Name(PROMPT.into()), bold(sizes.prompt)),
    ]
    .into()
}

fn space(style: &mut Style, theme: &Theme) {
    let space = theme.spacing;
    let spacing = &mut style.spacing;
    spacing.item_spacing = vec2(space.item, 6.0);
    spacing.button_padding = vec2(10.0, 4.0);
    spacing.interact_size = vec2(40.0, space.control);
    spacing.window_margin = Margin::same(16);
    spacing.menu_margin = Margin::same(6);
    spacing.indent = 16.0;
    spacing.icon_width = 16.0;
    spacing.icon_width_inner = 8.0;
    spacing.text_edit_width = 200.0;
    spacing.tooltip_width = 360.0;
    // Always visible, beside the content, and nothing fades: half-visible rows look like less.
    spacing.scroll = ScrollStyle {
        floating: true,
        floating_allocated_width: 10.0,
        floating_width: 6.0,
        bar_width: 10.0,
        handle_min_length: 24.0,
        foreground_color: true,
        dormant_background_opacity: 0.0,
        dormant_handle_opacity: 0.4,
        active_background_opacity: 0.0,
        active_handle_opacity: 0.5,
        interact_background_opacity: 0.3,
        interact_handle_opacity: 0.7,
        ..ScrollStyle::solid()
    };
    spacing.scroll.fade.strength = 0.0;
}

fn visuals(theme: &Theme) -> Visuals {
    let corner = CornerRadius::same(theme.spacing.corner);
    let hairline = Stroke::new(theme.spacing.hair, theme.rule);
    let base = if theme.dark { Visuals::dark() } else { Visuals::light() };
    let mut visuals = Visuals {
        dark_mode: theme.dark,
        override_text_color: None,
        weak_text_color: Some(theme.soft_ink),
        widgets: widgets(theme),
        selection: Selection { bg_fill: theme.selected, stroke: Stroke::new(theme.spacing.focus, theme.focus) },
        hyperlink_color: theme.brass,
        faint_bg_color: theme.hair,
        extreme_bg_color: theme.field,
        text_edit_bg_color: Some(theme.field),
        code_bg_color: theme.hover,
        warn_fg_color: theme.alert,
        error_fg_color: theme.alert,
        window_corner_radius: corner,
        window_shadow: shadow(theme, 24),
        window_fill: theme.panel,
        window_stroke: hairline,
        menu_corner_radius: corner,
        panel_fill: theme.ground,
        popup_shadow: shadow(theme, 10),
        indent_has_left_vline: false,
        striped: false,
        slider_trailing_fill: true,
        disabled_alpha: 0.55,
        ..base
    };
    visuals.text_cursor.stroke = Stroke::new(1.5, theme.ink);
    // A blinking cursor would redraw the window twice a second for nothing.
    visuals.text_cursor.blink = false;
    visuals
}

fn shadow(theme: &Theme, blur: u8) -> Shadow {
    Shadow { offset: [0, 2], blur, spread: 0, color: theme.shadow }
}

fn widgets(theme: &Theme) -> Widgets {
    let look = |fill: Color32, outline: Stroke| WidgetVisuals {
        bg_fill: fill,
        weak_bg_fill: fill,
        bg_stroke: outline,
        corner_radius: CornerRadius::same(theme.spacing.corner),
        fg_stroke: Stroke::new(1.5, theme.ink),
        expansion: 0.0,
    };
    let hair = theme.spacing.hair;
    let mut noninteractive = look(theme.panel, Stroke::new(hair, theme.rule));
    noninteractive.fg_stroke.width = 1.0;
    Widgets {
        noninteractive,
        inactive: look(theme.panel, Stroke::new(hair, theme.edge)),
        hovered: look(theme.hover, Stroke::new(hair, theme.brass)),
        // Pressed, and having the keyboard: the brass ring.
        active: look(theme.panel, Stroke::new(theme.spacing.focus, theme.focus)),
        open: look(theme.hover, Stroke::new(hair, theme.brass)),
    }
}

/// Frame of a panel: a hairline, slightly rounded, on the panel colour.
impl From<&Theme> for egui::Frame {
    fn from(theme: &Theme) -> Self {
        Self::new()
            .fill(theme.panel)
            .stroke(Stroke::new(theme.spacing.hair, theme.rule))
            .corner_radius(CornerRadius::same(theme.spacing.corner))
            .inner_margin(Margin::same(12))
    }
}
