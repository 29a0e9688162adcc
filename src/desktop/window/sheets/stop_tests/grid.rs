//! The grid: a row for each test, ten stops beside each other, figures at the end. The stops of the chosen row are fields.

use calc::limits::STOPPING_TIME;
use calc::press::Press;
use calc::refusal::Refusal;
use calc::round::Towards;
use calc::units::Time;
use egui::{Align, Event, FontId, Id, Key, Layout, Rect, RichText, Sense, Stroke, UiBuilder, pos2, vec2};
use figure::Role;

use super::model::{Figures, MOST_STOPS, Row, Standing, column_figure};
use super::paste::{is_block, read_block};
use crate::window::sheets::form::refusal_words;
use crate::window::theme;
use crate::window::widgets::{Commit, Drafts, FieldKind, Moved, field_ui};
use crate::window::wishes::Wishes;

/// What is being typed into the grid.
#[derive(Default)]
pub struct GridDrafts {
    /// The chosen test.
    pub chosen: usize,
    /// The test to choose as soon as it is there.
    pending: Option<usize>,
    /// The cells.
    cells: Drafts,
    /// Why the last block was not taken.
    block: Vec<String>,
}

impl GridDrafts {
    /// Chooses a test and puts the keyboard into its first empty cell.
    pub fn begin(&mut self, press: &Press, test: usize, stops: usize) {
        self.pending = Some(test);
        self.block.clear();
        self.cells.focus(cell_id(press, (test, stops)));
    }

    /// Chooses what was wished, and never a test that is not there.
    pub fn follow(&mut self, tests: usize) {
        if let Some(test) = self.pending.take_if(|test| *test < tests) {
            self.chosen = test;
        }
        self.chosen = self.chosen.min(tests.saturating_sub(1));
    }

    /// Forgets everything typed, as when tests have moved up.
    pub fn clear(&mut self) {
        self.cells.clear();
        self.block.clear();
    }

    /// What could not be taken in the cells, in words.
    pub fn refused_cells(&self) -> Vec<String> {
        self.cells.refused()
    }

    /// Every refusal in the cells of the chosen test, each with the stop that it is about.
    pub fn refused(&self, press: &Press) -> Vec<String> {
        let Some(test) = press.stop_tests.get(self.chosen) else { return Vec::new() };
        let cells = (0..=test.stops.len()).filter_map(|cell| {
            let refusal = self.cells.refusal(cell_id(press, (self.chosen, cell)))?;
            let taken = test.stops.get(cell).map_or_else(String::new, |stop| stop.digits());
            Some(format!("Stop {}. {}", cell + 1, refusal_words(refusal, &taken, STOPPING_TIME.unit)))
        });
        cells.chain(self.block.iter().cloned()).collect()
    }
}

const ACROSS: usize = 10;
const LINE: f32 = 29.0;
const HEAD: f32 = 58.0;
// Room for two lines of stops, so that no row grows when the tenth stop is entered.
const LEAST_ROW: f32 = 2.0 * LINE + 12.0;

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
        Self { title: 194.0 + spare * 0.4, cell: 44.0 + (spare * 0.06).floor(), gap: 14.0 }
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
        // What counts stands above what has been superseded; within each the order of entry is kept, so that no row jumps while
        // its stops are typed.
        let is_superseded = |row: &Row| matches!(row.standing, Standing::Superseded(_));
        let (superseded, counting): (Vec<_>, Vec<_>) = rows.iter().enumerate().partition(|(_, row)| is_superseded(row));
        for (index, row) in counting.into_iter().chain(superseded) {
            row_ui(ui, widths, press, index, row, drafts, wishes);
        }
    });
}

fn head_ui(ui: &mut egui::Ui, widths: Widths) {
    let (rect, _) = ui.allocate_exact_size(vec2(widths.total(), HEAD), Sense::hover());
    let bottom =
        |from: f32, width: f32| Rect::from_min_max(pos2(from, rect.top()), pos2(from + width, rect.bottom() - 5.0));
    let put_above = |ui: &egui::Ui, from: f32, text: &str| {
        let font = FontId::proportional(12.0);
        let at = pos2(from, rect.top() + 2.0);
        ui.painter().text(at, egui::Align2::LEFT_TOP, text, font, theme::colour(ui.ctx(), Role::Faint));
    };
    put_above(ui, widths.stops_from(rect.left()) + 6.0, "Stops, ms");
    put_above(ui, widths.figures_from(rect.left()) + FIGURES[0].1 + 6.0, "Figures, ms");
    let mut put = |from: f32, width: f32, text: &str, align: Align| {
        let layout = Layout::bottom_up(align);
        within(ui, UiBuilder::new().max_rect(bottom(from, width)).layout(layout), |ui| {
            ui.add(egui::Label::new(RichText::new(text).small().weak()).halign(align));
        });
    };
    put(rect.left() + 12.0, widths.title, "Condition", Align::Min);
    let stops = widths.stops_from(rect.left());
    for cell in 0..ACROSS {
        put(stops + cell as f32 * widths.cell, widths.cell - 8.0, &(cell + 1).to_string(), Align::Max);
    }
    let mut from = widths.figures_from(rect.left());
    for (name, width) in FIGURES {
        put(from, width - 4.0, name, Align::Max);
        from += width;
    }
    ui.painter().hline(rect.x_range(), rect.bottom(), Stroke::new(1.0, ui.visuals().weak_text_color()));
}

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
        drafts.begin(press, index, stops.len());
    }
    let cell_rect = |cell: usize| {
        let corner = pos2(
            widths.stops_from(rect.left()) + (cell % ACROSS) as f32 * widths.cell,
            rect.top() + 7.0 + (cell / ACROSS) as f32 * LINE,
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
            drafts.begin(press, index, stops.len());
        }
    }
    figures_ui(ui, rect, widths, row);
}

fn row_id(press: &Press, index: usize) -> Id {
    Id::unique((press.tag.as_str(), "stop-test", index))
}

fn cell_id(press: &Press, (test, cell): (usize, usize)) -> Id {
    row_id(press, test).with(("stop", cell))
}

/// The condition, which is also the button that chooses the row. Tells whether it was pressed.
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
    let standing = format!("{}, {}", row.day, standing_words(&row.standing));
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
    let inner = Rect::from_min_max(rect.min + vec2(12.0, 8.0), rect.max - vec2(4.0, 2.0));
    within(ui, UiBuilder::new().max_rect(inner).layout(Layout::top_down(Align::Min)), |ui| {
        ui.spacing_mut().item_spacing.y = 1.0;
        let line = |ui: &mut egui::Ui, text: &str, font: FontId, colour| {
            ui.add(egui::Label::new(RichText::new(text).font(font).color(colour)).truncate().selectable(false));
        };
        let accent = theme::colour(ui.ctx(), Role::Accent);
        let fonts = if governs {
            (theme::strong(14.0), theme::strong(12.0), accent)
        } else {
            (FontId::proportional(14.0), FontId::proportional(12.0), weak)
        };
        line(ui, &row.title, fonts.0, title_colour);
        line(ui, &row.detail, FontId::proportional(12.0), weak);
        line(ui, &standing, fonts.1, fonts.2);
    });
    response.clicked()
}

/// What stands under the condition.
pub fn standing_words(standing: &Standing) -> String {
    match standing {
        Standing::Governs => "governs".into(),
        Standing::Counts => "counts".into(),
        Standing::OtherPath => "other stop path".into(),
        Standing::Superseded(why) => why.clone(),
    }
}

fn figures_ui(ui: &mut egui::Ui, row_rect: Rect, widths: Widths, row: &Row) {
    let Figures { count, mean, deviation, longest, mean_plus_3_s, tolerance, taken } = row.figures;
    let up = |time: Option<Time>| time.map_or_else(String::new, |time| column_figure(time, Towards::Greater));
    let deviation = deviation.map_or_else(String::new, |time| column_figure(time, Towards::Greater));
    let taken = up(taken.map(|taken| taken.1));
    let texts = [count.to_string(), up(mean), deviation, up(longest), up(mean_plus_3_s), up(tolerance), taken];
    let is_faint = matches!(row.standing, Standing::Superseded(_));
    let mut from = widths.figures_from(row_rect.left());
    for ((text, (_, width)), place) in texts.iter().zip(FIGURES).zip(0..) {
        let rect = Rect::from_min_size(pos2(from, row_rect.top() + 7.0), vec2(width - 4.0, LINE - 3.0));
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
        text = text.font(theme::strong(14.0));
    }
    let layout = Layout::right_to_left(Align::Center);
    within(ui, UiBuilder::new().max_rect(rect).layout(layout), |ui| {
        ui.add(egui::Label::new(text).selectable(false).extend());
    });
}

/// Draws inside a row whose room is already taken, so that the place of what follows does not change.
fn within<R>(ui: &mut egui::Ui, builder: UiBuilder, content: impl FnOnce(&mut egui::Ui) -> R) -> R {
    content(&mut ui.new_child(builder))
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
    if let Some(text) = pasted_block(ui, id) {
        take_block(press, place, &text, drafts, wishes);
    }
    let label = format!("Stop {}", cell + 1);
    let taken = press.stop_tests[test].stops.get(cell).map_or_else(String::new, |stop| stop.digits());
    let kind = FieldKind::figure(&label, STOPPING_TIME.unit).wide(rect.width()).bare();
    let layout = Layout::left_to_right(Align::Center);
    let commit = within(ui, UiBuilder::new().max_rect(rect).layout(layout), |ui| {
        // The margin of a whole form would leave no room for the figures.
        ui.spacing_mut().button_padding.x = 4.0;
        field_ui(ui, id, FieldKind { unit: "", ..kind }, &taken, &mut drafts.cells, read_cell)
    });
    let next = cell_id(press, (test, (cell + 1).min(MOST_STOPS - 1)));
    match commit {
        Some(Commit::Set(Typed::Stop(stop), moved)) => {
            drafts.block.clear();
            set_stops(press, place, vec![stop], format!("enter stop {}", cell + 1), wishes);
            if moved == Moved::Enter {
                drafts.cells.focus(next);
            }
        }
        Some(Commit::Set(Typed::Block(text), _)) => take_block(press, place, &text, drafts, wishes),
        Some(Commit::Cleared(moved)) => {
            remove_stop(press, place, wishes);
            if moved == Moved::Enter {
                drafts.cells.focus(id);
            }
        }
        // From a filled cell on to the next; in the empty one the cursor stays.
        Some(Commit::Passed) => drafts.cells.focus(if taken.is_empty() { id } else { next }),
        Some(Commit::Refused) if ui.input(|input| input.key_pressed(Key::Enter)) => drafts.cells.focus(id),
        Some(Commit::Refused) | None => {}
    }
}

/// What a cell was given.
enum Typed {
    /// One stop.
    Stop(Time),
    /// Several entries, which fill cells from this one on.
    Block(String),
}

fn read_cell(text: &str) -> Result<Typed, Refusal> {
    if is_block(text) { Ok(Typed::Block(text.to_owned())) } else { Time::parse(text, &STOPPING_TIME).map(Typed::Stop) }
}

/// Takes a block whole, or lists why not.
fn take_block(press: &Press, (test, cell): (usize, usize), text: &str, drafts: &mut GridDrafts, wishes: &mut Wishes) {
    match read_block(text, MOST_STOPS - cell) {
        Ok(stops) => {
            drafts.block.clear();
            drafts.cells.focus(cell_id(press, (test, (cell + stops.len()).min(MOST_STOPS - 1))));
            let label = format!("paste stops {} to {}", cell + 1, cell + stops.len());
            set_stops(press, (test, cell), stops, label, wishes);
        }
        Err(refused) => {
            let counted =
                if refused.len() == 1 { "1 refusal".to_owned() } else { format!("{} refusals", refused.len()) };
            drafts.block = std::iter::once(format!("Nothing was pasted, {counted}.")).chain(refused).collect();
        }
    }
}

fn remove_stop(press: &Press, (test, cell): (usize, usize), wishes: &mut Wishes) {
    wishes.edit_press(press, format!("remove stop {}", cell + 1), move |press| {
        if let Some(test) = press.stop_tests.get_mut(test)
            && cell < test.stops.len()
        {
            test.stops.remove(cell);
        }
    });
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
