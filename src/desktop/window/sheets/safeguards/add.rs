//! Adding a safeguard: its kind, its name, and the figures without which the kind means nothing.

use calc::decimal::{self, Side};
use calc::limits::{self, Limit};
use calc::refusal::Refusal;
use calc::safeguard::*;
use calc::stop_test::StopPath;
use calc::units::{Angle, Length, LengthUnit};
use egui::{Id, Key, TextEdit, Ui};

use super::kind_fields::beam_heights;
use crate::window::context::SheetContext;
use crate::window::widgets::{Named, caption, card_ui, choice_ui, heading, refusal_line, segments_ui};
use crate::window::wishes::{Wish, Wishes};

/// The kinds that can be added.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
enum NewKind {
    #[default]
    LightCurtain,
    TwoHandControl,
    TwoHandTrip,
    InterlockedGuard,
    SeparateBeams,
    HorizontalField,
    Mat,
    GuardOpening,
}

impl Named for NewKind {
    fn every() -> &'static [Self] {
        &[
            Self::LightCurtain,
            Self::TwoHandControl,
            Self::TwoHandTrip,
            Self::InterlockedGuard,
            Self::SeparateBeams,
            Self::HorizontalField,
            Self::Mat,
            Self::GuardOpening,
        ]
    }

    fn name(self) -> &'static str {
        match self {
            Self::LightCurtain => "light curtain",
            Self::TwoHandControl => "two-hand control",
            Self::TwoHandTrip => "two-hand trip",
            Self::InterlockedGuard => "interlocked guard",
            Self::SeparateBeams => "separate beams",
            Self::HorizontalField => "horizontal field",
            Self::Mat => "mat",
            Self::GuardOpening => "guard opening",
        }
    }
}

/// What is being typed.
#[derive(Default)]
pub struct AddDraft {
    kind: NewKind,
    name: String,
    detection: String,
    height: String,
    beams: String,
    opening: String,
    shape: Shape,
    refusals: Vec<Refusal>,
    begun_for: String,
}

#[derive(Clone, Copy, PartialEq, Default)]
enum Shape {
    #[default]
    Slot,
    Square,
    Round,
}

/// Shows the form; whether a safeguard was added.
pub fn add_ui(ui: &mut Ui, cx: &SheetContext, draft: &mut AddDraft, wishes: &mut Wishes) -> bool {
    let mut is_added = false;
    card_ui(ui, |ui| {
        ui.set_width(ui.available_width());
        heading(ui, "Add a safeguard");
        let mut is_entered = false;
        // On a press without safeguards this is what one comes for: the cursor stands in the name.
        let begins = cx.press.safeguards.is_empty() && draft.begun_for != cx.press.tag;
        draft.begun_for.clone_from(&cx.press.tag);
        ui.horizontal_wrapped(|ui| {
            if let Some(kind) = choice_ui(ui, Id::unique(("new kind", &cx.press.tag)), "Kind", 150.0, draft.kind) {
                draft.kind = kind;
                draft.refusals.clear();
            }
            let mut entry = |ui: &mut Ui, label: &str, unit: &str, width: f32, text: &mut String| {
                let label_response = ui.label(label);
                let id = Id::unique(("new safeguard", &cx.press.tag, label));
                let response =
                    ui.add(TextEdit::singleline(text).id(id).desired_width(width)).labelled_by(label_response.id);
                if !unit.is_empty() {
                    caption(ui, unit);
                }
                if begins && label == "Name" {
                    response.request_focus();
                }
                is_entered |= response.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter));
            };
            entry(ui, "Name", "", 150.0, &mut draft.name);
            let sign = cx.unit.sign();
            if matches!(draft.kind, NewKind::LightCurtain | NewKind::HorizontalField) {
                entry(ui, "Detection capability", sign, 64.0, &mut draft.detection);
            }
            if matches!(draft.kind, NewKind::HorizontalField | NewKind::Mat) {
                entry(ui, "Height", sign, 64.0, &mut draft.height);
            }
            if draft.kind == NewKind::SeparateBeams {
                entry(ui, "Heights of the beams", "mm", 140.0, &mut draft.beams);
            }
            if draft.kind == NewKind::GuardOpening {
                entry(ui, "Opening", sign, 64.0, &mut draft.opening);
                let shapes = [(Shape::Slot, "slot"), (Shape::Square, "square"), (Shape::Round, "round")];
                if let Some(shape) = segments_ui(ui, "", draft.shape, &shapes) {
                    draft.shape = shape;
                }
            }
        });
        for refusal in &draft.refusals {
            refusal_line(ui, Some(refusal));
        }
        if ui.button("Add safeguard").clicked() || is_entered {
            match read(draft, cx) {
                Ok(safeguard) => {
                    let place = cx.press.safeguards.len();
                    wishes.edit_press(cx.press, format!("add {}", safeguard.name), move |press| {
                        press.safeguards.push(safeguard)
                    });
                    wishes.push(Wish::ShowSafeguard(place));
                    let begun_for = cx.press.tag.clone();
                    *draft = AddDraft { kind: draft.kind, begun_for, ..AddDraft::default() };
                    is_added = true;
                }
                Err(refusals) => draft.refusals = refusals,
            }
        }
    });
    is_added
}

/// Reads the form; all refusals at once.
fn read(draft: &AddDraft, cx: &SheetContext) -> Result<Safeguard, Vec<Refusal>> {
    let mut refusals = Vec::new();
    let name = draft.name.trim().to_owned();
    if name.is_empty() {
        refusals.push(Refusal::new(
            "Name",
            "",
            "a few words that tell this safeguard from the others",
            "Type one, such as front curtain.",
        ));
    } else if cx.press.safeguards.iter().any(|other| other.name == name) {
        refusals.push(Refusal::new(
            "Name",
            name.as_str(),
            "one that no other safeguard of the press bears",
            "Choose another.",
        ));
    }
    let mut length = |text: &str, limit: &Limit, side: Side| {
        read_length(text, cx.unit, limit, side).map_err(|refusal| refusals.push(refusal)).ok()
    };
    let kind = match draft.kind {
        NewKind::LightCurtain => length(&draft.detection, &limits::DETECTION, Side::Longer).map(|detection| {
            SafeguardKind::LightCurtain(LightCurtain {
                detection,
                lower_edge: None,
                over: WayOver::NotStated,
                starts_stroke: false,
            })
        }),
        NewKind::TwoHandControl => Some(SafeguardKind::TwoHandControl { shrouded: false }),
        NewKind::TwoHandTrip => Some(SafeguardKind::TwoHandTrip),
        NewKind::InterlockedGuard => Some(SafeguardKind::InterlockedGuard { gap: Gap::NotStated, opening_time: None }),
        NewKind::SeparateBeams => match beam_heights(&draft.beams) {
            Ok(heights) if !heights.is_empty() => Some(SafeguardKind::SeparateBeams { heights }),
            Ok(_) => {
                refusals.push(Refusal::new(
                    "Heights of the beams",
                    "",
                    "one to four heights in mm",
                    "Type them, such as 400; 900.",
                ));
                None
            }
            Err(refusal) => {
                refusals.push(refusal);
                None
            }
        },
        NewKind::HorizontalField => {
            let detection = length(&draft.detection, &limits::DETECTION, Side::Longer);
            let height = length(&draft.height, &limits::HEIGHT, Side::Shorter);
            detection.zip(height).map(|(detection, height)| {
                SafeguardKind::HorizontalField(HorizontalField { detection, height, lowest: height, tilt: Angle::ZERO })
            })
        }
        NewKind::Mat => {
            length(&draft.height, &limits::HEIGHT, Side::Shorter).map(|height| SafeguardKind::Mat { height })
        }
        NewKind::GuardOpening => length(&draft.opening, &limits::OPENING, Side::Longer).map(|size| {
            let shape = match draft.shape {
                Shape::Slot => OpeningShape::Slot { length: None },
                Shape::Square => OpeningShape::Square,
                Shape::Round => OpeningShape::Round,
            };
            SafeguardKind::GuardOpening(Opening { size, shape })
        }),
    };
    match kind {
        Some(kind) if refusals.is_empty() => Ok(Safeguard {
            name,
            kind,
            stop_path: StopPath::Normal,
            device_response: None,
            interface_response: None,
            wear_allowance: None,
            supplement: None,
            installed: None,
        }),
        _ => Err(refusals),
    }
}

fn read_length(text: &str, unit: LengthUnit, limit: &Limit, side: Side) -> Result<Length, Refusal> {
    let length = decimal::length(text, unit, side).map_err(|why| limit.unreadable(text, why))?;
    limit.take(length.base()).map(Length::from_base)
}
