//! The grid: a row for each test, ten stops beside each other, figures at the end. The stops of the chosen row are fields.

use std::collections::BTreeMap;

use calc::limits::STOPPING_TIME;
use calc::press::Press;
use calc::round::Towards;
use calc::units::Time;
use eframe::egui::{self, Align, Event, Id, Key, Layout, Rect, RichText, Sense, Stroke, UiBuilder, pos2, vec2};

use super::model::{Figures, MOST_STOPS, Row, Standing, column_figure};
use super::paste::{is_block, read_block};
use crate::window::sheets::entry::{Entry, Look, entry_ui};
use crate::window::wishes::Wishes;

/// What is being typed into the grid.
#[derive(Default, Debug)]
pub struct GridDrafts {
    /// The chosen test.
    pub chosen: usize,
    /// Cells by test and place.
    cells: BTreeMap<(usize, usize), Entry>,
    /// Why the last pasted block was not taken.
    pub block: Vec<String>,
    /// The cell that shall get the keyboard next.
    focus: Option<(usize, usize)>,
}

impl GridDrafts {
    /// Chooses a test and puts the keyboard into its first empty cell.
    pub fn begin(&mut self, test: usize, stops: usize) {
        self.chosen = test;
        self.focus = Some((test, stops));
    }

    /// Forgets everything typed, as when tests have moved up.
    pub fn clear(&mut self) {
        *self = Self { chosen: self.chosen, ..Self::default() };
    }

    /// Every refusal, each with the stop it is about.
    pub fn refusals(&self) -> Vec<String> {
        let cells = self.cells.iter().filter_map(|((_, cell), entry)| {
            entry.refusal.as_ref().map(|refusal| format!("Stop {}. {refusal}", cell + 1))
        });
        cells.chain(self.block.iter().cloned()).collect()
    }
}

const ACROSS: usize = 10;
const LINE: f32 = 27.0;
const HEAD: f32 = 40.0;
const LEAST_ROW: f32 = 58.0;

/// Width of each part of a row.
#[derive(Clone, Copy)]
struct Widths {
    title: f32,
    cell: f32,
    gap: f32,
}

const FIGURES: [(&str, f32); 7] = [
    ("n", 26.0),
    ("mean", 50.0),
    ("s", 48.0),
    ("longest", 54.0),
    ("mean\n+ 3 s", 54.0),
    ("tolerance\n95/95", 66.0),
    ("taken\nforward", 58.0),
];

/// The least width in which the grid shows every column.
pub const LEAST_WIDTH: f32 = 1016.0;

impl Widths {
    fn within(available: f32) -> Self {
        let spare = (available - LEAST_WIDTH).clamp(0.0, 160.0);
        Self { title: 214.0 + spare * 0.4, cell: 42.0 + (spare * 0.06).floor(), gap: 14.0 }
    }

    fn stops_from(self, left: f32) -> f32 {
        left + self.title + self.gap
    }

    fn figures_from(self, left: f32) -> f32 {
        self.stops_from(left) + self.cell * ACROSS as f32 + self.gap
    }

    fn total(self) -> f32 {
        self.figures_from(0.0) + FIGURES.iter().map(|figure| figure.1).sum::<f32>()
    }
}

/// Draws the grid.
pub fn grid_ui(ui: &mut egui::Ui, press: &Press, rows: &[Row], drafts: &mut GridDrafts, wishes: &mut Wishes) {
    egui::ScrollArea::horizontal().id_salt("stop-grid").show(ui, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        let widths = Widths::within(ui.available_width());
        head_ui(ui, widths);
        for (index, row) in rows.iter().enumerate() {
            row_ui(ui, widths, press, index, row, drafts, wishes);
        }
    });
}

fn head_ui(ui: &mut egui::Ui, widths: Widths) {
    let (rect, _) = ui.allocate_exact_size(vec2(widths.total(), HEAD), Sense::hover());
    let bottom = |from: f32, width: f32| Rect::from_min_max(pos2(from, rect.top()), pos2(from + width, rect.bottom() - 5.0));
    let mut put = |from: f32, width: f32, text: &str, align: Align| {
        let layout = Layout::bottom_up(align);
        ui.scope_builder(UiBuilder::new().max_rect(bottom(from, width)).layout(layout), |ui| {
            ui.add(egui::Label::new(RichText::new(text).small().weak()).halign(align));
        });
    };
    put(rect.left() + 12.0, widths.title, "Condition", Align::Min);
    let stops = widths.stops_from(rect.left());
    for cell in 0..ACROSS {
        let text = if cell == 0 { "ms   1".to_owned() } else { (cell + 1).to_string() };
        put(stops + cell as f32 * widths.cell, widths.cell - 8.0, &text, Align::Max);
    }
    let mut from = widths.figures_from(rect.left());
    for (name, width) in FIGURES {
        put(from, width - 4.0, name, Align::Max);
        from += width;
    }
    ui.painter().hline(rect.x_range(), rect.bottom(), Stroke::new(1.0, ui.visuals().weak_text_color()));
}

#[allow(clippy::too_many_arguments)]
fn row_ui(
    ui: &mut egui::Ui,
    widths: Widths,
    press: &Press,
    index: usize,
    row: &Row,
    drafts: &mut GridDrafts,
    wishes: &mut Wishes,
) {
    let is_chosen = drafts.chosen == index;
    let stops = &press.stop_tests[index].stops;
    let cells = if is_chosen { (stops.len() + 1).min(MOST_STOPS) } else { stops.len() };
    let height = (cells.div_ceil(ACROSS) as f32 * LINE + 12.0).max(LEAST_ROW);
    let (rect, _) = ui.allocate_exact_size(vec2(widths.total(), height), Sense::hover());
    if is_chosen {
        ui.painter().rect_filled(rect, 0.0, ui.visuals().faint_bg_color);
    }
    ui.painter().hline(rect.x_range(), rect.bottom(), ui.visuals().widgets.noninteractive.bg_stroke);
    if title_ui(ui, rect, widths, press, index, row, is_chosen) {
        drafts.begin(index, stops.len());
    }
    let cell_rect = |cell: usize| {
        let corner = pos2(
            widths.stops_from(rect.left()) + (cell % ACROSS) as f32 * widths.cell,
            rect.top() + 6.0 + (cell / ACROSS) as f32 * LINE,
        );
        Rect::from_min_size(corner, vec2(widths.cell - 3.0, LINE - 3.0))
    };
    if is_chosen {
        for cell in 0..cells {
            cell_ui(ui, cell_rect(cell), press, (index, cell), drafts, wishes);
        }
    } else {
        let is_faint = matches!(row.standing, Standing::Superseded(_));
        for (cell, stop) in stops.iter().enumerate() {
            figure_ui(ui, cell_rect(cell).shrink2(vec2(5.0, 0.0)), &stop.digits(), is_faint, false);
        }
        let from = Rect::from_min_max(
            pos2(widths.stops_from(rect.left()), rect.top()),
            pos2(widths.figures_from(rect.left()), rect.bottom()),
        );
        if ui.interact(from, row_id(press, index).with("stops"), Sense::CLICK).clicked() {
            drafts.begin(index, stops.len());
        }
    }
    figures_ui(ui, rect, widths, row);
}

fn row_id(press: &Press, index: usize) -> Id {
    Id::new((press.tag.as_str(), "stop-test", index))
}

fn cell_id(press: &Press, (test, cell): (usize, usize)) -> Id {
    row_id(press, test).with(("stop", cell))
}

/// The condition, which is also the button that chooses the row. Tells whether it was pressed.
#[allow(clippy::too_many_arguments)]
fn title_ui(
    ui: &mut egui::Ui,
    row_rect: Rect,
    widths: Widths,
    press: &Press,
    index: usize,
    row: &Row,
    is_chosen: bool,
) -> bool {
    let rect = Rect::from_min_size(row_rect.min, vec2(widths.title, row_rect.height()));
    let response = ui.interact(rect, row_id(press, index), Sense::click());
    let standing = standing_words(&row.standing);
    let spoken = format!("{}, {}, {standing}", row.title, row.detail);
    response.widget_info(|| egui::WidgetInfo::selected(egui::Role::RadioButton, true, is_chosen, spoken.clone()));
    let visuals = ui.visuals();
    let governs = row.standing == Standing::Governs;
    let is_faint = matches!(row.standing, Standing::Superseded(_));
    let (text, weak) = (visuals.text_color(), visuals.weak_text_color());
    let title_colour = if is_faint { weak } else { text };
    let painter = ui.painter();
    if governs {
        painter.rect_filled(
            Rect::from_min_size(rect.min + vec2(0.0, 1.0), vec2(4.0, rect.height() - 2.0)),
            0.0,
            visuals.hyperlink_color,
        );
    }
    if response.has_focus() {
        painter.rect_stroke(rect.shrink(2.0), 2.0, visuals.selection.stroke, egui::StrokeKind::Inside);
    } else if response.hovered() {
        painter.rect_filled(rect.shrink(1.0), 2.0, visuals.widgets.hovered.weak_bg_fill.gamma_multiply(0.5));
    }
    let inner = Rect::from_min_max(rect.min + vec2(12.0, 6.0), rect.max - vec2(4.0, 2.0));
    ui.scope_builder(UiBuilder::new().max_rect(inner).layout(Layout::top_down(Align::Min)), |ui| {
        ui.spacing_mut().item_spacing.y = 1.0;
        let title = RichText::new(&row.title).color(title_colour);
        ui.add(egui::Label::new(if governs { title.strong() } else { title }).truncate().selectable(false));
        ui.add(egui::Label::new(RichText::new(&row.detail).small().color(weak)).truncate().selectable(false));
        let standing_colour = if governs { visuals_accent(ui) } else { weak };
        let standing = RichText::new(&standing).small().color(standing_colour);
        ui.add(egui::Label::new(if governs { standing.strong() } else { standing }).truncate().selectable(false));
    });
    response.clicked()
}

fn visuals_accent(ui: &egui::Ui) -> egui::Color32 {
    ui.visuals().hyperlink_color
}

/// What stands under the condition.
pub fn standing_words(standing: &Standing) -> String {
    match standing {
        Standing::Governs => "governs".into(),
        Standing::Counts => "counts, does not govern".into(),
        Standing::OtherPath => "not the stop this safeguard calls for".into(),
        Standing::Superseded(why) => why.clone(),
    }
}

fn figures_ui(ui: &mut egui::Ui, row_rect: Rect, widths: Widths, row: &Row) {
    let Figures { count, mean, deviation, longest, mean_plus_3_s, tolerance, taken } = row.figures;
    let up = |time: Option<Time>| time.map_or_else(String::new, |time| column_figure(time, Towards::Greater));
    let deviation = deviation.map_or_else(String::new, |time| column_figure(time, Towards::Greater));
    let taken = up(taken.map(|taken| taken.1));
    let texts =
        [count.to_string(), up(mean), deviation, up(longest), up(mean_plus_3_s), up(tolerance), taken];
    let is_faint = matches!(row.standing, Standing::Superseded(_));
    let mut from = widths.figures_from(row_rect.left());
    for ((text, (_, width)), place) in texts.iter().zip(FIGURES).zip(0..) {
        let rect = Rect::from_min_size(pos2(from, row_rect.top() + 6.0), vec2(width - 4.0, LINE - 3.0));
        figure_ui(ui, rect, text, is_faint, place == 6 && row.standing == Standing::Governs);
        from += width;
    }
}

fn figure_ui(ui: &mut egui::Ui, rect: Rect, text: &str, is_faint: bool, is_strong: bool) {
    let mut text = RichText::new(text);
    if is_faint {
        text = text.weak();
    }
    if is_strong {
        text = text.strong();
    }
    let layout = Layout::right_to_left(Align::Center);
    ui.scope_builder(UiBuilder::new().max_rect(rect).layout(layout), |ui| {
        ui.add(egui::Label::new(text).selectable(false).extend());
    });
}

/// One stop of the chosen row.
fn cell_ui(
    ui: &mut egui::Ui,
    rect: Rect,
    press: &Press,
    place: (usize, usize),
    drafts: &mut GridDrafts,
    wishes: &mut Wishes,
) {
    let (test, cell) = place;
    let id = cell_id(press, place);
    if drafts.focus == Some(place) {
        drafts.focus = None;
        ui.memory_mut(|memory| memory.request_focus(id));
    }
    if let Some(text) = pasted_block(ui, id) {
        take_block(press, place, &text, drafts, wishes);
    }
    let stop = press.stop_tests[test].stops.get(cell).copied();
    let taken = stop.map_or_else(String::new, Time::digits);
    let mut entry = drafts.cells.remove(&place).unwrap_or_default();
    let (response, given) = ui
        .scope_builder(UiBuilder::new().max_rect(rect).layout(Layout::left_to_right(Align::Center)), |ui| {
            ui.spacing_mut().button_padding.x = 3.0;
            entry_ui(ui, id, &mut entry, &taken, Look { width: rect.width(), align: Align::Max })
        })
        .inner;
    ui.ctx().accesskit_node_builder(id, |node| node.set_label(format!("Stop {}", cell + 1)));
    let is_entered = response.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter));
    let outcome = match given {
        None if entry.refusal.is_some() => Outcome::Refused,
        None if stop.is_some() => Outcome::Filled,
        None => Outcome::Empty,
        Some(text) if is_block(&text) => {
            entry = Entry::default();
            take_block(press, place, &text, drafts, wishes);
            Outcome::Block
        }
        Some(text) => take_stop(press, place, &text, &mut entry, drafts, wishes),
    };
    if is_entered {
        match outcome {
            Outcome::Filled => drafts.focus = Some((test, (cell + 1).min(MOST_STOPS - 1))),
            Outcome::Empty | Outcome::Refused => drafts.focus = Some(place),
            Outcome::Block => drafts.focus = drafts.focus.or(Some(place)),
        }
    }
    if entry != Entry::default() {
        drafts.cells.insert(place, entry);
    }
}

/// What became of a cell, which decides where Enter goes.
enum Outcome {
    /// It holds a stop.
    Filled,
    /// It holds none.
    Empty,
    /// What was typed was refused.
    Refused,
    /// It took a block.
    Block,
}

/// Takes one typed stop, or removes the stop where the text is empty.
fn take_stop(
    press: &Press,
    (test, cell): (usize, usize),
    text: &str,
    entry: &mut Entry,
    drafts: &mut GridDrafts,
    wishes: &mut Wishes,
) -> Outcome {
    drafts.block.clear();
    if text.trim().is_empty() {
        *entry = Entry::default();
        wishes.edit_press(press, format!("remove stop {}", cell + 1), move |press| {
            if let Some(test) = press.stop_tests.get_mut(test)
                && cell < test.stops.len()
            {
                test.stops.remove(cell);
            }
        });
        return Outcome::Empty;
    }
    let Some(stop) = entry.settle(Time::parse(text, &STOPPING_TIME)) else { return Outcome::Refused };
    set_stops(press, (test, cell), vec![stop], format!("enter stop {}", cell + 1), wishes);
    Outcome::Filled
}

/// Takes a pasted block whole, or lists why not.
fn take_block(press: &Press, (test, cell): (usize, usize), text: &str, drafts: &mut GridDrafts, wishes: &mut Wishes) {
    match read_block(text, MOST_STOPS - cell) {
        Ok(stops) => {
            drafts.block.clear();
            drafts.cells.retain(|place, _| place.0 != test);
            drafts.focus = Some((test, (cell + stops.len()).min(MOST_STOPS - 1)));
            let label = format!("paste stops {} to {}", cell + 1, cell + stops.len());
            set_stops(press, (test, cell), stops, label, wishes);
        }
        Err(refused) => {
            drafts.block = std::iter::once("Nothing was pasted.".to_owned()).chain(refused).collect();
        }
    }
}

/// Writes stops from a place on; places that hold a stop get the new one.
fn set_stops(press: &Press, (test, cell): (usize, usize), stops: Vec<Time>, label: String, wishes: &mut Wishes) {
    wishes.edit_press(press, label, move |press| {
        let Some(test) = press.stop_tests.get_mut(test) else { return };
        for (place, stop) in (cell..).zip(stops) {
            match test.stops.get_mut(place) {
                Some(held) => *held = stop,
                None => test.stops.push(stop),
            }
        }
    });
}

/// A block that is being pasted into the field with the keyboard, taken away before the field sees it.
fn pasted_block(ui: &egui::Ui, id: Id) -> Option<String> {
    if !ui.memory(|memory| memory.has_focus(id)) {
        return None;
    }
    ui.input_mut(|input| {
        let place = input.events.iter().position(|event| matches!(event, Event::Paste(text) if is_block(text)))?;
        match input.events.remove(place) {
            Event::Paste(text) => Some(text),
            _ => None,
        }
    })
}
