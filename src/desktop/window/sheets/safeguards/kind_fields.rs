//! The figures that the kind of a safeguard needs, and only those.

use calc::decimal::Side;
use calc::limits::{self, Limit};
use calc::safeguard::{Gap, LightCurtain, Opening, OpeningShape, SafeguardKind, WayOver};
use calc::units::{Angle, Length, Time};
use egui::Ui;

use super::Card;
use crate::window::widgets::{
    Commit, Drafts, FieldKind, caption, heading, length_field, number_field, refusal_line, segments_ui, switch_ui,
};
use crate::window::wishes::Wishes;

/// Shows them.
pub fn kind_fields_ui(ui: &mut Ui, card: &Card, drafts: &mut Drafts, wishes: &mut Wishes) {
    let kind = card.safeguard().kind.clone();
    let heading_words = calc::assess::capitalised(kind.words());
    heading(ui, &heading_words);
    let mut form = Form { card, drafts, wishes, refused: None };
    match &kind {
        SafeguardKind::LightCurtain(curtain) => curtain_ui(ui, &mut form, curtain),
        SafeguardKind::TwoHandControl { shrouded } => {
            if let Some(shrouded) =
                switch_ui(ui, "Actuators shrouded, so that no hand reaches in while one is held", *shrouded)
            {
                form.set("the shroud", SafeguardKind::TwoHandControl { shrouded });
            }
        }
        SafeguardKind::TwoHandTrip => {
            caption(ui, "Its distance comes from engaging points and slowest speed, on the sheet Press.");
        }
        SafeguardKind::InterlockedGuard { gap, opening_time } => guard_ui(ui, &mut form, *gap, *opening_time),
        SafeguardKind::SeparateBeams { heights } => beams_ui(ui, &mut form, heights),
        SafeguardKind::HorizontalField(field) => {
            if let Some(detection) =
                form.length(ui, "detection capability", &limits::DETECTION, Side::Longer, field.detection)
            {
                let mut field = field.clone();
                field.detection = detection;
                form.set("the detection capability", SafeguardKind::HorizontalField(field));
            }
            if let Some(height) =
                form.length(ui, "height of the farthest beam", &limits::HEIGHT, Side::Shorter, field.height)
            {
                let mut field = field.clone();
                field.height = height;
                form.set("the height", SafeguardKind::HorizontalField(field));
            }
            if let Some(lowest) =
                form.length(ui, "height of the lowest beam", &limits::HEIGHT, Side::Shorter, field.lowest)
            {
                let mut field = field.clone();
                field.lowest = lowest;
                form.set("the lowest beam", SafeguardKind::HorizontalField(field));
            }
            let id = card.id("tilt");
            let kind = FieldKind::figure("angle to the approach", "°");
            if let Some(Commit::Set(tilt, _)) =
                number_field(ui, id, kind, &limits::FIELD_ANGLE, Some(field.tilt.base()), form.drafts)
            {
                let mut field = field.clone();
                field.tilt = Angle::from_base(tilt);
                form.set("the angle", SafeguardKind::HorizontalField(field));
            }
            form.note(id);
        }
        SafeguardKind::Mat { height } => {
            if let Some(height) = form.length(ui, "height over the floor", &limits::HEIGHT, Side::Shorter, *height) {
                form.set("the height", SafeguardKind::Mat { height });
            }
        }
        SafeguardKind::GuardOpening(opening) => {
            if let Some(opening) = opening_ui(ui, &mut form, *opening) {
                form.set("the opening", SafeguardKind::GuardOpening(opening));
            }
        }
    }
    let supplement = card.safeguard().supplement;
    if let Some(commit) =
        form.optional_length(ui, "supplemental distance", &limits::SUPPLEMENT, Side::Longer, supplement)
    {
        card.edit(form.wishes, "the supplemental distance", move |safeguard| safeguard.supplement = commit);
    }
    refusal_line(ui, form.refused.as_ref());
}

struct Form<'a, 'b> {
    card: &'a Card<'a>,
    drafts: &'b mut Drafts,
    wishes: &'b mut Wishes,
    refused: Option<calc::refusal::Refusal>,
}

impl Form<'_, '_> {
    fn set(&mut self, what: &str, kind: SafeguardKind) {
        self.card.edit(self.wishes, what, move |safeguard| safeguard.kind = kind);
    }

    fn note(&mut self, id: egui::Id) {
        self.refused = self.refused.take().or_else(|| self.drafts.refusal(id).cloned());
    }

    fn length(&mut self, ui: &mut Ui, name: &str, limit: &Limit, side: Side, current: Length) -> Option<Length> {
        match self.commit(ui, name, limit, side, Some(current)) {
            Some(Commit::Set(length, _)) => Some(length),
            _ => None,
        }
    }

    fn optional_length(
        &mut self,
        ui: &mut Ui,
        name: &str,
        limit: &Limit,
        side: Side,
        current: Option<Length>,
    ) -> Option<Option<Length>> {
        match self.commit(ui, name, limit, side, current) {
            Some(Commit::Set(length, _)) => Some(Some(length)),
            Some(Commit::Cleared(_)) => Some(None),
            _ => None,
        }
    }

    fn commit(
        &mut self,
        ui: &mut Ui,
        name: &str,
        limit: &Limit,
        side: Side,
        current: Option<Length>,
    ) -> Option<Commit<Length>> {
        let id = self.card.id(name);
        let commit = ui
            .horizontal(|ui| {
                label_column(ui, name);
                let kind = FieldKind::figure(name, "").bare();
                length_field(ui, id, kind, limit, self.card.cx.unit, side, current, self.drafts)
            })
            .inner;
        self.note(id);
        commit
    }
}

/// Names stand in a column of one width, so that the fields line up.
fn label_column(ui: &mut Ui, name: &str) {
    ui.allocate_ui_with_layout(egui::vec2(190.0, 26.0), egui::Layout::left_to_right(egui::Align::Center), |ui| {
        ui.set_min_width(190.0);
        ui.label(name);
    });
}

fn curtain_ui(ui: &mut Ui, form: &mut Form, curtain: &LightCurtain) {
    let with = |change: &dyn Fn(&mut LightCurtain)| {
        let mut curtain = curtain.clone();
        change(&mut curtain);
        SafeguardKind::LightCurtain(curtain)
    };
    if let Some(detection) =
        form.length(ui, "detection capability", &limits::DETECTION, Side::Longer, curtain.detection)
    {
        form.set("the detection capability", with(&|curtain| curtain.detection = detection));
    }
    if let Some(height) =
        form.optional_length(ui, "height of the lowest beam", &limits::HEIGHT, Side::Longer, curtain.lower_edge)
    {
        form.set("the lowest beam", with(&|curtain| curtain.lower_edge = height));
    }
    let open = match curtain.over {
        WayOver::Open { .. } => curtain.over,
        _ => WayOver::Open { hazard: Length::mm(1000), upper_edge: Length::mm(1400) },
    };
    let ways = [(WayOver::NotStated, "not stated"), (WayOver::Closed, "closed"), (open, "open")];
    if let Some(over) = segments_ui(ui, "Way over the upper edge", curtain.over, &ways) {
        form.set("the way over", with(&|curtain| curtain.over = over));
    }
    if let WayOver::Open { hazard, upper_edge } = curtain.over {
        if let Some(hazard) = form.length(ui, "height of the hazard", &limits::HEIGHT, Side::Longer, hazard) {
            form.set("the height of the hazard", with(&|curtain| curtain.over = WayOver::Open { hazard, upper_edge }));
        }
        if let Some(upper_edge) =
            form.length(ui, "height of the upper edge", &limits::HEIGHT, Side::Shorter, upper_edge)
        {
            form.set("the upper edge", with(&|curtain| curtain.over = WayOver::Open { hazard, upper_edge }));
        }
    }
    if let Some(starts) = switch_ui(ui, "It also starts the stroke", curtain.starts_stroke) {
        form.set("the start of the stroke", with(&|curtain| curtain.starts_stroke = starts));
    }
}

fn guard_ui(ui: &mut Ui, form: &mut Form, gap: Gap, opening_time: Option<Time>) {
    let open = match gap {
        Gap::Open(_) => gap,
        _ => Gap::Open(Opening { size: Length::mm(10), shape: OpeningShape::Slot { length: None } }),
    };
    let gaps = [(Gap::NotStated, "not stated"), (Gap::None, "none that a hand passes"), (open, "this opening")];
    caption(ui, "Gap before the stop is signalled");
    if let Some(gap) = segments_ui(ui, "", gap, &gaps) {
        form.set("the gap", SafeguardKind::InterlockedGuard { gap, opening_time });
    }
    if let Gap::Open(opening) = gap
        && let Some(opening) = opening_ui(ui, form, opening)
    {
        form.set("the gap", SafeguardKind::InterlockedGuard { gap: Gap::Open(opening), opening_time });
    }
    let id = form.card.id("opening time");
    let kind = FieldKind::figure("time the guard needs to open", "ms");
    let commit = number_field(ui, id, kind, &limits::OPENING_TIME, opening_time.map(Time::base), form.drafts);
    form.note(id);
    let opening_time = match commit {
        Some(Commit::Set(time, _)) => Some(Time::from_base(time)),
        Some(Commit::Cleared(_)) => None,
        _ => return,
    };
    form.set("the opening time", SafeguardKind::InterlockedGuard { gap, opening_time });
}

fn opening_ui(ui: &mut Ui, form: &mut Form, opening: Opening) -> Option<Opening> {
    let slot = match opening.shape {
        OpeningShape::Slot { .. } => opening.shape,
        _ => OpeningShape::Slot { length: None },
    };
    let shapes = [(slot, "slot"), (OpeningShape::Square, "square"), (OpeningShape::Round, "round")];
    if let Some(shape) = segments_ui(ui, "Shape", opening.shape, &shapes) {
        return Some(Opening { shape, ..opening });
    }
    if let Some(size) = form.length(ui, "opening", &limits::OPENING, Side::Longer, opening.size) {
        return Some(Opening { size, ..opening });
    }
    if let OpeningShape::Slot { length } = opening.shape
        && let Some(length) = form.optional_length(ui, "length of the slot", &limits::SLOT_LENGTH, Side::Longer, length)
    {
        return Some(Opening { shape: OpeningShape::Slot { length }, ..opening });
    }
    None
}

fn beams_ui(ui: &mut Ui, form: &mut Form, heights: &[Length]) {
    let id = form.card.id("beams");
    let text = heights.iter().map(|height| height.digits()).collect::<Vec<_>>().join("; ");
    let kind = FieldKind::words("heights of the beams").wide(200.0).hint("400; 900");
    let commit =
        crate::window::widgets::field_ui(ui, id, FieldKind { unit: "mm", ..kind }, &text, form.drafts, beam_heights);
    form.note(id);
    if let Some(Commit::Set(heights, _)) = commit {
        form.set("the beams", SafeguardKind::SeparateBeams { heights });
    }
}

/// Reads heights in mm, parted by semicolons or spaces, lowest first.
pub(super) fn beam_heights(text: &str) -> Result<Vec<Length>, calc::refusal::Refusal> {
    let limit = limits::HEIGHT.named("Height of a beam");
    let mut heights = text
        .split([';', ' '])
        .filter(|part| !part.trim().is_empty())
        .map(|part| Length::parse(part, &limit))
        .collect::<Result<Vec<_>, _>>()?;
    heights.sort_unstable();
    Ok(heights)
}
