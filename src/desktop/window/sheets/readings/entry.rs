//! Quick entry: the date is today's, the cursor stands in the first figure, Enter goes on, the last Enter adds the reading.

use calc::calendar::Moment;
use calc::limits::{SPEED, STOPPING_TIME};
use calc::reading::{Reading, ReadingSetup};
use calc::refusal::Refusal;
use calc::round::thousandths_text;
use calc::stop_test::Instrument;
use calc::units::{Rate, Time};
use egui::{Id, Key, Response, TextEdit, Ui};

use crate::window::context::SheetContext;
use crate::window::widgets::{caption, card_ui, refusal_line};
use crate::window::wishes::Wishes;

/// How many figures stand ready; a monthly reading is a few stops.
const STOPS: usize = 3;

/// What is being typed.
#[derive(Default)]
pub struct EntryDraft {
    tag: String,
    date: String,
    by: String,
    speed: String,
    stops: Vec<String>,
    refusals: Vec<Refusal>,
    focus: Option<usize>,
}

impl EntryDraft {
    fn begin(&mut self, cx: &SheetContext) {
        // Who reads and with what stays from press to press on a round.
        let by = std::mem::take(&mut self.by);
        *self = Self {
            tag: cx.press.tag.clone(),
            date: cx.today.to_string(),
            by,
            speed: setup(cx).map_or(String::new(), |setup| setup.condition.speed.digits()),
            stops: vec![String::new(); STOPS],
            refusals: Vec::new(),
            focus: Some(0),
        };
        if self.by.is_empty() {
            self.by = cx.press.readings.last().map_or(String::new(), |reading| reading.by.clone());
        }
    }
}

/// How the next reading is taken: the reference, or as the latest was.
pub fn setup<'a>(cx: &SheetContext<'a>) -> Option<&'a ReadingSetup> {
    cx.press.reference.as_ref().or_else(|| cx.press.readings.last().map(|reading| &reading.setup))
}

/// The instrument of the next reading: the latest reading's, or the latest stop test's.
fn instrument<'a>(cx: &SheetContext<'a>) -> Option<&'a Instrument> {
    let of_reading = cx.press.readings.last().map(|reading| &reading.instrument);
    of_reading.or_else(|| cx.press.stop_tests.last().map(|test| &test.instrument))
}

/// Shows the entry.
pub fn entry_ui(ui: &mut Ui, cx: &SheetContext, draft: &mut EntryDraft, wishes: &mut Wishes) {
    if draft.tag != cx.press.tag {
        draft.begin(cx);
    }
    let Some(setup) = setup(cx) else { return };
    card_ui(ui, |ui| {
        ui.set_width(ui.available_width());
        let mut entered = None;
        ui.horizontal_wrapped(|ui| {
            let id = |name: &str| Id::unique(("reading", &cx.press.tag, name));
            labelled(ui, id("date"), "Date", 100.0, &mut draft.date);
            labelled(ui, id("by"), "By", 90.0, &mut draft.by);
            for index in 0..draft.stops.len() {
                let name = format!("Stop {}", index + 1);
                let response = labelled(ui, id(&name), &name, 60.0, &mut draft.stops[index]);
                if draft.focus == Some(index) {
                    draft.focus = None;
                    response.request_focus();
                }
                if response.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter)) {
                    entered = Some(index);
                }
            }
            caption(ui, "ms");
            labelled(ui, id("speed"), "at", 54.0, &mut draft.speed);
            caption(ui, "strokes/min");
            if ui.button("Add reading").clicked() {
                entered = Some(draft.stops.len() - 1);
            }
        });
        caption(
            ui,
            format!(
                "{}; {}; clock started when: {}.",
                setup.condition.words(),
                setup.place.words(),
                setup.clock_start.words()
            ),
        );
        refusal_line(ui, draft.refusals.first());
        if let Some(index) = entered {
            if index + 1 < draft.stops.len() {
                draft.focus = Some(index + 1);
            } else {
                take(cx, setup, draft, wishes);
            }
            ui.ctx().request_repaint();
        }
    });
}

fn labelled(ui: &mut Ui, id: Id, label: &str, width: f32, text: &mut String) -> Response {
    let label = ui.label(label);
    ui.add(TextEdit::singleline(text).id(id).desired_width(width)).labelled_by(label.id)
}

fn take(cx: &SheetContext, setup: &ReadingSetup, draft: &mut EntryDraft, wishes: &mut Wishes) {
    match read(cx, setup, draft) {
        Ok(reading) => {
            let label = format!("add the reading of {}", reading.at);
            wishes.edit_press(cx.press, label, move |press| press.readings.push(reading));
            draft.begin(cx);
        }
        Err((refusals, first)) => {
            draft.refusals = refusals;
            draft.focus = Some(first);
        }
    }
}

/// Reads the entry; all refusals, and the first stop that was refused. Empty figures behind the last stop are no stops.
fn read(cx: &SheetContext, setup: &ReadingSetup, draft: &EntryDraft) -> Result<Reading, (Vec<Refusal>, usize)> {
    let mut refusals = Vec::new();
    let mut first = 0;
    let at = Moment::parse("Date", &draft.date).map_err(|refusal| refusals.push(refusal)).ok();
    let speed = Rate::parse(&draft.speed, &SPEED).map_err(|refusal| refusals.push(refusal)).ok();
    let mut stops = Vec::new();
    for (index, text) in draft.stops.iter().enumerate() {
        if text.trim().is_empty() {
            continue;
        }
        match Time::parse(text, &STOPPING_TIME) {
            Ok(time) => stops.push(time),
            Err(refusal) => {
                if refusals.is_empty() {
                    first = index;
                }
                refusals.push(refusal);
            }
        }
    }
    if stops.is_empty() && refusals.is_empty() {
        let range = STOPPING_TIME.range();
        refusals.push(Refusal::new("Reading", "", format!("one or more stops {range}"), "Type the stops."));
    }
    match (at, speed) {
        (Some(at), Some(speed)) if refusals.is_empty() => {
            let mut setup = setup.clone();
            setup.condition.speed = speed;
            let unknown =
                || Instrument { name: String::new(), serial: String::new(), calibrated: None, calibration_due: None };
            let instrument = instrument(cx).cloned().unwrap_or_else(unknown);
            Ok(Reading { at, by: draft.by.trim().to_owned(), setup, instrument, stops })
        }
        _ => Err((refusals, first)),
    }
}

/// The figures of a reading in one line, as the list shows them.
pub fn stops_words(reading: &Reading) -> String {
    reading.stops.iter().map(|stop| thousandths_text(stop.base())).collect::<Vec<_>>().join(" · ")
}
