//! The look: paper and ink, one accent, IBM Plex Sans. Light and dark.

use std::sync::Arc;

use egui::style::{Selection, WidgetVisuals, Widgets};
use egui::{
    Color32, Context, CornerRadius, FontData, FontDefinitions, FontFamily, FontId, Margin, Stroke, TextStyle, Theme,
    Visuals,
};
use figure::{Palette, Role};

/// The name of the heavier weight among egui's font families.
const STRONG: &str = "strong";

/// The family of the heavier weight.
pub fn strong_family() -> FontFamily {
    FontFamily::Name(STRONG.into())
}

/// The heavier weight in this size.
pub fn strong(size: f32) -> FontId {
    FontId::new(size, strong_family())
}

/// Puts fonts and style of both themes into a context, once, before the first frame.
pub fn install(context: &Context) {
    context.set_fonts(fonts());
    for (theme, palette) in [(Theme::Light, Palette::Light), (Theme::Dark, Palette::Dark)] {
        context.style_mut_of(theme, |style| {
            style.text_styles = [
                (TextStyle::Small, FontId::proportional(12.0)),
                (TextStyle::Body, FontId::proportional(14.0)),
                (TextStyle::Button, FontId::proportional(14.0)),
                (TextStyle::Monospace, FontId::proportional(14.0)),
                (TextStyle::Heading, strong(17.0)),
            ]
            .into();
            style.spacing.item_spacing = egui::vec2(8.0, 6.0);
            style.spacing.button_padding = egui::vec2(10.0, 4.0);
            style.spacing.interact_size.y = 26.0;
            style.spacing.menu_margin = Margin::same(8);
            style.interaction.selectable_labels = false;
            style.visuals = visuals(palette, theme == Theme::Dark);
            style.animation_time = 0.0;
        });
    }
    set_dark(context, false);
}

/// Both weights, each with egui's own fonts behind it for the characters that it lacks.
fn fonts() -> FontDefinitions {
    let mut fonts = FontDefinitions::default();
    let fallbacks = fonts.families.get(&FontFamily::Proportional).cloned().unwrap_or_default();
    for (name, bytes, family) in [
        ("plex-regular", figure::REGULAR, FontFamily::Proportional),
        ("plex-semibold", figure::SEMI_BOLD, strong_family()),
    ] {
        fonts.font_data.insert(name.to_owned(), Arc::new(FontData::from_static(bytes)));
        let names = std::iter::once(name.to_owned()).chain(fallbacks.iter().cloned()).collect();
        fonts.families.insert(family, names);
    }
    fonts
}

/// Shows the dark theme or the light one.
pub fn set_dark(context: &Context, is_dark: bool) {
    context.set_theme(if is_dark { Theme::Dark } else { Theme::Light });
}

/// The palette that is shown.
pub fn palette(context: &Context) -> Palette {
    if context.global_style().visuals.dark_mode { Palette::Dark } else { Palette::Light }
}

/// The colour of a role as it is shown now.
pub fn colour(context: &Context, role: Role) -> Color32 {
    of(palette(context), role)
}

/// The colour of a role in a palette.
pub fn of(palette: Palette, role: Role) -> Color32 {
    let [r, g, b] = palette.colour(role);
    Color32::from_rgb(r, g, b)
}

fn visuals(palette: Palette, is_dark: bool) -> Visuals {
    let colour = |role| of(palette, role);
    let (ground, ink, rule, accent) =
        (colour(Role::Ground), colour(Role::Ink), colour(Role::Rule), colour(Role::Accent));
    let lift = |amount: u8| {
        let shift = |channel: u8| if is_dark { channel.saturating_add(amount) } else { channel.saturating_sub(amount) };
        Color32::from_rgb(shift(ground.r()), shift(ground.g()), shift(ground.b()))
    };
    let field = if is_dark { lift(8) } else { Color32::from_rgb(0xFF, 0xFE, 0xFB) };
    let widget = |fill: Color32, line: Color32, text: Color32| WidgetVisuals {
        bg_fill: fill,
        weak_bg_fill: fill,
        bg_stroke: Stroke::new(1.0, line),
        fg_stroke: Stroke::new(1.0, text),
        corner_radius: CornerRadius::same(3),
        expansion: 0.0,
    };
    Visuals {
        dark_mode: is_dark,
        override_text_color: None,
        widgets: Widgets {
            noninteractive: widget(ground, rule, ink),
            inactive: widget(lift(9), rule, ink),
            hovered: widget(lift(18), accent, ink),
            active: widget(lift(26), accent, ink),
            open: widget(lift(18), accent, ink),
        },
        selection: Selection { bg_fill: accent.gamma_multiply(0.18), stroke: Stroke::new(1.5, accent) },
        hyperlink_color: accent,
        faint_bg_color: lift(5),
        extreme_bg_color: field,
        text_edit_bg_color: Some(field),
        warn_fg_color: colour(Role::Unproven),
        error_fg_color: colour(Role::Short),
        window_fill: ground,
        window_stroke: Stroke::new(1.0, rule),
        panel_fill: ground,
        window_corner_radius: CornerRadius::same(5),
        menu_corner_radius: CornerRadius::same(4),
        window_shadow: egui::Shadow { offset: [0, 4], blur: 18, spread: 0, color: Color32::from_black_alpha(50) },
        popup_shadow: egui::Shadow { offset: [0, 3], blur: 10, spread: 0, color: Color32::from_black_alpha(40) },
        weak_text_color: Some(colour(Role::Faint)),
        striped: false,
        ..if is_dark { Visuals::dark() } else { Visuals::light() }
    }
}

/// Fonts that know how wide a text is on paper; read once for all drawings.
pub fn drawing_fonts() -> Arc<figure::Fonts> {
    use std::sync::OnceLock;
    static FONTS: OnceLock<Arc<figure::Fonts>> = OnceLock::new();
    FONTS.get_or_init(|| Arc::new(figure::Fonts::new())).clone()
}
